package circuit

import "barlitre/machines/units"

// cylinderKind is a differential cylinder.
var cylinderKind = &Kind{
	Name: kindCylinder, Title: "Cylinder, differential", Group: "actuators",
	Letter: "C", Typical: []Setting{{"bore", "80 mm"}, {"rod", "56 mm"}},
	Text: "Single-rod cylinder. Port A is the bore side and extends, port B the rod side. `hold` says how the axis stands still: by closed valves, by the pump, or by a brake.",
	Ports: []Port{
		{Name: "A", Type: Oil, Text: "bore side; oil in extends"},
		{Name: "B", Type: Oil, Text: "rod side; oil in retracts"},
	},
	Params: append([]Param{
		{Key: "axis", Title: "Axis", Type: AxisRef, Need: true, Text: "axis of the duty that it moves; several cylinders on one axis are joined rigidly and share its load"},
		{Key: "hold", Title: "Held by", Type: Choice, Choices: []string{"valve", "pump", "brake"}, Need: true, Text: "what holds the axis at standstill"},
		{Key: "bore", Title: "Bore", Symbol: "d1", Dim: units.Length, Need: true, Above: true, Max: 2, Text: "piston diameter"},
		{Key: "rod", Title: "Rod", Symbol: "d2", Dim: units.Length, Need: true, Max: 2, Text: "rod diameter, below the bore"},
	}, strokeParams("share of |pA − pB| times the rod-side area that is lost in the seals", pistonLeakage)...),
	Losses: pistonLosses,
	Equations: []Equation{
		{"pA·A − pB·B = F + m·a + σ·(Fc + kp·|pA − pB|·B) + b·v + N, σ = sign v, −1..1 at rest", "force balance of the piston; Coulomb friction, e.g. Merritt, Hydraulic Control Systems, 1967"},
		{"qA = A·v + kl·(pA − pB), qB = −B·v − kl·(pA − pB)", "continuity; laminar leakage"},
		endEquation,
	},
	Rating: "rating",
	Symbol: func(*Block) string { return "cyl_diff" },
	check: func(k *Kind, b *Block, bad func(Level, string, string, ...any)) {
		checkRod(k, b, "rod", bad)
		checkStroke(k, b, bad)
	},
	build: buildPiston,
}
