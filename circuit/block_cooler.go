package circuit

import "barlitre/machines/units"

// coolerKind is the oil side of a cooler.
var coolerKind = &Kind{
	Name: kindCooler, Title: "Cooler", Group: "lines and conditioning",
	Letter: "CL", Typical: []Setting{{"nominal_flow", "60 L/min"}},
	Text: "Resistance of a cooler to the oil that passes it, with a bypass check valve where one is given.",
	Ports: []Port{
		{Name: "A", Type: Oil, Text: "hot side; the bypass passes oil from here"},
		{Name: "B", Type: Oil, Text: "cooled side"},
	},
	Params: []Param{
		{Key: "nominal_flow", Title: "Nominal flow", Symbol: "qN", Dim: units.Flow, Need: true, Above: true, Max: 10, Text: "at the nominal drop"},
		{Key: "nominal_drop", Title: "Nominal drop", Symbol: "ΔpN", Dim: units.Pressure, Default: "1 bar", Origin: Assumed, Source: "common practice 0.5 to 2 bar with warm oil", Max: 50e5, Text: "at the nominal flow, bypass closed"},
		{Key: "linear_share", Title: "Laminar share", Symbol: "kl", Dim: units.Ratio, Default: "0.3", Origin: Assumed, Source: "core laminar, headers turbulent; common practice", Max: 1, Text: "part of the nominal drop that grows with flow, the rest with its square"},
		{Key: "bypass", Title: "Bypass opens at", Symbol: "pb", Dim: units.Pressure, Above: true, Max: 50e5, Text: "without it there is no bypass"},
	},
	Losses:    []LossKind{{"cooler", ToOil, "P = Δp·q, core and bypass together"}},
	Equations: []Equation{{"Δp = ΔpN·(kl·q/qN + (1 − kl)·q·|q|/qN²), at most pb with a bypass", "core and header losses, common form; the bypass opens fully within a hundredth of the core's slope"}},
	Symbol: func(b *Block) string {
		if _, ok := b.Values["bypass"]; ok {
			return "cooler_bypass"
		}
		return "cooler"
	},
	build: func(k *compiler, b *Block) model { return k.strainer(b, "cooler") },
}
