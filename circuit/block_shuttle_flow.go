package circuit

import (
	"barlitre/machines/units"
)

// shuttleFlowKind is a shuttle valve in an oil line.
var shuttleFlowKind = &Kind{
	Name: kindShuttleFlow, Title: "Shuttle valve", Group: "valves",
	Letter: "SF",
	Text:   "Joins A with the one of X and Y that stands under the higher pressure, either way; its ball closes the other. Used for instance to open a brake from both sides of a motor.",
	Ports: []Port{
		{Name: "X", Type: Oil, Text: "one side"},
		{Name: "Y", Type: Oil, Text: "other side"},
		{Name: "A", Type: Oil, Text: "joined with the higher one"},
	},
	Params: []Param{
		{Key: "nominal_flow", Title: "Nominal flow", Symbol: "qN", Dim: units.Flow, Default: "60 L/min", Origin: Assumed, Source: "state the size of the valve", Above: true, Max: 10, Text: "of either way, at the nominal drop"},
		{Key: "nominal_drop", Title: "Nominal drop", Symbol: "ΔpN", Dim: units.Pressure, Default: "1 bar", Origin: Assumed, Source: "common practice", Above: true, Max: 100e5, Text: "at the nominal flow"},
		{Key: "band", Title: "Change-over band", Symbol: "Δpb", Dim: units.Pressure, Default: "0.5 bar", Origin: Assumed, Source: "the ball leaves its seat gradually, our choice", Above: true, Max: 10e5, Text: "difference of X and Y within which the ball stands between its seats"},
	},
	Losses: []LossKind{{"shuttle", ToOil, "P = (pX − pA)·qX + (pY − pA)·qY"}},
	Equations: []Equation{
		{"s = clip(1/2 + (pX − pY)/Δpb, 0, 1)", "ball between two seats, smooth within the band"},
		{"X to A: Δp·s = ΔpN·((q/qN)² + (1 − s)·q/qN); Y to A with 1 − s in place of s", "orifice law at the seats' ends; throttling between is our simplification"},
	},
	Symbol: func(*Block) string { return "shuttle_flow" },
	build: func(k *compiler, b *Block) model {
		return &shuttleFlowModel{X: k.node(b, "X"), Y: k.node(b, "Y"), A: k.node(b, "A"), q1: k.unknown(otherRow, b.ID), q2: k.unknown(otherRow, b.ID), s: k.unknown(otherRow, b.ID+" ball"),
			qN: k.param(b, "nominal_flow"), dN: k.param(b, "nominal_drop"), band: k.param(b, "band"),
			qX: k.port(b, "X"), qY: k.port(b, "Y"), qA: k.port(b, "A"), loss: k.channel(Loss, b, "shuttle")}
	},
}

type shuttleFlowModel struct {
	X, Y, A, q1, q2, s slot
	qN, dN, band       int
	qX, qY, qA, loss   int
	t                  throat
	width, shut        float64 // band; linear resistance as a way closes
}

func (m *shuttleFlowModel) clone() model { c := *m; return &c }

func (m *shuttleFlowModel) bind(b *binding) {
	m.t = throatOf(b.p[m.qN]/b.scales.q, b.p[m.dN]/b.scales.p)
	m.width = b.p[m.band] / b.scales.p
	m.shut = (b.p[m.dN] / b.scales.p) / (b.p[m.qN] / b.scales.q)
	b.bound.Lo[m.s], b.bound.Hi[m.s] = 0, 1
}

func (m *shuttleFlowModel) begin(*step) {}

// side adds the way from one side, open by u, which rises with s by du.
func (m *shuttleFlowModel) side(e *eval, from, q slot, u, du float64) {
	v := e.branch(from, m.A, q)
	r, dr := m.t.at(v)
	dp := e.val(from) - e.val(m.A)
	e.add(q, r+(1-u)*m.shut*v+minResistance*v-u*dp)
	e.d(q, q, dr+(1-u)*m.shut+minResistance)
	e.d(q, from, -u)
	e.d(q, m.A, u)
	e.d(q, m.s, -du*(m.shut*v+dp))
}

func (m *shuttleFlowModel) eval(e *eval) {
	s := e.val(m.s)
	m.side(e, m.X, m.q1, s, 1)
	m.side(e, m.Y, m.q2, 1-s, -1)
	e.add(m.s, s-0.5-(e.val(m.X)-e.val(m.Y))/m.width)
	e.d(m.s, m.s, 1)
	e.d(m.s, m.X, -1/m.width)
	e.d(m.s, m.Y, 1/m.width)
}

func (m *shuttleFlowModel) book(k *booking) {
	q1, q2, pA := k.val(m.q1), k.val(m.q2), k.val(m.A)
	k.put(m.qX, k.m3s(q1))
	k.put(m.qY, k.m3s(q2))
	k.put(m.qA, -k.m3s(q1+q2))
	k.lose(m.loss, k.watts((k.val(m.X)-pA)*q1+(k.val(m.Y)-pA)*q2))
}

func (m *shuttleFlowModel) cold(s *step, level int, x []float64) {
	x[m.q1], x[m.q2], x[m.s] = 0.05, 0, 0.5
}
