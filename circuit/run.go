package circuit

import (
	"context"
	"errors"
	"fmt"
	"math"

	"barlitre/circuit/balance"
	"barlitre/circuit/duty"
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
	if len(params) != len(c.params) || len(s.Axes) != len(c.axes) {
		return st, Certificate{}, fmt.Errorf("%w: %d numbers for %d, %d axes for %d", ErrParameters, len(params), len(c.params), len(s.Axes), len(c.axes))
	}
	for i, v := range params {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return st, Certificate{}, fmt.Errorf("%w: %s.%s is not a number", ErrParameters, c.params[i].Block, c.params[i].Key)
		}
	}
	r := newRun(c, params, cond, s)
	return r.all(ctx, st, to)
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
	topLoad  []float64
	params   []float64
	switches []switching
	leak     float64   // of each node to tank; see Ease
	behind   []float64 // demand of axes that lagged behind it at the last point, else 0
	haste    float64   // by how much axes move faster than asked; see approach
	scales
	hot
}

func newRun(c *Compiled, params []float64, cond Conditions, s *duty.Series) *run {
	r := &run{Compiled: c, solver: balance.NewSolver(c.n), series: s, params: params, leak: leak}
	r.scales = scales{p: pressureScale, q: c.flowScale(params)}
	x, fix := make([]float64, c.n), make([]float64, c.nfix)
	r.ev = eval{x: x, fix: fix, gfix: make([]float64, c.nfix)}
	r.step = step{axes: make([]axisStep, len(c.axes)), commands: s.Commands, atRest: c.circuit.PumpAtRest, solver: r.solver,
		x: x, fix: fix, rest: make([]float64, c.n), restK: make([]float64, c.n), pScale: r.scales.p}
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
	b := &binding{p: params, cond: cond, scales: r.scales, bound: r.solver}
	for _, m := range c.models {
		m = m.clone()
		m.bind(b)
		r.models = append(r.models, m)
	}
	r.volumes = make([]float64, len(c.axes))
	r.slip = make([]float64, len(c.axes))
	r.behind = make([]float64, len(c.axes))
	r.topLoad = make([]float64, len(c.axes))
	for i, m := range c.movers {
		r.volumes[i] = 1
		if m.volume != nil {
			r.volumes[i] = m.volume(params)
		}
		if m.slip != nil {
			r.slip[i] = m.slip(params) / cond.Viscosity
		}
		for _, f := range s.Axes[i].Load {
			r.topLoad[i] = math.Max(r.topLoad[i], math.Abs(f))
		}
	}
	r.sort()
	r.book = booking{scales: r.scales, cond: cond, step: &r.step, sig: make([]float64, len(c.signals)), pow: make([]float64, len(c.channels)),
		shaft: make([]shaftBook, len(c.shafts)), el: make([]float64, c.electric)}
	r.sample = Sample{Signals: r.book.sig, Power: r.book.pow, Axes: make([]AxisNow, len(c.axes)), Void: make([]float64, len(c.nodes))}
	return r
}

// flowScale is the flow of the largest machine at full speed, at least 1 L/min.
func (c *Compiled) flowScale(p []float64) float64 {
	const usual = 157.0 // rad/s, 1500 rpm
	q := units.LitrePerMinute
	for _, s := range c.shafts {
		q = math.Max(q, s.size(p)*usual)
	}
	return q
}

func (r *run) all(ctx context.Context, st State, to Receiver) (State, Certificate, error) {
	x := r.step.x
	warm := st.begun && len(st.x) == len(x)
	if warm {
		copy(x, st.x)
	}
	r.state = State{travel: make([]float64, len(r.axes)), speed: make([]float64, len(r.axes)), lastT: st.lastT, begun: st.begun}
	copy(r.state.travel, st.travel)
	copy(r.state.speed, st.speed)
	good := append([]float64(nil), x...)
	lost := 0
	r.beginSlow(st)
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
		r.report(k, !res.Solved())
		if !res.Solved() {
			copy(x, good)
		}
		return to.Sample(&r.sample)
	}
	for k := range r.series.T {
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

// solve balances a point in time.
func (r *run) solve(k int, share float64, x, good []float64, warm bool) balance.Result {
	r.begin(k, share)
	if !warm {
		r.cold(0, x)
	}
	r.solver.Foretell = r.moved() && warm && r.step.t > r.solved
	r.solved = r.step.t
	res := r.solver.Solve(r, x, len(coldStarts), r.cold)
	r.solver.Foretell = false
	if !res.Solved() {
		res = r.approach(k, share, x, good)
	}
	return res
}

// Ease makes the circuit leakier by a share of 1e-3 of its flow scale at 100 bar: what
// hangs on the least of leaks then hangs on more.
func (r *run) Ease(e float64) { r.leak = leak + 1e-3*e }

// approach solves a step that withstood all else by way of easier ones: the axes
// move faster at first, where throttling edges are well open, and slow down to
// what is asked in steps of half an order of magnitude.
func (r *run) approach(k int, share float64, x, good []float64) balance.Result {
	defer func() { r.haste = 1 }()
	copy(x, good)
	var res balance.Result
	for _, haste := range [...]float64{1000, 300, 100, 30, 10, 3, 1} {
		r.haste = haste
		r.begin(k, share)
		levels := 1
		if haste == 1 || haste == 1000 {
			levels = len(coldStarts)
		}
		res = r.solver.Solve(r, x, levels, r.cold)
	}
	if res.Solved() {
		res.Rung = balance.Levels
	}
	return res
}

// between reads a column at a share of the way from the step before k to k.
func between(v []float64, k int, share float64) float64 {
	if v == nil {
		return 0
	}
	if share >= 1 || k == 0 {
		return v[k]
	}
	return v[k-1] + share*(v[k]-v[k-1])
}

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
	s.k, s.standing = k, true
	s.t = between(r.series.T, k, share)
	s.dt = 0
	if r.state.begun {
		s.dt = math.Max(0, s.t-r.state.lastT)
	}
	s.next = r.next(k, share)
	for i := range s.axes {
		a, d := &s.axes[i], &r.series.Axes[i]
		*a = axisStep{given: d.Given, standing: d.Standing[k], travel: r.state.travel[i], before: r.state.speed[i]}
		a.load, a.command, a.demand = between(d.Load, k, share), between(d.Command, k, share), between(d.Speed, k, share)
		if d.Accel != nil {
			a.accel = d.Accel[k]
		}
		if h := r.haste; h > 1 { // at most a third of the top speed
			a.demand *= math.Max(1, math.Min(h, r.series.Axes[i].Top/(3*math.Abs(a.demand)+1e-300)))
		}
		a.scaledDemand = a.demand * r.volumes[i] / r.scales.q
		a.flow = math.Abs(a.scaledDemand)
		if r.slip[i] > 0 {
			a.flow += r.slip[i] * math.Abs(a.load) / r.volumes[i] / r.scales.q
		}
		s.standing = s.standing && a.standing
		if m := r.movers[i]; m.speed >= 0 && a.given == duty.MotionLoad && a.demand*r.behind[i] <= 0 {
			s.x[m.speed] = a.scaledDemand
			if !a.standing { // else the active set must first find out which way it rubs
				s.x[m.sigma] = sign(a.scaledDemand)
			}
		}
	}
	clear(s.rest)
	clear(s.restK)
	for _, m := range r.models {
		m.begin(s)
	}
}

// coldStart is a guess for a cold start: pressure of all nodes (scaled), opening
// of throttling valves, setting of variable pumps, and speed over demand.
type coldStart struct{ pressure, opening, setting, speed float64 }

// Starts for moving freely, for a supply that is exhausted, and for a stalled
// actuator; the first is the usual one.
var coldStarts = [...]coldStart{
	{0.3, 0.3, 0.5, 1}, {0.03, 0.15, 0.5, 1}, {1.2, 1, 1, 0}, {2.5, 0.6, 0.1, 1}, {0.8, 1, 1, 0.5}, {0.3, 1, 1, 0}, {1.5, 0.05, 0.05, 1},
}

func coldStartOf(level int) coldStart { return coldStarts[level%len(coldStarts)] }

func (r *run) cold(level int, x []float64) {
	guess := coldStartOf(level)
	for i := range x {
		x[i] = 0
		if r.rows[i].kind == flowRow {
			x[i] = guess.pressure
		}
	}
	for i, m := range r.movers {
		if m.speed >= 0 {
			x[m.speed] = guess.speed * r.step.axes[i].scaledDemand
			x[m.sigma] = sign(r.step.axes[i].scaledDemand)
		}
	}
	for _, m := range r.models {
		if st, ok := m.(starter); ok {
			st.cold(&r.step, level, x)
		}
	}
	for i := range x {
		x[i] = math.Max(r.solver.Lo[i], math.Min(r.solver.Hi[i], x[i]))
	}
}

// certify keeps the worst residuals of the step.
func (r *run) certify(k int, res balance.Result) {
	c := &r.cert
	c.Steps++
	if res.Rung > balance.Warm && k > 0 {
		c.Fallbacks++
	}
	if res.Solved() && res.Norm*r.scales.q <= c.Worst && res.Norm*r.topForce <= c.Force { // no row is worse than all together
		return
	}
	for i := range r.rows {
		left := math.Abs(r.solver.Residual(i))
		switch r.rows[i].kind {
		case flowRow:
			if q := left * r.scales.q; q > c.Worst {
				c.Worst, c.WorstAt = q, r.rows[i].where
			}
		case forceRow:
			c.Force = math.Max(c.Force, left*r.forceUnit(&r.rows[i]))
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
	clear(b.pow)
	clear(b.shaft)
	clear(b.el)
	b.eval = r.ev
	b.eval.x = r.step.x
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
	for _, p := range r.portP {
		b.sig[p.signal] = b.pa(p.node)
	}
	copy(b.next, r.state.slow)
	for _, s := range r.slowly {
		s.advance(b)
	}
}

// report books the step into the sample and takes its states over.
func (r *run) report(k int, unbalanced bool) {
	r.bookAll()
	r.voids(&r.book)
	r.axesNow(k, unbalanced)
}

// voids finds what is missing at nodes that rest on the floor, and books what the leak
// of nodes takes: nothing that counts, but for pressures far beyond any rating.
func (r *run) voids(b *booking) {
	leaked := 0.0
	for _, n := range r.leaky {
		leaked += (leak*b.x[n] + r.step.restK[n]*(b.x[n]-r.step.rest[n])) * b.x[n]
	}
	b.pow[r.Compiled.void] += b.watts(leaked)
	for i, n := range r.nodes {
		r.sample.Void[i] = 0
		if n.slot < 0 || n.pilot || b.x[n.slot] > r.solver.Lo[n.slot]+1e-9 {
			continue
		}
		q := b.m3s(math.Max(0, r.solver.Row(int(n.slot))))
		r.sample.Void[i] = q
		b.pow[r.Compiled.void] += -floorPressure * q
	}
}

func (r *run) axesNow(k int, unbalanced bool) {
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
		s.Holding = s.Holding || (s.Standing && math.Abs(now.Load) > HoldShare*r.topLoad[i])
		r.state.travel[i] += dt * (r.state.speed[i] + now.Speed) / 2
		r.state.speed[i] = now.Speed
	}
	r.state.lastT = s.T
	copy(r.state.slow, r.book.next)
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
