package circuit

import "barlitre/machines/units"

// openingParams are the parameters of valves that pass oil freely one way.
func openingParams() []Param {
	return []Param{
		{Key: "opens", Title: "Opens at", Symbol: "po", Dim: units.Pressure, Default: "0.5 bar", Origin: Assumed, Source: "common practice", Max: 100e5, Text: "pressure drop at which it begins to open"},
		{Key: "nominal_flow", Title: "Nominal flow", Symbol: "qN", Dim: units.Flow, Default: "60 L/min", Origin: Assumed, Source: "state the size of the valve", Above: true, Max: 10, Text: "at the nominal drop beyond the opening pressure"},
		{Key: "nominal_drop", Title: "Nominal drop", Symbol: "ΔpN", Dim: units.Pressure, Default: "1 bar", Origin: Assumed, Source: "common practice", Max: 100e5, Text: "at the nominal flow; 0 bar makes it lossless"},
	}
}

// checkKind is a check valve.
var checkKind = &Kind{
	Name: kindCheck, Title: "Check valve", Group: "valves",
	Text:      "Passes oil from `in` to `out` only.",
	Ports:     []Port{{Name: "in", Type: Oil, Text: "inlet"}, {Name: "out", Type: Oil, Text: "outlet"}},
	Params:    openingParams(),
	Losses:    []LossKind{{"check valve", ToOil, "P = Δp·q"}},
	Equations: []Equation{{"q = 0 for Δp <= po; q = qN·√((Δp − po)/ΔpN) above", "orifice law beyond the opening pressure"}},
	Symbol:    func(*Block) string { return "check_spring" },
	build: func(k *compiler, b *Block) model {
		return &checkModel{in: k.node(b, "in"), out: k.node(b, "out"), q: k.unknown(otherRow, b.ID),
			po: k.param(b, "opens"), qN: k.param(b, "nominal_flow"), dN: k.param(b, "nominal_drop"),
			qIn: k.port(b, "in"), qOut: k.port(b, "out"), loss: k.channel(Loss, b, "check valve")}
	},
}

type checkModel struct {
	in, out, q      slot
	po, qN, dN      int
	qIn, qOut, loss int
	opens           float64
	t               throat
}

func (m *checkModel) clone() model { c := *m; return &c }

func (m *checkModel) bind(b *binding) {
	m.opens = b.p[m.po] / b.scales.p
	m.t = throatOf(b.p[m.qN]/b.scales.q, b.p[m.dN]/b.scales.p)
	b.bound.Lo[m.q] = 0
}

func (m *checkModel) begin(*step) {}

func (m *checkModel) eval(e *eval) {
	q := e.branch(m.in, m.out, m.q)
	r, dr := m.t.at(q)
	e.drop(m.in, m.out, m.q, m.opens+r, dr)
}

func (m *checkModel) book(k *booking) { k.through(m.in, m.out, k.val(m.q), m.qIn, m.qOut, m.loss) }

func (m *checkModel) cold(s *step, level int, x []float64) { x[m.q] = 0.05 }

// pilotCheckKind is a pilot-operated check valve.
var pilotCheckKind = &Kind{
	Name: kindPilotCheck, Title: "Pilot-operated check valve", Group: "valves",
	Text: "Passes oil from V to C freely, and from C to V once the pilot pressure at X lifts it.",
	Ports: []Port{
		{Name: "V", Type: Oil, Text: "valve side"},
		{Name: "C", Type: Oil, Text: "cylinder side, held"},
		{Name: "X", Type: Pilot, Text: "pilot that opens it"},
	},
	Params: append(openingParams(),
		Param{Key: "pilot_ratio", Title: "Pilot ratio", Symbol: "φ", Dim: units.Ratio, Default: "3", Origin: Assumed, Source: "common practice 3 to 4", Above: true, Max: 50, Text: "pilot area over seat area"},
		Param{Key: "band", Title: "Opening band", Symbol: "Δpb", Dim: units.Pressure, Default: "2 bar", Origin: Assumed, Source: "seat pressure from closed to fully open, our choice", Above: true, Max: 50e5, Text: "from closed to fully open"},
	),
	Losses: []LossKind{{"check valve", ToOil, "P = Δp·q"}},
	Equations: []Equation{
		{"V to C: as a check valve", "orifice law beyond the opening pressure"},
		{"C to V: s = clip((φ·(pX − pV) − (pC − pV) − po)/Δpb, 0, 1); Δp·s = ΔpN·(q/qN)² + (1 − s)·Δp1·q/qN, Δp1 = 100 bar", "force balance of the seat; throttling while it opens is our simplification"},
	},
	Symbol: func(*Block) string { return "check_pilot" },
	build: func(k *compiler, b *Block) model {
		m := &pilotCheckModel{pilot: k.node(b, "X"), ratio: k.param(b, "pilot_ratio"), band: k.param(b, "band"), po: k.param(b, "opens")}
		qN, dN := k.param(b, "nominal_flow"), k.param(b, "nominal_drop")
		qV, qC, loss := k.port(b, "V"), k.port(b, "C"), k.channel(Loss, b, "check valve")
		m.gate = newGate(k, b, "V", "C", m.po, qN, dN, qV, qC, loss)
		k.port(b, "X")
		return m
	},
}

// gate is a valve that passes oil freely from V to C and, as far as it is lifted
// by s (0..1), from C to V.
type gate struct {
	V, C, q1, q2, s slot // q1 >= 0 free flow, q2 >= 0 controlled flow C to V
	po, qN, dN      int
	qN2, dN2        int // of the controlled way, −1 as the free one
	qV, qC, loss    int
	opens           float64
	free, back      throat
	closed          float64 // linear resistance of the controlled way as s falls
}

func newGate(k *compiler, b *Block, V, C string, po, qN, dN, qV, qC, loss int) gate {
	return gate{V: k.node(b, V), C: k.node(b, C), q1: k.unknown(otherRow, b.ID), q2: k.unknown(otherRow, b.ID), s: k.unknown(otherRow, b.ID+" opening"),
		po: po, qN: qN, dN: dN, qN2: -1, dN2: -1, qV: qV, qC: qC, loss: loss}
}

func (m *gate) bindGate(b *binding) {
	m.opens = b.p[m.po] / b.scales.p
	m.free = throatOf(b.p[m.qN]/b.scales.q, b.p[m.dN]/b.scales.p)
	m.back = m.free
	if m.qN2 >= 0 {
		m.back = throatOf(b.p[m.qN2]/b.scales.q, b.p[m.dN2]/b.scales.p)
	}
	m.closed = (100e5 / b.scales.p) / (b.p[m.qN] / b.scales.q)
	b.bound.Lo[m.q1], b.bound.Lo[m.q2] = 0, 0
	b.bound.Lo[m.s], b.bound.Hi[m.s] = 0, 1
}

// evalGate adds both ways; lift adds the row of s.
func (m *gate) evalGate(e *eval) {
	q1 := e.branch(m.V, m.C, m.q1)
	r, dr := m.free.at(q1)
	e.drop(m.V, m.C, m.q1, m.opens+r, dr)
	q2, s := e.branch(m.C, m.V, m.q2), e.val(m.s)
	r, dr = m.back.at(q2)
	dp := e.val(m.C) - e.val(m.V)
	e.add(m.q2, r+(1-s)*m.closed*q2+minResistance*q2-s*dp)
	e.d(m.q2, m.q2, dr+(1-s)*m.closed+minResistance)
	e.d(m.q2, m.s, -m.closed*q2-dp)
	e.d(m.q2, m.C, -s)
	e.d(m.q2, m.V, s)
}

func (m *gate) bookGate(k *booking) {
	k.through(m.V, m.C, k.val(m.q1)-k.val(m.q2), m.qV, m.qC, m.loss)
}

func (m *gate) cold(s *step, level int, x []float64) {
	x[m.q1], x[m.q2], x[m.s] = 0.05, 0.05, 0.5
}

type pilotCheckModel struct {
	gate
	pilot       slot
	ratio, band int
	po          int
	phi, width  float64
}

func (m *pilotCheckModel) clone() model { c := *m; return &c }

func (m *pilotCheckModel) bind(b *binding) {
	m.bindGate(b)
	m.phi, m.width = b.p[m.ratio], b.p[m.band]/b.scales.p
}

func (m *pilotCheckModel) begin(*step) {}

func (m *pilotCheckModel) eval(e *eval) {
	m.evalGate(e)
	pX, pV, pC := e.val(m.pilot), e.val(m.V), e.val(m.C)
	e.add(m.s, e.val(m.s)-(m.phi*(pX-pV)-(pC-pV)-m.opens)/m.width)
	e.d(m.s, m.s, 1)
	e.d(m.s, m.pilot, -m.phi/m.width)
	e.d(m.s, m.V, (m.phi-1)/m.width)
	e.d(m.s, m.C, 1/m.width)
}

func (m *pilotCheckModel) book(k *booking) { m.bookGate(k) }

// counterbalanceKind is a counterbalance (over-centre) valve.
var counterbalanceKind = &Kind{
	Name: kindCounterbalance, Title: "Counterbalance valve", Group: "valves",
	Text: "Holds a load at C and lets oil out to V only as the pressures at C and X lift it. Oil from V to C passes freely.",
	Ports: []Port{
		{Name: "V", Type: Oil, Text: "valve side"},
		{Name: "C", Type: Oil, Text: "load side"},
		{Name: "X", Type: Pilot, Text: "pilot, from the other side of the actuator"},
	},
	Params: append(openingParams(),
		Param{Key: "setting", Title: "Setting", Symbol: "ps", Dim: units.Pressure, Need: true, Above: true, Max: 1000e5, Text: "pressure at C that opens it without pilot; usually 1.3 times the highest load pressure"},
		Param{Key: "pilot_ratio", Title: "Pilot ratio", Symbol: "r", Dim: units.Ratio, Default: "4.5", Origin: Assumed, Source: "common practice 3 to 10", Above: true, Max: 50, Text: "pilot area over the area under the load pressure"},
		Param{Key: "range", Title: "Opening range", Symbol: "Δpb", Dim: units.Pressure, Default: "20 bar", Origin: Assumed, Source: "from closed to fully open, common practice", Above: true, Max: 200e5, Text: "rise of pC + r·pX from closed to fully open"},
		Param{Key: "back_flow", Title: "Nominal flow out", Symbol: "q2", Dim: units.Flow, Default: "60 L/min", Origin: Assumed, Source: "state the size of the valve", Above: true, Max: 10, Text: "from C to V, fully open, at back_drop"},
		Param{Key: "back_drop", Title: "Nominal drop out", Symbol: "Δp2", Dim: units.Pressure, Default: "5 bar", Origin: Assumed, Source: "common practice", Above: true, Max: 200e5, Text: "at back_flow"},
	),
	Losses: []LossKind{{"braking of the load", ToOil, "P = Δp·q"}},
	Equations: []Equation{
		{"s = clip((pC + r·pX − (1 + r)·pV − ps)/Δpb, 0, 1), not vented: back-pressure at V adds to the setting", "force balance of the poppet, e.g. Zähe, 1998; from memory"},
		{"C to V: Δp·s = Δp2·(q/q2)² + (1 − s)·Δp1·q/qN, Δp1 = 100 bar", "throttling while it opens is our simplification"},
	},
	Symbol: func(*Block) string { return "counterbalance" },
	build: func(k *compiler, b *Block) model {
		m := &counterbalanceModel{pilot: k.node(b, "X"), setting: k.param(b, "setting"), ratio: k.param(b, "pilot_ratio"), band: k.param(b, "range")}
		po, qN, dN := k.param(b, "opens"), k.param(b, "nominal_flow"), k.param(b, "nominal_drop")
		qV, qC, loss := k.port(b, "V"), k.port(b, "C"), k.channel(Loss, b, "braking of the load")
		m.gate = newGate(k, b, "V", "C", po, qN, dN, qV, qC, loss)
		m.qN2, m.dN2 = k.param(b, "back_flow"), k.param(b, "back_drop")
		k.port(b, "X")
		return m
	},
}

type counterbalanceModel struct {
	gate
	pilot                slot
	setting, ratio, band int
	ps, r, width         float64
}

func (m *counterbalanceModel) clone() model { c := *m; return &c }

func (m *counterbalanceModel) bind(b *binding) {
	m.bindGate(b)
	m.ps, m.r, m.width = b.p[m.setting]/b.scales.p, b.p[m.ratio], b.p[m.band]/b.scales.p
}

func (m *counterbalanceModel) begin(*step) {}

func (m *counterbalanceModel) eval(e *eval) {
	m.evalGate(e)
	pX, pV, pC := e.val(m.pilot), e.val(m.V), e.val(m.C)
	e.add(m.s, e.val(m.s)-(pC+m.r*pX-(1+m.r)*pV-m.ps)/m.width)
	e.d(m.s, m.s, 1)
	e.d(m.s, m.C, -1/m.width)
	e.d(m.s, m.pilot, -m.r/m.width)
	e.d(m.s, m.V, (1+m.r)/m.width)
}

func (m *counterbalanceModel) book(k *booking) { m.bookGate(k) }
