package duty

import "math"

// What is asked of a duty here is found on the way through its time steps, which may be
// many; none is kept.

// TopSpeed returns the largest |speed| of an axis; given is false when the duty does not give its motion.
func (d *Duty) TopSpeed(axis string) (top float64, given bool) {
	c := d.speedColumn(axis)
	return c.top(), c != nil
}

// StandsUnder reports whether an axis ever stands under more than a share of its largest load.
func (d *Duty) StandsUnder(axis Axis, share float64) bool {
	load := d.column(axis.Name, Load)
	if load == nil {
		return false
	}
	l, least := newLayout(d, []Axis{axis}, false), share*load.top()
	for g := range l.steps {
		if l.stands(0, g) && math.Abs(load.at(g.seg, g.t)) > least {
			return true
		}
	}
	return false
}

// Busiest returns the time at which the axes are asked for the most power, each counted
// by its size; the first time stamp where nothing moves under a load.
func (d *Duty) Busiest(axes []Axis) float64 {
	l, loads := newLayout(d, axes, false), make([]*column, len(axes))
	for i, a := range axes {
		loads[i] = d.column(a.Name, Load)
	}
	most, at := 0.0, d.Time[0]
	for g := range l.steps {
		sum := 0.0
		for i, v := range l.speeds {
			if v != nil && loads[i] != nil && !l.stands(i, g) {
				sum += math.Abs(v.at(g.seg, g.t) * loads[i].at(g.seg, g.t))
			}
		}
		if sum > most {
			most, at = sum, g.t
		}
	}
	return at
}
