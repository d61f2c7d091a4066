package fixfirst

import (
	"fmt"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/station"
	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/audit/fixfirst"
)

// ladder shows what is to be put right in one circuit.
type ladder struct {
	ctx     station.Context
	content *fyne.Container
	of      *fixfirst.Ladder
}

func newLadder(ctx station.Context, l *fixfirst.Ladder, page fixfirst.Page, i int, in *container.Scroll) *ladder {
	part := &ladder{ctx: ctx, of: l, content: container.NewVBox()}
	title := widget.NewLabelWithStyle("What to put right first: "+page.Circuit, fyne.TextAlignLeading, fyne.TextStyle{Bold: true})
	title.Wrapping = fyne.TextWrapWord
	part.content.Add(title)
	part.content.Add(part.text(numbered("fixfirst.verdict", i), page.Verdict, widget.MediumImportance))
	if len(page.Items) > 0 {
		part.table(numbered("fixfirst.ladder", i), page.Head, page.Rows, page.Note, in)
	}
	for j, s := range page.Splits {
		part.content.Add(part.text(numbered("fixfirst.split", j), s.Text, widget.MediumImportance))
		part.table(numbered("fixfirst.split.table", j), s.Head, s.Rows, "", in)
	}
	if l.Changes() {
		add := widgets.Name(widgets.NewButton("Add the circuit put right", part.add), numbered("fixfirst.add", i))
		part.content.Add(container.NewHBox(add))
	}
	for _, it := range page.Items {
		part.content.Add(widget.NewSeparator())
		part.item(it)
	}
	part.content.Add(widget.NewSeparator())
	return part
}

func numbered(name string, i int) string {
	if i == 0 {
		return name
	}
	return fmt.Sprintf("%s.%d", name, i+1)
}

func (l *ladder) text(name, text string, importance widget.Importance) *widgets.Text {
	t := widgets.Wrapped(name)
	t.Importance = importance
	t.SetText(l.ctx.Local(text))
	return t
}

// table shows rows of figures, each of which opens its calculation.
func (l *ladder) table(name string, head []string, rows []fixfirst.Row, note string, in *container.Scroll) {
	f := widgets.NewFigureTable(l.ctx.Palette, l.ctx.Explain, l.ctx.Local)
	widgets.Name(f.Table, name)
	f.In(in)
	var out []widgets.FigureRow
	for _, r := range rows {
		out = append(out, widgets.FigureRow(r))
	}
	f.Set(head, out)
	l.content.Add(f.Table)
	if note != "" {
		l.content.Add(l.text("", note, widget.LowImportance))
	}
}

// item shows one thing to put right.
func (l *ladder) item(it fixfirst.Item) {
	name := fmt.Sprintf("fixfirst.item.%d", it.Number)
	head := widgets.Name(widget.NewLabelWithStyle(fmt.Sprintf("%d  %s", it.Number, it.Head), fyne.TextAlignLeading, fyne.TextStyle{Bold: true}), name)
	head.Wrapping = fyne.TextWrapWord
	var button fyne.CanvasObject
	if it.Block != "" {
		button = widgets.Name(widgets.NewButton("Show "+it.Block, func() { l.show(it.Block) }), name+".show")
	}
	l.content.Add(container.NewBorder(nil, nil, nil, button, head))
	l.content.Add(l.text("", it.Text, widget.MediumImportance))
	var found []string
	for _, q := range it.Evidence {
		line := "· " + q.Name + ": " + q.Found
		if q.Limit != "" {
			line += " (should be: " + q.Limit + ")"
		}
		found = append(found, line)
	}
	if it.Where != "" {
		found = append(found, "· shows in "+it.Where)
	}
	l.content.Add(l.text(name+".evidence", strings.Join(found, "\n"), widget.LowImportance))
	l.content.Add(l.text("", "Do: "+it.Do, widget.MediumImportance))
	if worth := strings.TrimSpace(it.Price + " " + it.Note); worth != "" {
		l.content.Add(l.text(name+".worth", "Worth: "+worth, widget.MediumImportance))
	}
	if it.Caution != "" {
		l.content.Add(l.text(name+".caution", "▲ "+it.Caution, widget.DangerImportance))
	}
	basis := "Limit: " + it.Basis + "."
	if len(it.Edits) > 0 {
		basis += " Priced with " + l.ctx.Local(it.Edits.InWords(l.ctx.Doc().File())) + "."
	}
	l.content.Add(l.text("", basis, widget.LowImportance))
}

// show selects a block on the sheet.
func (l *ladder) show(block string) {
	for i, c := range l.ctx.Doc().File().Circuits {
		if c.Name == l.of.Circuit {
			l.ctx.Select(i, block)
			l.ctx.Go("Circuit")
		}
	}
}

// add puts a copy of the circuit with its faults cured into the audit.
func (l *ladder) add() {
	name := l.of.Circuit + ", put right"
	for n := 2; l.ctx.Doc().File().Circuit(name) != nil; n++ {
		name = fmt.Sprintf("%s, put right %d", l.of.Circuit, n)
	}
	if err := l.ctx.Doc().Edit("Add the circuit put right", func(f *audit.File) error { return l.of.AddCured(f, name) }); err != nil {
		l.ctx.Fail(err)
		return
	}
	l.ctx.Say("Added as a proposal: " + name)
}
