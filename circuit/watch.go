package circuit

import (
	"fmt"
	"math"

	"barlitre/circuit/duty"
	"barlitre/machines/units"
)

// Watch is a Receiver that keeps extremes and notes limits that are passed.
type Watch struct {
	c      *Compiled
	series *duty.Series
	params []float64

	steps  int
	lastT  float64
	weight float64 // half the time since the step before
	ext    []extreme
	axes   []axisWatch
	motors []motorWatch
	reds   []reliefWatch
	voids  []voidWatch
	starts int
	stop   bool
	span   float64
	mach   []machineWatch
}

// extreme is the range of a signal and when it was reached.
type extreme struct{ min, max, tMin, tMax float64 }

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
	lastV            float64
}

type motorWatch struct {
	b            *Block
	torque       int
	speed        int
	square, peak float64
	tPeak        float64
	last         float64
	rated        float64
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
	w := &Watch{c: c, series: s, params: params, ext: make([]extreme, len(c.signals)), axes: make([]axisWatch, len(c.axes)), voids: make([]voidWatch, len(c.nodes))}
	for i := range w.ext {
		w.ext[i] = extreme{min: math.Inf(1), max: math.Inf(-1)}
	}
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
		switch b.Kind {
		case kindElectricMotor:
			p, n := w.value(b, "rated_power"), w.value(b, "speed")
			w.motors = append(w.motors, motorWatch{b: b, torque: get(b.ID + ".T"), speed: get(b.ID + ".w"), rated: p / n})
		case kindRelief:
			w.reds = append(w.reds, reliefWatch{b: b, flow: get(b.ID + ".P.q"), p: get(b.ID + ".P.p")})
		case kindPump, kindChargePump, kindHydraulicMotor:
			m := machineWatch{b: b, w: get(b.ID + ".w"), pP: get(b.ID + ".P.p"), pS: get(b.ID + ".S.p"), max: math.Inf(1)}
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
		}
	}
	return w
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
	dt := 0.0
	if w.steps > 0 {
		dt = s.T - w.lastT
	}
	w.lastT = s.T
	w.steps++
	w.span += dt
	if s.Unbalanced {
		return nil // its numbers mean nothing
	}
	for i, v := range s.Signals {
		e := &w.ext[i]
		if v < e.min {
			e.min, e.tMin = v, s.T
		}
		if v > e.max {
			e.max, e.tMax = v, s.T
		}
	}
	for i := range w.axes {
		w.axes[i].take(s.Axes[i], w.series.Axes[i].Given, w.series.Axes[i].Top, s.T, dt)
	}
	for i := range w.motors {
		m := &w.motors[i]
		T := s.Signals[m.torque]
		m.square += dt * (T*T + m.last*m.last) / 2
		if math.Abs(T) > m.peak {
			m.peak, m.tPeak = math.Abs(T), s.T
		}
		m.last = T
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
	return nil
}

// A demand counts as met when the speed is within a thousandth of it.
func (a *axisWatch) take(now AxisNow, given duty.Given, top, t, dt float64) {
	a.travel += dt * (a.lastV + now.Speed) / 2
	a.lastV = now.Speed
	a.lo, a.hi = math.Min(a.lo, a.travel), math.Max(a.hi, a.travel)
	lost := 0.0
	if given == duty.MotionLoad {
		switch {
		case now.Standing:
			if v := math.Abs(now.Speed); v > math.Max(1e-3*top, stillSpeed) && v > math.Abs(a.falls) {
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
	if slow && (m.slowTime == 0 || v < m.slow) {
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

// Shortfalls lists the axes that were slower than asked.
func (w *Watch) Shortfalls() []Shortfall {
	var out []Shortfall
	for i, a := range w.axes {
		if a.short > 0 {
			out = append(out, Shortfall{w.c.axes[i].Name, a.short, a.lost, a.ratio, a.at})
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
		if s.What == "p" && w.ext[i].max > best.Value {
			best = Peak{Value: w.ext[i].max, At: s.Block + "." + s.Port, T: w.ext[i].tMax}
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
	for _, a := range w.series.Axes {
		if a.Load == nil {
			continue
		}
		lo, hi, top := math.Inf(1), math.Inf(-1), 0.0
		for k, f := range a.Load {
			top = math.Max(top, math.Abs(f))
			if math.Abs(w.series.T[k]-t) <= window {
				lo, hi = math.Min(lo, f), math.Max(hi, f)
			}
		}
		if hi-lo > 0.2*top {
			return true
		}
	}
	return false
}

// Extreme returns the range of a signal over the run.
func (w *Watch) Extreme(signal int) (min, max float64) { return w.ext[signal].min, w.ext[signal].max }

func show(x float64, d units.Dim) string {
	return units.Format(x, units.Preferred(d, units.Metric), 3)
}

func clock(t float64) string { return units.Number(t, 4) + " s" }

// Findings says which limits were passed and what stands out.
func (w *Watch) Findings() []Finding {
	f := &findings{circuit: w.c.circuit, duty: w.series.Duty.Name}
	w.ratings(f)
	w.speeds(f)
	w.torques(f)
	w.motions(f)
	w.reliefs(f)
	for i, v := range w.voids {
		if v.worst > 0.01*units.LitrePerMinute {
			f.add(Warns, nil, "", v.t, "%s runs empty: %s are missing at %s. Feed it through a make-up check valve, or hold the load back with a counterbalance valve", w.c.nodes[i].name, show(v.worst, units.Flow), clock(v.t))
		}
	}
	if w.starts > 0 && w.span > 0 && w.onLine() {
		if perHour := float64(w.starts) * 3600 / w.span; perHour > 10 {
			f.add(Warns, nil, "pump_at_rest", 0, "the motors are started %s times an hour; a direct-on-line motor usually stands 6 to 15 (common practice, ask its maker), use a converter or unload instead", units.Number(perHour, 3))
		}
	}
	return f.list
}

// onLine reports whether a motor hangs on the mains without a converter.
func (w *Watch) onLine() bool {
	_, of := netsOf(w.c.circuit)
	for _, m := range w.motors {
		if n := of[PortRef{m.b.ID, "E"}]; n == nil || len(n.ports) < 2 {
			return true
		}
	}
	return false
}

type findings struct {
	circuit *Circuit
	duty    string
	list    []Finding
}

func (f *findings) add(l Level, b *Block, param string, t float64, format string, args ...any) {
	x := Finding{Level: l, Circuit: f.circuit.Name, Duty: f.duty, Parameter: param, Time: t, Text: fmt.Sprintf(format, args...)}
	if b != nil {
		x.Block, x.Line = b.ID, b.Line
		x.Text = b.ID + ": " + x.Text
	}
	f.list = append(f.list, x)
}

// ratings compares each block's port pressures with its rating.
func (w *Watch) ratings(f *findings) {
	for _, b := range sorted(w.c.circuit.Blocks) {
		k := KindNamed(b.Kind)
		if k.Rating == "" {
			continue
		}
		v, ok := b.Values[k.Rating]
		if !ok {
			continue
		}
		top, at, port := 0.0, 0.0, ""
		for i, s := range w.c.signals {
			if s.Block == b.ID && s.What == "p" && w.ext[i].max > top {
				top, at, port = w.ext[i].max, w.ext[i].tMax, s.Port
			}
		}
		if top > v.SI {
			est := ""
			if w.fastRamp(at) {
				est = " (upper estimate of a fast ramp)"
			}
			f.add(Caution, b, k.Rating, at, "%s at port %s%s is above its rated %s; do not run it so", show(top, units.Pressure), port, est, show(v.SI, units.Pressure))
		}
	}
	if p := w.PeakPressure(); p.Value > 1000*units.Bar {
		f.add(Caution, nil, "", p.T, "%s at %s: nothing limits the pressure there, the figure only shows that a relief valve is missing", show(p.Value, units.Pressure), p.At)
	}
}

func (w *Watch) speeds(f *findings) {
	for _, m := range w.mach {
		if m.fast > 0 {
			f.add(Warns, m.b, "max_speed", m.tFast, "turns at %s, above its highest speed of %s", show(m.fast, units.AngularSpeed), show(m.max, units.AngularSpeed))
		}
		if m.slowTime > 0 {
			f.add(Warns, m.b, "min_speed", m.tSlow, "turns at %s under pressure, below its lowest speed of %s, for %s a cycle; its bearings may run dry", show(m.slow, units.AngularSpeed), show(m.min, units.AngularSpeed), clock(m.slowTime))
		}
	}
}

func (w *Watch) torques(f *findings) {
	for _, m := range w.motors {
		if m.rated <= 0 || w.span <= 0 {
			continue
		}
		rms := math.Sqrt(m.square / w.span)
		if rms > m.rated*1.0001 {
			f.add(Warns, m.b, "rated_power", 0, "its mean square torque of %s is above the rated %s; it will overheat, choose a larger motor", show(rms, units.Torque), show(m.rated, units.Torque))
		}
		switch r := m.peak / m.rated; {
		case r > 2:
			f.add(Warns, m.b, "rated_power", m.tPeak, "peak torque %s is %s times the rated one; most induction motors pull out near 2 to 3 times (common practice)", show(m.peak, units.Torque), units.Number(r, 2))
		case r > 1.0001:
			f.add(Note, m.b, "rated_power", m.tPeak, "peak torque %s is above the rated %s for a while; mean square torque %s", show(m.peak, units.Torque), show(m.rated, units.Torque), show(rms, units.Torque))
		}
	}
}

func (w *Watch) motions(f *findings) {
	for i, a := range w.axes {
		ax := w.c.axes[i]
		b := w.c.circuit.Block(w.c.movers[i].block)
		speed, way := units.Velocity, units.Length
		if ax.Kind == duty.Rotary {
			speed, way = units.AngularSpeed, units.Angle
		}
		if a.short > 0 {
			f.add(Warns, b, "", a.at, "slower than the duty asks for %s a cycle, at worst %s of the speed at %s; %s of travel are lost", clock(a.short), units.Format(a.ratio, units.Percent, 3), clock(a.at), show(a.lost, way))
		}
		if a.over != 0 {
			f.add(Caution, b, "", a.tOver, "it runs ahead of the duty, at %s it moves at %s, %s times what is asked: leakage or the load moves it and the control cannot hold it back", clock(a.tOver), show(math.Abs(a.over), speed), units.Number(a.overRatio, 3))
		}
		if a.backwards != 0 {
			f.add(Caution, b, "", a.tBack, "the load drives it backwards at up to %s; fit a load check", show(math.Abs(a.backwards), speed))
		}
		if a.falls != 0 {
			f.add(Caution, b, "hold", a.tFall, "it is not held: it moves at up to %s while it should stand", show(math.Abs(a.falls), speed))
		}
		if b == nil || b.Kind != kindCylinder {
			continue
		}
		if v, ok := b.Values["stroke"]; ok && a.hi-a.lo > v.SI*(1+1e-6) {
			f.add(Warns, b, "stroke", 0, "the duty moves it over %s, more than its stroke of %s", mm(a.hi-a.lo), mm(v.SI))
		}
	}
}

func (w *Watch) reliefs(f *findings) {
	for _, r := range w.reds {
		if share := r.open / math.Max(w.span, 1e-12); share > 0.02 {
			f.add(Note, r.b, "", 0, "open for %s of the cycle, %s of it while an axis moves: what passes it is lost as heat. Never raise a relief setting to gain speed", units.Format(share, units.Percent, 2), units.Format(r.work/math.Max(r.open, 1e-12), units.Percent, 2))
		}
	}
}
