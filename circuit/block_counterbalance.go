package circuit

import (
	"barlitre/machines/units"
)

// counterbalanceKind is a counterbalance (over-centre) valve.
var counterbalanceKind = &Kind{
	Name: kindCounterbalance, Title: "Counterbalance valve", Group: "valves",
	Letter: "CB", Typical: []Setting{{"setting", "200 bar"}},
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
		Param{Key: "back_flow", Title: "Nominal flow out", Symbol: "q2", Dim: units.Flow, Default: "60 L/min", Origin: Assumed, Source: "state the size of the valve", Above: true, Max: 10, Text: "from C to V, fully open, at its nominal drop"},
		Param{Key: "back_drop", Title: "Nominal drop out", Symbol: "Δp2", Dim: units.Pressure, Default: "5 bar", Origin: Assumed, Source: "common practice", Above: true, Max: 200e5, Text: "at its nominal flow"},
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
