package circuit

import (
	"barlitre/machines/units"
)

// throttleCheckKind is a throttle with a check valve beside it.
var throttleCheckKind = &Kind{
	Name: kindThrottleCheck, Title: "Throttle-check valve", Group: "valves",
	Text: "Throttles from A to B; from B to A a check valve beside the throttle passes oil freely.",
	Ports: []Port{
		{Name: "A", Type: Oil, Text: "inlet of the throttled way"},
		{Name: "B", Type: Oil, Text: "inlet of the free way"},
	},
	Params: []Param{
		{Key: "nominal_flow", Title: "Nominal flow", Symbol: "qN", Dim: units.Flow, Need: true, Above: true, Max: 10, Text: "of the throttle as it is set, at the nominal drop"},
		{Key: "nominal_drop", Title: "Nominal drop", Symbol: "ΔpN", Dim: units.Pressure, Default: "5 bar", Origin: Assumed, Source: "usual point of data sheets; state it", Above: true, Max: 500e5, Text: "of the throttle at its nominal flow"},
		{Key: "check_opens", Title: "Check opens at", Symbol: "po", Dim: units.Pressure, Default: "0.5 bar", Origin: Assumed, Source: "common practice", Max: 100e5, Text: "pressure drop at which the check valve begins to open"},
		{Key: "check_flow", Title: "Nominal flow of the check", Symbol: "q2", Dim: units.Flow, Default: "60 L/min", Origin: Assumed, Source: "state the size of the valve", Above: true, Max: 10, Text: "at check_drop beyond the opening pressure"},
		{Key: "check_drop", Title: "Nominal drop of the check", Symbol: "Δp2", Dim: units.Pressure, Default: "1 bar", Origin: Assumed, Source: "common practice", Max: 100e5, Text: "at check_flow; 0 bar makes it lossless"},
	},
	Losses: []LossKind{{"metering", ToOil, "P = Δp·q of the throttle"}, {"check valve", ToOil, "P = Δp·q of the check valve"}},
	Equations: []Equation{
		{"throttle, both ways: q = qN·√(Δp/ΔpN)", "orifice law from a nominal point"},
		{"check valve, B to A: q = q2·√((Δp − po)/Δp2) above po", "orifice law beyond the opening pressure"},
	},
	Symbol: func(*Block) string { return "throttle_check" },
	build: func(k *compiler, b *Block) model {
		m := &throttleCheckModel{A: k.node(b, "A"), B: k.node(b, "B"), q: k.unknown(otherRow, b.ID), qN: k.param(b, "nominal_flow"), dN: k.param(b, "nominal_drop"),
			qA: k.port(b, "A"), qB: k.port(b, "B"), loss: k.channel(Loss, b, "metering"), back: k.returnCheck(b, "B", "A")}
		m.back.q = k.unknown(otherRow, b.ID+" check valve")
		return m
	},
}

type throttleCheckModel struct {
	back         returnCheck
	A, B, q      slot
	qN, dN       int
	qA, qB, loss int
	t            throat
}

func (m *throttleCheckModel) clone() model { c := *m; return &c }

func (m *throttleCheckModel) bind(b *binding) {
	m.t = throatOf(b.p[m.qN]/b.scales.q, b.p[m.dN]/b.scales.p)
	m.back.bind(b)
}

func (m *throttleCheckModel) begin(*step) {}

func (m *throttleCheckModel) eval(e *eval) {
	q := e.branch(m.A, m.B, m.q)
	r, dr := m.t.at(q)
	e.drop(m.A, m.B, m.q, r, dr)
	m.back.eval(e)
}

func (m *throttleCheckModel) book(k *booking) {
	q := k.val(m.q)
	k.lose(m.loss, k.watts((k.val(m.A)-k.val(m.B))*q))
	q -= m.back.book(k)
	k.put(m.qA, k.m3s(q))
	k.put(m.qB, -k.m3s(q))
}

func (m *throttleCheckModel) cold(s *step, level int, x []float64) {
	x[m.q] = 0.05
	m.back.cold(x)
}
