package intake

import (
	"fmt"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/widgets"
	"barlitre/circuit/recording/logger"
)

// findings lists what the import found in the data and what is done about each.
type findings struct {
	p       *Page
	content fyne.CanvasObject
	list    *fyne.Container
	head    *widgets.Text
	shows   string
}

func newFindings(p *Page) *findings {
	f := &findings{p: p, list: container.NewVBox()}
	f.head = widgets.Name(say("", widget.MediumImportance, false), "intake.findings")
	f.content = container.NewBorder(f.head, nil, nil, nil, container.NewVScroll(container.New(besideBar{}, f.list)))
	return f
}

func (f *findings) fill() {
	p := f.p
	text := "What was found in the data, and what is done about it. The file itself is not touched; the list is kept with the audit and printed."
	switch list := p.corrections(); {
	case p.rec == nil:
		text = "Here stands what is wrong with the data, once they are read."
	case len(list) == 0:
		text = fmt.Sprintf("Nothing is wrong with the %d rows: no gap, no doubled or unordered row, no clock that jumps, no channel that is stuck, clipped or out of its range. Nothing is changed.", len(p.rec.Time))
	}
	f.head.SetText(text)
	shows := fmt.Sprint(p.corrections(), p.ctx.Local("0.0"))
	if shows == f.shows {
		return
	}
	f.shows, f.list.Objects = shows, nil
	for i, c := range p.corrections() {
		if i > 0 {
			f.list.Add(widget.NewSeparator())
		}
		f.list.Add(f.row(i, c))
	}
	f.list.Refresh()
}

func (f *findings) row(i int, c logger.Correction) fyne.CanvasObject {
	p := f.p
	what, importance := c, widget.MediumImportance
	what.Done = ""
	text := c.Text
	if c.Channel != "" {
		text = c.Channel + ": " + text
	}
	switch {
	case c.Line > 0 && c.Count > 1:
		text += fmt.Sprintf(", first in line %d", c.Line)
	case c.Line > 0:
		text += fmt.Sprintf(", line %d", c.Line)
	}
	if c.File != "" && c.Line > 0 {
		text += " of " + c.File
	}
	if c.Warns {
		text, importance = "⚠ "+text, widget.DangerImportance
	}
	done := "Left as it is."
	if c.Done != "" {
		done = "Done: " + c.Done + "."
	}
	name := fmt.Sprintf("intake.finding%d", i+1)
	words := container.NewVBox(widgets.Name(say(p.ctx.Local(text), importance, false), name), widgets.Name(say(p.ctx.Local(done), widget.LowImportance, false), name+".done"))
	if len(c.Choices) < 2 {
		return words
	}
	pick := p.newChoice(name+".choice", c.Choices, nil, func(word string) {
		s, key := p.owner(c.Key)
		p.changeOf(s, func(r *logger.Recipe) {
			if r.Choices == nil {
				r.Choices = map[string]string{}
			}
			r.Choices[key] = word
		})
	})
	pick.set(c.Choice)
	return container.NewBorder(nil, nil, nil, container.New(widgets.Wide(170), pick.Select), words)
}
