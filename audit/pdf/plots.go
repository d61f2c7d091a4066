package pdf

import (
	"fmt"
	"slices"
	"strings"

	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
	"barlitre/circuit"
	"barlitre/circuit/duty"
	"barlitre/machines/units"
)

const dutyHead = "Duty: "

// duties prints what is asked of the machine and the course of each circuit.
func (l *layout) duties() {
	if len(l.s.File.Duties) == 0 {
		l.para("The file holds no duty.", l.body())
	}
	for i, d := range l.s.File.Duties {
		asked, zero := l.asked(i)
		l.heading(2, dutyHead+d.Name, 10+l.plotHeight(asked, d))
		text := l.dutyText(i)
		if len(zero) > 0 {
			text += " At zero throughout: " + strings.Join(zero, ", ") + "."
		}
		l.para(text, l.body())
		l.plot(asked, d)
		runs := l.courses(i)
		if len(runs) > 0 {
			text := "In the courses that follow, power, heat and pressure have the same scales for all circuits. Pressures: the highest three that run differently."
			if slices.ContainsFunc(runs, func(c course) bool { return c.thinned }) {
				text += " Long courses are drawn from the lowest and highest value of each stretch."
			}
			l.para(text, l.small())
		}
		for _, c := range runs {
			l.heading(3, c.name, l.plotHeight(c.lanes, d))
			l.plot(c.lanes, d)
		}
	}
}

func (l *layout) dutyText(i int) string {
	d := l.s.File.Duties[i]
	parts := []string{fmt.Sprintf("One cycle takes %s.", units.Format(d.Cycle(), units.Preferred(units.Time, l.r.System), 4))}
	if d.Hours > 0 {
		parts = append(parts, fmt.Sprintf("It runs %s\u202fh a year.", units.Number(d.Hours/units.Hour, 4)))
	} else {
		parts = append(parts, "It has no hours a year.")
	}
	if i < len(l.s.File.Sources) && l.s.File.Sources[i].File != "" {
		src := l.s.File.Sources[i]
		parts = append(parts, fmt.Sprintf("Taken from %s, SHA-256 %s.", src.File, src.SHA256))
	}
	return strings.Join(parts, " ")
}

// lanesAbreast is how many lanes a plot has at most before it is cut in two.
const lanesAbreast = 8

// first returns the plot of as many lanes as one plot takes.
func (l *layout) first(lanes []figures.Lane, d *duty.Duty) figures.Plot {
	return figures.Plot{Lanes: lanes[:min(len(lanes), lanesAbreast)], Phases: figures.PhasesOf(d), Axis: "time",
		AxisUnit: units.Preferred(units.Time, l.r.System).Label()}
}

// plotHeight returns the least height of the first plot of lanes on paper.
func (l *layout) plotHeight(lanes []figures.Lane, d *duty.Duty) float64 {
	if len(lanes) == 0 {
		return 0
	}
	return 2*l.sheet.room + figureLeast*l.first(lanes, d).Height(fullW/figureLeast)
}

func (l *layout) plot(lanes []figures.Lane, d *duty.Duty) {
	for len(lanes) > 0 {
		f := l.first(lanes, d)
		l.figure(f.Height, func(p pen.Pen, w, h float64) { f.Draw(p, w, h, l.pal) })
		l.y += 2 * l.sheet.room
		lanes = lanes[len(f.Lanes):]
	}
}

// asked returns the lanes of a duty: what it gives, axis by axis, and how a
// circuit moved where it fell short; and the names of those that would show nothing but a line at zero.
func (l *layout) asked(i int) (lanes []figures.Lane, zero []string) {
	d := l.s.File.Duties[i]
	add := func(t duty.Track, kind duty.AxisKind) {
		u := units.Percent
		if t.What != duty.Command {
			u = units.Preferred(t.What.Dim(kind), l.r.System)
		}
		lane := figures.Lane{Title: t.Of + " " + t.What.String(), Unit: u.Label(), Zero: true}
		asked := audit.CourseOf(d, t)
		lane.Series = []figures.Series{{Name: "asked", X: asked.T, Y: inUnit(asked.V, u), Role: figures.RoleInk}}
		switch {
		case t.What == duty.Speed:
			lane.Series = append(lane.Series, l.delivered(i, t.Of, u)...)
		case t.What.Measured():
			lane.Series[0].Name = "measured"
			lane.Series = append(lane.Series, l.computed(i, audit.MeasuredSignal(t), u)...)
		}
		if len(lane.Series) == 1 && reach(lane) == [2]float64{} {
			zero = append(zero, lane.Title)
			return
		}
		lanes = append(lanes, lane)
	}
	for _, a := range l.s.File.Axes {
		for _, t := range d.Tracks {
			if t.Of == a.Name {
				add(t, a.Kind)
			}
		}
	}
	for _, t := range d.Tracks {
		if !slices.ContainsFunc(l.s.File.Axes, func(a duty.Axis) bool { return a.Name == t.Of }) {
			add(t, duty.Linear)
		}
	}
	return lanes, zero
}

// computed returns a signal in each circuit that has it.
func (l *layout) computed(i int, signal string, u units.Unit) []figures.Series {
	var out []figures.Series
	for _, c := range l.s.Circuits {
		if i >= len(c.Duties) || c.Duties[i].Plot == nil {
			continue
		}
		if t := c.Duties[i].Plot.Signal(signal); t != nil {
			out = append(out, figures.Series{Name: c.Circuit.Name + " computes", X: t.T, Y: inUnit(t.V, u), Role: circuitRole(c), Dash: true})
		}
	}
	return out
}

// delivered returns the speed of an axis in each circuit that fell short of it.
func (l *layout) delivered(i int, axis string, u units.Unit) []figures.Series {
	var out []figures.Series
	for _, c := range l.s.Circuits {
		if i >= len(c.Duties) || c.Duties[i].Plot == nil {
			continue
		}
		short := slices.ContainsFunc(c.Duties[i].Shortfalls, func(s circuit.Shortfall) bool { return s.Axis == axis })
		t := speedTrack(c, c.Duties[i].Plot, axis)
		if short && t != nil {
			out = append(out, figures.Series{Name: c.Circuit.Name + " delivers", X: t.T, Y: inUnit(t.V, u), Role: circuitRole(c), Dash: true})
		}
	}
	return out
}

func speedTrack(c *audit.CircuitRun, p *audit.Plot, axis string) *audit.Track {
	for _, b := range c.Circuit.Blocks {
		if b.Word("axis") != axis {
			continue
		}
		for _, what := range []string{".v", ".w"} {
			if t := p.Signal(b.ID + what); t != nil {
				return t
			}
		}
	}
	return nil
}

func circuitRole(c *audit.CircuitRun) figures.Role {
	if c.Proposal {
		return figures.RoleGain
	}
	return figures.RoleDanger
}

func inUnit(si []float64, u units.Unit) []float64 {
	out := make([]float64, len(si))
	for i, v := range si {
		out[i] = u.FromSI(v)
	}
	return out
}

// course is what one circuit did over a cycle.
type course struct {
	name    string
	lanes   []figures.Lane
	thinned bool
}

// courses returns the key courses of every solved circuit, on common scales.
func (l *layout) courses(i int) []course {
	var out []course
	for _, c := range l.s.Circuits {
		if i < len(c.Duties) && c.Duties[i].Plot != nil && c.Duties[i].Balance != nil {
			p := c.Duties[i].Plot
			out = append(out, course{c.Circuit.Name, l.courseLanes(c, p), p.Thinned})
		}
	}
	for lane := range 3 {
		var all [2]float64
		for _, c := range out {
			r := reach(c.lanes[lane])
			all = [2]float64{min(all[0], r[0]), max(all[1], r[1])}
		}
		margin := 0.04 * (all[1] - all[0])
		if all[0] < 0 {
			all[0] -= margin
		}
		all[1] += margin
		for _, c := range out {
			c.lanes[lane].Range = all
		}
	}
	return out
}

func reach(l figures.Lane) [2]float64 {
	var r [2]float64
	for _, s := range l.Series {
		for _, v := range s.Y {
			if known(v) {
				r = [2]float64{min(r[0], v), max(r[1], v)}
			}
		}
	}
	return r
}

// courseLanes returns power drawn, heat to the oil and the highest pressures.
func (l *layout) courseLanes(c *audit.CircuitRun, p *audit.Plot) []figures.Lane {
	power, bar := units.Preferred(units.Power, l.r.System), units.Preferred(units.Pressure, l.r.System)
	sum := func(title string, role figures.Role, want func(circuit.Channel) bool) figures.Lane {
		t, v := total(p, want)
		return figures.Lane{Title: title, Unit: power.Label(), Zero: true,
			Series: []figures.Series{{Name: title, X: t, Y: inUnit(v, power), Role: role, Fill: true}}}
	}
	pressures := figures.Lane{Title: "pressures", Unit: bar.Label(), Zero: true}
	for n, t := range highest(p, 3) {
		role := []figures.Role{figures.RoleInk, figures.RoleGain, figures.RoleSecondary}[n]
		pressures.Series = append(pressures.Series, figures.Series{Name: strings.TrimSuffix(t.Name, ".p"), X: t.T, Y: inUnit(t.V, bar), Role: role})
	}
	if len(pressures.Series) == 1 {
		pressures.Title = "pressure " + pressures.Series[0].Name
	}
	return []figures.Lane{
		sum("power drawn", circuitBar(c), func(ch circuit.Channel) bool { return ch.Role == circuit.Supply }),
		sum("heat to the oil", figures.RoleHeat, func(ch circuit.Channel) bool { return ch.Role == circuit.Loss && ch.Sink == circuit.ToOil }),
		pressures,
	}
}

func circuitBar(c *audit.CircuitRun) figures.Role {
	if c.Proposal {
		return figures.RoleGain
	}
	return figures.RoleBar
}

// total adds up channels over time. Tracks of a long run keep different instants;
// the sum is then taken at those of the track with most of them.
func total(p *audit.Plot, want func(circuit.Channel) bool) (t, v []float64) {
	var tracks []*audit.Track
	for i, ch := range p.Channels {
		if want(ch) && i < len(p.Powers) {
			tracks = append(tracks, &p.Powers[i])
			if len(p.Powers[i].T) > len(t) {
				t = p.Powers[i].T
			}
		}
	}
	v = make([]float64, len(t))
	for _, k := range tracks {
		same := slices.Equal(k.T, t)
		for i := range t {
			if same {
				v[i] += k.V[i] // at a step both values
			} else {
				v[i] += k.At(t[i])
			}
		}
	}
	return t, v
}

// highest returns up to n pressures with the highest peaks, each course once.
func highest(p *audit.Plot, n int) []*audit.Track {
	var out []*audit.Track
	for i := range p.Signals {
		t := &p.Signals[i]
		if t.Dim != units.Pressure || len(t.V) == 0 ||
			slices.ContainsFunc(out, func(o *audit.Track) bool { return slices.Equal(o.V, t.V) && slices.Equal(o.T, t.T) }) {
			continue
		}
		out = append(out, t)
	}
	slices.SortStableFunc(out, func(a, b *audit.Track) int {
		switch x, y := slices.Max(a.V), slices.Max(b.V); {
		case x > y:
			return -1
		case x < y:
			return 1
		}
		return 0
	})
	return out[:min(n, len(out))]
}
