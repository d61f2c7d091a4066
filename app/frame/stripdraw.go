package frame

import (
	"fmt"
	"math"
	"sort"

	"fyne.io/fyne/v2"

	"barlitre/app/widgets"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
	"barlitre/machines/units"
)

// drawUnder draws the tracks, which stay while the clock moves.
func (s *strip) drawUnder(p pen.Pen, w, h float64) {
	pal := s.f.Palette()
	pen.Rect(p, 0, 0, w, h, pal.Card, pen.Stroke{})
	if len(s.plot.Lanes) == 0 {
		p.Text(pen.Pt{X: 16, Y: h / 2}, "The duty has no tracks. Give the axes motion and load on the Duty station.", 12.5, pal.Secondary, pen.Left, false)
		return
	}
	s.drawTracks(p, w, h, pal)
}

// draw draws the clock with the values at it over the tracks.
func (s *strip) draw(p pen.Pen, w, h float64) []widgets.Part {
	pal := s.f.Palette()
	if len(s.plot.Lanes) == 0 || s.area.W <= 0 {
		return nil
	}
	x := 6 + s.area.XAt(s.f.clock)
	foot := h - 21
	p.Polyline([]pen.Pt{{X: x, Y: 8}, {X: x, Y: foot}}, false, pal.Danger, pen.Stroke{W: 1.4, C: pal.Danger})
	p.Polyline([]pen.Pt{{X: x - 5, Y: 1}, {X: x + 5, Y: 1}, {X: x, Y: 9}}, true, pal.Danger, pen.Stroke{})
	// The values stand over the numbers of the axis: there they hide no phase and no track.
	text := s.f.Local(s.atClock())
	text = pen.Shorten(text, 11, true, w-s.area.X-20)
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
		p.Text(pen.Pt{X: 6, Y: 13}, "+ "+plural(more, "track", "tracks"), 10, pal.Secondary, pen.Left, false)
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

const stripSide = 146

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

// playRow sets the button and the choice of its speed side by side.
type playRow struct{}

// playShare is the share of the button.
const playShare = 0.44

// MinSize is as high as the higher of both.
func (playRow) MinSize(o []fyne.CanvasObject) fyne.Size {
	return fyne.NewSize(0, max(o[0].MinSize().Height, o[1].MinSize().Height))
}

// Layout shares the width.
func (playRow) Layout(o []fyne.CanvasObject, size fyne.Size) {
	gap := 3 * widgets.Scale()
	first := (size.Width - gap) * playShare
	o[0].Move(fyne.NewPos(0, 0))
	o[0].Resize(fyne.NewSize(first, size.Height))
	o[1].Move(fyne.NewPos(first+gap, 0))
	o[1].Resize(fyne.NewSize(size.Width-first-gap, size.Height))
}

// atClock writes the time and the values of the tracks at it.
func (s *strip) atClock() string {
	text := units.Number(s.f.clock, 4) + " s"
	for i, l := range s.plot.Lanes {
		for _, x := range s.asked[i] {
			text += " · " + units.Number(x.unit.FromSI(at(x.t, x.v, s.f.clock)), 3) + " " + l.Unit
		}
	}
	return text
}

// valuesAt are the rows of a track, all of them: what is drawn of a long one is thinned.
type valuesAt struct {
	t, v []float64 // s, SI
	unit units.Unit
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
