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
	Letter:    "CK",
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
	e.throttle(m.in, m.out, m.q, &m.t, m.opens, 0)
}

func (m *checkModel) book(k *booking) { k.through(m.in, m.out, k.val(m.q), m.qIn, m.qOut, m.loss) }

func (m *checkModel) cold(s *step, level int, x []float64) { x[m.q] = m.t.first() }
