package figures

import (
	"math"
	"math/rand/v2"
)

// Invented data used by several tests.

func demoSteps() LossSteps {
	return LossSteps{Unit: "kJ", Circuits: []StepsCircuit{
		{Title: "As found", Subtitle: "251.5 kJ from the mains in one 12 s cycle", Supply: 251.5, WorkPositive: 5.1, WorkNegative: 2.2,
			Steps: []Step{{"motor M1", 17.1, false}, {"pump P1 slip and friction", 23.5, true}, {"relief RV1", 162.2, true},
				{"valve V1, metering", 44.8, true}, {"filter F1 and ram C1 friction", 1.0, true}}},
		{Title: "Proposal 1", Subtitle: "14.1 kJ from the mains", Supply: 14.1, Returned: 1.4, WorkPositive: 5.1, WorkNegative: 2.2,
			Stored: 0.3,
			Steps:  []Step{{"motor and converter", 5.2, false}, {"pump P1 slip and friction", 3.5, true}, {"ram C1 friction", 0.8, true}}},
	}}
}

func demoPlot() Plot {
	n := 4000
	t, v, f, p1, p2 := make([]float64, n), make([]float64, n), make([]float64, n), make([]float64, n), make([]float64, n)
	r := rand.New(rand.NewPCG(1, 2))
	for i := range n {
		x := 12 * float64(i) / float64(n-1)
		t[i] = x
		v[i] = 0.15*math.Min(1, 4*math.Max(0, 2-x)) - 0.2*math.Exp(-math.Pow((x-8)/0.8, 4))
		f[i] = 5e3 + 95e3/(1+math.Exp(-3*(x-4)))*1/(1+math.Exp(6*(x-7)))
		p1[i] = 160 + 4*r.NormFloat64()
		p2[i] = 20 + f[i]/1e3 + r.NormFloat64()
	}
	return Plot{Axis: "time", AxisUnit: "s",
		Lanes: []Lane{
			{Title: "Ram speed", Unit: "m/s", Series: []Series{{Name: "ram", X: t, Y: v, Role: RoleGain}}},
			{Title: "Ram load", Unit: "N", Series: []Series{{Name: "load", X: t, Y: f, Role: RoleInk}}},
			{Title: "Pressure", Unit: "bar", Zero: true, Series: []Series{{Name: "as found, pump", X: t, Y: p1, Role: RoleInk}, {Name: "proposal, pump", X: t, Y: p2, Role: RoleGain}}},
			{Title: "Heat", Unit: "kW", Series: []Series{{Name: "relief RV1", X: t, Y: p1, Role: RoleHeat, Fill: true}}},
		},
		Phases: []Phase{{"approach", 0, 2.4}, {"press", 2.4, 5.9}, {"hold", 5.9, 6.3}, {"return", 6.3, 9.5}, {"load and unload", 9.5, 10}, {"wait", 10, 12}},
	}
}

func demoBars() Bars {
	return Bars{Groups: []BarGroup{
		{Title: "Energy a year", Unit: "MWh", Bars: []Bar{{"As found", 62.9, RoleBar}, {"Proposal 1", 2.9, RoleGain}, {"Proposal 2, larger pump", 4.1, RoleGain}}},
		{Title: "Heat to the oil", Unit: "kW", Bars: []Bar{{"As found", 19.3, RoleHeat}, {"Proposal 1", 0.36, RoleGain}}},
		{Title: "Net present value over 10 years", Unit: "€", Bars: []Bar{{"Low", -4200, RoleDanger}, {"Likely", 31400, RoleGain}, {"High", 52300, RoleGain}}},
	}}
}
