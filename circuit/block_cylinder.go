package circuit

import (
	"math"

	"barlitre/circuit/duty"
	"barlitre/machines/units"
)

// cylinderKind is a differential cylinder.
var cylinderKind = &Kind{
	Name: kindCylinder, Title: "Cylinder, differential", Group: "actuators",
	Text: "Single-rod cylinder. Port A is the bore side and extends, port B the rod side. `hold` says how the axis stands still: by closed valves, by the pump, or by a brake.",
	Ports: []Port{
		{Name: "A", Type: Oil, Text: "bore side; oil in extends"},
		{Name: "B", Type: Oil, Text: "rod side; oil in retracts"},
	},
	Params: []Param{
		{Key: "axis", Title: "Axis", Type: AxisRef, Need: true, Text: "axis of the duty that it moves"},
		{Key: "hold", Title: "Held by", Type: Choice, Choices: []string{"valve", "pump", "brake"}, Need: true, Text: "what holds the axis at standstill"},
		{Key: "bore", Title: "Bore", Symbol: "d1", Dim: units.Length, Need: true, Above: true, Max: 2, Text: "piston diameter"},
		{Key: "rod", Title: "Rod", Symbol: "d2", Dim: units.Length, Need: true, Max: 2, Text: "rod diameter, below the bore"},
		{Key: "stroke", Title: "Stroke", Symbol: "s", Dim: units.Length, Above: true, Max: 30, Text: "for the check that the duty stays inside it"},
		{Key: "friction", Title: "Dry friction", Symbol: "Fc", Dim: units.Force, Default: "0 N", Origin: Assumed, Source: "none counted unless given", Max: 1e7, Text: "force that resists motion, of constant size"},
		{Key: "pressure_friction", Title: "Friction by pressure", Symbol: "kp", Dim: units.Ratio, Default: "0", Origin: Assumed, Source: "none counted unless given", Max: 0.5, Text: "share of |pA − pB| times the rod-side area that is lost in the seals"},
		{Key: "viscous", Title: "Viscous friction", Symbol: "b", Dim: units.ViscousFriction, Default: "0 N s/m", Origin: Assumed, Source: "none counted unless given", Max: 1e7, Text: "force by speed"},
		{Key: "leakage", Title: "Piston leakage", Symbol: "kl", Dim: units.FlowConductance, Default: "0 L/min per 100 bar", Origin: Assumed, Source: "new seals", Max: 1e-8, Text: "laminar flow past the piston"},
		{Key: "mass", Title: "Moved mass", Symbol: "m", Dim: units.Mass, Default: "0 kg", Origin: Assumed, Source: "the load track holds all of it unless given", Max: 1e7, Text: "its inertia force is added to the load"},
		{Key: "rating", Title: "Rated pressure", Symbol: "pr", Dim: units.Pressure, Above: true, Max: 2000e5, Text: "highest permitted working pressure"},
	},
	Losses: []LossKind{
		{"friction", ToOil, "P = (σ·(Fc + kp·|pA − pB|·B) + b·v)·v"},
		{"leakage", ToOil, "P = kl·(pA − pB)²"},
	},
	Equations: []Equation{
		{"pA·A − pB·B = F + m·a + σ·(Fc + kp·|pA − pB|·B) + b·v, σ = sign v, −1..1 at rest", "force balance of the piston; Coulomb friction, e.g. Merritt, Hydraulic Control Systems, 1967"},
		{"qA = A·v + kl·(pA − pB), qB = −B·v − kl·(pA − pB)", "continuity; laminar leakage"},
	},
	Rating: "rating",
	Symbol: func(*Block) string { return "cyl_diff" },
	check: func(k *Kind, b *Block, bad func(Level, string, string, ...any)) {
		bore, _, ok1 := k.Value(b, "bore")
		rod, _, ok2 := k.Value(b, "rod")
		if ok1 && ok2 && rod.SI >= bore.SI {
			bad(Stops, "rod", "rod %s is not below the bore %s", mm(rod.SI), mm(bore.SI))
		}
	},
	build: buildCylinder,
}

func mm(x float64) string { return units.Format(x, mustUnit("mm", units.Length), 4) }

func mustUnit(symbol string, d units.Dim) units.Unit {
	u, ok := units.Find(symbol, d)
	if !ok {
		panic("circuit: no unit " + symbol)
	}
	return u
}

type cylinderModel struct {
	axis                                 int
	pA, pB, v, sigma                     slot
	bore, rod, fc, kp, visc, kl, mass    int
	qA, qB, sigV, sigF                   int
	friction, leakage, work, stored      int
	hold                                 string
	A, B, ratio, fc1, kp1, visc1, kl1, m float64 // bound; A [m²], the rest scaled by A·p or flow
	force, scale, load, accel            float64 // A·p; of the step
}

// placeMover gives the axis of an actuator its unknowns.
func (k *compiler) placeMover(b *Block) {
	i, ok := k.axisOf[b.Word("axis")]
	if !ok {
		return
	}
	m := &k.movers[i]
	m.block = b.ID
	m.hold = KindNamed(b.Kind).WordOf(b, "hold")
	switch b.Kind {
	case kindCylinder:
		if m.given == duty.MotionCommand {
			m.speed, m.sigma = k.fixed(), k.fixed()
		} else {
			m.speed = k.unknown(forceRow, b.ID)
			m.sigma = k.unknown(otherRow, b.ID+" friction")
		}
		bore := k.param(b, "bore")
		m.volume = func(p []float64) float64 { return math.Pi / 4 * p[bore] * p[bore] }
		if v, _, _ := KindNamed(b.Kind).Value(b, "mass"); v.SI > 0 {
			k.inertia = true
		}
	case kindHydraulicMotor:
		k.placeMotorMover(m, b)
	}
}

// heldFlow is the share of the flow scale below which a held actuator stands.
const heldFlow = 1e-8

func buildCylinder(k *compiler, b *Block) model {
	i := k.axisOf[b.Word("axis")]
	mv := k.movers[i]
	m := &cylinderModel{axis: i, pA: k.node(b, "A"), pB: k.node(b, "B"), v: mv.speed, sigma: mv.sigma, hold: mv.hold,
		bore: k.param(b, "bore"), rod: k.param(b, "rod"), fc: k.param(b, "friction"), kp: k.param(b, "pressure_friction"),
		visc: k.param(b, "viscous"), kl: k.param(b, "leakage"), mass: k.param(b, "mass"),
		qA: k.port(b, "A"), qB: k.port(b, "B"),
		sigV: k.signal(b, "v", "speed", units.Velocity), sigF: k.signal(b, "F", "load", units.Force),
		friction: k.channel(Loss, b, "friction"), leakage: k.channel(Loss, b, "leakage"),
		work: k.channel(Work, b, k.axes[i].Name), stored: k.channel(Stored, b, "moved mass"),
	}
	if m.v >= 0 {
		k.rows[m.v].axis = i
	}
	return m
}

func (m *cylinderModel) clone() model { c := *m; return &c }

func (m *cylinderModel) bind(b *binding) {
	d1, d2 := b.p[m.bore], b.p[m.rod]
	m.A = math.Pi / 4 * d1 * d1
	m.B = math.Pi / 4 * (d1*d1 - d2*d2)
	m.ratio = m.B / m.A
	m.force = m.A * b.scales.p
	m.scale = m.A / b.scales.q
	m.fc1 = b.p[m.fc] / m.force
	m.kp1 = b.p[m.kp] * m.ratio
	m.visc1 = b.p[m.visc] / m.scale / m.force
	m.kl1 = b.p[m.kl] * b.scales.p / b.scales.q
	m.m = b.p[m.mass]
	if m.sigma >= 0 {
		b.bound.Lo[m.sigma], b.bound.Hi[m.sigma] = -1, 1
	}
}

func (m *cylinderModel) begin(s *step) {
	a := &s.axes[m.axis]
	m.load = (a.load + m.m*a.accel) / m.force
	m.accel = a.accel
	switch {
	case a.standing:
		s.set(m.sigma, 0) // dry friction carries nothing at rest: the worst case for whatever holds
		if m.hold == "brake" || a.given == duty.MotionCommand {
			s.set(m.v, 0)
		} else {
			s.bounds(m.v, math.Inf(-1), math.Inf(1))
		}
	case a.given == duty.MotionCommand:
		s.set(m.v, a.demand*m.scale)
		s.set(m.sigma, sign(a.demand))
	default:
		s.bounds(m.v, math.Inf(-1), math.Inf(1))
		s.bounds(m.sigma, -1, 1)
	}
	if a.standing && m.hold == "valve" {
		s.restAt(m.pA, math.Max(a.load, 0)/m.A)
		s.restAt(m.pB, math.Max(-a.load, 0)/m.B)
	}
}

func (m *cylinderModel) eval(e *eval) {
	v := e.val(m.v)
	e.add(m.pA, v)
	e.d(m.pA, m.v, 1)
	e.add(m.pB, -m.ratio*v)
	e.d(m.pB, m.v, -m.ratio)
	if m.kl1 > 0 {
		e.conduct(m.pA, m.pB, m.kl1)
	}
	if m.v < 0 {
		return
	}
	pA, pB, sg := e.val(m.pA), e.val(m.pB), e.val(m.sigma)
	dry, slope := m.fc1+m.kp1*math.Abs(pA-pB), m.kp1*sign(pA-pB)
	e.add(m.v, m.load+sg*dry+m.visc1*v-pA+m.ratio*pB)
	e.d(m.v, m.v, m.visc1)
	e.d(m.v, m.pA, -1+sg*slope)
	e.d(m.v, m.pB, m.ratio-sg*slope)
	e.d(m.v, m.sigma, dry)
	// σ sits at 1 while v > 0, at −1 while v < 0, and anywhere between at v = 0.
	e.add(m.sigma, -v)
	e.d(m.sigma, m.v, -1)
}

func (m *cylinderModel) book(k *booking) {
	vs := k.val(m.v)
	if k.step.axes[m.axis].standing && math.Abs(vs) < heldFlow {
		vs = 0 // what the resting leak lets through is no motion
	}
	v := vs / m.scale
	pA, pB := k.pa(m.pA), k.pa(m.pB)
	leak := m.kl1 * (k.val(m.pA) - k.val(m.pB))
	k.put(m.qA, k.m3s(vs+leak))
	k.put(m.qB, k.m3s(-m.ratio*vs-leak))
	dry := (m.fc1 + m.kp1*math.Abs(k.val(m.pA)-k.val(m.pB))) * m.force
	friction := k.val(m.sigma)*dry + m.visc1*vs*m.A*k.scales.p
	a := &k.step.axes[m.axis]
	load := a.load
	if a.given == duty.MotionCommand { // the load is what is left of the pressures
		load = pA*m.A - pB*m.B - friction - m.m*m.accel
	}
	k.put(m.sigV, v)
	k.put(m.sigF, load)
	k.pow[m.friction] += friction * v
	k.pow[m.leakage] += k.watts(leak * (k.val(m.pA) - k.val(m.pB)))
	k.pow[m.work] += load * v
	k.pow[m.stored] += m.m * m.accel * v
	a.speed, a.found = v, load
}

// sign returns −1, 0 or 1.
func sign(x float64) float64 {
	switch {
	case x > 0:
		return 1
	case x < 0:
		return -1
	}
	return 0
}
