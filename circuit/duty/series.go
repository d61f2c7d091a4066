package duty

import "slices"

// StandstillShare is, unless a duty says otherwise, the share of an axis' largest speed (or command) below
// which it counts as standing. Recordings never read exactly zero; 0.1 % of the
// top speed is below what any axis is driven at on purpose (our choice, stated
// in the report).
const StandstillShare = 1e-3

// AxisSeries is what one axis must do at each time step of a Series. What decides
// its standstill, the speed or without one the command, counts as 0 while it stands.
type AxisSeries struct {
	Axis     Axis
	Given    Given
	Speed    []float64 // nil when motion is not given; see SpeedAt
	Accel    []float64 // of the segment that the time step belongs to; nil unless asked for
	Load     []float64 // nil when the load is not given
	Command  []float64 // nil when not given; see CommandAt
	Standing []bool
	Top      float64 // largest |speed| of the duty, 0 when motion is not given
	TopLoad  float64 // largest |load| of the duty, 0 when the load is not given
}

// SpeedAt returns the speed at time step k, 0 while the axis stands or its motion is not given.
func (a *AxisSeries) SpeedAt(k int) float64 {
	if a.Speed == nil || a.Standing[k] {
		return 0
	}
	return a.Speed[k]
}

// LoadAt returns the load at time step k, 0 where none is given.
func (a *AxisSeries) LoadAt(k int) float64 {
	if a.Load == nil {
		return 0
	}
	return a.Load[k]
}

// CommandAt returns the command at time step k, 0 where none is given or the axis
// stands because of it.
func (a *AxisSeries) CommandAt(k int) float64 {
	if a.Command == nil || a.Speed == nil && a.Standing[k] {
		return 0
	}
	return a.Command[k]
}

// Control names a track that a duty gives for a block.
type Control struct {
	Block string
	What  What // of a block, see What.OfBlock
}

// Series is a duty laid out in time steps: the rows of the duty, the steps
// between them, and the instants at which an axis comes to rest or sets off,
// each as two time steps at one time (before, after). Its columns are not to be
// changed: where nothing stands between the rows they are those of the duty.
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
	s := &Series{Repeats: d.Repeats, Duty: d, Commands: map[Control][]float64{}}
	l := newLayout(d, axes, inertia)
	columns := []*column{{t: d.Time, v: d.Time}}
	var loads []*column
	for i, a := range axes {
		loads = append(loads, d.column(a.Name, Load))
		columns = append(columns, l.speeds[i], loads[i], d.column(a.Name, Command))
	}
	var controls []Control
	for _, tr := range d.Tracks {
		if !slices.ContainsFunc(axes, func(a Axis) bool { return a.Name == tr.Of }) {
			controls = append(controls, Control{tr.Of, tr.What})
			columns = append(columns, &column{t: d.Time, v: tr.Values})
		}
	}
	laid := l.laid(columns)
	s.T = laid[0]
	for i, a := range axes {
		c := laid[1+3*i:]
		s.Axes = append(s.Axes, AxisSeries{Axis: a, Given: d.Given(a.Name), Top: l.speeds[i].top(), TopLoad: loads[i].top(),
			Speed: c[0], Load: c[1], Command: c[2]})
	}
	for i, c := range controls {
		s.Commands[c] = laid[1+3*len(axes)+i]
	}
	s.rest(l)
	return s
}

// rest finds where axes stand and, with inertia, how fast they gain speed where they do not.
func (s *Series) rest(l *layout) {
	for i := range s.Axes {
		s.Axes[i].Standing = make([]bool, len(s.T))
		if l.inertia && l.speeds[i] != nil {
			s.Axes[i].Accel = make([]float64, len(s.T))
		}
	}
	k := 0
	for g := range l.steps {
		for i := range s.Axes {
			a := &s.Axes[i]
			a.Standing[k] = l.stands(i, g)
			if a.Accel != nil && !a.Standing[k] {
				a.Accel[k] = l.speeds[i].slope(g.seg)
			}
		}
		k++
	}
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
		p.Commands[c] = cut(v)
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
