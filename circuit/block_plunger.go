package circuit

import "barlitre/machines/units"

// plungerKind is a single-acting plunger cylinder.
var plungerKind = &Kind{
	Name: kindPlunger, Title: "Cylinder, plunger", Group: "actuators",
	Letter: "C", Typical: []Setting{{"diameter", "80 mm"}},
	Text: "Single-acting cylinder: oil into A extends it, the load drives it back as far as the oil is let out. Without enough load it does not return.",
	Ports: []Port{
		{Name: "A", Type: Oil, Text: "oil in extends"},
	},
	Params: append([]Param{
		{Key: "axis", Title: "Axis", Type: AxisRef, Need: true, Text: "axis of the duty that it moves; several cylinders on one axis are joined rigidly and share its load"},
		{Key: "hold", Title: "Held by", Type: Choice, Choices: []string{"valve", "pump", "brake"}, Need: true, Text: "what holds the axis at standstill"},
		{Key: "diameter", Title: "Diameter", Symbol: "d", Dim: units.Length, Need: true, Above: true, Max: 2, Text: "of the plunger"},
	}, strokeParams("share of pA times the area that is lost in the seals")...),
	Losses: []LossKind{
		{"friction", ToOil, "P = (σ·(Fc + kp·|pA|·A) + b·v)·v"},
		endLoss,
	},
	Equations: []Equation{
		{"pA·A = F + m·a + σ·(Fc + kp·|pA|·A) + b·v + N, σ = sign v, −1..1 at rest; A = π/4·d²", "force balance of the plunger; Coulomb friction, e.g. Merritt, Hydraulic Control Systems, 1967"},
		{"qA = A·v", "continuity"},
		endEquation,
	},
	Rating: "rating",
	Symbol: func(*Block) string { return "cyl_plunger" },
	check:  checkStroke,
	build:  buildPiston,
}
