package duty

import (
	"slices"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/widgets"
	"barlitre/audit"
	cycle "barlitre/circuit/duty"
)

// axisRows are the fields of one axis.
type axisRows struct {
	content    fyne.CanvasObject
	name, load *widgets.Field
	rotary     *widgets.Check
	both       *widgets.TipButton // gives the duty at hand the usual tracks; nil without a duty
}

func newAxisRows(p *panel, a cycle.Axis) *axisRows {
	r := &axisRows{}
	doc, axis := p.s.ctx.Doc(), a.Name
	r.name = widgets.Name(widgets.NewField(axis, func(text string) error { return p.took(doc.RenameAxis(axis, text)) }), "duty.axis."+axis)
	r.load = widgets.Name(widgets.NewField(a.Load, func(text string) error { return p.took(doc.SetAxisLoad(axis, text)) }), "duty.axis."+axis+".load")
	r.load.SetPlaceHolder("such as platen and bale")
	r.rotary = widgets.Name(widgets.NewCheck("turns", func(on bool) { p.setRotary(axis, on) }), "duty.axis."+axis+".rotary")
	remove := widgets.Name(widgets.NewTipButton("Remove", "takes the axis out, and its tracks", func() { p.removeAxis(axis) }), "duty.axis."+axis+".remove")
	rows := container.NewVBox(widgets.FieldRow("Axis", r.name), widgets.FieldRow("  moves", r.load),
		container.NewBorder(nil, nil, r.rotary, remove))
	if p.s.shown != nil {
		rows.Add(widgets.Row("  this duty gives", p.trackChecks([]string{axis + ".speed", axis + ".position", axis + ".load", axis + ".command"}), nil))
		r.both = widgets.Name(widgets.NewTipButton("Add speed and load of "+axis, signs, func() {
			duty := p.s.shown.Name
			p.do(doc.Edit("Add speed and load of "+axis, func(f *audit.File) error { return speedAndLoad(f, duty, axis) }))
		}), "duty.axis."+axis+".both")
		rows.Add(container.NewHBox(r.both))
		sign := widgets.Wrapped("")
		sign.Importance = widget.LowImportance
		sign.SetText(signs)
		rows.Add(sign)
	}
	r.content = rows
	return r
}

func (r *axisRows) fill(s *Station, a cycle.Axis) {
	r.name.SetValue(a.Name, "")
	r.load.SetValue(a.Load, "")
	r.rotary.SetChecked(a.Kind == cycle.Rotary)
	if r.both != nil {
		d := s.shown
		show(r.both, d != nil && s.locked() == "" && !slices.ContainsFunc(d.Tracks, func(t cycle.Track) bool { return t.Of == a.Name }))
	}
}

// took shows what an edit changed, or hands its error on.
func (p *panel) took(err error) error {
	if err == nil {
		p.s.reload()
	}
	return err
}

// do is took for a button: what went wrong is said in the frame, and the button shows the file again.
func (p *panel) do(err error) {
	if err != nil {
		p.s.ctx.Fail(err)
	}
	p.s.reload()
}

// addAxis takes the name of a new axis.
func (p *panel) addAxis(text string) error {
	if text == "" {
		return nil
	}
	if err := p.s.ctx.Doc().AddAxis(text, cycle.Linear); err != nil {
		return err
	}
	p.added.SetText("")
	p.s.reload()
	return nil
}

func (p *panel) setRotary(axis string, on bool) {
	if p.loading {
		return
	}
	kind := cycle.Linear
	if on {
		kind = cycle.Rotary
	}
	p.do(p.s.ctx.Doc().SetAxisKind(axis, kind))
}

// removeAxis takes an axis out with its tracks in duties whose points stand in the file.
func (p *panel) removeAxis(axis string) {
	p.do(p.s.ctx.Doc().Edit("Remove axis "+axis, func(f *audit.File) error {
		for _, d := range f.Duties {
			for _, t := range d.Tracks {
				if t.Of != axis {
					continue
				}
				if err := f.RemoveTrack(d.Name, axis+"."+t.What.String()); err != nil {
					return err
				}
			}
			if err := f.SetStandstill(d.Name, axis, ""); err != nil {
				return err
			}
		}
		return f.RemoveAxis(axis)
	}))
}

// setTrack gives the duty at hand a track of zeros, or takes one out.
func (p *panel) setTrack(track string, on bool) {
	if p.loading || p.s.shown == nil {
		return
	}
	doc, name := p.s.ctx.Doc(), p.s.shown.Name
	if on {
		p.do(doc.AddTrack(name, track, ""))
	} else {
		p.do(doc.RemoveTrack(name, track))
	}
}
