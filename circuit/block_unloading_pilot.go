package circuit

import "barlitre/machines/units"

// unloadingPilotKind is the unloading valve of a high-low pump pair.
var unloadingPilotKind = &Kind{
	Name: kindUnloadingPilot, Title: "Unloading valve, remote pilot", Group: "valves",
	Letter: "UP", Typical: []Setting{{"setting", "80 bar"}},
	Text: "Opens P to T as the pressure at its pilot X rises above its setting, without snap: it unloads the large pump of a high-low pair, behind whose check valve X is taken. The unloading (charging) valve of an accumulator is another kind.",
	Ports: []Port{
		{Name: "P", Type: Oil, Text: "pump"},
		{Name: "T", Type: Oil, Text: "tank"},
		{Name: "X", Type: Pilot, Text: "pilot, from behind the check valve of the pump"},
	},
	Params: []Param{
		{Key: "setting", Title: "Unloads at", Symbol: "ps", Dim: units.Pressure, Need: true, Above: true, Max: 1000e5, Text: "pressure at X, above that at T, at which it begins to open"},
		{Key: "range", Title: "Opening range", Symbol: "Δpb", Dim: units.Pressure, Default: "10 bar", Origin: Assumed, Source: "from closed to fully open, common practice, no source", Above: true, Max: 200e5, Text: "rise of the pilot pressure from closed to fully open"},
		{Key: "nominal_flow", Title: "Nominal flow", Symbol: "qN", Dim: units.Flow, Default: "60 L/min", Origin: Assumed, Source: "state the size of the valve", Above: true, Max: 10, Text: "fully open, at the nominal drop"},
		{Key: "nominal_drop", Title: "Nominal drop", Symbol: "ΔpN", Dim: units.Pressure, Default: "3 bar", Origin: Assumed, Source: "common practice 2 to 20 bar", Above: true, Max: 100e5, Text: "fully open, at the nominal flow"},
		ratedPressure,
	},
	Losses: []LossKind{{"unloaded circulation", ToOil, "P = (pP − pT)·q"}},
	Equations: []Equation{
		{"s = clip((pX − pT − ps)/Δpb, 0, 1)", "force balance of spool and spring, spring chamber drained to T"},
		{"P to T: Δp·s = ΔpN·(q/qN)² + (1 − s)·Δp1·q/qN, Δp1 = 100 bar", "throttling while it opens is our simplification"},
	},
	Rating: "rating",
	Symbol: func(*Block) string { return "unloading_pilot" },
	build: func(k *compiler, b *Block) model {
		m := &unloadingPilotModel{P: k.node(b, "P"), T: k.node(b, "T"), X: k.node(b, "X"), q: k.unknown(otherRow, b.ID), s: k.unknown(otherRow, b.ID+" opening"),
			setting: k.param(b, "setting"), band: k.param(b, "range"), qN: k.param(b, "nominal_flow"), dN: k.param(b, "nominal_drop"),
			sigP: k.port(b, "P"), sigT: k.port(b, "T"), loss: k.channel(Loss, b, "unloaded circulation"), sigU: k.signal(b, "u", "opening", units.Ratio)}
		k.port(b, "X")
		return m
	},
}

type unloadingPilotModel struct {
	P, T, X, q, s         slot
	setting, band, qN, dN int
	sigP, sigT, sigU      int
	loss                  int

	ps, width float64
	open      throat
	closed    float64 // linear resistance as s falls
}

func (m *unloadingPilotModel) clone() model { c := *m; return &c }

func (m *unloadingPilotModel) bind(b *binding) {
	m.ps, m.width = b.p[m.setting]/b.scales.p, b.p[m.band]/b.scales.p
	q := b.p[m.qN] / b.scales.q
	m.open = throatOf(q, b.p[m.dN]/b.scales.p)
	m.closed = 100e5 / b.scales.p / q
	b.bound.Lo[m.q] = 0
	b.bound.Lo[m.s], b.bound.Hi[m.s] = 0, 1
}

func (m *unloadingPilotModel) begin(*step) {}

func (m *unloadingPilotModel) eval(e *eval) {
	q, s := e.branch(m.P, m.T, m.q), e.val(m.s)
	r, dr := m.open.at(q)
	dp := e.val(m.P) - e.val(m.T)
	e.add(m.q, r+(1-s)*m.closed*q+minResistance*q-s*dp)
	e.d(m.q, m.q, dr+(1-s)*m.closed+minResistance)
	e.d(m.q, m.s, -m.closed*q-dp)
	e.d(m.q, m.P, -s)
	e.d(m.q, m.T, s)
	e.add(m.s, s-(e.val(m.X)-e.val(m.T)-m.ps)/m.width)
	e.d(m.s, m.s, 1)
	e.d(m.s, m.X, -1/m.width)
	e.d(m.s, m.T, 1/m.width)
}

func (m *unloadingPilotModel) book(k *booking) {
	k.through(m.P, m.T, k.val(m.q), m.sigP, m.sigT, m.loss)
	k.put(m.sigU, k.val(m.s))
}

func (m *unloadingPilotModel) cold(s *step, level int, x []float64) {
	x[m.q], x[m.s] = m.open.first(), 0.5
}
