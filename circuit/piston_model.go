package circuit

import (
	"math"

	"barlitre/circuit/duty"
	"barlitre/machines"
	"barlitre/machines/units"
)

// placeMover gives the axis of an actuator its unknowns.
func (k *compiler) placeMover(b *Block) {
	i, ok := k.axisOf[b.Word("axis")]
	if !ok {
		return
	}
	m := &k.movers[i]
	if m.block != "" { // a cylinder more on the same axis: all move as one, the first leads
		m.sizes = append(m.sizes, k.pistonSize(b))
		k.moved(b)
		return
	}
	m.block = b.ID
	m.hold = KindNamed(b.Kind).WordOf(b, "hold")
	switch {
	case movesAlong(b.Kind):
		if m.given == duty.MotionCommand {
			m.speed, m.sigma = k.fixed(), k.fixed()
		} else {
			m.speed = k.unknown(forceRow, b.ID)
			m.sigma = k.unknown(otherRow, b.ID+" friction")
		}
		m.sizes = []pistonSize{k.pistonSize(b)}
		m.volume = func(p []float64) float64 { return m.boreArea(p) }
		k.moved(b)
	case b.Kind == kindHydraulicMotor:
		k.placeMotorMover(m, b)
	}
}

// moved notes the mass of a cylinder.
func (k *compiler) moved(b *Block) {
	if v, _, _ := KindNamed(b.Kind).Value(b, "mass"); v.SI > 0 {
		k.inertia = true
	}
}

// boreArea is the area on side A of all cylinders of an axis [m²].
func (m *mover) boreArea(p []float64) float64 {
	sum := 0.0
	for _, s := range m.sizes {
		A, _ := s.areas(p)
		sum += A
	}
	return sum
}

// pistonModel is one cylinder. Several on one axis are joined rigidly: they share speed,
// friction sign and the row of forces, which the first of them leads.
type pistonModel struct {
	mover                          *mover
	lead, alone                    bool
	axis                           int
	pA, pB, v, sigma               slot
	size                           pistonSize
	fc, kp, visc, kl, mass         int
	stroke, start                  int // −1 without ends
	qA, qB, sigV, sigF             int
	friction, leakage, work, store int
	ended                          int
	hold                           string
	plunger                        bool

	A, B, ratio, fc1, kp1, visc1, kl1, m float64 // bound; A [m²], the rest scaled by A·p or flow
	share                                float64 // of the area of all cylinders of the axis
	way, first                           float64 // stroke and start, m
	force, scale, load, accel            float64 // A·p; flow of the axis by speed; of the step
	lo, hi                               float64 // bounds of the speed that the ends set
	steep, rests                         float64 // of the row of σ: slope; 1 on an end
}

// heldFlow is the share of the flow scale below which a held actuator stands.
const heldFlow = 1e-8

func buildPiston(k *compiler, b *Block) model {
	i := k.axisOf[b.Word("axis")]
	mv := &k.movers[i]
	m := &pistonModel{mover: mv, lead: mv.block == b.ID, alone: len(mv.sizes) == 1, axis: i, pA: k.node(b, "A"), pB: k.node(b, "B"), v: mv.speed, sigma: mv.sigma, hold: mv.hold, plunger: b.Kind == kindPlunger,
		size: k.pistonSize(b), fc: k.param(b, "friction"), kp: k.param(b, "pressure_friction"),
		visc: k.param(b, "viscous"), kl: k.param(b, "leakage"), mass: k.param(b, "mass"), stroke: -1, start: -1,
		qA: k.port(b, "A"), qB: k.port(b, "B"),
		sigV: k.signal(b, "v", "speed", units.Velocity), sigF: k.signal(b, "F", "load", units.Force),
		friction: k.channel(Loss, b, "friction"), leakage: -1, ended: -1,
		work: k.channel(Work, b, k.axes[i].Name), store: k.channel(Stored, b, "moved mass"),
	}
	if m.kl >= 0 {
		m.leakage = k.channel(Loss, b, "leakage")
	}
	if _, ok := b.Values["start"]; ok && m.v >= 0 { // a motion that is given is not stopped
		m.stroke, m.start = k.param(b, "stroke"), k.param(b, "start")
		m.ended = k.channel(Loss, b, endLoss.Name)
	}
	if m.v >= 0 {
		k.rows[m.v].axis = i
	}
	return m
}

func (m *pistonModel) clone() model { c := *m; return &c }

func (m *pistonModel) bind(b *binding) {
	m.A, m.B = m.size.areas(b.p)
	m.ratio = m.B / m.A
	all := m.mover.boreArea(b.p)
	m.share = m.A / all
	m.force = m.A * b.scales.p
	m.scale = all / b.scales.q
	m.fc1 = b.p[m.fc] / m.force
	m.kp1 = b.p[m.kp] * m.ratio
	if m.plunger {
		m.kp1 = b.p[m.kp]
	}
	m.visc1 = b.p[m.visc] / m.scale / m.force
	m.kl1 = b.get(m.kl, 0) * b.scales.p / b.scales.q
	m.m = b.p[m.mass]
	m.way, m.first = b.get(m.stroke, 0), b.get(m.start, 0)
	if m.sigma >= 0 && m.lead {
		b.bound.Lo[m.sigma], b.bound.Hi[m.sigma] = -1, 1
	}
}

// Positions are sums of speeds: endSlack, a share of the stroke, is what they may be
// off, so that a duty that uses the whole stroke is not stopped a rounding before its
// end. Below touchFlow, a share of the flow scale, the piston rests on its end.
// There, where its friction decides nothing, σ goes to 0, within gripFlow of standstill.
const (
	endSlack  = 1e-5
	touchFlow = 1e-6
	gripFlow  = 1e-8
)

// ends bounds the scaled speed so that the piston, going on as speeds run linearly
// between points, can stop at the next point without passing an end.
func (m *pistonModel) ends(s *step, a *axisStep) {
	m.lo, m.hi, m.steep, m.rests = math.Inf(-1), math.Inf(1), 1, 0
	if m.stroke < 0 {
		return
	}
	slack := endSlack * m.way
	x := m.first + a.travel + a.before*s.dt/2
	room := func(way float64) float64 { // the speed that uses it up
		v := 2 * way / (s.dt + s.next) * m.scale
		switch {
		case way <= 0 || v < touchFlow:
			m.rests = 1
			return 0
		case s.dt+s.next == 0:
			return math.Inf(1)
		}
		return v
	}
	m.lo, m.hi = -room(x+slack), room(m.way+slack-x)
	// Bounds so near count as much as a force, else they would hide what is left of it.
	s.solver.Weight[m.v] = 1 / max(touchFlow, min(1, min(m.hi, -m.lo)))
	// Near an end the row of σ is as steep as the speed left is small.
	if m.rests > 0 {
		m.steep = 1 / gripFlow
	} else {
		m.steep = 1 / min(1, min(m.hi, -m.lo))
	}
}

// reach gives the way to the ends; they steepen something only where a unit of scaled
// speed brings the piston to one within a step, and few speeds are more than a unit.
func (m *pistonModel) reach() (axis int, in, out, unit float64, has bool) {
	return m.axis, -m.first, m.way - m.first, 1 / m.scale, m.stroke >= 0
}

func (m *pistonModel) begin(s *step) {
	a := &s.axes[m.axis]
	m.accel = a.accel
	m.load = m.m * a.accel
	if m.lead {
		m.load += a.load
		m.govern(s, a)
	}
	m.load *= m.share / m.force
	if a.standing && m.hold == "valve" {
		s.restAt(m.pA, max(a.load, 0)*m.share/m.A)
		if m.B > 0 {
			s.restAt(m.pB, max(-a.load, 0)*m.share/m.B)
		}
	}
}

// govern sets what speed and friction of the axis may be.
func (m *pistonModel) govern(s *step, a *axisStep) {
	m.ends(s, a)
	switch {
	case a.standing:
		s.set(m.sigma, 0) // dry friction carries nothing at rest: the worst case for whatever holds
		switch {
		case m.hold == "brake" || a.given == duty.MotionCommand:
			s.set(m.v, 0)
		case m.hold == "pump": // it holds the speed at nothing, on an end as anywhere
			s.bounds(m.v, math.Inf(-1), math.Inf(1))
		default:
			s.bounds(m.v, m.lo, m.hi)
		}
	case a.given == duty.MotionCommand:
		s.set(m.v, a.demand*m.scale)
		s.set(m.sigma, machines.Sign(a.demand))
	default:
		s.bounds(m.v, m.lo, m.hi)
		s.bounds(m.sigma, -1, 1)
		if m.v >= 0 {
			s.x[m.v] = max(m.lo, min(m.hi, s.x[m.v]))
		}
	}
}

func (m *pistonModel) eval(e *eval) {
	v, k := e.val(m.v), m.share // of the axis; this cylinder's part of its flow and force
	e.add(m.pA, k*v)
	e.add(m.pB, -k*m.ratio*v)
	if e.steady != nil {
		e.same(m.pA, m.v, k)
		e.same(m.pB, m.v, -k*m.ratio)
		e.same(m.v, m.v, k*m.visc1)
	}
	if m.kl1 > 0 {
		e.conduct(m.pA, m.pB, m.kl1)
	}
	if m.v < 0 {
		return
	}
	pA, pB, sg := e.val(m.pA), e.val(m.pB), e.val(m.sigma)
	dry := m.fc1 + m.kp1*math.Abs(pA-pB)
	e.add(m.v, m.load+k*(sg*dry+m.visc1*v-pA+m.ratio*pB))
	if !e.plain() {
		slope := m.kp1 * machines.Sign(pA-pB)
		e.d(m.v, m.pA, k*(-1+sg*slope))
		e.d(m.v, m.pB, k*(m.ratio-sg*slope))
		e.d(m.v, m.sigma, k*dry)
	}
	if !m.lead {
		return
	}
	// σ sits at 1 while v > 0, at −1 while v < 0, and anywhere between at v = 0.
	e.add(m.sigma, -v*m.steep+sg*m.rests)
	if !e.plain() {
		e.d(m.sigma, m.v, -m.steep)
		e.d(m.sigma, m.sigma, m.rests)
	}
}

func (m *pistonModel) book(k *booking) {
	vs := k.val(m.v)
	if k.step.axes[m.axis].standing && math.Abs(vs) < heldFlow {
		vs = 0 // what the resting leak lets through is no motion, and nothing is booked for it
		k.step.noRest(m.pA)
		k.step.noRest(m.pB)
	}
	v := vs / m.scale
	viscous := m.visc1 * vs
	vs *= m.share
	pA, pB := k.pa(m.pA), k.pa(m.pB)
	leak := m.kl1 * (k.val(m.pA) - k.val(m.pB))
	k.put(m.qA, k.m3s(vs+leak))
	k.put(m.qB, k.m3s(-m.ratio*vs-leak))
	dry := (m.fc1 + m.kp1*math.Abs(k.val(m.pA)-k.val(m.pB))) * m.force
	friction := k.val(m.sigma)*dry + viscous*m.force
	a := &k.step.axes[m.axis]
	load := a.load
	if a.given == duty.MotionCommand || !m.alone { // what is left of the pressures; its part of the load
		load = pA*m.A - pB*m.B - friction - m.m*m.accel
	}
	k.put(m.sigV, v)
	k.put(m.sigF, load)
	k.pow[m.friction] += friction * v
	k.lose(m.leakage, k.watts(leak*(k.val(m.pA)-k.val(m.pB))))
	k.pow[m.work] += load * v
	k.pow[m.store] += m.m * m.accel * v
	switch {
	case a.given != duty.MotionCommand:
		a.found = a.load
	case m.lead:
		a.found = load
	default:
		a.found += load
	}
	a.speed = v
	if m.stroke >= 0 {
		m.bookEnd(k, a, vs, pA*m.A-pB*m.B-load-m.m*m.accel-friction)
	}
}

// bookEnd books what the force N of an end takes while the piston comes to rest on it.
func (m *pistonModel) bookEnd(k *booking, a *axisStep, vs, N float64) {
	const touch = 1e-9 // scaled: well above what a balance leaves
	switch {
	case a.standing && m.hold != "valve":
		return
	case N > 0 && m.hi-k.val(m.v) < touch:
		a.end = 1
	case N < 0 && k.val(m.v)-m.lo < touch:
		a.end = -1
	default:
		return
	}
	k.pow[m.ended] += N * vs / m.scale
}
