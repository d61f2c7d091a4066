package circuit

import (
	"math"
	"slices"
	"sort"

	"barlitre/circuit/duty"
	"barlitre/machines/units"
)

// Watch is a Receiver that keeps extremes and notes limits that are passed.
type Watch struct {
	c      *Compiled
	series *duty.Series
	params []float64

	steps  int
	cycles int // that are over
	lastT  float64
	ext    extremes
	axes   []axisWatch
	motors []motorWatch
	reds   []reliefWatch
	voids  []voidWatch
	starts int
	stop   bool
	span   float64
	mach   []machineWatch
	drives []driveWatch
	links  []linkWatch
	sets   []startWatch

	services []switchedWatch
}

// extremes are the ranges of the signals, by signal, and when they were reached.
type extremes struct{ min, max, tMin, tMax []float64 }

func newExtremes(signals int) extremes {
	e := extremes{make([]float64, signals), make([]float64, signals), make([]float64, signals), make([]float64, signals)}
	for i := range e.min {
		e.min[i], e.max[i] = math.Inf(1), math.Inf(-1)
	}
	return e
}

func (e *extremes) take(t float64, values []float64) {
	low, high := e.min[:len(values)], e.max[:len(values)]
	for i, v := range values {
		if v < low[i] {
			low[i], e.tMin[i] = v, t
		}
		if v > high[i] {
			high[i], e.tMax[i] = v, t
		}
	}
}

type axisWatch struct {
	short            float64 // s
	lost             float64 // m or rad
	ratio            float64 // worst speed over demand
	at               float64
	backwards, tBack float64 // worst speed against the demand
	falls, tFall     float64 // worst speed while it should stand
	over, tOver      float64 // highest speed above the demand
	overRatio        float64
	was              bool
	lastLost         float64
	travel, lo, hi   float64
	ended, tEnd      float64 // s against an end while it should move; when it first was
	end, wasEnd      int     // that end; the end at the step before
	lastV            float64
	crept, stood     float64 // way [m or rad] and time [s] at standstill in which it was not held
	creep, tCreep    float64 // highest speed at standstill
	wasStill         bool
}

type reliefWatch struct {
	b        *Block
	flow     int
	p        int
	open     float64 // s
	work     float64 // s open while an axis moves
	last     bool
	lastMove bool
}

type machineWatch struct {
	b           *Block
	w, pP, pS   int
	max, min    float64
	fast, tFast float64
	slow, tSlow float64
	slowTime    float64
	lastSlow    bool
}

type voidWatch struct{ worst, t, volume, last float64 }

// NewWatch makes a Watch for one run over a series.
func (c *Compiled) NewWatch(params []float64, s *duty.Series) *Watch {
	w := &Watch{c: c, series: s, params: params, ext: newExtremes(len(c.signals)), axes: make([]axisWatch, len(c.axes)), voids: make([]voidWatch, len(c.nodes))}
	for i := range w.axes {
		w.axes[i].ratio = 1
	}
	by := map[string]int{}
	for i, s := range c.signals {
		by[s.Name] = i
	}
	get := func(name string) int {
		if i, ok := by[name]; ok {
			return i
		}
		return -1
	}
	for _, b := range sorted(c.circuit.Blocks) {
		w.drive(b, get(b.ID+".w"), get(b.ID+".T"))
		w.service(b, get)
		switch {
		case b.Kind == kindElectricMotor:
			w.motors = append(w.motors, w.motor(b, get))
		case b.Kind == kindConverter:
			w.links = append(w.links, linkWatch{b: b, resistor: w.channelOf(b, "brake resistor")})
		case b.Kind == kindRelief:
			w.reds = append(w.reds, reliefWatch{b: b, flow: get(b.ID + ".P.q"), p: get(b.ID + ".P.p")})
		case displaces(b):
			m := machineWatch{b: b, w: get(b.ID + ".w"), pP: get(b.ID + ".P.p"), pS: get(b.ID + ".S.p"), max: math.Inf(1), slow: math.Inf(1)}
			if b.Kind == kindHydraulicMotor {
				m.pP, m.pS = get(b.ID+".A.p"), get(b.ID+".B.p")
			}
			if i, ok := c.Index(b.ID, "max_speed"); ok {
				m.max = params[i]
			} else if v, ok := b.Values["max_speed"]; ok {
				m.max = v.SI
			}
			if v, ok := b.Values["min_speed"]; ok {
				m.min = v.SI
			}
			w.mach = append(w.mach, m)
			if b.Kind == kindHydraulicMotor && b.Word("axis") != "" {
				w.sets = append(w.sets, w.startOf(b))
			}
		}
	}
	w.stop = c.circuit.PumpAtRest == Stop && endsStanding(s)
	return w
}

// cycle takes the axes back to where they stand at the start when a cycle is over: its
// last point and the first of the next stand at one time.
func (w *Watch) cycle(t, dt float64) {
	first, last := w.series.T[0], w.series.T[len(w.series.T)-1]
	if end := last + float64(w.cycles)*(last-first); dt > 0 || w.steps < 2 || t < end-1e-9*(last-first) {
		return
	}
	w.cycles++
	for i := range w.axes {
		w.axes[i].travel = 0
	}
}

// value is a parameter as the run has it.
func (w *Watch) value(b *Block, key string) float64 {
	if i, ok := w.c.Index(b.ID, key); ok {
		return w.params[i]
	}
	v, _, _ := KindNamed(b.Kind).Value(b, key)
	return v.SI
}

// Sample takes one time step.
func (w *Watch) Sample(s *Sample) error {
	w.take(s)
	return nil
}

func (w *Watch) take(s *Sample) {
	dt := 0.0
	if w.steps > 0 {
		dt = s.T - w.lastT
	}
	w.lastT = s.T
	w.steps++
	w.span += dt
	if s.Unbalanced {
		return // its numbers mean nothing
	}
	w.ext.take(s.T, s.Signals)
	w.cycle(s.T, dt)
	for i := range w.axes {
		w.axes[i].creeps(s.Axes[i], w.series.Axes[i].Given, s.T, dt)
		w.axes[i].take(s.Axes[i], w.series.Axes[i].Given, w.series.Axes[i].Top, s.T, dt)
	}
	for i := range w.motors {
		w.motors[i].take(s, dt)
	}
	for i := range w.links {
		w.links[i].take(s, dt)
	}
	for i := range w.sets {
		w.sets[i].take(s)
	}
	for i := range w.reds {
		r := &w.reds[i]
		open := s.Signals[r.flow] > 0.01*units.LitrePerMinute
		if open && r.last {
			r.open += dt
			if !s.Standing && r.lastMove {
				r.work += dt
			}
		}
		r.last, r.lastMove = open, !s.Standing
	}
	for i := range w.mach {
		w.mach[i].take(s, dt)
	}
	for i := range w.services {
		w.services[i].take(s, dt)
	}
	for i := range w.drives {
		w.drives[i].take(s, dt)
	}
	for i, q := range s.Void {
		v := &w.voids[i]
		if q > v.worst {
			v.worst, v.t = q, s.T
		}
		v.volume += dt * (q + v.last) / 2
		v.last = q
	}
	if w.stop && !s.Stopped {
		w.starts++
	}
	w.stop = s.Stopped
}

// A demand counts as met when the speed is within a thousandth of it.
func (a *axisWatch) take(now AxisNow, given duty.Given, top, t, dt float64) {
	a.travel += dt * (a.lastV + now.Speed) / 2
	a.lastV = now.Speed
	a.lo, a.hi = min(a.lo, a.travel), max(a.hi, a.travel)
	a.stops(now, t, dt)
	lost := 0.0
	if given == duty.MotionLoad {
		switch {
		case now.Standing:
			if v := math.Abs(now.Speed); v > max(1e-3*top, stillSpeed) && v > math.Abs(a.falls) {
				a.falls, a.tFall = now.Speed, t
			}
		default:
			r := now.Speed / now.Demand
			switch {
			case r < 1-1e-3:
				lost = math.Abs(now.Demand - now.Speed)
				if r < a.ratio {
					a.ratio, a.at = r, t
				}
			case r > 1+1e-3 && math.Abs(now.Speed) > math.Abs(a.over):
				a.over, a.tOver, a.overRatio = now.Speed, t, r
			}
			if now.Speed*now.Demand < 0 && math.Abs(now.Speed) > math.Abs(a.backwards) {
				a.backwards, a.tBack = now.Speed, t
			}
		}
	}
	if lost > 0 || a.was {
		if lost > 0 && a.was {
			a.short += dt
		} else {
			a.short += dt / 2
		}
		a.lost += dt * (lost + a.lastLost) / 2
	}
	a.was, a.lastLost = lost > 0, lost
}

// stops notes how long an axis pushes against an end of its stroke.
func (a *axisWatch) stops(now AxisNow, t, dt float64) {
	end := now.End
	if now.Standing {
		end = 0 // it may well rest there
	}
	if end != 0 && a.end == 0 {
		a.end, a.tEnd = end, t
	}
	if end != 0 && a.wasEnd != 0 {
		a.ended += dt
	}
	a.wasEnd = end
}

func (m *machineWatch) take(s *Sample, dt float64) {
	v := math.Abs(s.Signals[m.w])
	if v > m.max && v > m.fast {
		m.fast, m.tFast = v, s.T
	}
	dp := 0.0
	if m.pP >= 0 {
		dp = s.Signals[m.pP]
	}
	if m.pS >= 0 {
		dp -= s.Signals[m.pS]
	}
	slow := m.min > 0 && v < m.min && math.Abs(dp) > 5*units.Bar
	if slow && v < m.slow {
		m.slow, m.tSlow = v, s.T
	}
	if slow && m.lastSlow {
		m.slowTime += dt
	}
	m.lastSlow = slow
}

// Shortfall says by how much an axis did less than asked.
type Shortfall struct {
	Axis       string
	Seconds    float64
	LostStroke float64 // m or rad
	WorstRatio float64 // speed over demand at the worst moment; below 0 it ran backwards
	At         float64 // s, the worst moment
}

// Shortfalls lists the axes that were slower than asked, as the mean of the cycles watched.
func (w *Watch) Shortfalls(cycles int) []Shortfall {
	var out []Shortfall
	for i, a := range w.axes {
		if a.short > 0 {
			k := 1 / float64(max(cycles, 1))
			out = append(out, Shortfall{w.c.axes[i].Name, a.short * k, a.lost * k, a.ratio, a.at})
		}
	}
	return out
}

// Peak is the highest pressure of a run.
type Peak struct {
	Value         float64 // Pa
	At            string  // port
	T             float64 // s
	UpperEstimate bool    // a quasi-static figure of a fast ramp: the real peak is lower
}

// PeakPressure returns the highest pressure at any port.
func (w *Watch) PeakPressure() Peak {
	best := Peak{Value: math.Inf(-1)}
	for i, s := range w.c.signals {
		if s.What == "p" && w.ext.max[i] > best.Value {
			best = Peak{Value: w.ext.max[i], At: s.Block + "." + s.Port, T: w.ext.tMax[i]}
		}
	}
	if math.IsInf(best.Value, 0) {
		return Peak{}
	}
	best.UpperEstimate = w.fastRamp(best.T)
	return best
}

// fastRamp reports whether a load changes by more than a fifth of its largest
// value within 0.2 s around t: the oil then has no time to follow, and the
// pressure found without its compression is too high.
func (w *Watch) fastRamp(t float64) bool {
	const window = 0.1
	T := w.series.T
	from := sort.SearchFloat64s(T, t-window)
	to := from + sort.Search(len(T)-from, func(i int) bool { return T[from+i] > t+window })
	for _, a := range w.series.Axes {
		if a.Load == nil || from == to {
			continue
		}
		if near := a.Load[from:to]; slices.Max(near)-slices.Min(near) > 0.2*a.TopLoad {
			return true
		}
	}
	return false
}

// Extreme returns the range of a signal over the run.
func (w *Watch) Extreme(signal int) (min, max float64) { return w.ext.min[signal], w.ext.max[signal] }
