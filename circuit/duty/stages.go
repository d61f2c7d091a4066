package duty

import (
	"fmt"
	"math"
)

// Stage is a phase of a cycle as a person with a stop watch gives it: how long it lasts,
// and how far or how fast each axis moves in it against which load. Build makes the
// tracks of a duty of a list of them.
type Stage struct {
	Name  string
	Lasts float64 // s, > 0
	Ramp  float64 // s, 0 to half of Lasts: for speeding up and, at its end, for slowing down
	Moves []Move  // by axis; an axis without one stands
}

// Move is what one axis does in a stage.
type Move struct {
	Axis          string
	Stroke, Speed float64 // m or rad, m/s or rad/s; one is given, NaN = not; neither = it stands
	Load, End     float64 // N or N·m, at the start and at the end; NaN = as before, as at the start
}

// DefaultRamp is the ramp [s] of a stage that gives none: a tenth of it, at most 0.1 s.
// Common practice, no source.
func DefaultRamp(lasts float64) float64 { return math.Min(0.1, lasts/10) }

// Build computes time stamps, a speed and a load track for every axis, and the names of
// the stretches. Between two stages that move in one direction the faster one gives way to
// the speed of the slower within its own time; else the axis stops. With the speeds wl and
// wr at its ends, a stroke s within T with ramps r takes the speed
//
//	v = (s − r·(wl + wr)/2) / (T − r)
//
// so that it is met exactly. The load goes from that of the stage before to its own within
// the ramp, at once where there is none. repeats says that the last stage is followed by the first.
func Build(stages []Stage, axes []string, repeats bool) (*Duty, error) {
	d := &Duty{Repeats: repeats}
	for _, s := range stages {
		if !(s.Lasts > 0) || !(s.Ramp >= 0) || s.Ramp > s.Lasts/2*(1+1e-9) {
			return nil, fmt.Errorf("phase %q: lasts %g s with a ramp of %g s; it must last longer than 0 s, and a ramp at most half as long", s.Name, s.Lasts, s.Ramp)
		}
		d.Phases = append(d.Phases, Phase{s.Name, sumLasts(stages[:len(d.Phases)])})
	}
	if len(stages) == 0 {
		return d, nil
	}
	var courses []*course
	for _, a := range axes {
		courses = append(courses, newCourse(stages, a, repeats))
		d.Tracks = append(d.Tracks, Track{Of: a, What: Speed}, Track{Of: a, What: Load})
	}
	for i, s := range stages {
		for _, at := range []float64{0, s.Ramp, s.Lasts - s.Ramp, s.Lasts} {
			d.row(d.Phases[i].From+at, courses, i, at)
		}
	}
	d.thin()
	return d, nil
}

func sumLasts(stages []Stage) float64 {
	t := 0.0
	for _, s := range stages {
		t += s.Lasts
	}
	return t
}

// course is what one axis does.
type course struct {
	stages         []Stage
	v, left, right []float64 // speed of each stage, and at its ends
	from, to, end  []float64 // load before each stage, at the end of its ramp, at its end
}

func newCourse(stages []Stage, axis string, repeats bool) *course {
	n := len(stages)
	c := &course{stages: stages, v: make([]float64, n), left: make([]float64, n), right: make([]float64, n)}
	moves := make([]Move, n)
	for i, s := range stages {
		moves[i] = Move{Stroke: math.NaN(), Speed: math.NaN(), Load: math.NaN(), End: math.NaN()}
		for _, m := range s.Moves {
			if m.Axis == axis {
				moves[i] = m
			}
		}
	}
	for range 300 { // a step halves what is missing, see speeds
		c.speeds(moves, repeats, 0.5)
	}
	c.speeds(moves, repeats, 1)
	c.loads(moves, repeats)
	return c
}

// speeds brings the speeds nearer to what the strokes need, by a share of the way: with a
// ramp of half the stage the whole way would swing for ever.
func (c *course) speeds(moves []Move, repeats bool, share float64) {
	n := len(moves)
	for i := range n {
		c.left[i], c.right[i] = 0, 0
		if i > 0 || repeats {
			c.left[i] = slower(c.v[(i+n-1)%n], c.v[i])
		}
		if i < n-1 || repeats {
			c.right[i] = slower(c.v[i], c.v[(i+1)%n])
		}
	}
	for i, m := range moves {
		s := c.stages[i]
		switch {
		case !math.IsNaN(m.Speed):
			c.v[i] = m.Speed
		case !math.IsNaN(m.Stroke):
			v := (m.Stroke - s.Ramp*(c.left[i]+c.right[i])/2) / (s.Lasts - s.Ramp)
			c.v[i] += share * (v - c.v[i])
		}
	}
}

// slower is the speed at which one stage hands over to another.
func slower(a, b float64) float64 {
	switch {
	case a*b <= 0:
		return 0
	case math.Abs(a) < math.Abs(b):
		return a
	}
	return b
}

func (c *course) loads(moves []Move, repeats bool) {
	load := 0.0
	for pass := range 2 { // the first finds what the last stage ends with
		c.from, c.to, c.end = nil, nil, nil
		if pass == 1 && !repeats {
			load = 0
		}
		for i, m := range moves {
			from := load
			if !math.IsNaN(m.Load) {
				load = m.Load
			}
			if i == 0 && !repeats {
				from = load
			}
			c.from, c.to = append(c.from, from), append(c.to, load)
			if !math.IsNaN(m.End) {
				load = m.End
			}
			c.end = append(c.end, load)
		}
	}
}

// at returns speed and load a time after the start of stage i.
func (c *course) at(i int, t float64) (speed, load float64) {
	s := c.stages[i]
	r, rest := s.Ramp, s.Lasts-t
	switch {
	case t < r:
		speed = c.left[i] + (c.v[i]-c.left[i])*t/r
	case rest < r:
		speed = c.right[i] + (c.v[i]-c.right[i])*math.Max(0, rest)/r
	default:
		speed = c.v[i]
	}
	if t < r {
		return speed, c.from[i] + (c.to[i]-c.from[i])*t/r
	}
	return speed, c.to[i] + (c.end[i]-c.to[i])*(t-r)/(s.Lasts-r)
}

// row adds a row, unless it says what the last one says.
func (d *Duty) row(t float64, courses []*course, stage int, at float64) {
	n := len(d.Time)
	same := n > 0 && d.Time[n-1] >= t-1e-12
	var values []float64
	for k, c := range courses {
		v, load := c.at(stage, at)
		values = append(values, v, load)
		for j, x := range []float64{v, load} {
			same = same && math.Abs(d.Tracks[2*k+j].Values[n-1]-x) <= 1e-12*(1+math.Abs(x))
		}
	}
	if same {
		return
	}
	d.Time = append(d.Time, t)
	for k, x := range values {
		d.Tracks[k].Values = append(d.Tracks[k].Values, x)
	}
}

// thin takes out the rows on a straight line between their neighbours.
func (d *Duty) thin() {
	for i := len(d.Time) - 2; i > 0; i-- {
		t0, t, t1 := d.Time[i-1], d.Time[i], d.Time[i+1]
		straight := t > t0 && t1 > t
		for _, k := range d.Tracks {
			a, x, b := k.Values[i-1], k.Values[i], k.Values[i+1]
			straight = straight && math.Abs(a+(b-a)*(t-t0)/(t1-t0)-x) <= 1e-9*(math.Abs(a)+math.Abs(b)+math.Abs(x))
		}
		if straight {
			d.Time = append(d.Time[:i], d.Time[i+1:]...)
			for k := range d.Tracks {
				d.Tracks[k].Values = append(d.Tracks[k].Values[:i], d.Tracks[k].Values[i+1:]...)
			}
		}
	}
}
