package duty

import (
	"math"
	"sort"
)

// instant is a time step, the segment of rows it is read from, and the middle of
// the stretch it belongs to: between two events a quantity is linear and an axis
// either stands or moves, so a stretch is judged by its middle.
type instant struct {
	t   float64
	seg int
	mid float64
}

// layout finds the time steps of a duty for some axes.
type layout struct {
	*Duty
	speeds, rest []*column // by axis: its speed, and the column that decides its standstill
	limit        []float64 // of rest, below which the axis stands
	inertia      bool
	found        []float64 // events of the segment at hand
}

func newLayout(d *Duty, axes []Axis, inertia bool) *layout {
	l := &layout{Duty: d, inertia: inertia}
	for _, a := range axes {
		v := d.speedColumn(a.Name)
		rest, limit := v, d.StandsBelow(a.Name, v.top())
		if rest == nil {
			rest = d.column(a.Name, Command)
			limit = StandstillShare * rest.top()
		}
		l.speeds, l.rest, l.limit = append(l.speeds, v), append(l.rest, rest), append(l.limit, limit)
	}
	return l
}

// rows returns the rows from a up to but not with b if these are the time steps.
func (l *layout) rows() (a, b int, are bool) {
	t := l.Time
	a, b = 0, len(t)
	if t[0] == t[1] { // a step at an end has nothing on its other side
		a++
	}
	if t[b-1] == t[b-2] {
		b--
	}
	return a, b, l.Sampled && l.Step <= 0
}

// laid lays columns out in time steps, nil as nil. Where the time steps are the rows,
// they are shared, not copied.
func (l *layout) laid(columns []*column) [][]float64 {
	out := make([][]float64, len(columns))
	a, b, shared := l.rows()
	steps := 0
	if !shared {
		for range l.steps {
			steps++
		}
	}
	for i, c := range columns {
		switch {
		case c != nil && shared:
			out[i] = c.v[a:b:b]
		case c != nil:
			out[i] = make([]float64, 0, steps)
		}
	}
	if !shared {
		for g := range l.steps {
			for i, c := range columns {
				if c != nil {
					out[i] = append(out[i], c.at(g.seg, g.t))
				}
			}
		}
	}
	return out
}

// stands reports whether an axis stands during the stretch of g.
func (l *layout) stands(axis int, g instant) bool {
	at := g.mid
	if l.Sampled {
		at = g.t
	}
	c := l.rest[axis]
	return c == nil || math.Abs(c.at(g.seg, at)) <= l.limit[axis]
}

// steps goes through the time steps: rows, multiples of Step, and the instants at
// which |rest| crosses its limit. Two stretches keep their common instant each,
// as two time steps, where something jumps there; elsewhere they share one.
func (l *layout) steps(yield func(instant) bool) {
	last := instant{seg: -1}
	for seg := 0; seg+1 < len(l.Time); seg++ {
		t0, t1 := l.Time[seg], l.Time[seg+1]
		if t1 == t0 {
			continue // a step: the segments at both sides bring their own ends
		}
		start := t0
		l.events(seg)
		for _, end := range append(l.found, t1) {
			mid := (start + end) / 2
			first := instant{start, seg, mid}
			if (last.seg < 0 || l.jumps(last, first)) && !yield(first) || !l.fill(start, end, seg, mid, yield) {
				return
			}
			last = instant{end, seg, mid}
			if !yield(last) {
				return
			}
			start = end
		}
	}
}

// fill goes through the multiples of Step, counted from the first row, strictly inside (a, b).
func (l *layout) fill(a, b float64, seg int, mid float64, yield func(instant) bool) bool {
	if l.Step <= 0 {
		return true
	}
	base, tiny := l.Time[0], 1e-6*l.Step
	for i := math.Floor((a-base)/l.Step) + 1; ; i++ {
		t := base + i*l.Step
		if t >= b-tiny {
			return true
		}
		if t > a+tiny && !yield(instant{t, seg, mid}) {
			return false
		}
	}
}

// jumps reports whether anything changes at once between the end of one stretch
// and the start of the next: a step of any track, rest or motion of an axis, and
// with inertia the acceleration.
func (l *layout) jumps(end, start instant) bool {
	if start.seg > end.seg+1 {
		return true // rows with one time stamp lie between
	}
	if l.Sampled {
		return false
	}
	for i, c := range l.rest {
		if l.stands(i, end) != l.stands(i, start) {
			return true
		}
		if l.inertia && c != nil && end.seg != start.seg {
			a, b := c.slope(end.seg), c.slope(start.seg)
			if math.Abs(a-b) > 1e-9*(math.Abs(a)+math.Abs(b)) {
				return true
			}
		}
	}
	return false
}

// events finds the times inside a segment at which an axis comes to rest or sets off.
func (l *layout) events(seg int) {
	l.found = l.found[:0]
	if l.Sampled {
		return
	}
	t0, t1 := l.Time[seg], l.Time[seg+1]
	tiny := 1e-9 * (t1 - t0)
	for i, c := range l.rest {
		if c == nil || l.limit[i] == 0 {
			continue
		}
		v0, v1 := c.v[seg], c.v[seg+1]
		for _, lim := range [2]float64{l.limit[i], -l.limit[i]} {
			if (v0-lim)*(v1-lim) < 0 {
				t := t0 + (t1-t0)*(lim-v0)/(v1-v0)
				if t > t0+tiny && t < t1-tiny {
					l.found = append(l.found, t)
				}
			}
		}
	}
	if len(l.found) < 2 {
		return
	}
	sort.Float64s(l.found)
	apart := l.found[:1]
	for _, t := range l.found[1:] {
		if t > apart[len(apart)-1]+tiny {
			apart = append(apart, t)
		}
	}
	l.found = apart
}
