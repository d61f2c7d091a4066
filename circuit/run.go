package circuit

import (
	"context"
	"errors"
	"fmt"
	"math"

	"barlitre/circuit/balance"
	"barlitre/circuit/duty"
	"barlitre/machines"
	"barlitre/machines/units"
)

// pressureScale is the pressure unit of the balance; flows are scaled by the
// largest machine of the circuit.
const pressureScale = 100e5 // Pa

// lostSteps ends a run: so many unsolved steps in a row are a fault of the
// circuit, not of a moment.
const lostSteps = 50

// ErrLost says that a run was given up.
var ErrLost = errors.New("the circuit could not be balanced")

// ErrParameters says that a parameter vector does not fit the circuit.
var ErrParameters = errors.New("parameters do not fit the circuit")

// Run balances a circuit at every time step of s and hands each to the receiver. params
// is laid out as Compiled.Params; s must come from Compiled.Series or be a part
// of such a series. The state returned can be handed to the next call, which
// then goes on where this one ended. A step that cannot be balanced is marked,
// listed in the certificate, and passed; after lostSteps in a row Run gives up
// with an error that wraps ErrLost.
//
// Run has no side effects; any number may run at once on one Compiled.
func Run(ctx context.Context, c *Compiled, params []float64, s *duty.Series, cond Conditions, st State, to Receiver) (State, Certificate, error) {
	if err := c.fits(params, s); err != nil {
		return st, Certificate{}, err
	}
	r := newRun(c, params, cond, s)
	end, cert, err := r.all(ctx, st, 0, len(s.T), to)
	r.end()
	return end, cert, err
}

// fits reports what parameters or a series lack to be those of the circuit.
func (c *Compiled) fits(params []float64, s *duty.Series) error {
	if len(params) != len(c.params) || len(s.Axes) != len(c.axes) {
		return fmt.Errorf("%w: %d numbers for %d, %d axes for %d", ErrParameters, len(params), len(c.params), len(s.Axes), len(c.axes))
	}
	for i, v := range params {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return fmt.Errorf("%w: %s.%s is not a number", ErrParameters, c.params[i].Block, c.params[i].Key)
		}
	}
	return nil
}

// run is the workspace of one call.
type run struct {
	*Compiled
	models   []model
	solver   *balance.Solver
	ev       eval
	step     step
	book     booking
	series   *duty.Series
	sample   Sample
	cert     Certificate
	state    State
	volumes  []float64
	slip     []float64 // leakage of each actuator, m³/s per Pa
	params   []float64
	strokes  []stroke
	switches []switching
	leak     float64   // of each node to tank; see Ease
	behind   []float64 // demand of axes that lagged behind it at the last point, else 0
	haste    float64   // by how much axes move faster than asked; see approach
	scales
	loose looseWatch
	hot
}

func newRun(c *Compiled, params []float64, cond Conditions, s *duty.Series) *run {
	r := &run{Compiled: c, solver: c.newSolver(), series: s, params: params, leak: leak}
	r.scales = scales{p: pressureScale, q: c.flowScale(params)}
	r.ev = newEval(make([]float64, c.nfix+c.n, c.nfix+c.n+1), r.solver.Border(c.nfix), c.nfix)
	r.step = step{axes: make([]axisStep, len(c.axes)), atRest: c.circuit.PumpAtRest, solver: r.solver,
		x: r.ev.all[c.nfix:], now: &r.ev, rest: make([]float64, c.n), restK: make([]float64, c.n), pScale: r.scales.p}
	for i := range r.rows {
		if r.rows[i].kind == flowRow {
			r.solver.Lo[i] = floorPressure / r.scales.p
		}
	}
	for _, sh := range c.shafts {
		if sh.sigma >= 0 {
			r.solver.Lo[sh.sigma], r.solver.Hi[sh.sigma] = -1, 1
		}
	}
	b := &binding{p: params, cond: cond, scales: r.scales, bound: r.solver, duty: s.Commands}
	for _, m := range c.models {
		m = m.clone()
		m.bind(b)
		r.models = append(r.models, m)
		if m, ok := m.(ended); ok {
			if axis, lo, hi, unit, has := m.reach(); has {
				r.strokes = append(r.strokes, stroke{axis: axis, lo: lo, hi: hi, unit: unit})
			}
		}
	}
	r.volumes = make([]float64, len(c.axes))
	r.slip = make([]float64, len(c.axes))
	r.behind = make([]float64, len(c.axes))
	for i, m := range c.movers {
		r.volumes[i] = 1
		if m.volume != nil {
			r.volumes[i] = m.volume(params)
		}
		if m.slip != nil {
			r.slip[i] = m.slip(params) / cond.Viscosity
		}
	}
	r.sort()
	r.book = booking{eval: r.ev, scales: r.scales, cond: cond, step: &r.step, sig: make([]float64, len(c.signals)), shaft: make([]shaftBook, len(c.shafts))}
	r.book.room(len(c.channels), c.electric)
	r.sample = Sample{Signals: r.book.sig, Power: r.book.pow, Pulse: r.book.pulse, Axes: make([]AxisNow, len(c.axes)), Void: make([]float64, len(c.nodes))}
	return r
}

// newSolver returns a solver that has learned nothing; if there is one, that of a run that
// has ended, whose memory it takes over.
func (c *Compiled) newSolver() *balance.Solver {
	if s, ok := c.solvers.Get().(*balance.Solver); ok {
		s.Reset()
		return s
	}
	return balance.NewSolver(c.n)
}

// end hands the memory of the solver on; after a panic, which may have left it in disorder, it is
// not to be called. The run cannot go on after it.
func (r *run) end() {
	r.solvers.Put(r.solver)
	r.solver, r.step.solver = nil, nil
}

// flowScale is the flow of the largest machine at full speed, at least 1 L/min.
func (c *Compiled) flowScale(p []float64) float64 {
	const usual = 157.0 // rad/s, 1500 rpm
	q := units.LitrePerMinute
	for _, s := range c.shafts {
		q = max(q, s.size(p)*usual)
	}
	return q
}

// all balances the steps of the series from up to but not with end.
func (r *run) all(ctx context.Context, st State, from, end int, to Receiver) (State, Certificate, error) {
	x := r.step.x
	warm := st.begun && len(st.x) == len(x)
	if warm {
		copy(x, st.x)
	}
	r.state = State{travel: make([]float64, len(r.axes)), speed: make([]float64, len(r.axes)), lastT: st.lastT, begun: st.begun, stood: st.stood}
	if !st.begun {
		r.state.stood = endsStanding(r.series)
	}
	copy(r.state.travel, st.travel)
	copy(r.state.speed, st.speed)
	good := append([]float64(nil), x...)
	lost := 0
	r.beginSlow(st)
	for i := range r.strokes {
		r.strokes[i].from, r.strokes[i].to = math.Inf(1), math.Inf(-1)
	}
	// One solved, booked and handed over point in time, at a share of the way from the step before.
	point := func(k int, share float64) error {
		res := r.solve(k, share, x, good, warm)
		warm = true
		r.certify(k, res)
		if res.Solved() {
			lost = 0
			copy(good, x)
		} else if lost++; lost >= lostSteps {
			return fmt.Errorf("%w: %d time steps in a row, the last at %g s; %s", ErrLost, lost, r.series.T[k], r.cert.Unsolved[0])
		}
		r.report(!res.Solved())
		if res.Solved() {
			r.lookLoose()
		} else {
			copy(x, good)
		}
		return to.Sample(&r.sample)
	}
	for k := from; k < end; k++ {
		if (k&255 == 0 || lost > 0) && ctx.Err() != nil { // unsolved steps take long
			return r.state, r.cert, ctx.Err()
		}
		if err := r.through(k, x, good, point); err != nil {
			return r.state, r.cert, err
		}
	}
	r.state.x = append([]float64(nil), x...)
	return r.state, r.cert, nil
}

// between is a value at a share of the way from the step before to the one at hand.
func between(before, now, share float64) float64 { return before + share*(now-before) }

// next is the time from a point to the one after it; what follows a series is taken
// to go on as it did.
func (r *run) next(k int, share float64) float64 {
	t := r.series.T
	switch {
	case share < 1 && k > 0:
		return (1 - share) * (t[k] - t[k-1])
	case k+1 < len(t):
		return t[k+1] - t[k]
	}
	return r.step.dt
}

// begin sets the demands at a share of the way from the step before to step k, 1 for
// the step itself, and lets every block prepare.
func (r *run) begin(k int, share float64) {
	s := &r.step
	s.k, s.standing, s.stood = k, true, r.state.stood
	s.t = r.series.T[k]
	inside := share < 1 && k > 0
	if inside {
		s.t = between(r.series.T[k-1], s.t, share)
	}
	s.dt = 0
	if r.state.begun {
		s.dt = max(0, s.t-r.state.lastT)
	}
	s.next = r.next(k, share)
	for i := range s.axes {
		a, d := &s.axes[i], &r.series.Axes[i]
		*a = axisStep{}
		a.given, a.standing, a.travel, a.before = d.Given, d.Standing[k], r.state.travel[i], r.state.speed[i]
		a.load, a.command, a.demand = d.LoadAt(k), d.CommandAt(k), d.SpeedAt(k)
		if inside {
			a.load, a.command, a.demand = between(d.LoadAt(k-1), a.load, share), between(d.CommandAt(k-1), a.command, share), between(d.SpeedAt(k-1), a.demand, share)
		}
		if d.Accel != nil {
			a.accel = d.Accel[k]
		}
		if h := r.haste; h > 1 { // at most a third of the top speed
			a.demand *= max(1, min(h, r.series.Axes[i].Top/(3*math.Abs(a.demand)+1e-300)))
		}
		a.scaledDemand = a.demand * r.volumes[i] / r.scales.q
		a.flow = math.Abs(a.scaledDemand)
		if r.slip[i] > 0 {
			a.flow += r.slip[i] * math.Abs(a.load) / r.volumes[i] / r.scales.q
		}
		s.standing = s.standing && a.standing
		if m := &r.movers[i]; m.speed >= 0 && a.given == duty.MotionLoad && a.demand*r.behind[i] <= 0 {
			s.x[m.speed] = a.scaledDemand
			if !a.standing { // else the active set must first find out which way it rubs
				s.x[m.sigma] = machines.Sign(a.scaledDemand)
			}
		}
	}
	for _, n := range s.resting {
		s.restK[n] = 0
	}
	s.resting = s.resting[:0]
	for _, m := range r.models {
		m.begin(s)
	}
}

// certify keeps the worst residuals of the step.
func (r *run) certify(k int, res balance.Result) {
	c := &r.cert
	c.Steps++
	if res.Rung > balance.Warm && k > 0 {
		c.Fallbacks++
	}
	if !res.Solved() || res.Norm*r.scales.q > c.Worst { // no row is worse than all together
		for _, n := range r.found {
			if q := math.Abs(r.solver.Residual(int(n.slot))) * r.scales.q; q > c.Worst {
				c.Worst, c.WorstAt = q, r.rows[n.slot].where
			}
		}
	}
	for _, f := range r.forces {
		if v := math.Abs(r.solver.Residual(f.row)) * f.unit; v > c.Force {
			c.Force = v
		}
	}
	if res.Solved() {
		return
	}
	c.Unbalanced++
	if len(c.Unsolved) < 8 {
		c.Unsolved = append(c.Unsolved, r.unsolved(res.Worst))
	}
}

// forceUnit is what one unit of a force row stands for [N].
func (r *run) forceUnit(row *rowName) float64 {
	if row.axis >= 0 {
		return r.scales.p * r.volumes[row.axis]
	}
	return r.scales.p * r.scales.q / 157
}

// bookAll books the point that was balanced last: signals, powers, slow states.
func (r *run) bookAll() {
	b := &r.book
	clear(b.sums)
	b.pulsed = false
	clear(b.shaft)
	for _, m := range r.models {
		m.book(b)
	}
	for _, g := range r.gears {
		g.bookTorque(b)
	}
	for _, e := range r.onShafts {
		e.bookShaft(b)
	}
	for _, c := range r.converters {
		c.bookSupply(b)
	}
	sig, unit := b.sig, b.scales.p
	for _, p := range r.portP {
		sig[p.signal] = b.val(p.node) * unit
	}
	if len(r.slowly) > 0 {
		copy(b.next, r.state.slow)
	}
	for _, s := range r.slowly {
		s.advance(b)
	}
}

// report books the step into the sample and takes its states over.
func (r *run) report(unbalanced bool) {
	r.bookAll()
	r.sample.Pulsed = r.book.pulsed
	r.voids(&r.book)
	r.axesNow(unbalanced)
}

// voids finds what is missing at nodes that rest on the floor, and books what the leak
// of nodes takes: nothing that counts, but for pressures far beyond any rating.
func (r *run) voids(b *booking) {
	x, lo, leaked := b.all[b.known:], r.solver.Lo, 0.0
	for _, at := range r.found {
		p, void := x[at.slot], 0.0
		leaked += leak * p * p
		if p <= lo[at.slot]+1e-9 {
			void = b.m3s(max(0, r.solver.Row(int(at.slot))))
			b.pow[r.Compiled.void] -= floorPressure * void
		}
		r.sample.Void[at.node] = void
	}
	for _, n := range r.step.resting {
		leaked += r.step.restK[n] * (x[n] - r.step.rest[n]) * x[n]
	}
	b.pow[r.Compiled.void] += b.watts(leaked)
}

func (r *run) axesNow(unbalanced bool) {
	s := &r.sample
	dt := r.step.dt // 0 where a series starts before the last one ended: it is another one
	r.state.begun = true
	s.T, s.Standing, s.Holding, s.Driving = r.step.t, r.step.standing, false, false
	s.Stopped, s.Unbalanced = r.step.off(), unbalanced
	for i := range r.axes {
		a := &r.step.axes[i]
		now := AxisNow{Demand: a.demand, Speed: a.speed, Load: a.found, Standing: a.standing, End: a.end}
		if a.given == duty.LoadCommand {
			now.Demand = a.speed
		}
		s.Axes[i] = now
		r.behind[i] = 0
		if now.Demand*(now.Demand-now.Speed) > 1e-3*now.Demand*now.Demand {
			r.behind[i] = now.Demand
		}
		s.Driving = s.Driving || (now.Load*now.Speed < 0 && math.Abs(now.Speed) > stillSpeed)
		s.Holding = s.Holding || (s.Standing && math.Abs(now.Load) > HoldShare*r.series.Axes[i].TopLoad)
		r.state.travel[i] += dt * (r.state.speed[i] + now.Speed) / 2
		r.state.speed[i] = now.Speed
	}
	for i := range r.strokes {
		k := &r.strokes[i]
		a := &r.step.axes[k.axis]
		k.meet(r.state.travel[k.axis], a.travel+a.before*dt/2, 10*k.unit*(dt+r.step.next)/2)
	}
	r.state.lastT, r.state.stood = s.T, r.step.standing
	if len(r.slowly) > 0 {
		copy(r.state.slow, r.book.next)
	}
}

// endsStanding reports whether a duty that repeats ends with all axes standing: so it then begins.
func endsStanding(s *duty.Series) bool {
	for i := range s.Axes {
		if st := s.Axes[i].Standing; len(st) == 0 || !st[len(st)-1] {
			return false
		}
	}
	return s.Repeats
}

// stillSpeed [m/s, rad/s] is a speed that nobody sees: a millimetre in a quarter of an hour.
const stillSpeed = 1e-6

// HoldShare is the share of the largest load of a duty above which a standing
// axis counts as holding, below it as idle (our choice, stated in the report).
const HoldShare = 0.1

// Nodes names the nodes, in the order of Sample.Void.
func (c *Compiled) Nodes() []string {
	out := make([]string, len(c.nodes))
	for i, n := range c.nodes {
		out[i] = n.name
	}
	return out
}
