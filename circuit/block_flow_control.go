package circuit

import (
	"math"

	"barlitre/machines/units"
)

// flowControlKind is a two-way flow control valve with pressure compensation.
var flowControlKind = &Kind{
	Name: kindFlowControl, Title: "Flow control valve, two-way", Group: "valves",
	Text: "Lets no more than the set flow from A to B, whatever the load, as long as the drop is above the least one; below it the flow falls as that of an orifice. From B to A it is an orifice, or free through a built-in check valve.",
	Ports: []Port{
		{Name: "A", Type: Oil, Text: "inlet"},
		{Name: "B", Type: Oil, Text: "outlet, flow held"},
	},
	Params: append([]Param{
		{Key: "set_flow", Title: "Set flow", Symbol: "qs", Dim: units.Flow, Need: true, Above: true, Max: 10, Text: "flow from A to B that it holds"},
		{Key: "least_drop", Title: "Least drop", Symbol: "Δp1", Dim: units.Pressure, Default: "8 bar", Origin: Assumed, Source: "common practice 5 to 12 bar, no source", Above: true, Max: 100e5, Text: "at the set flow with the compensator wide open; below it the flow is not held"},
	}, returnParams("throttled", "free")...),
	Losses: []LossKind{{"flow control", ToOil, "P = (pA − pB)·q"}, returnLoss},
	Equations: []Equation{
		{"q = min(qs, qs·√(Δp/Δp1)) for Δp = pA − pB >= 0; q = −qs·√(−Δp/Δp1) below", "ideal pressure compensator in series with an orifice, e.g. Merritt, Hydraulic Control Systems, 1967; from memory"},
		returnEquation,
	},
	Symbol: func(b *Block) string { return checked(b, "flow_2way") },
	build: func(k *compiler, b *Block) model {
		return &flowControlModel{A: k.node(b, "A"), B: k.node(b, "B"), q: k.unknown(otherRow, b.ID), set: k.param(b, "set_flow"), least: k.param(b, "least_drop"),
			qA: k.port(b, "A"), qB: k.port(b, "B"), loss: k.channel(Loss, b, "flow control"), back: k.returnCheck(b, "B", "A")}
	},
}

type flowControlModel struct {
	back         returnCheck
	A, B, q      slot
	set, least   int
	qA, qB, loss int
	t            throat
}

func (m *flowControlModel) clone() model { c := *m; return &c }

func (m *flowControlModel) bind(b *binding) {
	m.t = throatOf(b.p[m.set]/b.scales.q, b.p[m.least]/b.scales.p)
	b.bound.Lo[m.q], b.bound.Hi[m.q] = math.Inf(-1), b.p[m.set]/b.scales.q
	m.back.bind(b)
}

func (m *flowControlModel) begin(*step) {}

func (m *flowControlModel) eval(e *eval) {
	q := e.branch(m.A, m.B, m.q)
	r, dr := m.t.at(q)
	e.drop(m.A, m.B, m.q, r, dr) // what the compensator adds is held back by the bound of q
	m.back.eval(e)
}

func (m *flowControlModel) book(k *booking) {
	q := k.val(m.q)
	k.lose(m.loss, k.watts((k.val(m.A)-k.val(m.B))*q))
	q -= m.back.book(k)
	k.put(m.qA, k.m3s(q))
	k.put(m.qB, -k.m3s(q))
}

func (m *flowControlModel) cold(s *step, level int, x []float64) {
	x[m.q] = 0.05
	m.back.cold(x)
}
