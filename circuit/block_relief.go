package circuit

import (
	"math"

	"barlitre/machines/units"
)

// reliefKind is a pressure relief valve.
var reliefKind = &Kind{
	Name: kindRelief, Title: "Relief valve", Group: "valves",
	Text: "Opens from P to T above its setting. Give either `set`, the pressure at the flow `set_flow` as name plates mean it, or `crack`, where it begins to open. With `vented` it is unloaded to that pressure while the circuit stands with pump_at_rest: unload.",
	Ports: []Port{
		{Name: "P", Type: Oil, Text: "inlet"},
		{Name: "T", Type: Oil, Text: "outlet"},
	},
	Params: []Param{
		{Key: "crack", Title: "Cracks at", Symbol: "pc", Dim: units.Pressure, Above: true, Max: 1000e5, Text: "pressure drop at which it begins to open"},
		{Key: "set", Title: "Set to", Symbol: "ps", Dim: units.Pressure, Above: true, Max: 1000e5, Text: "pressure drop at set_flow"},
		{Key: "set_flow", Title: "Set at flow", Symbol: "qs", Dim: units.Flow, Default: "60 L/min", Origin: Assumed, Source: "flow at which a name-plate setting is usually stated; ask", Above: true, Max: 1, Text: "flow at which `set` holds"},
		{Key: "override", Title: "Override", Symbol: "R", Dim: units.FlowResistance, Default: "10 bar per 100 L/min", Origin: Assumed, Source: "pilot-operated valve, common practice 3 to 12 % of the setting", Max: 1e12, Text: "pressure rise by flow"},
		{Key: "vented", Title: "Vented pressure", Symbol: "pv", Dim: units.Pressure, Max: 100e5, Text: "opening pressure while vented"},
	},
	Losses:    []LossKind{{"relief spill", ToOil, "P = (pP − pT)·q"}},
	Equations: []Equation{{"q = 0 for Δp <= pc; Δp = pc + R·q above; with set: pc = ps − R·qs", "linear override, e.g. Esposito, Fluid Power with Applications, ch. 8"}},
	Symbol:    func(*Block) string { return "relief_direct" },
	check: func(k *Kind, b *Block, bad func(Level, string, string, ...any)) {
		_, crack := b.Values["crack"]
		_, set := b.Values["set"]
		switch {
		case crack && set:
			bad(Stops, "set", "crack and set are both given; keep one of them")
		case !crack && !set:
			bad(Stops, "set", "give its setting: set (at set_flow) or crack")
		case set:
			s, _, _ := k.Value(b, "set")
			f, _, _ := k.Value(b, "set_flow")
			r, _, _ := k.Value(b, "override")
			if s.SI-f.SI*r.SI <= 0 {
				bad(Stops, "override", "with this override it would open below zero; lower the override or set_flow")
			}
		}
	},
	build: func(k *compiler, b *Block) model {
		return &reliefModel{P: k.node(b, "P"), T: k.node(b, "T"), q: k.unknown(otherRow, b.ID),
			crack: k.param(b, "crack"), set: k.param(b, "set"), setFlow: k.param(b, "set_flow"), override: k.param(b, "override"), vent: k.param(b, "vented"),
			qP: k.port(b, "P"), qT: k.port(b, "T"), loss: k.channel(Loss, b, "relief spill")}
	},
}

type reliefModel struct {
	P, T, q                             slot
	crack, set, setFlow, override, vent int
	qP, qT, loss                        int
	opens, slope, vented, now           float64
}

func (m *reliefModel) clone() model { c := *m; return &c }

func (m *reliefModel) bind(b *binding) {
	R := b.p[m.override]
	pc := b.get(m.crack, 0)
	if m.set >= 0 {
		pc = b.p[m.set] - R*b.p[m.setFlow]
	}
	m.opens, m.slope = pc/b.scales.p, R*b.scales.q/b.scales.p
	m.vented = b.get(m.vent, pc) / b.scales.p
	b.bound.Lo[m.q] = 0
}

func (m *reliefModel) begin(s *step) {
	m.now = m.opens
	if s.unloaded() {
		m.now = m.vented
	}
}

func (m *reliefModel) eval(e *eval) {
	q := e.branch(m.P, m.T, m.q)
	e.drop(m.P, m.T, m.q, m.now+m.slope*q, m.slope)
}

func (m *reliefModel) book(k *booking) { k.through(m.P, m.T, k.val(m.q), m.qP, m.qT, m.loss) }

func (m *reliefModel) cold(s *step, level int, x []float64) { x[m.q] = 0.05 }

// through books a flow from a to b: both port flows and the loss Δp·q.
func (k *booking) through(a, b slot, q float64, qa, qb, loss int) {
	k.put(qa, k.m3s(q))
	k.put(qb, -k.m3s(q))
	k.lose(loss, k.watts((k.val(a)-k.val(b))*q))
}

// orificeKind is a fixed throttle.
var orificeKind = &Kind{
	Name: kindOrifice, Title: "Orifice", Group: "valves",
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
			bad(Stops, "nominal_flow", "give its size: either nominal_flow or diameter")
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
		q = b.p[m.cd] * math.Pi / 4 * d * d * math.Sqrt(2*dp/b.cond.Density)
	}
	m.t = throatOf(q/b.scales.q, dp/b.scales.p)
}

func (m *orificeModel) begin(*step) {}

func (m *orificeModel) eval(e *eval) {
	q := e.branch(m.A, m.B, m.q)
	r, dr := m.t.at(q)
	e.drop(m.A, m.B, m.q, r, dr)
}

func (m *orificeModel) book(k *booking) { k.through(m.A, m.B, k.val(m.q), m.qA, m.qB, m.loss) }
