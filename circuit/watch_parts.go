package circuit

import "math"

// Part makes a Watch for the time steps after before. It looks at before as well, as what
// its first step is compared with; all that is found there has been found before.
func (w *Watch) Part(_, _ int, before *Sample) Receiver {
	p := w.c.NewWatch(w.params, w.series)
	if before != nil {
		p.stop = false // a start at it has been counted
		p.take(before)
	}
	return p
}

// Join adds what a part found. Of equal extremes the earlier is kept, as within a part.
func (w *Watch) Join(part Receiver) error {
	p := part.(*Watch)
	w.steps += p.steps
	w.span += p.span
	w.starts += p.starts
	w.lastT, w.stop = p.lastT, p.stop
	w.ext.join(&p.ext)
	for i := range w.axes {
		w.axes[i].join(&p.axes[i])
	}
	for i := range w.motors {
		w.motors[i].join(&p.motors[i])
	}
	for i := range w.links {
		l, o := &w.links[i], &p.links[i]
		l.energy += o.energy
		later(&l.peak, &l.tPeak, o.peak, o.tPeak)
	}
	for i := range w.sets {
		w.sets[i].join(&p.sets[i])
	}
	for i := range w.reds {
		w.reds[i].open += p.reds[i].open
		w.reds[i].work += p.reds[i].work
	}
	for i := range w.mach {
		m, o := &w.mach[i], &p.mach[i]
		later(&m.fast, &m.tFast, o.fast, o.tFast)
		earlier(&m.slow, &m.tSlow, o.slow, o.tSlow)
		m.slowTime += o.slowTime
	}
	for i := range w.drives {
		w.drives[i].join(&p.drives[i])
	}
	for i := range w.services {
		w.services[i].join(&p.services[i])
	}
	for i := range w.voids {
		v, o := &w.voids[i], &p.voids[i]
		later(&v.worst, &v.t, o.worst, o.t)
		v.volume += o.volume
	}
	return nil
}

// later takes over a larger value that a later part found, and its time.
func later(v, t *float64, found, at float64) {
	if found > *v {
		*v, *t = found, at
	}
}

// earlier does the same for a smaller one.
func earlier(v, t *float64, found, at float64) {
	if found < *v {
		*v, *t = found, at
	}
}

func (e *extremes) join(o *extremes) {
	for i := range e.min {
		later(&e.max[i], &e.tMax[i], o.max[i], o.tMax[i])
		earlier(&e.min[i], &e.tMin[i], o.min[i], o.tMin[i])
	}
}

func (a *axisWatch) join(o *axisWatch) {
	a.short += o.short
	a.lost += o.lost
	a.ended += o.ended
	earlier(&a.ratio, &a.at, o.ratio, o.at)
	if math.Abs(o.backwards) > math.Abs(a.backwards) {
		a.backwards, a.tBack = o.backwards, o.tBack
	}
	if math.Abs(o.falls) > math.Abs(a.falls) {
		a.falls, a.tFall = o.falls, o.tFall
	}
	if math.Abs(o.over) > math.Abs(a.over) {
		a.over, a.tOver, a.overRatio = o.over, o.tOver, o.overRatio
	}
	if a.end == 0 {
		a.end, a.tEnd = o.end, o.tEnd
	}
	a.lo, a.hi = math.Min(a.lo, a.travel+o.lo), math.Max(a.hi, a.travel+o.hi)
	a.travel += o.travel
	a.crept += o.crept
	a.stood += o.stood
	later(&a.creep, &a.tCreep, o.creep, o.tCreep)
}

func (m *motorWatch) join(o *motorWatch) {
	m.square += o.square
	m.heated += o.heated
	m.amps += o.amps
	m.hold += o.hold
	m.held += o.held
	m.ampere = math.Max(m.ampere, o.ampere)
	later(&m.peak, &m.tPeak, o.peak, o.tPeak)
	later(&m.most, &m.tMax, o.most, o.tMax)
	later(&m.fast, &m.tFast, o.fast, o.tFast)
}

func (m *switchedWatch) join(o *switchedWatch) {
	m.sum += o.sum
	m.busy += o.busy
	m.low += o.low
	if o.worst > m.worst {
		m.worst, m.at, m.worstRipple, m.worstDP = o.worst, o.at, o.worstRipple, o.worstDP
	}
}

func (s *startWatch) join(o *startWatch) {
	if o.need > 0 && s.worse(o.need, o.avail) {
		s.need, s.avail, s.load, s.t, s.forwards = o.need, o.avail, o.load, o.t, o.forwards
	}
}

func (d *driveWatch) join(o *driveWatch) {
	d.seconds += o.seconds
	earlier(&d.worst, &d.tWor, o.worst, o.tWor)
	later(&d.fastest, &d.tFas, o.fastest, o.tFas)
	later(&d.brakes, &d.tBrakes, o.brakes, o.tBrakes)
	if !d.stalls {
		d.stalls, d.tStall = o.stalls, o.tStall
	}
}
