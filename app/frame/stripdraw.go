package frame

import (
	"math"

	"fyne.io/fyne/v2"

	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
	"barlitre/machines/units"
)

// draw draws the tracks.
func (s *strip) draw(p pen.Pen, w, h float64) {
	pal := s.f.Palette()
	pen.Rect(p, 0, 0, w, h, pal.Card, pen.Stroke{})
	if len(s.plot.Lanes) == 0 {
		p.Text(pen.Pt{X: 16, Y: h / 2}, "The duty has no tracks. Give the axes motion and load on the Duty station.", 12.5, pal.Secondary, pen.Left, false)
		return
	}
	s.drawTracks(p, w, h, pal)
}

// seen is the plot of as many lanes as can be read at a height, and how many more there are;
// with room for none the phases alone are drawn.
func (s *strip) seen(h float64) (plot figures.Plot, more int, bare bool) {
	plot = s.plot
	fit := 0
	switch {
	case h >= 0.9*stripHigh:
		fit = 2
	case h >= 0.9*stripLow:
		fit = 1
	}
	if more = len(plot.Lanes) - fit; more > 0 && fit > 0 {
		plot.Lanes = plot.Lanes[:fit]
		return plot, more, false
	}
	return plot, 0, fit == 0
}

// lay finds where the tracks lie in a size.
func (s *strip) lay(w, h float64) {
	s.area, s.numbers = figures.PlotArea{}, nil
	if len(s.plot.Lanes) == 0 || w <= 0 || h <= 0 || s.plot.To <= s.plot.From {
		return
	}
	p := pen.NewRecorder()
	if plot, _, bare := s.seen(h); bare {
		s.area = phasesArea(plot, w-20)
		drawPhases(p, plot, w-20, h-4, s.f.Palette())
	} else {
		s.area = plot.Draw(p, w-20, h-4, s.f.Palette())
	}
	for _, b := range p.Boxes() {
		if b.Y+b.H > h-stripFoot && b.X > s.area.X-b.W {
			s.numbers = append(s.numbers, span{stripPad + b.X, stripPad + b.X + b.W})
		}
	}
}

// span is a stretch across the strip.
type span struct{ from, to float64 }

// covering is a stretch, and all of the numbers of the axis that it lies on: one that is half
// hidden reads as another.
func (s *strip) covering(x span) span {
	out := x
	for _, n := range s.numbers {
		if n.from < x.to && n.to > x.from {
			out = span{min(out.from, n.from), max(out.to, n.to)}
		}
	}
	return out
}

// drawTracks draws the lanes that are seen. What is not drawn is named, and stands at the
// Duty station.
func (s *strip) drawTracks(p pen.Pen, w, h float64, pal figures.Palette) {
	plot, more, bare := s.seen(h)
	if more > 0 {
		p.Text(pen.Pt{X: 6, Y: 13}, "+ "+plural(more, "track", "tracks"), 10, pal.Secondary, pen.Left, false)
	}
	p.Push(stripPad, 2, 1)
	if bare {
		drawPhases(p, plot, w-20, h-4, pal)
	} else {
		plot.Draw(p, w-20, h-4, pal)
	}
	p.Pop()
}

// phasesArea is where the line of time lies.
func phasesArea(plot figures.Plot, w float64) figures.PlotArea {
	return figures.PlotArea{X: 10, W: w - 20, From: plot.From, To: plot.To}
}

// drawPhases draws a line of time with the names of the phases.
func drawPhases(p pen.Pen, plot figures.Plot, w, h float64, pal figures.Palette) {
	a := phasesArea(plot, w)
	if a.W <= 0 || a.To <= a.From {
		return
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

// flagValues is how many values stand beside the clock; of more nobody could tell whose they are.
const flagValues = 6

// atClock writes the time, and the values of the tracks at it if these are few.
func (s *strip) atClock() string {
	text, n := units.Number(s.f.clock, 4)+" s", 0
	for _, l := range s.asked {
		n += len(l)
	}
	if n > flagValues {
		return text
	}
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

// at is the value at a time; at a step that of the row after it.
func at(t, v []float64, x float64) float64 {
	n := min(len(t), len(v)) // a faulty duty may have a short track
	if n == 0 {
		return math.NaN()
	}
	return (&audit.Track{T: t[:n], V: v[:n]}).At(x)
}
