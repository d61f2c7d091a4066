package circuit

import (
	"barlitre/circuit/balance"
	"barlitre/circuit/duty"
)

// Unknowns and rows are scaled: pressures by scales.p, flows by scales.q, so that
// powers come in p·q. Speeds of actuators and free shafts are counted as the flow
// they displace. Row i of the balance belongs to unknown i and rises with it.

// slot addresses a number that blocks share: an unknown of the balance (>= 0) or
// a number that is known within a time step (< 0).
type slot int

// scales of a run.
type scales struct{ p, q float64 }

// Pressure floor of a node: the oil tears at about 0.1 bar absolute. Below it
// the balance is met by a void, which is counted and reported, never free oil.
const floorPressure = -0.9e5 // Pa gauge

// leak ties each node to tank so weakly (1e-11 of the largest flow at 100 bar)
// that no result shows it; it only gives pressures that nothing else determines
// a place to rest. restLeak ties the chambers of a held actuator to the pressure
// that its load asks for.
const (
	leak     = 1e-11
	restLeak = 1e-9
)

// minResistance keeps parallel ideal parts (checks without a drop, lines of no
// length) from trading an undetermined flow: 1e-10 of 100 bar at full flow.
const minResistance = 1e-10

// eval is one evaluation of all rows. Blocks read with val and add with add and d.
// Known numbers lie before the unknowns in the same vectors, so that no block and no
// line below asks which of the two a slot is.
type eval struct {
	all    []float64 // known numbers, then unknowns
	rows   []float64 // what leaves the known nodes, then the rows
	known  slot
	x, out balance.Vector  // all and rows, by slots
	slopes *balance.Slopes // nil where no slopes are wanted
	steady *balance.Slopes // nil where those that stay as they are are known
}

func newEval(all, rows []float64, known int) eval {
	return eval{all: all, rows: rows, known: slot(known), x: balance.VectorOf(all, known), out: balance.VectorOf(rows, known)}
}

func (e *eval) val(s slot) float64 { return e.x.At(int(s)) }

// row returns the row of s: of a known node, the flow that leaves it.
func (e *eval) row(s slot) float64 { return e.out.At(int(s)) }

// add adds v to the row of s.
func (e *eval) add(s slot, v float64) { e.out.Add(int(s), v) }

// d adds the derivative of row r by unknown c.
func (e *eval) d(r, c slot, v float64) {
	if e.slopes != nil {
		e.slopes.Add(int(r), int(c), v)
	}
}

// same adds a derivative that stays as it is until a block says step.changes.
func (e *eval) same(r, c slot, v float64) {
	if e.steady != nil {
		e.steady.AddSteady(int(r), int(c), v)
	}
}

// plain reports that no slopes are wanted: blocks spare themselves those.
func (e *eval) plain() bool { return e.slopes == nil }

// branch adds the flow unknown q from node a to node b, always the same ones but for step.changes.
func (e *eval) branch(a, b, q slot) float64 {
	v := e.val(q)
	e.add(a, v)
	e.add(b, -v)
	if e.steady != nil {
		e.same(a, q, 1)
		e.same(b, q, -1)
	}
	return v
}

// drop adds the row of the flow unknown q between a and b: r(q) − (pa − pb),
// where r and its slope dr are the pressure drop at q. Nodes are as those of branch.
func (e *eval) drop(a, b, q slot, r, dr float64) {
	e.add(q, r+minResistance*e.val(q)-(e.val(a)-e.val(b)))
	e.d(q, q, dr+minResistance)
	if e.steady != nil {
		e.same(q, a, -1)
		e.same(q, b, 1)
	}
}

// conduct adds the linear flow k·(pa − pb) from a to b, with the same k but for step.changes.
func (e *eval) conduct(a, b slot, k float64) {
	q := k * (e.val(a) - e.val(b))
	e.add(a, q)
	e.add(b, -q)
	if e.steady != nil {
		e.same(a, a, k)
		e.same(a, b, -k)
		e.same(b, a, -k)
		e.same(b, b, k)
	}
}

// pass adds a flow q from a to b with its slope k by the drop.
func (e *eval) pass(a, b slot, q, k float64) {
	e.add(a, q)
	e.add(b, -q)
	if !e.plain() {
		e.d(a, a, k)
		e.d(a, b, -k)
		e.d(b, a, -k)
		e.d(b, b, k)
	}
}

// hot is what every step of a run needs, sorted out once.
type hot struct {
	found      []foundNode
	free       []shaft
	gears      []*gearboxModel
	onShafts   []shaftBooker
	converters []*converterModel
	slowly     []slowModel
	forces     []force
	solved     float64 // instant of the last balance [s]
	asked      []asked // by axis, of the last balance
}

// foundNode is an oil node whose pressure is an unknown: it has a leak to tank and may
// come to rest on the pressure floor.
type foundNode struct {
	node int
	slot slot
}

// force is a force row and what one unit of it stands for [N].
type force struct {
	row  int
	unit float64
}

// asked is what is asked of an axis.
type asked struct{ demand, load, command float64 }

// moved reports whether anything else is asked of the axes than at the last balance.
func (r *run) moved() bool {
	moved := false
	for i := range r.step.axes {
		a := &r.step.axes[i]
		now := asked{a.demand, a.load, a.command}
		moved = moved || now != r.asked[i]
		r.asked[i] = now
	}
	return moved
}

// sort fills hot, once the models are bound.
func (r *run) sort() {
	r.asked = make([]asked, len(r.axes))
	for i, n := range r.nodes {
		if n.slot >= 0 && !n.pilot {
			r.found = append(r.found, foundNode{i, n.slot})
		}
	}
	for _, s := range r.shafts {
		if s.free && len(s.way) == 0 {
			r.free = append(r.free, s)
		}
	}
	for i := range r.rows {
		if row := &r.rows[i]; row.kind == forceRow {
			r.forces = append(r.forces, force{i, r.forceUnit(row)})
		}
	}
	for _, m := range r.models {
		if g, ok := m.(*gearboxModel); ok {
			r.gears = append(r.gears, g)
		}
		if s, ok := m.(shaftBooker); ok {
			r.onShafts = append(r.onShafts, s)
		}
		if c, ok := m.(*converterModel); ok {
			r.converters = append(r.converters, c)
		}
		if s, ok := m.(slowModel); ok {
			r.slowly = append(r.slowly, s)
		}
	}
}

// Eval adds all rows: it is the balance.Problem. Unknowns and rows are those of r.ev.
func (r *run) Eval(_, _ []float64, j *balance.Slopes) {
	e := &r.ev
	e.slopes, e.steady = j, nil
	if j != nil && j.Stating() {
		e.steady = j
	}
	clear(e.rows)
	r.leaks(e)
	for i := range r.free {
		// σ is 1 while a shaft turns forwards, −1 backwards, between at rest.
		s := &r.free[i]
		e.add(s.sigma, -e.val(s.speed))
		e.same(s.sigma, s.speed, -1)
	}
	for _, m := range r.models {
		m.eval(e)
	}
}

// leaks sets the rows of nodes to what ties them to tank, and adds what ties them to
// what a held load asks for.
func (r *run) leaks(e *eval) {
	leak := r.leak
	for i := range r.found {
		at := int(r.found[i].slot)
		e.out.Put(at, leak*e.x.At(at))
	}
	if e.steady != nil {
		for _, at := range r.found {
			e.same(at.slot, at.slot, leak)
		}
	}
	for _, n := range r.step.resting {
		k := r.step.restK[n]
		e.add(n, k*(e.val(n)-r.step.rest[n]))
		e.d(n, n, k)
	}
}

// model is a block as the balance sees it. One model serves one run at a time.
type model interface {
	// clone returns a copy for another run.
	clone() model
	// bind takes numbers from the parameters and conditions of the run.
	bind(b *binding)
	// begin prepares a time step: bounds, states, demands.
	begin(s *step)
	// eval adds the rows of the block.
	eval(e *eval)
	// book writes flows, states and powers of a balanced step.
	book(k *booking)
}

// starter is a model with unknowns that need a start of their own.
type starter interface {
	cold(s *step, level int, x []float64)
}

// shaftBooker is a model that books what is left of the torque of its shaft, after
// all others on it.
type shaftBooker interface{ bookShaft(k *booking) }

// binding is what a model may take its numbers from.
type binding struct {
	p    []float64
	cond Conditions
	scales
	bound *balance.Solver
	duty  map[duty.Control][]float64 // what it says for blocks, by time step
}

// commanded returns the column of what the duty says for a block.
func (b *binding) commanded(block string, w duty.What) column {
	return b.duty[duty.Control{Block: block, What: w}]
}

// get returns parameter i, or fallback when the block has none.
func (b *binding) get(i int, fallback float64) float64 {
	if i < 0 {
		return fallback
	}
	return b.p[i]
}

// step is one time step to be balanced.
type step struct {
	k        int       // index into the series
	t, dt    float64   // s; dt since the point before, 0 at the first and at both sides of a step
	next     float64   // s, until the point after, as far as it is known
	slow     []float64 // slow states at the point before
	axes     []axisStep
	standing bool   // all axes stand
	stood    bool   // all axes stood at the point before
	atRest   AtRest // what the prime movers do while all stand
	solver   *balance.Solver
	x        []float64 // the unknowns
	now      *eval     // that hold them and the known numbers
	rest     []float64 // by node unknown: reference pressure of the leak
	restK    []float64 // and its conductance
	resting  []slot    // nodes that have one
	pScale   float64
}

// axisStep is what an axis must do in a step, and what it did.
type axisStep struct {
	given                        duty.Given
	demand, accel, load, command float64
	standing                     bool
	scaledDemand                 float64
	flow                         float64 // scaled, about what the actuator takes: motion and slip
	travel, before               float64 // way gone and speed at the point before
	speed, found                 float64 // result: speed and load
	end                          int     // result: 1, −1 where that end of its stroke holds it
}

// restAt gives a node that nothing else determines a place to rest [Pa].
func (s *step) restAt(node slot, pressure float64) {
	if node >= 0 {
		if s.restK[node] == 0 {
			s.resting = append(s.resting, node)
		}
		s.rest[node], s.restK[node] = pressure/s.pScale, restLeak
	}
}

// noRest takes what restAt gave, once the balance is found.
func (s *step) noRest(node slot) {
	if node >= 0 {
		s.restK[node] = 0
	}
}

// column is what a track of the duty says for a block, by time step; nil where it has none.
type column []float64

// at returns what it says in a step, or what else holds.
func (c column) at(s *step, fallback float64) float64 {
	if c == nil {
		return fallback
	}
	return c[s.k]
}

// off reports whether the prime movers are switched off.
func (s *step) off() bool { return s.standing && s.atRest == Stop }

// startsUp reports whether the prime movers leave what they do at rest at this point.
func (s *step) startsUp() bool { return s.stood && !s.standing }

// unloaded reports whether relief valves are vented.
func (s *step) unloaded() bool { return s.standing && s.atRest == Unload }

// changes tells that a block adds other nodes or steady slopes from now on; see eval.same.
func (s *step) changes() { s.solver.Restate() }

// bounds sets the box of an unknown; for a fixed slot it does nothing.
func (s *step) bounds(u slot, lo, hi float64) {
	if u >= 0 {
		s.solver.Lo[u], s.solver.Hi[u] = lo, hi
	}
}

// set fixes a slot for this step.
func (s *step) set(u slot, v float64) {
	if u >= 0 {
		s.solver.Lo[u], s.solver.Hi[u] = v, v
	}
	s.now.x.Put(int(u), v)
}

func (s *step) val(u slot) float64 { return s.now.val(u) }
