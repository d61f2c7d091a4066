package circuit

import (
	"barlitre/machines/units"
)

// compensatorKind is a pressure compensator before a metering edge.
var compensatorKind = &Kind{
	Name: kindCompensator, Title: "Pressure compensator", Group: "valves",
	Letter: "IC",
	Text:   "Stands before a metering edge and keeps the drop from A to the load signal at LS at its setting, by throttling what the supply has too much. It does not pass oil back.",
	Ports: []Port{
		{Name: "P", Type: Oil, Text: "supply"},
		{Name: "A", Type: Oil, Text: "to the metering edge"},
		{Name: "LS", Type: Pilot, Text: "load pressure of the section"},
	},
	Params: []Param{
		{Key: "drop", Title: "Drop held", Symbol: "Δpc", Dim: units.Pressure, Default: "8 bar", Origin: Assumed, Source: "common practice 5 to 12 bar", Above: true, Max: 100e5, Text: "from A to the load signal"},
		{Key: "nominal_flow", Title: "Nominal flow", Symbol: "qN", Dim: units.Flow, Default: "60 L/min", Origin: Assumed, Source: "state the size of the valve", Above: true, Max: 10, Text: "wide open, at the nominal drop"},
		{Key: "nominal_drop", Title: "Nominal drop", Symbol: "ΔpN", Dim: units.Pressure, Default: "2 bar", Origin: Assumed, Source: "common practice", Max: 100e5, Text: "wide open, at the nominal flow; 0 bar makes it lossless"},
	},
	Losses:    []LossKind{{"compensator", ToOil, "P = Δp·q"}},
	Equations: []Equation{{"pP − pA = ΔpN·(q/qN)² + z, z >= 0; pA − pLS = Δpc while z > 0; q >= 0", "ideal pressure compensator with load check, complementarity"}},
	Symbol:    func(*Block) string { return "compensator" },
	build: func(k *compiler, b *Block) model {
		m := &compensatorModel{P: k.node(b, "P"), A: k.node(b, "A"), ls: k.node(b, "LS"), q: k.unknown(otherRow, b.ID), z: k.unknown(otherRow, b.ID+" throttling"),
			drop: k.param(b, "drop"), qN: k.param(b, "nominal_flow"), dN: k.param(b, "nominal_drop"),
			qP: k.port(b, "P"), qA: k.port(b, "A"), loss: k.channel(Loss, b, "compensator")}
		k.port(b, "LS")
		return m
	},
}

type compensatorModel struct {
	P, A, ls, q, z slot
	drop, qN, dN   int
	qP, qA, loss   int
	held           float64
	t              throat
}

func (m *compensatorModel) clone() model { c := *m; return &c }

func (m *compensatorModel) bind(b *binding) {
	m.held = b.p[m.drop] / b.scales.p
	m.t = throatOf(b.p[m.qN]/b.scales.q, b.p[m.dN]/b.scales.p)
	b.bound.Lo[m.q] = 0
	b.bound.Lo[m.z], b.bound.Hi[m.z] = 0, throttleMax
	b.bound.Long[m.z] = true
}

func (m *compensatorModel) begin(*step) {}

func (m *compensatorModel) eval(e *eval) {
	e.throttle(m.P, m.A, m.q, &m.t, e.val(m.z), 0)
	// More throttling lowers pA: the row rises with z.
	e.add(m.z, m.held-(e.val(m.A)-e.val(m.ls)))
	if e.steady == nil {
		return
	}
	e.same(m.q, m.z, 1)
	e.same(m.z, m.A, -1)
	e.same(m.z, m.ls, 1)
}

func (m *compensatorModel) book(k *booking) { k.through(m.P, m.A, k.val(m.q), m.qP, m.qA, m.loss) }

func (m *compensatorModel) cold(s *step, level int, x []float64) { x[m.q], x[m.z] = m.t.first(), 0.1 }

// throttleMax bounds the drop that a compensator may make: 1000 times the
// pressure scale.
const throttleMax = 1e3
