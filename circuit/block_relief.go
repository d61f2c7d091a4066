package circuit

import (
	"barlitre/machines/units"
)

// reliefKind is a pressure relief valve.
var reliefKind = &Kind{
	Name: kindRelief, Title: "Relief valve", Group: "valves",
	Letter: "RV", Typical: []Setting{{"crack", "160 bar"}},
	Text: "Opens from P to T above its setting. Give either `set`, the pressure at the flow `set_flow` as name plates mean it, or `crack`, where it begins to open. With `vented` it is unloaded to that pressure while the circuit stands with pump_at_rest: unload.",
	Ports: []Port{
		{Name: "P", Type: Oil, Text: "inlet"},
		{Name: "T", Type: Oil, Text: "outlet"},
	},
	Params: []Param{
		{Key: "crack", Title: "Cracks at", Symbol: "pc", Dim: units.Pressure, Above: true, Max: 1000e5, Text: "pressure drop at which it begins to open"},
		{Key: "set", Title: "Set to", Symbol: "ps", Dim: units.Pressure, Above: true, Max: 1000e5, Text: "pressure drop at the flow of its setting"},
		{Key: "set_flow", Title: "Set at flow", Symbol: "qs", Dim: units.Flow, Default: "60 L/min", Origin: Assumed, Source: "flow at which a name-plate setting is usually stated; ask", Above: true, Max: 1, Text: "flow at which the setting holds"},
		{Key: "override", Title: "Override", Symbol: "R", Dim: units.FlowResistance, Default: "10 bar per 100 L/min", Origin: Assumed, Source: "pilot-operated valve, common practice 3 to 12 % of the setting", Max: 1e12, Text: "pressure rise by flow"},
		{Key: "vented", Title: "Vented pressure", Symbol: "pv", Dim: units.Pressure, Max: 100e5, Text: "opening pressure while vented"},
	},
	Losses:    []LossKind{{"relief spill", ToOil, "P = (pP − pT)·q"}, {"unloaded circulation", ToOil, "P = (pP − pT)·q while vented"}},
	Equations: []Equation{{"q = 0 for Δp <= pc; Δp = pc + R·q above; with set: pc = ps − R·qs; while vented: pc = pv", "linear override, e.g. Esposito, Fluid Power with Applications, ch. 8"}},
	Symbol:    func(*Block) string { return "relief_direct" },
	check: func(k *Kind, b *Block, bad func(Level, string, string, ...any)) {
		_, crack := b.Values["crack"]
		_, set := b.Values["set"]
		switch {
		case crack && set:
			bad(Stops, "set", "both are given, its setting at a flow (set) and where it begins to open (crack); keep one of them")
		case !crack && !set:
			bad(Stops, "set", "give its setting: the pressure at a flow (set, set_flow) or where it begins to open (crack)")
		case set:
			s, _, _ := k.Value(b, "set")
			f, _, _ := k.Value(b, "set_flow")
			r, _, _ := k.Value(b, "override")
			if s.SI-f.SI*r.SI <= 0 {
				bad(Stops, "override", "with this override it would open below zero; lower the override or the flow of its setting (set_flow)")
			}
		}
	},
	build: func(k *compiler, b *Block) model {
		m := &reliefModel{P: k.node(b, "P"), T: k.node(b, "T"), q: k.unknown(otherRow, b.ID),
			crack: k.param(b, "crack"), set: k.param(b, "set"), setFlow: k.param(b, "set_flow"), override: k.param(b, "override"), vent: k.param(b, "vented"),
			qP: k.port(b, "P"), qT: k.port(b, "T"), spill: k.channel(Loss, b, "relief spill"), around: -1}
		if m.vent >= 0 {
			m.around = k.channel(Loss, b, "unloaded circulation")
		}
		return m
	},
}

type reliefModel struct {
	P, T, q                             slot
	crack, set, setFlow, override, vent int
	qP, qT, spill, around, booked       int // booked is the one of the two losses that takes the flow now
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
	m.now, m.booked = m.opens, m.spill
	if m.vent >= 0 && s.unloaded() {
		m.now, m.booked = m.vented, m.around
	}
}

func (m *reliefModel) eval(e *eval) {
	q := e.branch(m.P, m.T, m.q)
	e.drop(m.P, m.T, m.q, m.now+m.slope*q, m.slope)
}

func (m *reliefModel) book(k *booking) { k.through(m.P, m.T, k.val(m.q), m.qP, m.qT, m.booked) }

func (m *reliefModel) cold(s *step, level int, x []float64) { x[m.q] = 0.05 }
