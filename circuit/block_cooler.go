package circuit

// coolerKind is the oil side of a cooler.
var coolerKind = &Kind{
	Name: kindCooler, Title: "Cooler", Group: "lines and conditioning",
	Letter: "CL", Typical: []Setting{{"nominal_flow", "60 L/min"}},
	Text:  "Resistance of a cooler to the oil that passes it, with a bypass check valve where one is given.",
	Ports: strainerPorts("hot side; the bypass passes oil from here", "cooled side"),
	Params: strainerParams(
		Param{Default: "1 bar", Source: "common practice 0.5 to 2 bar with warm oil", Text: "at the nominal flow, bypass closed"},
		Param{Default: "0.3", Source: "core laminar, headers turbulent; common practice"}),
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
