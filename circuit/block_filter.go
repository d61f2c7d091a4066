package circuit

import (
	"math"

	"barlitre/machines/units"
)

// filterKind is a filter with a linear and a square part and a bypass valve.
var filterKind = &Kind{
	Name: kindFilter, Title: "Filter", Group: "lines and conditioning",
	Letter: "F", Typical: []Setting{{"nominal_flow", "100 L/min"}},
	Text:  "Return or pressure filter, with a bypass where one is given.",
	Ports: strainerPorts("dirty side", "clean side"),
	Params: strainerParams(
		Param{Default: "0.7 bar", Source: "half-used element, common practice 0.3 to 3.5 bar", Text: "at the nominal flow"},
		Param{Default: "0.5", Source: "element laminar, housing turbulent; common practice"}),
	Losses:    []LossKind{{"filter", ToOil, "P = Δp·q"}},
	Equations: []Equation{{"Δp = ΔpN·(kl·q/qN + (1 − kl)·(q/qN)²), at most pb with a bypass", "element and housing losses, common form"}},
	Symbol: func(b *Block) string {
		if _, ok := b.Values["bypass"]; ok {
			return "filter_bypass"
		}
		return "filter"
	},
	build: func(k *compiler, b *Block) model { return k.strainer(b, "filter") },
}

// strainerPorts names the sides of what strains or cools oil.
func strainerPorts(in, out string) []Port {
	return []Port{{Name: "A", Type: Oil, Text: in}, {Name: "B", Type: Oil, Text: out}}
}

// strainerParams are the parameters of a filter or cooler; drop and share say what its nominal drop
// and laminar share are by default, and why.
func strainerParams(drop, share Param) []Param {
	return []Param{
		{Key: "nominal_flow", Title: "Nominal flow", Symbol: "qN", Dim: units.Flow, Need: true, Above: true, Max: 10, Text: "at the nominal drop"},
		{Key: "nominal_drop", Title: "Nominal drop", Symbol: "ΔpN", Dim: units.Pressure, Default: drop.Default, Origin: Assumed, Source: drop.Source, Max: 50e5, Text: drop.Text},
		{Key: "linear_share", Title: "Laminar share", Symbol: "kl", Dim: units.Ratio, Default: share.Default, Origin: Assumed, Source: share.Source, Max: 1, Text: "part of the nominal drop that grows with flow, the rest with its square"},
		{Key: "bypass", Title: "Bypass opens at", Symbol: "pb", Dim: units.Pressure, Above: true, Max: 50e5, Text: "without it there is no bypass"},
	}
}

// strainer wires a filter, or a cooler, which resists in the same way.
func (k *compiler) strainer(b *Block, loss string) *filterModel {
	return &filterModel{A: k.node(b, "A"), B: k.node(b, "B"), q: k.unknown(otherRow, b.ID), qN: k.param(b, "nominal_flow"), dN: k.param(b, "nominal_drop"), share: k.param(b, "linear_share"), by: k.param(b, "bypass"),
		qA: k.port(b, "A"), qB: k.port(b, "B"), loss: k.channel(Loss, b, loss)}
}

type filterModel struct {
	A, B, q           slot
	qN, dN, share, by int
	qA, qB, loss      int
	lin, opens        float64
	t                 throat
}

func (m *filterModel) clone() model { c := *m; return &c }

func (m *filterModel) bind(b *binding) {
	q, dp, s := b.p[m.qN]/b.scales.q, b.p[m.dN]/b.scales.p, b.p[m.share]
	m.lin = s * dp / q
	m.t = throatOf(q, (1-s)*dp)
	m.opens = b.get(m.by, math.Inf(1)) / b.scales.p
}

func (m *filterModel) begin(*step) {}

// drop is the element, or beyond the bypass pressure the bypass valve, which
// opens fully within a hundredth of the element's slope there.
func (m *filterModel) at(q float64) (r, dr float64) {
	r, dr = m.t.at(q)
	r, dr = r+m.lin*q, dr+m.lin
	if r > m.opens {
		r, dr = m.opens+0.01*(r-m.opens), 0.01*dr
	}
	return
}

func (m *filterModel) eval(e *eval) {
	q := e.branch(m.A, m.B, m.q)
	r, dr := m.at(q)
	e.drop(m.A, m.B, m.q, r, dr)
}

func (m *filterModel) book(k *booking) { k.through(m.A, m.B, k.val(m.q), m.qA, m.qB, m.loss) }
