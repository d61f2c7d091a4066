package circuit

import (
	"math"

	"barlitre/machines/units"
)

// flushingKind is the flushing valve of a closed circuit.
var flushingKind = &Kind{
	Name: kindFlushing, Title: "Flushing valve", Group: "valves",
	Letter: "FV", Typical: []Setting{{"opens", "16 bar"}, {"nominal_flow", "10 L/min"}},
	Text: "Takes oil out of the low-pressure side of a closed circuit, past a relief valve and an orifice, so that it can be cooled and cleaned. The higher pressure shifts its spool; near equal pressures it is closed.",
	Ports: []Port{
		{Name: "A", Type: Oil, Text: "one main line"},
		{Name: "B", Type: Oil, Text: "other main line"},
		{Name: "T", Type: Oil, Text: "to the tank, often by the motor case"},
	},
	Params: []Param{
		{Key: "opens", Title: "Opens at", Symbol: "po", Dim: units.Pressure, Need: true, Max: 100e5, Text: "pressure of the low side at which it begins to pass oil, a few bar below the charge pressure"},
		{Key: "override", Title: "Override", Symbol: "R", Dim: units.FlowResistance, Default: "10 bar per 100 L/min", Origin: Assumed, Source: "direct-operated valve, common practice", Max: 1e12, Text: "pressure rise by flow of its relief valve"},
		{Key: "nominal_flow", Title: "Nominal flow", Symbol: "qN", Dim: units.Flow, Need: true, Above: true, Max: 10, Text: "of its orifice, at the nominal drop: the most that it is meant to take"},
		{Key: "nominal_drop", Title: "Nominal drop", Symbol: "ΔpN", Dim: units.Pressure, Default: "5 bar", Origin: Assumed, Source: "usual point of data sheets; state it", Above: true, Max: 100e5, Text: "of its orifice at the nominal flow"},
		{Key: "shift", Title: "Shifted at", Symbol: "Δps", Dim: units.Pressure, Default: "5 bar", Origin: Assumed, Source: "spring of the spool, common practice", Above: true, Max: 100e5, Text: "difference of the main pressures at which its spool is fully over"},
	},
	Losses: []LossKind{{"flushing", ToOil, "P = (p − pT)·q of the low side"}},
	Equations: []Equation{
		{"q = u·qN·√((p − pT − po − R·q)/ΔpN), q >= 0, from the side with the lower pressure p", "relief valve with linear override and orifice in series"},
		{"u = clip((pHigh − pLow)/Δps, 0, 1)", "spool between two springs, without overlap; our simplification"},
	},
	Symbol: func(*Block) string { return "flushing" },
	build: func(k *compiler, b *Block) model {
		return &flushingModel{A: k.node(b, "A"), B: k.node(b, "B"), T: k.node(b, "T"), qA: k.unknown(passRow, b.ID+" from A"), qB: k.unknown(passRow, b.ID+" from B"),
			po: k.param(b, "opens"), over: k.param(b, "override"), qN: k.param(b, "nominal_flow"), dN: k.param(b, "nominal_drop"), shift: k.param(b, "shift"),
			sigA: k.port(b, "A"), sigB: k.port(b, "B"), sigT: k.port(b, "T"), loss: k.channel(Loss, b, "flushing")}
	},
}

type flushingModel struct {
	A, B, T, qA, qB         slot
	po, over, qN, dN, shift int
	sigA, sigB, sigT, loss  int
	opens, slope, width     float64
	t                       throat
}

func (m *flushingModel) clone() model { c := *m; return &c }

func (m *flushingModel) bind(b *binding) {
	m.opens, m.width = b.p[m.po]/b.scales.p, b.p[m.shift]/b.scales.p
	m.slope = b.p[m.over] * b.scales.q / b.scales.p
	m.t = throatOf(b.p[m.qN]/b.scales.q, b.p[m.dN]/b.scales.p)
	b.bound.Lo[m.qA], b.bound.Lo[m.qB] = 0, 0
}

func (m *flushingModel) begin(*step) {}

func (m *flushingModel) eval(e *eval) {
	m.side(e, m.A, m.B, m.qA)
	m.side(e, m.B, m.A, m.qB)
}

// side adds the way from the line low to T, which opens as the line high rises above it.
func (m *flushingModel) side(e *eval, low, high, q slot) {
	v := e.branch(low, m.T, q)
	u := (e.val(high) - e.val(low)) / m.width
	du := 1 / m.width
	if u <= 0 || u >= 1 {
		u, du = math.Max(0, math.Min(1, u)), 0
	}
	full, slope := m.t.flow(e.val(low) - e.val(m.T) - m.opens - m.slope*v)
	e.add(q, v-u*full)
	e.d(q, q, 1+u*slope*m.slope)
	e.d(q, low, -u*slope+du*full)
	e.d(q, high, -du*full)
	e.d(q, m.T, u*slope)
}

func (m *flushingModel) book(k *booking) {
	qA, qB := k.val(m.qA), k.val(m.qB)
	k.put(m.sigA, k.m3s(qA))
	k.put(m.sigB, k.m3s(qB))
	k.put(m.sigT, -k.m3s(qA+qB))
	k.pow[m.loss] += k.watts((k.val(m.A)-k.val(m.T))*qA + (k.val(m.B)-k.val(m.T))*qB)
}
