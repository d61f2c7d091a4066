package circuit

import (
	"barlitre/machines/units"
)

// flowSharingKind is a pressure compensator behind a metering edge.
var flowSharingKind = &Kind{
	Name: kindFlowSharing, Title: "Pressure compensator, flow sharing", Group: "valves",
	Letter: "FS",
	Text:   "Stands behind a metering edge and keeps the pressure there at the signal at LS, the highest load pressure of all sections, plus its setting. All metering edges then see the same drop, so that all sections slow down in proportion when the pump is exhausted. Give each LS from the load side (A), not from the port of the valve before it.",
	Ports: []Port{
		{Name: "P", Type: Oil, Text: "behind the metering edge"},
		{Name: "A", Type: Oil, Text: "to the actuator"},
		{Name: "LS", Type: Pilot, Text: "highest load pressure"},
	},
	Params: append([]Param{
		{Key: "setting", Title: "Setting", Symbol: "Δpc", Dim: units.Pressure, Default: "5 bar", Origin: Assumed, Source: "spring of the compensator, common practice 2 to 8 bar, no source", Above: true, Max: 100e5, Text: "of P above the signal; below the margin of the pump"},
		{Key: "nominal_flow", Title: "Nominal flow", Symbol: "qN", Dim: units.Flow, Default: "60 L/min", Origin: Assumed, Source: "state the size of the valve", Above: true, Max: 10, Text: "wide open, at the nominal drop"},
		{Key: "nominal_drop", Title: "Nominal drop", Symbol: "ΔpN", Dim: units.Pressure, Default: "2 bar", Origin: Assumed, Source: "common practice", Max: 100e5, Text: "wide open, at the nominal flow; 0 bar makes it lossless; below the setting"},
	}, returnParams("blocked", "free")...),
	Losses: []LossKind{{"compensator", ToOil, "P = Δp·q"}, returnLoss},
	Equations: []Equation{
		{"pP − pA = ΔpN·(q/qN)² + z, z >= 0; pP − pLS = Δpc while z > 0, above while z = 0; q >= 0", "ideal pressure compensator with load check, complementarity"},
		returnEquation,
	},
	Symbol: func(b *Block) string { return checked(b, "flow_sharing") },
	build: func(k *compiler, b *Block) model {
		m := &flowSharingModel{way: k.regulated(b, "P", "A"), ls: k.node(b, "LS"), set: k.param(b, "setting"), qN: k.param(b, "nominal_flow"), dN: k.param(b, "nominal_drop"),
			qP: k.port(b, "P"), qA: k.port(b, "A"), loss: k.channel(Loss, b, "compensator"), back: k.returnCheck(b, "A", "P")}
		k.port(b, "LS")
		return m
	},
}

type flowSharingModel struct {
	way          regulated
	back         returnCheck
	ls           slot
	set, qN, dN  int
	qP, qA, loss int
	held         float64
}

func (m *flowSharingModel) clone() model { c := *m; return &c }

func (m *flowSharingModel) bind(b *binding) {
	m.held = b.p[m.set] / b.scales.p
	m.way.bind(b, throatOf(b.p[m.qN]/b.scales.q, b.p[m.dN]/b.scales.p))
	m.back.bind(b)
}

func (m *flowSharingModel) begin(*step) {}

func (m *flowSharingModel) eval(e *eval) {
	m.way.eval(e)
	// More throttling raises pP: the row rises with z.
	e.add(m.way.z, e.val(m.way.a)-e.val(m.ls)-m.held)
	e.d(m.way.z, m.way.a, 1)
	e.d(m.way.z, m.ls, -1)
	m.back.eval(e)
}

func (m *flowSharingModel) book(k *booking) {
	q := k.val(m.way.q)
	k.lose(m.loss, k.watts((k.val(m.way.a)-k.val(m.way.b))*q))
	q -= m.back.book(k)
	k.put(m.qP, k.m3s(q))
	k.put(m.qA, -k.m3s(q))
}

func (m *flowSharingModel) cold(s *step, level int, x []float64) {
	m.way.cold(x)
	m.back.cold(x)
}
