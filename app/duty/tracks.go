package duty

import (
	"fyne.io/fyne/v2"

	"barlitre/audit"
	"barlitre/audit/figures"
	cycle "barlitre/circuit/duty"
	"barlitre/machines/units"
)

// track is one column of the duty at hand, in the unit it is shown in.
type track struct {
	name   string // as in files: "ram.speed"; "t" for the time
	of     string
	what   string
	says   string // asked or measured
	unit   units.Unit
	values []float64 // SI
}

// tracksOf returns time and tracks, axis by axis as the file lists them, then the
// commands of blocks.
func (s *Station) tracksOf(d *cycle.Duty) []track {
	sys := s.ctx.System()
	out := []track{{name: "t", of: "time", unit: units.Preferred(units.Time, sys), values: d.Time}}
	known := map[string]bool{}
	add := func(t cycle.Track, kind cycle.AxisKind) {
		u := units.Percent
		if t.What != cycle.Command {
			u = units.Preferred(t.What.Dim(kind), sys)
		}
		says := "asked"
		if t.What.Measured() {
			says = "measured"
		}
		out = append(out, track{name: t.Of + "." + t.What.String(), of: t.Of, what: t.What.String(), says: says, unit: u, values: t.Values})
	}
	for _, a := range s.ctx.Doc().File().Axes {
		known[a.Name] = true
		for _, t := range d.Tracks {
			if t.Of == a.Name {
				add(t, a.Kind)
			}
		}
	}
	for _, t := range d.Tracks {
		if !known[t.Of] {
			add(t, cycle.Linear)
		}
	}
	return out
}

func (s *Station) fillPlot(d *cycle.Duty) {
	p := figures.Plot{Phases: figures.PhasesOf(d), Axis: "time", AxisUnit: s.tracks[0].unit.Label()}
	if n := len(d.Time); n > 0 {
		p.From, p.To = s.tracks[0].unit.FromSI(d.Time[0]), s.tracks[0].unit.FromSI(d.Time[n-1])
	}
	courses := s.courses.of(d, s.tracks[1:], func() {
		if s.shown == d {
			s.fillPlot(d)
		}
	})
	for i, t := range s.tracks[1:] {
		role := figures.RoleGain
		if t.what == cycle.Load.String() {
			role = figures.RoleInk
		}
		lane := figures.Lane{Title: t.of + " " + t.what, Unit: t.unit.Label(), Zero: true}
		if c := courses[i]; c != nil {
			lane.Series = []figures.Series{{Name: t.says, Long: &figures.Long{Pyramid: c, X: s.tracks[0].unit, Y: t.unit}, Role: role}}
		} else if s.courses.cannot(t) { // its times are at fault: what can be drawn is
			c := audit.CourseOf(d, cycle.Track{Of: t.of, Values: t.values})
			lane.Series = []figures.Series{{Name: t.says, X: inUnit(c.T, s.tracks[0].unit), Y: inUnit(c.V, t.unit), Role: role}}
		}
		p.Lanes = append(p.Lanes, lane)
	}
	s.plot.SetMin(fyne.NewSize(300, float32(60+62*len(p.Lanes))))
	s.plot.SetPlot(p)
	s.plot.SetClock(s.ctx.Clock())
}

func inUnit(si []float64, u units.Unit) []float64 {
	out := make([]float64, len(si))
	for i, v := range si {
		out[i] = u.FromSI(v)
	}
	return out
}

// valueAt is the value of a lane at the clock, as text.
func (s *Station) valueAt(lane int, t float64) string {
	if s.shown == nil || lane+1 >= len(s.tracks) {
		return ""
	}
	k := s.tracks[lane+1]
	if len(k.values) != len(s.shown.Time) {
		return "" // a fault of the file, which the findings tell
	}
	course := audit.Track{T: s.shown.Time, V: k.values}
	return s.ctx.Local(units.Format(course.At(t), k.unit, 3))
}
