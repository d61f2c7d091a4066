package duty

import (
	"math"
	"sort"
)

// StandstillShare is, unless a duty says otherwise, the share of an axis' largest speed (or command) below
// which it counts as standing. Recordings never read exactly zero; 0.1 % of the
// top speed is below what any axis is driven at on purpose (our choice, stated
// in the report).
const StandstillShare = 1e-3

// AxisSeries is what one axis must do at each time step of a Series.
type AxisSeries struct {
	Axis     Axis
	Given    Given
	Speed    []float64 // 0 while standing; nil when motion is not given
	Accel    []float64 // of the segment that the time step belongs to
	Load     []float64 // nil when the load is not given
	Command  []float64 // nil when not given
	Standing []bool
	Top      float64 // largest |speed| of the duty, 0 when motion is not given
}

// Control names a track that a duty gives for a block.
type Control struct {
	Block string
	What  What // of a block, see What.OfBlock
}

// Series is a duty laid out in time steps: the rows of the duty, the steps
// between them, and the instants at which an axis comes to rest or sets off,
// each as two time steps at one time (before, after).
type Series struct {
	T        []float64
	Axes     []AxisSeries
	Commands map[Control][]float64
	Repeats  bool
	Duty     *Duty
}

// Series lays the duty out for the given axes. It needs a duty that Check finds
// nothing in. With inertia set, rows at which an acceleration jumps become two
// time steps, so that the force of a moved mass is right on both sides.
func (d *Duty) Series(axes []Axis, inertia bool) *Series {
	speeds := make([]*column, len(axes))
	cmds := make([]*column, len(axes))
	loads := make([]*column, len(axes))
	top := make([]float64, len(axes))
	rest := make([]*column, len(axes)) // the column that decides standstill
	limit := make([]float64, len(axes))
	for i, a := range axes {
		speeds[i] = d.speedColumn(a.Name)
		loads[i] = d.column(a.Name, Load)
		cmds[i] = d.column(a.Name, Command)
		top[i] = speeds[i].top()
		rest[i] = speeds[i]
		if rest[i] == nil {
			rest[i] = cmds[i]
		}
		limit[i] = StandstillShare * rest[i].top()
		if speeds[i] != nil {
			limit[i] = d.StandsBelow(a.Name, top[i])
		}
	}
	grid := d.grid(rest, limit, inertia)
	s := &Series{Repeats: d.Repeats, Duty: d, Commands: map[Control][]float64{}}
	for _, g := range grid {
		s.T = append(s.T, g.t)
	}
	for i, a := range axes {
		as := AxisSeries{Axis: a, Given: d.Given(a.Name), Top: top[i], Standing: make([]bool, len(grid))}
		as.Load = sampled(loads[i], grid)
		as.Command = sampled(cmds[i], grid)
		as.Speed = sampled(speeds[i], grid)
		if speeds[i] != nil {
			as.Accel = make([]float64, len(grid))
		}
		for k, g := range grid {
			if d.Sampled {
				g.mid = g.t
			}
			as.Standing[k] = standing(rest[i], limit[i], g)
			if as.Speed != nil {
				as.Accel[k] = speeds[i].slope(g.seg)
				if as.Standing[k] {
					as.Speed[k], as.Accel[k] = 0, 0
				}
			} else if as.Command != nil && as.Standing[k] {
				as.Command[k] = 0
			}
		}
		s.Axes = append(s.Axes, as)
	}
	isAxis := map[string]bool{}
	for _, a := range axes {
		isAxis[a.Name] = true
	}
	for _, tr := range d.Tracks {
		if !isAxis[tr.Of] {
			s.Commands[Control{tr.Of, tr.What}] = sampled(&column{d.Time, tr.Values}, grid)
		}
	}
	return s
}

// Part returns time steps from up to but not with to; it shares the columns of s.
func (s *Series) Part(from, to int) *Series {
	cut := func(v []float64) []float64 {
		if v == nil {
			return nil
		}
		return v[from:to]
	}
	p := &Series{T: s.T[from:to], Repeats: s.Repeats, Duty: s.Duty, Commands: map[Control][]float64{}}
	for _, a := range s.Axes {
		a.Speed, a.Accel, a.Load, a.Command = cut(a.Speed), cut(a.Accel), cut(a.Load), cut(a.Command)
		a.Standing = a.Standing[from:to]
		p.Axes = append(p.Axes, a)
	}
	for c, v := range s.Commands {
		p.Commands[c] = v[from:to]
	}
	return p
}

// StandsBelow returns the speed up to which an axis counts as standing, for the largest
// speed top of the duty.
func (d *Duty) StandsBelow(axis string, top float64) float64 {
	if v, ok := d.Standstill[axis]; ok {
		return v
	}
	return StandstillShare * top
}

// column is one track over the rows.
type column struct{ t, v []float64 }

func (d *Duty) column(of string, w What) *column {
	if tr := d.Track(of, w); tr != nil {
		return &column{d.Time, tr.Values}
	}
	return nil
}

// speedColumn gives the speed track, or the speed taken from a position track:
// at each row the central difference over its neighbours (one-sided at the ends
// and at steps), linear between rows.
func (d *Duty) speedColumn(of string) *column {
	if c := d.column(of, Speed); c != nil {
		return c
	}
	p := d.column(of, Position)
	if p == nil {
		return nil
	}
	v := make([]float64, len(p.t))
	for i := range v {
		a, b := max(i-1, 0), min(i+1, len(v)-1)
		if p.t[a] == p.t[i] && i > 0 {
			a = i
		}
		if p.t[b] == p.t[i] {
			b = i
		}
		if p.t[b] > p.t[a] {
			v[i] = (p.v[b] - p.v[a]) / (p.t[b] - p.t[a])
		}
	}
	return &column{p.t, v}
}

func (c *column) top() float64 {
	m := 0.0
	if c != nil {
		for _, v := range c.v {
			m = math.Max(m, math.Abs(v))
		}
	}
	return m
}

// at interpolates inside segment seg (rows seg, seg+1).
func (c *column) at(seg int, t float64) float64 {
	t0, t1 := c.t[seg], c.t[seg+1]
	if t1 <= t0 || t <= t0 {
		return c.v[seg]
	}
	if t >= t1 {
		return c.v[seg+1]
	}
	return c.v[seg] + (c.v[seg+1]-c.v[seg])*(t-t0)/(t1-t0)
}

func (c *column) slope(seg int) float64 {
	if h := c.t[seg+1] - c.t[seg]; h > 0 {
		return (c.v[seg+1] - c.v[seg]) / h
	}
	return 0
}

// instant is a time step, the segment of rows it is read from, and the middle of
// the stretch it belongs to: between two events a quantity is linear and an axis
// either stands or moves, so a stretch is judged by its middle.
type instant struct {
	t   float64
	seg int
	mid float64
}

// standing reports whether an axis stands during the stretch of g.
func standing(rest *column, limit float64, g instant) bool {
	return rest == nil || math.Abs(rest.at(g.seg, g.mid)) <= limit
}

func sampled(c *column, grid []instant) []float64 {
	if c == nil {
		return nil
	}
	out := make([]float64, len(grid))
	for k, g := range grid {
		out[k] = c.at(g.seg, g.t)
	}
	return out
}

// grid lays out the time steps: rows, multiples of Step, and the instants at
// which |rest| crosses its limit. Two stretches keep their common instant each,
// as two time steps, where something jumps there; elsewhere they share one.
func (d *Duty) grid(rest []*column, limit []float64, inertia bool) []instant {
	var out []instant
	for seg := 0; seg+1 < len(d.Time); seg++ {
		t0, t1 := d.Time[seg], d.Time[seg+1]
		if t1 == t0 {
			continue // a step: the segments at both sides bring their own ends
		}
		start := t0
		for _, end := range append(d.events(seg, rest, limit), t1) {
			mid := (start + end) / 2
			first := instant{start, seg, mid}
			if n := len(out); n == 0 || d.jumps(out[n-1], first, rest, limit, inertia) {
				out = append(out, first)
			}
			out = d.fill(out, start, end, seg, mid)
			out = append(out, instant{end, seg, mid})
			start = end
		}
	}
	return out
}

// fill adds the multiples of Step, counted from the first row, strictly inside (a, b).
func (d *Duty) fill(out []instant, a, b float64, seg int, mid float64) []instant {
	if d.Step <= 0 {
		return out
	}
	base, tiny := d.Time[0], 1e-6*d.Step
	for i := math.Floor((a-base)/d.Step) + 1; ; i++ {
		t := base + i*d.Step
		if t >= b-tiny {
			return out
		}
		if t > a+tiny {
			out = append(out, instant{t, seg, mid})
		}
	}
}

// jumps reports whether anything changes at once between the end of one stretch
// and the start of the next: a step of any track, rest or motion of an axis, and
// with inertia the acceleration.
func (d *Duty) jumps(end, start instant, rest []*column, limit []float64, inertia bool) bool {
	if start.seg > end.seg+1 {
		return true // rows with one time stamp lie between
	}
	if d.Sampled {
		return false
	}
	for i, c := range rest {
		if standing(c, limit[i], end) != standing(c, limit[i], start) {
			return true
		}
		if inertia && c != nil && end.seg != start.seg {
			a, b := c.slope(end.seg), c.slope(start.seg)
			if math.Abs(a-b) > 1e-9*(math.Abs(a)+math.Abs(b)) {
				return true
			}
		}
	}
	return false
}

// events returns the times inside a segment at which an axis comes to rest or sets off.
func (d *Duty) events(seg int, rest []*column, limit []float64) []float64 {
	var ev []float64
	t0, t1 := d.Time[seg], d.Time[seg+1]
	tiny := 1e-9 * (t1 - t0)
	for i, c := range rest {
		if c == nil || limit[i] == 0 || d.Sampled {
			continue
		}
		v0, v1 := c.v[seg], c.v[seg+1]
		for _, lim := range [2]float64{limit[i], -limit[i]} {
			if (v0-lim)*(v1-lim) < 0 {
				t := t0 + (t1-t0)*(lim-v0)/(v1-v0)
				if t > t0+tiny && t < t1-tiny {
					ev = append(ev, t)
				}
			}
		}
	}
	sort.Float64s(ev)
	out := ev[:0]
	for _, t := range ev {
		if len(out) == 0 || t > out[len(out)-1]+tiny {
			out = append(out, t)
		}
	}
	return out
}
