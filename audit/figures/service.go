package figures

import (
	"math"

	"barlitre/audit"
	"barlitre/audit/pen"
	"barlitre/machines/units"
)

// Service shows the efficiency of one service of a cylinder-switched machine over its flow, as a band from low to high
// idle and switching losses, beside another machine of the same displacement; below, for how long the duty asks for which flow.
type Service struct {
	Head    string // at which pressure and speed
	Plot    Plot
	Verdict string // in sentences, for the text below
}

const serviceHead = 20.0 // height of the line above the plot

// ServiceOf makes the figure; ok = false when the service delivers nothing in the duty.
func ServiceOf(s *audit.Service, system units.System) (f Service, ok bool) {
	c, ok := s.Curve()
	if !ok {
		return f, false
	}
	show := func(v float64, d units.Dim) string { return units.Format(v, units.Preferred(d, system), 3) }
	f.Head = s.Block + " at its mean " + show(c.Pressure, units.Pressure) + " and " + units.Format(c.Speed, units.Preferred(units.AngularSpeed, system), 4)
	f.Verdict = s.Verdict(system)
	flow := units.Preferred(units.Flow, system)
	x := make([]float64, len(c.Flow))
	for i, q := range c.Flow {
		x[i] = flow.FromSI(q)
	}
	word := ""
	if s.Assumed {
		word = ", assumed"
	}
	other := "swashplate, usual losses"
	if s.Fitted {
		other = "swashplate, fitted to points"
	}
	eff := Lane{Title: "efficiency", Unit: "%", Range: [2]float64{0, 100}, Series: []Series{
		{Name: "low to high losses" + word, X: x, Y: percent(c.Switched[0]), Base: percent(c.Switched[2]), Role: RoleGain},
		{Name: "switched, likely" + word, X: x, Y: percent(c.Switched[1]), Role: RoleGain},
		{Name: other, X: x, Y: percent(c.Other), Role: RoleInk, Dash: true}}}
	f.Plot = Plot{Lanes: []Lane{eff, timeOf(s, x)}, Axis: "flow", AxisUnit: flow.Label(), From: 0, To: x[len(x)-1]}
	return f, true
}

// timeOf is the share of the time at work by flow.
func timeOf(s *audit.Service, x []float64) Lane {
	total := 0.0
	for _, t := range s.Flows {
		total += t
	}
	lane := Lane{Title: "time", Unit: "%", Zero: true, Series: []Series{{Name: "of the time at work", Role: RoleBar, Fill: true}}}
	if total == 0 {
		return lane
	}
	at := &lane.Series[0]
	for i, t := range s.Flows {
		y, w := 100*t/total, x[len(x)-1]/audit.FlowBins
		at.X = append(at.X, float64(i)*w, float64(i+1)*w)
		at.Y = append(at.Y, y, y)
	}
	return lane
}

func percent(v []float64) []float64 {
	out := make([]float64, len(v))
	for i, x := range v {
		out[i] = 100 * x
	}
	return out
}

// Height returns a height [figure units] at which the figure looks well.
func (f Service) Height(w float64) float64 { return serviceHead + f.Plot.Height(w) + 40 }

// Draw draws the figure into 0…w × 0…h.
func (f Service) Draw(p pen.Pen, w, h float64, pal Palette) {
	if !(w > 0) || !(h > serviceHead) || math.IsInf(w+h, 0) {
		return
	}
	p.Text(pen.Pt{Y: 13}, pen.Shorten(f.Head, textSize, false, w), textSize, pal.Ink, pen.Left, false)
	p.Push(0, serviceHead, 1)
	f.Plot.Draw(p, w, h-serviceHead, pal)
	p.Pop()
}
