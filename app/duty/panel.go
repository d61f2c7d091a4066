package duty

import (
	"fmt"
	"slices"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/station"
	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/circuit"
	cycle "barlitre/circuit/duty"
	"barlitre/machines/units"
)

// panel is the right side: what a duty has besides its points, the axes of the machine,
// which tracks the duty gives, and the notes.
type panel struct {
	s       *Station
	content *fyne.Container
	loading bool // values come from the file: choices are not the user's
	shows   string

	own               *fyne.Container // of the duty at hand
	name, hours, step *widgets.Field
	repeats           *widgets.Check
	change            *fyne.Container // buttons that act on it
	axes              *fyne.Container
	axis              []*axisRows
	added             *widgets.Field
	blocks            *fyne.Container
	checks            map[string]*widgets.Check // by track
}

func newPanel(s *Station) *panel {
	p := &panel{s: s, axes: container.NewVBox(), blocks: container.NewVBox(), checks: map[string]*widgets.Check{}}
	field := func(name string, take func(string) error) *widgets.Field {
		return widgets.Name(widgets.NewField("", take), name)
	}
	p.name, p.hours, p.step = field("duty.name", p.rename), field("duty.hours", p.setHours), field("duty.step", p.setStep)
	p.repeats = widgets.Name(widgets.NewCheck("repeats without pause", p.setRepeats), "duty.repeats")
	p.added = field("duty.axis.new", p.addAxis)
	p.added.SetPlaceHolder("name a new axis")
	p.change = container.NewHBox(
		widgets.Name(widgets.NewButton("Duplicate", p.duplicate), "duty.duplicate"),
		widgets.Name(widgets.NewButton("Remove", p.remove), "duty.remove"))
	p.own = container.NewVBox(widgets.FieldRow("Name", p.name), widgets.FieldRow("Hours a year", p.hours),
		widgets.FieldRow("Time step", p.step), p.repeats)
	add := widgets.Name(widgets.NewButton("New duty", p.newDuty), "duty.new")
	p.content = container.NewVBox(
		widgets.Card("This duty", container.NewVBox(p.own, container.NewHBox(add, p.change), container.NewHBox(s.recordings.button("duty.recording")))),
		widget.NewSeparator(),
		widgets.Card("Axes and their tracks", container.NewVBox(p.axes, widgets.FieldRow("Add an axis", p.added), p.blocks)),
		widget.NewSeparator(), s.notes)
	return p
}

// fill brings in what the file has.
func (p *panel) fill() {
	f := p.s.ctx.Doc().File()
	if f == nil {
		return
	}
	p.loading = true
	defer func() { p.loading = false }()
	if shows := p.key(f); shows != p.shows {
		p.shows = shows
		p.rebuild(f)
	}
	d := p.s.shown
	show(p.own, d != nil)
	show(p.change, d != nil)
	for i, a := range p.axis {
		a.fill(p.s, f.Axes[i])
	}
	for track, c := range p.checks {
		of, what, _ := strings.Cut(track, ".")
		w, _ := cycle.WhatNamed(what)
		c.SetChecked(d != nil && d.Track(of, w) != nil)
	}
	if d == nil {
		return
	}
	p.name.SetValue(d.Name, "")
	hours, hint := "", "left out of the year"
	if d.Hours > 0 {
		hours, hint = p.s.ctx.Local(station.TrimZeros(units.Number(d.Hours/units.Hour, 6))+"\u202fh"), ""
	}
	if state := p.s.ctx.Doc().File().StateOf(d.Name); state != "" {
		hint = "from the calendar, as " + string(state) + ": see Year"
	}
	p.hours.SetValue(hours, hint)
	step, hint := p.s.ctx.Local(units.FileText(d.Step, millisecond)), ""
	if d.Step == 0 {
		hint = "time steps at the rows only"
	}
	p.step.SetValue(step, hint)
	p.repeats.SetChecked(d.Repeats)
}

var millisecond, _ = units.ParseUnit("ms", units.Time)

// key names what the rows are made for.
func (p *panel) key(f *audit.File) string {
	return fmt.Sprint(f.Axes, p.blockTracks(f), p.s.shown != nil, p.s.locked())
}

// rebuild makes the rows of axes and blocks anew.
func (p *panel) rebuild(f *audit.File) {
	p.axis, p.axes.Objects, p.blocks.Objects, p.checks = nil, nil, nil, map[string]*widgets.Check{}
	for _, a := range f.Axes {
		r := newAxisRows(p, a)
		p.axis = append(p.axis, r)
		p.axes.Add(r.content)
	}
	if len(f.Axes) == 0 {
		text := widgets.Wrapped("")
		text.SetText("An axis is a place where the machine does work: a ram, a winch drum. Name the first one.")
		p.axes.Add(text)
	}
	if tracks := p.blockTracks(f); p.s.shown != nil && len(tracks) > 0 {
		p.blocks.Add(widgets.Row("Tracks of blocks", p.trackChecks(tracks), nil))
	}
}

// trackChecks are boxes that give a duty a track, or take it out.
func (p *panel) trackChecks(tracks []string) fyne.CanvasObject {
	grid := container.NewGridWithColumns(2)
	for _, track := range tracks {
		text := track
		if of, what, _ := strings.Cut(track, "."); p.isAxis(of) {
			text = what
		}
		c := widgets.Name(widgets.NewCheck(text, func(on bool) { p.setTrack(track, on) }), "duty.track."+track)
		if p.s.locked() != "" {
			c.Disable()
		}
		p.checks[track] = c
		grid.Add(container.NewHBox(c)) // a box takes clicks as far as its word reaches
	}
	return grid
}

func (p *panel) isAxis(name string) bool {
	return slices.ContainsFunc(p.s.ctx.Doc().File().Axes, func(a cycle.Axis) bool { return a.Name == name })
}

// blockTracks lists the tracks that blocks of any circuit have a use for.
func (p *panel) blockTracks(f *audit.File) []string {
	var out []string
	for _, e := range f.Circuits {
		for i := range e.Blocks {
			for _, w := range circuit.TracksOf(&e.Blocks[i]) {
				if t := e.Blocks[i].ID + "." + w.String(); !slices.Contains(out, t) {
					out = append(out, t)
				}
			}
		}
	}
	return out
}

func show(o fyne.CanvasObject, on bool) {
	switch {
	case on && !o.Visible():
		o.Show()
	case !on && o.Visible():
		o.Hide()
	}
}

// besideBar leaves room for the scroll bar at the right.
type besideBar struct{}

func (besideBar) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	for _, o := range objects {
		o.Move(fyne.NewPos(4, 0))
		o.Resize(size.SubtractWidthHeight(4+10*widgets.Scale(), 0))
	}
}

func (besideBar) MinSize(objects []fyne.CanvasObject) fyne.Size {
	return objects[0].MinSize().AddWidthHeight(4+10*widgets.Scale(), 0)
}
