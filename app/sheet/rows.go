package sheet

import (
	"slices"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/theme"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/widgets"
)

// tight stacks objects without gaps; labels lose the room the toolkit gives them.
type tight struct{}

func labelTrim() float32 { return theme.InnerPadding() }

func (tight) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	y, t := float32(0), labelTrim()
	for _, o := range objects {
		if !o.Visible() {
			continue
		}
		h := o.MinSize().Height
		if l, ok := o.(*widgets.Text); ok {
			if l.DumpText() == "" {
				o.Resize(fyne.NewSize(size.Width+2*t, h))
				o.Move(fyne.NewPos(-t, y))
				continue
			}
			o.Move(fyne.NewPos(-t, y-t/2))
			o.Resize(fyne.NewSize(size.Width+2*t, h))
			y += o.MinSize().Height - t
			continue
		}
		o.Move(fyne.NewPos(0, y))
		o.Resize(fyne.NewSize(size.Width, h))
		y += h
	}
}

func (tight) MinSize(objects []fyne.CanvasObject) fyne.Size {
	m, t := fyne.NewSize(0, 0), labelTrim()
	for _, o := range objects {
		if !o.Visible() {
			continue
		}
		s := o.MinSize()
		if l, ok := o.(*widgets.Text); ok {
			if l.DumpText() == "" {
				continue
			}
			s.Height -= t
			s.Width = 0
		}
		m.Height += s.Height
		m.Width = max(m.Width, s.Width)
	}
	return m
}

// columns shares the width among its objects in parts.
type columns []float32

func (c columns) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	gap := 6 * widgets.Scale()
	x, free := float32(0), size.Width-gap*float32(len(objects)-1)
	for i, o := range objects {
		w := free * c[i]
		o.Move(fyne.NewPos(x, 0))
		o.Resize(fyne.NewSize(w, size.Height))
		x += w + gap
	}
}

func (columns) MinSize(objects []fyne.CanvasObject) fyne.Size {
	m := fyne.Size{}
	for _, o := range objects {
		m.Height = max(m.Height, o.MinSize().Height)
	}
	return m
}

// headLine is the line above a field: title, unit, and links at its end.
type headLine struct{}

func (headLine) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	x, right := float32(0), size.Width
	for i, o := range objects {
		m := o.MinSize()
		if i >= 2 {
			if o.Visible() {
				right -= m.Width
				o.Move(fyne.NewPos(right, size.Height-m.Height-2))
				o.Resize(m)
			}
			continue
		}
		o.Move(fyne.NewPos(x, size.Height-m.Height-1))
		o.Resize(m)
		x += m.Width + 6
	}
}

func (headLine) MinSize(objects []fyne.CanvasObject) fyne.Size {
	return fyne.NewSize(0, 22*widgets.Scale())
}

// base is what all rows of the panel are made of.
type base struct {
	p       *panel
	target  string // as the document knows it
	title   *canvas.Text
	unit    *canvas.Text
	head    *fyne.Container
	note    *widgets.Text // hint, or why a value was refused
	warn    *widgets.Text // what the findings say of it
	content *fyne.Container
}

func newBase(p *panel, title, target string) *base {
	pal, k := p.s.ctx.Palette(), widgets.Scale()
	b := &base{p: p, target: target, title: canvas.NewText(title, pal.Ink), unit: canvas.NewText("", pal.Secondary)}
	b.title.TextSize, b.unit.TextSize = 12*k, 11*k
	b.head = container.New(headLine{}, b.title, b.unit)
	b.note, b.warn = p.label(widget.LowImportance), p.label(widget.DangerImportance)
	return b
}

// label makes a small wrapped label as wide as the panel.
func (p *panel) label(i widget.Importance) *widgets.Text {
	l := widgets.Wrapped("")
	l.Importance, l.SizeName = i, theme.SizeNameCaptionText
	l.Resize(fyne.NewSize(p.width()+2*labelTrim(), 10))
	return l
}

func (b *base) stack(objects ...fyne.CanvasObject) {
	all := append([]fyne.CanvasObject{b.head}, objects...)
	b.content = container.New(tight{}, append(all, b.note, b.warn)...)
}

// say shows a refusal or a hint below a row that is no field.
func (b *base) say(text string, bad bool) {
	b.note.Importance = widget.LowImportance
	if bad {
		b.note.Importance, text = widget.DangerImportance, "⚠ "+text
	}
	b.note.SetText(text)
}

// warnOf shows what the findings say of a parameter.
func (b *base) warnOf(text string) {
	b.warn.SetText(text)
}

// row is one line of the panel.
type row interface {
	fill() // brings the file's value in
	object() fyne.CanvasObject
	keep() // remembers what was typed and refused
	focus() fyne.Focusable
}

// fieldRow is a row with a text field.
type fieldRow struct {
	*base
	field *widgets.Field
	value func() (text, hint, placeholder, unit string)
	ready bool // what was refused before is back in the field
}

// newFieldRow makes a row around a field; take hands the text over.
func newFieldRow(p *panel, title, name, target string, take func(string) error) *fieldRow {
	r := &fieldRow{base: newBase(p, title, target)}
	r.field = widgets.NewField("", func(text string) error {
		err := take(text)
		if err == nil {
			delete(p.drafts, target)
			r.fill()
		} else {
			p.drafts[target] = text
		}
		p.relay()
		return err
	})
	r.field.Note = r.note
	widgets.Name(r.field, name)
	return r
}

func (r *fieldRow) object() fyne.CanvasObject { return r.content }
func (r *fieldRow) focus() fyne.Focusable     { return r.field }

func (r *fieldRow) fill() {
	text, hint, placeholder, unit := r.value()
	if r.field.PlaceHolder != placeholder {
		r.field.SetPlaceHolder(placeholder)
	}
	if r.unit.Text != unit {
		r.unit.Text = unit
		r.unit.Refresh()
	}
	r.field.SetValue(text, hint)
	if r.ready && !r.field.Bad() {
		delete(r.p.drafts, r.target)
	}
}

// keep remembers a refused text, so that it stands here again when the block is
// selected again.
func (r *fieldRow) keep() {
	if r.field.Bad() {
		r.p.drafts[r.target] = r.field.Text
	} else {
		delete(r.p.drafts, r.target)
	}
}

// restore brings a refused text back with its reason.
func (r *fieldRow) restore() {
	r.ready = true
	if text, ok := r.p.drafts[r.target]; ok {
		r.field.SetText(text)
		r.field.OnSubmitted(text)
	}
}

// selectRow is a row with a choice.
type selectRow struct {
	*base
	sel     *widgets.Select
	value   func() (selected, hint string)
	options func() []string                 // nil where they stay the same
	pick    func(text string) (bool, error) // of what is no value; nil where there is none
	called  func(word string) string        // what a word of the file is called in the list
	filling bool
}

func newSelectRow(p *panel, title, name, target string, words []string, called func(string) string) *selectRow {
	r := &selectRow{base: newBase(p, title, target), called: called}
	options := make([]string, len(words))
	for i, w := range words {
		options[i] = called(w)
	}
	r.sel = widgets.NewSelect(options, func(text string) {
		if r.filling {
			return
		}
		if i := slices.Index(options, text); i >= 0 {
			text = words[i]
		}
		change := func() error {
			if r.pick != nil {
				if done, err := r.pick(text); done {
					return err
				}
			}
			return p.choose(target, text)
		}
		if text == none {
			change = func() error { return p.drop(target) }
		}
		if err := change(); err != nil {
			r.fill()
			r.say(err.Error(), true)
			p.relay()
			return
		}
		r.fill()
		p.relay()
	})
	r.sel.PlaceHolder = "choose"
	widgets.Name(r.sel, name)
	r.stack(r.sel)
	return r
}

func (r *selectRow) object() fyne.CanvasObject { return r.content }
func (r *selectRow) focus() fyne.Focusable     { return r.sel }
func (r *selectRow) keep()                     {}

func (r *selectRow) fill() {
	r.filling = true
	defer func() { r.filling = false }()
	selected, hint := r.value()
	selected = r.called(selected)
	if r.options != nil {
		r.sel.Options = r.options()
	}
	if r.sel.Selected != selected {
		r.sel.Selected = selected
		r.sel.Refresh()
	}
	r.say(hint, false)
}
