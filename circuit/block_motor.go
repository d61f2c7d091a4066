package circuit

import (
	"math"

	"barlitre/circuit/duty"
	"barlitre/machines"
	"barlitre/machines/units"
)

// hydraulicMotorKind is a fixed hydraulic motor, alone on an axis or on a shaft with others.
var hydraulicMotorKind = &Kind{
	Name: kindHydraulicMotor, Title: "Hydraulic motor", Group: "pumps and motors",
	Passes: HydraulicMotor, Letter: "HM", Typical: []Setting{{"displacement", "80 cm3/rev"}},
	Text: "Fixed motor. Oil into A turns it forwards. With `axis` it drives that axis, through a gear where one is given; without, its shaft must be joined to other machines.",
	Ports: []Port{
		{Name: "A", Type: Oil, Text: "oil in turns forwards"},
		{Name: "B", Type: Oil, Text: "oil in turns backwards"},
		{Name: "D", Type: Oil, Optional: true, Text: "case drain; unconnected it goes to tank"},
		{Name: "shaft", Type: Shaft, Optional: true, Text: "output shaft, where other machines sit on it"},
	},
	Params: append(machineParams("0.5"), sectioned([]Param{
		{Key: "axis", Title: "Axis", Type: AxisRef, Text: "axis of the duty that it drives"},
		{Key: "hold", Title: "Held by", Type: Choice, Choices: []string{"valve", "pump", "brake"}, Text: "what holds the axis at standstill"},
		{Key: "gear", Title: "Gear ratio", Symbol: "i", Dim: units.Ratio, Default: "1", Origin: Assumed, Source: "direct drive", Above: true, Max: 1e4, Text: "motor speed over axis speed"},
		{Key: "starting_torque", Title: "Starting torque", Symbol: "τ0", Dim: units.Ratio, Default: "0.8", Origin: Assumed, Source: "piston motor, common practice, no source", Above: true, Max: 1, Text: "at standstill, over the ideal torque D·Δp; the motor must break away with it"},
		{Key: "gear_efficiency", Title: "Gear efficiency", Symbol: "ηg", Dim: units.Ratio, Default: "1", Origin: Assumed, Source: "no gear", Above: true, Max: 1, Text: "of the gear, both ways"},
	}, map[Section][]string{Governing: {"axis", "hold"}, LossBasis: {"gear_efficiency", "starting_torque"}})...),
	Losses:    append([]LossKind{{"gearbox", ToAir, "P = |T|/i·(1 − ηg)/ηg·|ω|"}}, machineLosses...),
	Equations: append(machineEquations, Equation{"D·Δp = T/i + friction + |T|/i·(1 − ηg)/ηg·sign ω", "torque balance of the shaft; gear loss opposes motion both ways, our choice"}),
	Rating:    "rating",
	Symbol:    func(*Block) string { return "motor_fixed_2" },
	derive:    deriveMachine,
	check: func(k *Kind, b *Block, bad func(Level, string, string, ...any)) {
		checkMachine(k, b, bad)
		if b.Word("axis") != "" && b.Word("hold") == "" {
			bad(Stops, "hold", "say what holds the axis at standstill: valve, pump or brake (hold)")
		}
	},
	build: buildHydraulicMotor,
}

// placeMotorMover makes the axis' unknowns those of the motor's shaft.
func (k *compiler) placeMotorMover(m *mover, b *Block) {
	i := k.shaftAt(b)
	s := &k.shafts[i]
	m.speed, m.sigma = s.speed, s.sigma
	gear := k.param(b, "gear")
	disp, slip := k.param(b, "displacement"), k.param(b, "slip")
	m.volume = func(p []float64) float64 { return k.Compiled.shafts[i].size(p) * p[gear] }
	m.slip = func(p []float64) float64 { return p[disp] * p[slip] }
}

type motorModel struct {
	machine
	k          *Compiled
	axis       int
	hold       string
	gear, eta  int
	sigLoad    int
	gearLoss   int
	work       int
	ratio, g   float64 // bound: gear ratio; gear loss torque by load torque
	load, lost float64 // of the step, scaled torques at the motor shaft
	set        slot
}

func buildHydraulicMotor(k *compiler, b *Block) model {
	m := &motorModel{k: k.Compiled, axis: -1, sigLoad: -1, gearLoss: -1, work: -1, gear: k.param(b, "gear"), eta: k.param(b, "gear_efficiency"), set: k.fixed()}
	m.machine = k.machine(b, "A", "B", k.shaftAt(b), m.set)
	if a := b.Word("axis"); a != "" {
		m.axis = k.axisOf[a]
		m.hold = k.movers[m.axis].hold
		m.sigLoad = k.signal(b, "load", "load torque at the axis", units.Torque)
		m.gearLoss = k.channel(Loss, b, "gearbox")
		m.work = k.channel(Work, b, a)
		if m.speed >= 0 {
			k.rows[m.speed].axis = m.axis
		}
	}
	return m
}

func (m *motorModel) clone() model { c := *m; return &c }

func (m *motorModel) bind(b *binding) {
	m.bindMachine(b, m.k.shafts)
	m.ratio = b.p[m.gear]
	m.g = (1 - b.p[m.eta]) / b.p[m.eta]
}

func (m *motorModel) begin(s *step) {
	s.set(m.e, -1) // a pump run backwards in sign: oil into A turns it forwards
	m.load, m.lost = 0, 0
	if m.axis < 0 {
		return
	}
	a := &s.axes[m.axis]
	m.load = a.load / m.ratio / m.tPer
	m.lost = math.Abs(m.load) * m.g
	switch {
	case a.standing:
		s.set(m.sigma, 0)
		if m.hold == "brake" || a.given == duty.MotionCommand {
			s.set(m.speed, 0)
		} else {
			s.bounds(m.speed, math.Inf(-1), math.Inf(1))
		}
	case a.given == duty.MotionCommand:
		s.set(m.speed, a.demand*m.ratio/m.wPer)
		s.set(m.sigma, machines.Sign(a.demand))
	default:
		s.bounds(m.speed, math.Inf(-1), math.Inf(1))
		s.bounds(m.sigma, -1, 1)
	}
}

func (m *motorModel) eval(e *eval) {
	m.evalMachine(e)
	if m.axis < 0 || m.speed < 0 {
		return
	}
	e.add(m.row, m.load+e.val(m.sigma)*m.lost)
	e.d(m.row, m.sigma, m.lost)
}

func (m *motorModel) book(k *booking) { m.bookMachine(k) }

// bookShaft books the axis once the torque of its shaft is summed.
func (m *motorModel) bookShaft(k *booking) {
	if m.axis < 0 {
		return
	}
	a := &k.step.axes[m.axis]
	w := k.shaft[m.shaft].speed / m.ratio
	load, lost := a.load, m.lost*m.tPer*k.val(m.sigma)
	if a.given == duty.MotionCommand {
		// what the machines on the shaft give, less the gear loss: T/i·(1 + g·sign(T·ω)) = given
		given := -k.shaft[m.shaft].torque
		load = given * m.ratio / (1 + m.g*machines.Sign(given*w))
		lost = given - load/m.ratio
	}
	k.put(m.sigLoad, load)
	k.pow[m.gearLoss] += lost * w * m.ratio
	k.pow[m.work] += load * w
	a.speed, a.found = w, load
}
