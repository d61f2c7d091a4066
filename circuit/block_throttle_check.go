package circuit

import (
	"barlitre/machines/units"
)

// throttleCheckKind is a throttle with a check valve beside it.
var throttleCheckKind = &Kind{
	Name: kindThrottleCheck, Title: "Throttle-check valve", Group: "valves",
	Letter: "TC", Typical: []Setting{{"nominal_flow", "20 L/min"}},
	Text: "Throttles from A to B; from B to A a check valve beside the throttle passes oil freely.",
	Ports: []Port{
		{Name: "A", Type: Oil, Text: "inlet of the throttled way"},
		{Name: "B", Type: Oil, Text: "inlet of the free way"},
	},
	Params: []Param{
		{Key: "nominal_flow", Title: "Nominal flow", Symbol: "qN", Dim: units.Flow, Need: true, Above: true, Max: 10, Text: "of the throttle as it is set, at the nominal drop"},
		{Key: "nominal_drop", Title: "Nominal drop", Symbol: "ΔpN", Dim: units.Pressure, Default: "5 bar", Origin: Assumed, Source: "usual point of data sheets; state it", Above: true, Max: 500e5, Text: "of the throttle at its nominal flow"},
		{Key: "check_opens", Title: "Check opens at", Symbol: "po", Dim: units.Pressure, Default: "0.5 bar", Origin: Assumed, Source: "common practice", Max: 100e5, Text: "pressure drop at which the check valve begins to open"},
		{Key: "check_flow", Title: "Nominal flow of the check", Symbol: "q2", Dim: units.Flow, Default: "60 L/min", Origin: Assumed, Source: "state the size of the valve", Above: true, Max: 10, Text: "at its nominal drop beyond the opening pressure"},
		{Key: "check_drop", Title: "Nominal drop of the check", Symbol: "Δp2", Dim: units.Pressure, Default: "1 bar", Origin: Assumed, Source: "common practice", Max: 100e5, Text: "at its nominal flow; 0 bar makes it lossless"},
	},
	Losses: []LossKind{{"metering", ToOil, "P = Δp·q of the throttle"}, {"check valve", ToOil, "P = Δp·q of the check valve"}},
	Equations: []Equation{
		{"throttle, both ways: q = qN·√(Δp/ΔpN)", "orifice law from a nominal point"},
		{"check valve, B to A: q = q2·√((Δp − po)/Δp2) above po", "orifice law beyond the opening pressure"},
	},
	Symbol: func(*Block) string { return "throttle_check" },
	build: func(k *compiler, b *Block) model {
		m := &throttleCheckModel{checkedThrottle: k.checkedThrottle(b, "metering"), qN: k.param(b, "nominal_flow"), dN: k.param(b, "nominal_drop")}
		m.back.q = k.unknown(otherRow, b.ID+" check valve")
		return m
	},
}

type throttleCheckModel struct {
	checkedThrottle
	qN, dN int
}

func (m *throttleCheckModel) clone() model { c := *m; return &c }

func (m *throttleCheckModel) bind(b *binding) {
	m.t = throatOf(b.p[m.qN]/b.scales.q, b.p[m.dN]/b.scales.p)
	m.back.bind(b)
}
