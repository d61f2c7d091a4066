package circuit

import (
	"math"

	"barlitre/machines/units"
)

// flywheelKind is a rotating mass on a shaft without a prime mover of given speed.
var flywheelKind = &Kind{
	Name: kindFlywheel, Title: "Flywheel", Group: "supply",
	Letter: "FW", Typical: []Setting{{"inertia", "0.5 kg m2"}},
	Text: "Rotating mass on a shaft whose speed is free. On a shaft that a motor holds at a given speed it does nothing but at changes of that speed, which the balance does not see.",
	Ports: []Port{
		{Name: "shaft", Type: Shaft, Text: "shaft"},
	},
	Params: []Param{
		{Key: "inertia", Title: "Moment of inertia", Symbol: "J", Dim: units.Inertia, Need: true, Above: true, Max: 1e6, Text: "of all that turns with it"},
		{Key: "start_speed", Title: "Speed at the start", Symbol: "n0", Dim: units.AngularSpeed, Default: "0 rpm", Origin: Assumed, Source: "from rest", Min: -2000, Max: 2000, Text: "where a single recording begins"},
	},
	Equations: []Equation{{"J·dω/dt = −Σ T; dE/dt = J·ω·dω/dt", "Newton, rotation"}},
	Symbol:    func(*Block) string { return "flywheel" },
	build: func(k *compiler, b *Block) model {
		m := &flywheelModel{k: k.Compiled, shaft: k.shaftAt(b), inertia: k.param(b, "inertia"), first: k.param(b, "start_speed"),
			sigW: k.signal(b, "w", "speed", units.AngularSpeed), stored: k.channel(Stored, b, "flywheel")}
		m.speed, m.row = k.shafts[m.shaft].speed, k.shafts[m.shaft].row
		m.free = k.shafts[m.shaft].free
		m.state = k.newSlow(slowState{block: b.ID, name: "speed", start: func(p []float64) float64 { return p[m.first] }, scale: func([]float64) float64 { return 100 }})
		return m
	},
}

type flywheelModel struct {
	k              *Compiled
	shaft          int
	speed, row     slot
	free           bool
	inertia, first int
	sigW, stored   int
	state          int

	J, wPer, tPer float64
	was, dt       float64 // scaled speed before; s
}

func (m *flywheelModel) clone() model { c := *m; return &c }

func (m *flywheelModel) bind(b *binding) {
	size := m.k.shafts[m.shaft].size(b.p)
	m.J, m.wPer, m.tPer = b.p[m.inertia], b.scales.q/size, size*b.scales.p
}

// begin: at both sides of a step the speed stands.
func (m *flywheelModel) begin(s *step) {
	m.was, m.dt = s.slow[m.state]/m.wPer, s.dt
	if !m.free || m.speed < 0 {
		return
	}
	if m.dt == 0 {
		s.set(m.speed, m.was)
	} else {
		s.bounds(m.speed, -inf, inf)
	}
}

func (m *flywheelModel) eval(e *eval) {
	if !m.free || m.dt == 0 {
		return
	}
	k := m.J * m.wPer / m.dt / m.tPer
	e.add(m.row, k*(e.val(m.speed)-m.was))
	e.d(m.row, m.speed, k)
}

func (m *flywheelModel) book(k *booking) {
	w := k.val(m.speed) * m.wPer
	k.put(m.sigW, w)
	if m.free && m.dt > 0 {
		torque := m.J * (w - m.was*m.wPer) / m.dt
		k.pow[m.stored] += torque * w
		k.shaft[m.shaft].torque += torque
	}
}

func (m *flywheelModel) advance(k *booking) { k.next[m.state] = k.val(m.speed) * m.wPer }

// inf is beyond every bound.
var inf = math.Inf(1)
