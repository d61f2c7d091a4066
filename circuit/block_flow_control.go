package circuit

import (
	"math"

	"barlitre/machines/units"
)

// flowControlKind is a two-way flow control valve with pressure compensation.
var flowControlKind = &Kind{
	Name: kindFlowControl, Title: "Flow control valve, two-way", Group: "valves",
	Letter: "FC", Typical: []Setting{{"set_flow", "20 L/min"}},
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
		return &flowControlModel{checkedThrottle: k.checkedThrottle(b, "flow control"), set: k.param(b, "set_flow"), least: k.param(b, "least_drop")}
	},
}

// flowControlModel: what the compensator adds to the throat is held back by the bound of q.
type flowControlModel struct {
	checkedThrottle
	set, least int
}

func (m *flowControlModel) clone() model { c := *m; return &c }

func (m *flowControlModel) bind(b *binding) {
	m.t = throatOf(b.p[m.set]/b.scales.q, b.p[m.least]/b.scales.p)
	b.bound.Lo[m.q], b.bound.Hi[m.q] = math.Inf(-1), b.p[m.set]/b.scales.q
	m.back.bind(b)
}
