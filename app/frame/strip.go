package frame

import (
	"fmt"
	"image/color"
	"math"
	"sort"
	"time"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/driver/desktop"

	"barlitre/app/widgets"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
	"barlitre/circuit/duty"
	"barlitre/machines/units"
)

// strip shows the tracks of the duty at hand over time, and the clock.
type strip struct {
	f       *Frame
	figure  *clockFigure
	play    *widgets.TipButton
	picker  *widgets.Select
	plot    figures.Plot
	area    figures.PlotArea
	content fyne.CanvasObject
	own     bool // the picker is being set by the program
}

func newStrip(f *Frame) *strip {
	s := &strip{f: f}
	s.figure = newClockFigure(s)
	widgets.Name(s.figure, "strip")
	s.play = widgets.Name(widgets.NewTipButton("Play", "let the clock run (Space in the strip)", s.toggle), "strip.play")
	s.picker = widgets.Name(widgets.NewSelect(nil, func(name string) {
		if s.own {
			return
		}
		for i, d := range f.doc.File().Duties {
			if d.Name == name {
				f.SetDuty(i)
			}
		}
	}), "strip.duty")
	f.player = &player{f: f}
	side := container.New(&stack{}, s.picker, s.play)
	s.content = container.NewBorder(nil, nil, side, nil, s.figure)
	return s
}

func (s *strip) toggle() {
	if s.f.player.running() {
		s.f.player.stop()
	} else {
		s.f.player.start()
	}
}

// reload takes the duty at hand.
func (s *strip) reload() {
	file := s.f.doc.File()
	if file == nil || s.f.duty >= len(file.Duties) {
		s.plot = figures.Plot{}
		s.figure.Refresh()
		return
	}
	var names []string
	for _, d := range file.Duties {
		names = append(names, d.Name)
	}
	d := file.Duties[s.f.duty]
	s.own = true
	s.picker.SetOptions(names)
	s.picker.SetSelected(d.Name)
	s.own = false
	s.plot = s.lanes(d, file.Axes)
	s.figure.Refresh()
}

// lanes puts tracks of one quantity and kind of axis into one lane.
func (s *strip) lanes(d *duty.Duty, axes []duty.Axis) figures.Plot {
	plot := figures.Plot{Axis: "time", AxisUnit: "s"}
	if len(d.Time) > 0 {
		plot.From, plot.To = d.Time[0], d.Time[len(d.Time)-1]
	}
	kind := map[string]duty.AxisKind{}
	for _, a := range axes {
		kind[a.Name] = a.Kind
	}
	lane := map[string]int{}
	roles := []figures.Role{figures.RoleInk, figures.RoleGain, figures.RoleBar}
	for _, tr := range d.Tracks {
		dim := trackDim(tr.What, kind[tr.Of])
		u := units.Preferred(dim, s.f.settings.system)
		key := fmt.Sprint(tr.What, dim)
		i, ok := lane[key]
		if !ok {
			i = len(plot.Lanes)
			lane[key] = i
			plot.Lanes = append(plot.Lanes, figures.Lane{Title: tr.Of + " " + tr.What.String(), Unit: u.Label(), Zero: true})
		}
		y := make([]float64, len(tr.Values))
		for k, v := range tr.Values {
			y[k] = u.FromSI(v)
		}
		n := len(plot.Lanes[i].Series)
		plot.Lanes[i].Series = append(plot.Lanes[i].Series, figures.Series{Name: tr.Of, X: d.Time, Y: y, Role: roles[n%len(roles)], Dash: n > 0})
		if n > 0 {
			plot.Lanes[i].Title = tr.What.String()
		}
	}
	for i, p := range d.Phases {
		to := plot.To
		if i+1 < len(d.Phases) {
			to = d.Phases[i+1].From
		}
		plot.Phases = append(plot.Phases, figures.Phase{Name: p.Name, From: p.From, To: to})
	}
	return plot
}

func trackDim(w duty.What, k duty.AxisKind) units.Dim {
	switch {
	case w == duty.Command:
		return units.Ratio
	case w == duty.SetPressure:
		return units.Pressure
	case w == duty.SetFlow:
		return units.Flow
	case w == duty.Load && k == duty.Rotary:
		return units.Torque
	case w == duty.Load:
		return units.Force
	case w == duty.Position && k == duty.Rotary:
		return units.Angle
	case w == duty.Position:
		return units.Length
	case k == duty.Rotary:
		return units.AngularSpeed
	}
	return units.Velocity
}

func (s *strip) moved() { s.figure.Refresh() }

// draw draws the tracks and the clock with the values at it.
func (s *strip) draw(p pen.Pen, w, h float64) []widgets.Part {
	pal := s.f.Palette()
	pen.Rect(p, 0, 0, w, h, pal.Card, pen.Stroke{})
	if len(s.plot.Lanes) == 0 {
		p.Text(pen.Pt{X: 16, Y: h / 2}, "The duty has no tracks. Give the axes motion and load on the Duty station.", 12.5, pal.Secondary, pen.Left, false)
		return nil
	}
	s.drawTracks(p, w, h, pal)
	if s.area.W <= 0 {
		return nil
	}
	x := 6 + s.area.XAt(s.f.clock)
	foot := h - 21
	p.Polyline([]pen.Pt{{X: x, Y: 8}, {X: x, Y: foot}}, false, pal.Danger, pen.Stroke{W: 1.4, C: pal.Danger})
	p.Polyline([]pen.Pt{{X: x - 5, Y: 1}, {X: x + 5, Y: 1}, {X: x, Y: 9}}, true, pal.Danger, pen.Stroke{})
	// The values stand over the numbers of the axis: there they hide no phase and no track.
	text := s.f.Local(s.atClock())
	tw := p.TextWidth(text, 11, true) + 10
	bx := max(6+s.area.X, min(w-4-tw, x-tw/2))
	pen.RoundRect(p, bx, foot, tw, 17, 3, pal.Ground, pen.Stroke{W: 1, C: pal.Danger})
	p.Text(pen.Pt{X: bx + 5, Y: foot + 12.5}, text, 11, pal.Ink, pen.Left, true)
	return []widgets.Part{
		{Name: "tracks", Text: fmt.Sprint(len(s.plot.Lanes)), X: 6 + s.area.X, Y: 0, W: s.area.W, H: h},
		{Name: "clock", Text: s.f.Local(units.Number(s.f.clock, 4)) + " s", X: x - 6, Y: 0, W: 12, H: h, Click: true},
	}
}

// drawTracks draws as many lanes as can be read at a height; with room for none, the phases
// alone. What is not drawn is named, and stands at the Duty station.
func (s *strip) drawTracks(p pen.Pen, w, h float64, pal figures.Palette) {
	plot := s.plot
	fit := 0
	switch {
	case h >= 0.9*stripHigh:
		fit = 2
	case h >= 0.9*stripLow:
		fit = 1
	}
	if more := len(plot.Lanes) - fit; more > 0 && fit > 0 {
		plot.Lanes = plot.Lanes[:fit]
		p.Text(pen.Pt{X: 6, Y: 13}, "and "+plural(more, "track", "tracks")+" more", 10, pal.Secondary, pen.Left, false)
	}
	p.Push(6, 2, 1)
	if fit > 0 {
		s.area = plot.Draw(p, w-20, h-4, pal)
	} else {
		s.area = drawPhases(p, plot, w-20, h-4, pal)
	}
	p.Pop()
}

// drawPhases draws a line of time with the names of the phases.
func drawPhases(p pen.Pen, plot figures.Plot, w, h float64, pal figures.Palette) figures.PlotArea {
	a := figures.PlotArea{X: 10, W: w - 20, From: plot.From, To: plot.To}
	if a.W <= 0 || a.To <= a.From {
		return figures.PlotArea{}
	}
	y := h - 24
	pen.Line(p, pen.Pt{X: a.X, Y: y}, pen.Pt{X: a.X + a.W, Y: y}, pen.Stroke{W: 1.4, C: pal.Ink})
	tick := func(t float64) {
		pen.Line(p, pen.Pt{X: a.XAt(t), Y: y - 14}, pen.Pt{X: a.XAt(t), Y: y}, pen.Stroke{W: 1, C: pal.Secondary})
	}
	for _, ph := range plot.Phases {
		tick(ph.From)
		room := a.XAt(ph.To) - a.XAt(ph.From) - 8
		if name := pen.Shorten(ph.Name, 11, false, room); room > 20 {
			p.Text(pen.Pt{X: a.XAt(ph.From) + 5, Y: y - 5}, name, 11, pal.Secondary, pen.Left, false)
		}
	}
	tick(a.To)
	p.Text(pen.Pt{X: a.X, Y: h - 4}, units.Number(a.From, 3)+" s", 10, pal.Secondary, pen.Left, false)
	p.Text(pen.Pt{X: a.X + a.W, Y: h - 4}, units.Number(a.To, 4)+" s", 10, pal.Secondary, pen.Right, false)
	return a
}

// stack puts the choice of the duty over the play button, close where there is little room.
type stack struct{}

const stripSide = 111

// MinSize is that of both, close together.
func (*stack) MinSize(o []fyne.CanvasObject) fyne.Size {
	k := widgets.Scale()
	return fyne.NewSize((stripSide+12)*k, o[0].MinSize().Height+o[1].MinSize().Height)
}

// Layout places both from the top.
func (*stack) Layout(o []fyne.CanvasObject, size fyne.Size) {
	k := widgets.Scale()
	free := size.Height - o[0].MinSize().Height - o[1].MinSize().Height
	gap := max(0, min(4*k, free/3))
	y := min(4*k, gap)
	for _, c := range o {
		c.Move(fyne.NewPos(4*k, y))
		c.Resize(fyne.NewSize(size.Width-12*k, c.MinSize().Height))
		y += c.MinSize().Height + gap
	}
}

// atClock writes the time and the values of the tracks at it.
func (s *strip) atClock() string {
	text := units.Number(s.f.clock, 4) + " s"
	for _, l := range s.plot.Lanes {
		for _, x := range l.Series {
			text += " · " + units.Number(at(x.X, x.Y, s.f.clock), 3) + " " + l.Unit
		}
	}
	return text
}

// at interpolates between rows; at a step it takes the row after it.
func at(t, v []float64, x float64) float64 {
	n := min(len(t), len(v)) // a faulty duty may have a short track
	t, v = t[:n], v[:n]
	i := sort.Search(len(t), func(i int) bool { return t[i] > x })
	switch {
	case len(t) == 0:
		return math.NaN()
	case i == 0:
		return v[0]
	case i == len(t):
		return v[len(v)-1]
	}
	return v[i-1] + (v[i]-v[i-1])*(x-t[i-1])/(t[i]-t[i-1])
}

// clockFigure is the strip's figure: the clock follows click, drag and arrow keys.
type clockFigure struct {
	*widgets.Figure
	s     *strip
	focus bool
}

func newClockFigure(s *strip) *clockFigure {
	c := &clockFigure{s: s}
	c.Figure = widgets.NewFigure(fyne.NewSize(240, stripSlim), func(p pen.Pen, w, h float64) []widgets.Part {
		parts := s.draw(p, w, h)
		if c.focus {
			pen.Rect(p, 1, 1, w-2, h-2, color.NRGBA{}, pen.Stroke{W: 2, C: s.f.Palette().Gain})
		}
		return parts
	})
	c.ExtendBaseWidget(c)
	return c
}

func (c *clockFigure) to(x float32) {
	c.s.f.player.stop()
	c.s.f.SetClock(c.s.area.At(float64(x/widgets.Scale()) - 6))
}

// MouseDown sets the clock and takes the focus.
func (c *clockFigure) MouseDown(ev *desktop.MouseEvent) {
	c.s.f.win.Canvas().Focus(c)
	if ev.Button == desktop.MouseButtonPrimary {
		c.to(ev.Position.X)
	}
}

// MouseUp ends a press.
func (c *clockFigure) MouseUp(*desktop.MouseEvent) {}

// Dragged moves the clock along.
func (c *clockFigure) Dragged(ev *fyne.DragEvent) { c.to(ev.Position.X) }

// DragEnd ends a drag.
func (c *clockFigure) DragEnd() {}

// FocusGained and FocusLost show the focus.
func (c *clockFigure) FocusGained()   { c.focus = true; c.Refresh() }
func (c *clockFigure) FocusLost()     { c.focus = false; c.Refresh() }
func (c *clockFigure) TypedRune(rune) {}

// TypedKey steps the clock: a hundredth of the cycle, with page keys a tenth.
func (c *clockFigure) TypedKey(k *fyne.KeyEvent) {
	f := c.s.f
	from, to := f.span()
	step := (to - from) / 100
	switch k.Name {
	case fyne.KeyLeft:
		f.SetClock(f.clock - step)
	case fyne.KeyRight:
		f.SetClock(f.clock + step)
	case fyne.KeyPageUp:
		f.SetClock(f.clock - 10*step)
	case fyne.KeyPageDown:
		f.SetClock(f.clock + 10*step)
	case fyne.KeyHome:
		f.SetClock(from)
	case fyne.KeyEnd:
		f.SetClock(to)
	case fyne.KeySpace:
		c.s.toggle()
	}
}

// player lets the clock run: a cycle in its own time, but in no less than 8 s and
// no more than a minute.
type player struct {
	f    *Frame
	quit chan struct{}
}

const framePeriod = 33 * time.Millisecond

func (p *player) running() bool { return p.quit != nil }

func (p *player) start() {
	from, to := p.f.span()
	if to <= from {
		return
	}
	quit := make(chan struct{})
	p.quit = quit
	p.f.strip.play.SetText("Pause")
	speed := (to - from) / math.Max(8, math.Min(60, to-from))
	go func() {
		tick := time.NewTicker(framePeriod)
		defer tick.Stop()
		last := time.Now()
		for {
			select {
			case <-quit:
				return
			case <-tick.C:
			}
			now := time.Now()
			dt := now.Sub(last).Seconds()
			last = now
			fyne.DoAndWait(func() { // a slow screen drops steps instead of piling them up
				if p.quit != quit {
					return
				}
				from, to := p.f.span()
				t := p.f.clock + dt*speed
				if t >= to {
					t = from
				}
				p.f.SetClock(t)
			})
		}
	}()
}

func (p *player) stop() {
	if p.quit != nil {
		close(p.quit)
		p.quit = nil
		p.f.strip.play.SetText("Play")
	}
}
