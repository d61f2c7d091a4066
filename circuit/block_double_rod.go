package circuit

import "barlitre/machines/units"

// doubleRodKind is a cylinder with rods on both sides.
var doubleRodKind = &Kind{
	Name: kindDoubleRod, Title: "Cylinder, double-rod", Group: "actuators",
	Letter: "C", Typical: []Setting{{"bore", "80 mm"}, {"rod", "45 mm"}},
	Text: "Cylinder with a rod on each side, of equal or of two diameters. Oil into A extends the rod that drives the load, the one on side B; with equal rods it takes the same flow both ways.",
	Ports: []Port{
		{Name: "A", Type: Oil, Text: "side of the back rod; oil in extends"},
		{Name: "B", Type: Oil, Text: "side of the rod that drives the load; oil in retracts"},
	},
	Params: append([]Param{
		{Key: "axis", Title: "Axis", Type: AxisRef, Need: true, Text: "axis of the duty that it moves; several cylinders on one axis are joined rigidly and share its load"},
		{Key: "hold", Title: "Held by", Type: Choice, Choices: []string{"valve", "pump", "brake"}, Need: true, Text: "what holds the axis at standstill"},
		{Key: "bore", Title: "Bore", Symbol: "d1", Dim: units.Length, Need: true, Above: true, Max: 2, Text: "piston diameter"},
		{Key: "rod", Title: "Rod", Symbol: "d2", Dim: units.Length, Need: true, Max: 2, Text: "diameter of the rod on side B, below the bore"},
		{Key: "back_rod", Title: "Back rod", Symbol: "d3", Dim: units.Length, Max: 2, Text: "diameter of the rod on side A, where it differs"},
	}, strokeParams("share of |pA − pB| times the area on side B that is lost in the seals", pistonLeakage)...),
	Losses: pistonLosses,
	Equations: []Equation{
		{"pA·A − pB·B = F + m·a + σ·(Fc + kp·|pA − pB|·B) + b·v + N, A = π/4·(d1² − d3²), B = π/4·(d1² − d2²)", "force balance of the piston; Coulomb friction, e.g. Merritt, Hydraulic Control Systems, 1967"},
		{"qA = A·v + kl·(pA − pB), qB = −B·v − kl·(pA − pB)", "continuity; laminar leakage"},
		endEquation,
	},
	Rating: "rating",
	Symbol: func(*Block) string { return "cyl_double_rod" },
	check: func(k *Kind, b *Block, bad func(Level, string, string, ...any)) {
		checkRod(k, b, "rod", bad)
		checkRod(k, b, "back_rod", bad)
		checkStroke(k, b, bad)
	},
	build: buildPiston,
}
