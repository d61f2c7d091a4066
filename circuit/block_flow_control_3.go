package circuit

import (
	"math"

	"barlitre/machines/units"
)

// flowControl3Kind is a three-way flow control valve: priority flow to A, the rest to T.
var flowControl3Kind = &Kind{
	Name: kindFlowControl3, Title: "Flow control valve, three-way", Group: "valves",
	Letter: "FC", Typical: []Setting{{"set_flow", "20 L/min"}},
	Text: "Gives the set flow to A before all else and by-passes the rest to T, so that the inlet stands at the load pressure plus the drop. When T stands under a higher pressure the inlet rises with it and the flow to A is held all the same.",
	Ports: []Port{
		{Name: "P", Type: Oil, Text: "supply"},
		{Name: "A", Type: Oil, Text: "outlet, flow held"},
		{Name: "T", Type: Oil, Text: "the rest, to tank or on"},
	},
	Params: []Param{
		{Key: "set_flow", Title: "Set flow", Symbol: "qs", Dim: units.Flow, Need: true, Above: true, Max: 10, Text: "flow to A that it holds"},
		{Key: "drop", Title: "Drop held", Symbol: "Δps", Dim: units.Pressure, Default: "8 bar", Origin: Assumed, Source: "common practice 5 to 12 bar, no source", Above: true, Max: 100e5, Text: "from P to A at the set flow"},
		{Key: "nominal_flow", Title: "Nominal flow to T", Symbol: "qN", Dim: units.Flow, Default: "60 L/min", Origin: Assumed, Source: "state the size of the valve", Above: true, Max: 10, Text: "by-pass wide open, at the nominal drop"},
		{Key: "nominal_drop", Title: "Nominal drop to T", Symbol: "ΔpN", Dim: units.Pressure, Default: "2 bar", Origin: Assumed, Source: "common practice, no source", Max: 100e5, Text: "by-pass wide open, at the nominal flow; 0 bar makes it lossless"},
	},
	Losses: []LossKind{
		{"flow control", ToOil, "P = (pP − pA)·qA"},
		{"by-pass", ToOil, "P = (pP − pT)·qT"},
	},
	Equations: []Equation{
		{"qA = min(qs, qs·√(Δp/Δps)) for Δp = pP − pA >= 0; qA = −qs·√(−Δp/Δps) below", "orifice with ideal pressure compensator"},
		{"pP − pT = ΔpN·(qT/qN)² + z, z >= 0; pP − pA = Δps while z > 0, above while z = 0; qT >= 0", "ideal by-pass compensator, complementarity"},
	},
	Symbol: func(*Block) string { return "flow_3way" },
	build: func(k *compiler, b *Block) model {
		return &flowControl3Model{way: k.regulated(b, "P", "T"), A: k.node(b, "A"), q: k.unknown(otherRow, b.ID+" to A"), set: k.param(b, "set_flow"), drop: k.param(b, "drop"),
			qN: k.param(b, "nominal_flow"), dN: k.param(b, "nominal_drop"), qP: k.port(b, "P"), qA: k.port(b, "A"), qT: k.port(b, "T"),
			loss: k.channel(Loss, b, "flow control"), rest: k.channel(Loss, b, "by-pass")}
	},
}

type flowControl3Model struct {
	way                    regulated
	A, q                   slot
	set, drop, qN, dN      int
	qP, qA, qT, loss, rest int
	held                   float64
	t                      throat
}

func (m *flowControl3Model) clone() model { c := *m; return &c }

func (m *flowControl3Model) bind(b *binding) {
	m.held = b.p[m.drop] / b.scales.p
	m.t = throatOf(b.p[m.set]/b.scales.q, m.held)
	m.way.bind(b, throatOf(b.p[m.qN]/b.scales.q, b.p[m.dN]/b.scales.p))
	b.bound.Lo[m.q], b.bound.Hi[m.q] = math.Inf(-1), b.p[m.set]/b.scales.q
}

func (m *flowControl3Model) begin(*step) {}

func (m *flowControl3Model) eval(e *eval) {
	P := m.way.a
	e.throttle(P, m.A, m.q, &m.t, 0, math.Inf(-1))
	m.way.eval(e)
	// More throttling of the by-pass raises pP: the row rises with z.
	e.add(m.way.z, e.val(P)-e.val(m.A)-m.held)
	e.d(m.way.z, P, 1)
	e.d(m.way.z, m.A, -1)
}

func (m *flowControl3Model) book(k *booking) {
	q, rest, pP := k.val(m.q), k.val(m.way.q), k.val(m.way.a)
	k.lose(m.loss, k.watts((pP-k.val(m.A))*q))
	k.lose(m.rest, k.watts((pP-k.val(m.way.b))*rest))
	k.put(m.qP, k.m3s(q+rest))
	k.put(m.qA, -k.m3s(q))
	k.put(m.qT, -k.m3s(rest))
}

func (m *flowControl3Model) cold(s *step, level int, x []float64) {
	m.way.cold(x)
	x[m.q] = m.t.first()
}
