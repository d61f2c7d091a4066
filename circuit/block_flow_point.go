package circuit

import "barlitre/machines/units"

// flowPointKind is a measuring point for a flow.
var flowPointKind = &Kind{
	Name: kindFlowPoint, Title: "Flow measuring point", Group: "measuring",
	Letter: "Q",
	Text:   "Flow meter in a line: the flow from A to B and the pressures before and after it. Without a nominal drop it is lossless. What was measured there may stand in the duty as a track Q1.flow: it changes nothing and is compared with what is computed.",
	Ports: []Port{
		{Name: "A", Type: Oil, Text: "one side; the flow into it is the reading"},
		{Name: "B", Type: Oil, Text: "other side"},
	},
	Params: []Param{
		{Key: "nominal_flow", Title: "Nominal flow", Symbol: "qN", Dim: units.Flow, Default: "60 L/min", Origin: Assumed, Source: "state the size of the meter", Above: true, Max: 10, Text: "at the nominal drop"},
		{Key: "nominal_drop", Title: "Nominal drop", Symbol: "ΔpN", Dim: units.Pressure, Default: "0 bar", Origin: Assumed, Source: "lossless unless given", Max: 50e5, Text: "at the nominal flow"},
	},
	Losses:    []LossKind{{"flow meter", ToOil, "P = Δp·q"}},
	Equations: []Equation{{"Δp = ΔpN·q·|q|/qN²", "orifice law from a nominal point"}},
	Symbol:    func(*Block) string { return "flow_meter" },
	build: func(k *compiler, b *Block) model {
		return &orificeModel{A: k.node(b, "A"), B: k.node(b, "B"), q: k.unknown(otherRow, b.ID), dia: -1, cd: -1,
			qN: k.param(b, "nominal_flow"), dN: k.param(b, "nominal_drop"),
			qA: k.port(b, "A"), qB: k.port(b, "B"), loss: k.channel(Loss, b, "flow meter")}
	},
}
