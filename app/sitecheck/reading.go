package sitecheck

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/station"
	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/audit/sitecheck"
	"barlitre/machines/units"
)

// reading is the field for one point in one state, with what the model says under it.
type reading struct {
	state, point string
	field        *widgets.Field
	model        string
	note         *widgets.Text
	content      fyne.CanvasObject
}

func (p *Page) reading(pt sitecheck.Point, state string) *reading {
	r := &reading{state: state, point: pt.Name, model: p.ctx.Local(p.plan.Shown(pt, state))}
	if drawn := p.plan.AsDrawn(pt, state); drawn != "" {
		r.model += ", as drawn " + p.ctx.Local(drawn)
	}
	r.field = widgets.Name(widgets.NewField("", func(text string) error { return p.put(r, pt, text) }), "sitecheck."+state+"."+pt.Name)
	r.field.Scroll = fyne.ScrollHorizontalOnly
	r.note = widgets.Wrapped("sitecheck." + state + "." + pt.Name + ".says")
	r.note.Importance = widget.LowImportance
	r.field.Note = r.note
	r.content = container.NewVBox(r.field, r.note)
	return r
}

// put notes a reading in the audit file; an empty field takes it out.
func (p *Page) put(r *reading, pt sitecheck.Point, text string) error {
	quantity := ""
	if text != "" {
		var err error
		if quantity, err = station.Typed(text, pt.Dim, units.Preferred(pt.Dim, p.ctx.System()), units.Unit{}); err != nil {
			return err
		}
	}
	err := p.ctx.Doc().Edit("Note a reading", func(f *audit.File) error { return f.SetReading(r.state, r.point, quantity) })
	if err == nil {
		p.compare()
	}
	return err
}

// compare sets the readings of the file beside the plan.
func (p *Page) compare() {
	if p.plan == nil {
		return
	}
	readings := p.ctx.Doc().File().Readings
	v := p.plan.Compare(readings)
	p.verdict.SetText(p.ctx.Local(v.Text))
	says := map[string]sitecheck.Reading{}
	for _, r := range v.Readings {
		says[r.State+"."+r.Point] = r
	}
	read := map[string]string{}
	for _, r := range readings {
		read[r.State+"."+r.Point] = r.Text
	}
	for _, r := range p.fields {
		key := r.state + "." + r.point
		r.field.SetValue(read[key], "")
		text, importance := "good "+r.model, widget.LowImportance
		if s, ok := says[key]; ok {
			text += ": " + p.ctx.Local(s.Words)
			if s.Off > 2 {
				text, importance = "▲ "+text, widget.DangerImportance
			}
		}
		if r.note.Text != text || r.note.Importance != importance {
			r.note.Importance = importance
			r.note.SetText(text)
		}
	}
}

// columns is a name and four fields side by side.
type columns struct{}

const (
	nameShare = 0.24
	columnGap = 6
)

// MinSize is as high as the highest.
func (columns) MinSize(o []fyne.CanvasObject) fyne.Size {
	var m fyne.Size
	for _, c := range o {
		m.Height = fyne.Max(m.Height, c.MinSize().Height)
	}
	m.Width = 480 * widgets.Scale()
	return m
}

// Layout gives the name a quarter and each field an equal share of the rest.
func (columns) Layout(o []fyne.CanvasObject, size fyne.Size) {
	name := size.Width * nameShare
	each := (size.Width - name) / float32(max(1, len(o)-1))
	for i, c := range o {
		x, w := name+float32(i-1)*each, each
		if i == 0 {
			x, w = 0, name
		}
		c.Move(fyne.NewPos(x, 0))
		c.Resize(fyne.NewSize(w-columnGap, size.Height))
	}
}
