package sheet

import (
	"slices"
	"strings"

	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// course is one line of the small plot.
type course struct {
	group  string // what is plotted together: "heat", "pressures", "flows"
	name   string // in the legend, "" when it is alone
	prefix string // before its value at the clock
	dim    units.Dim
	tracks []*audit.Track // added up
	role   figures.Role
	fill   bool
}

func (c *course) at(t float64) float64 {
	sum := 0.0
	for _, k := range c.tracks {
		sum += k.At(t)
	}
	return sum
}

// points are the times of all tracks with their sum. Tracks of a thinned run keep
// different times.
func (c *course) points(u units.Unit) (x, y []float64) {
	if len(c.tracks) == 1 {
		k := c.tracks[0]
		y = make([]float64, len(k.V))
		for i, v := range k.V {
			y[i] = u.FromSI(v)
		}
		return k.T, y
	}
	for _, k := range c.tracks {
		x = append(x, k.T...)
	}
	slices.Sort(x)
	x = slices.Compact(x)
	for _, t := range x {
		y = append(y, u.FromSI(c.at(t)))
	}
	return x, y
}

// courses lists what can be plotted of what the panel shows, heat first.
func (l *live) courses() []course {
	c, b := l.p.at()
	switch {
	case c == nil:
		return nil
	case b == nil:
		return l.totalCourses()
	}
	run := l.p.s.runOf(c.Name)
	if run == nil || run.Plot == nil {
		return nil
	}
	var out []course
	if heat := lossTracks(run.Plot, func(c circuit.Channel) bool { return c.Role == circuit.Loss && c.Block == b.ID }); len(heat) > 0 {
		out = append(out, course{group: "heat", dim: units.Power, tracks: heat, role: figures.RoleHeat, fill: true})
	}
	roles := map[string]int{}
	for i := range run.Plot.Signals {
		k := &run.Plot.Signals[i]
		block, what, _ := strings.Cut(k.Name, ".")
		if block != b.ID {
			continue
		}
		port, kind, isPort := strings.Cut(what, ".")
		q := course{group: k.Title, dim: k.Dim, tracks: []*audit.Track{k}}
		if isPort {
			q.group, q.name, q.prefix = map[string]string{"p": "pressures", "q": "flows"}[kind], port, port+" "
			q.role = [4]figures.Role{figures.RoleInk, figures.RoleGain, figures.RoleBar, figures.RoleSecondary}[roles[kind]%4]
			roles[kind]++
		}
		out = append(out, q)
		for j := range run.Plot.Measured {
			if m := &run.Plot.Measured[j]; m.Name == k.Name {
				q.name, q.prefix, q.tracks, q.role = "measured", "measured ", []*audit.Track{m}, figures.RoleHeat
				out = append(out, q)
			}
		}
	}
	return out
}

func lossTracks(p *audit.Plot, of func(circuit.Channel) bool) []*audit.Track {
	var out []*audit.Track
	for i, c := range p.Channels {
		if of(c) {
			out = append(out, &p.Powers[i])
		}
	}
	return out
}

// totalCourses compares the circuits.
func (l *live) totalCourses() []course {
	groups := []struct {
		name string
		of   func(circuit.Channel) bool
	}{
		{"power drawn", func(c circuit.Channel) bool { return c.Role == circuit.Supply }},
		{"heat to the oil", func(c circuit.Channel) bool { return c.Role == circuit.Loss && c.Sink == circuit.ToOil }},
	}
	var out []course
	for _, g := range groups {
		for i, e := range l.p.s.editors {
			run := l.p.s.run(i)
			if run == nil || run.Plot == nil {
				continue
			}
			if tracks := lossTracks(run.Plot, g.of); len(tracks) > 0 {
				out = append(out, course{group: g.name, name: e.name, dim: units.Power, tracks: tracks,
					role: [2]figures.Role{figures.RoleInk, figures.RoleGain}[i]})
			}
		}
	}
	return out
}

// choose plots another group.
func (l *live) choose(group string) {
	if l.filling {
		return
	}
	l.chosen[l.kind()] = group
	l.replot()
}

// kind is what a choice is remembered for.
func (l *live) kind() string {
	if _, b := l.p.at(); b != nil {
		return b.Kind
	}
	return ""
}

// replot brings the plot up to date with the solution and the choice.
func (l *live) replot() {
	all := l.courses()
	var groups []string
	for _, c := range all {
		if !slices.Contains(groups, c.group) {
			groups = append(groups, c.group)
		}
	}
	show(l.choice, len(groups) > 0)
	show(l.plot, len(groups) > 0)
	l.drawn = nil
	if len(groups) == 0 {
		return
	}
	group := l.chosen[l.kind()]
	if !slices.Contains(groups, group) {
		group = groups[0]
	}
	l.filling = true
	l.choice.Options = groups
	l.choice.Selected = group
	l.choice.Refresh()
	l.filling = false
	for _, c := range all {
		if c.group == group {
			l.drawn = append(l.drawn, c)
		}
	}
	l.plot.SetPlot(l.figureOf(group))
}

// figureOf makes the plot of a group.
func (l *live) figureOf(group string) figures.Plot {
	u := units.Preferred(l.drawn[0].dim, l.p.s.ctx.System())
	if l.drawn[0].dim == units.Ratio {
		u = units.Percent
	}
	lane := figures.Lane{Unit: u.Label(), Zero: true}
	for _, c := range l.drawn {
		x, y := c.points(u)
		lane.Series = append(lane.Series, figures.Series{Name: c.name, X: x, Y: y, Role: c.role, Fill: c.fill})
	}
	return figures.Plot{Lanes: []figures.Lane{lane}, Axis: "t", AxisUnit: "s"}
}
