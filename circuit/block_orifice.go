package circuit

import (
	"math"

	"barlitre/machines"
	"barlitre/machines/units"
)

// orificeKind is a fixed throttle.
var orificeKind = &Kind{
	Name: kindOrifice, Title: "Orifice", Group: "valves",
	Letter: "O", Typical: []Setting{{"nominal_flow", "20 L/min"}},
	Text: "Fixed turbulent restriction, given by a nominal point or by its diameter.",
	Ports: []Port{
		{Name: "A", Type: Oil, Text: "one side"},
		{Name: "B", Type: Oil, Text: "other side"},
	},
	Params: []Param{
		{Key: "nominal_flow", Title: "Nominal flow", Symbol: "qN", Dim: units.Flow, Above: true, Max: 10, Text: "at the nominal drop"},
		{Key: "nominal_drop", Title: "Nominal drop", Symbol: "ΔpN", Dim: units.Pressure, Default: "5 bar", Origin: Assumed, Source: "usual point of data sheets; state it", Above: true, Max: 500e5, Text: "at the nominal flow"},
		{Key: "diameter", Title: "Diameter", Symbol: "d", Dim: units.Length, Above: true, Max: 1, Text: "instead of a nominal point"},
		{Key: "coefficient", Title: "Discharge coefficient", Symbol: "Cd", Dim: units.Ratio, Default: "0.6", Origin: Assumed, Source: "sharp edge, turbulent; handbook value 0.60 to 0.65", Above: true, Max: 1.2, Text: "with a diameter"},
	},
	Losses: []LossKind{{"metering", ToOil, "P = Δp·q"}},
	Equations: []Equation{
		{"q = qN·√(Δp/ΔpN)", "orifice law from a nominal point, laminar below 3·10⁻⁵ of the flow at 100 bar"},
		{"q = Cd·A·√(2Δp/ρ)", "orifice equation, e.g. Merritt, Hydraulic Control Systems, 1967"},
	},
	Symbol: func(*Block) string { return "orifice" },
	check: func(k *Kind, b *Block, bad func(Level, string, string, ...any)) {
		_, n := b.Values["nominal_flow"]
		_, d := b.Values["diameter"]
		if n == d {
			bad(Stops, "nominal_flow", "give its size: either nominal flow (nominal_flow) or diameter")
		}
	},
	build: func(k *compiler, b *Block) model {
		return &orificeModel{A: k.node(b, "A"), B: k.node(b, "B"), q: k.unknown(otherRow, b.ID),
			qN: k.param(b, "nominal_flow"), dN: k.param(b, "nominal_drop"), dia: k.param(b, "diameter"), cd: k.param(b, "coefficient"),
			qA: k.port(b, "A"), qB: k.port(b, "B"), loss: k.channel(Loss, b, "metering")}
	},
}

type orificeModel struct {
	A, B, q         slot
	qN, dN, dia, cd int
	qA, qB, loss    int
	t               throat
}

func (m *orificeModel) clone() model { c := *m; return &c }

func (m *orificeModel) bind(b *binding) {
	q, dp := b.get(m.qN, 0), b.p[m.dN]
	if m.dia >= 0 {
		d := b.p[m.dia]
		q = machines.OrificeFlow(dp, b.p[m.cd], math.Pi/4*d*d, b.cond.Density)
	}
	m.t = throatOf(q/b.scales.q, dp/b.scales.p)
}

func (m *orificeModel) begin(*step) {}

func (m *orificeModel) eval(e *eval) {
	e.throttle(m.A, m.B, m.q, &m.t, 0, math.Inf(-1))
}

func (m *orificeModel) book(k *booking) { k.through(m.A, m.B, k.val(m.q), m.qA, m.qB, m.loss) }
