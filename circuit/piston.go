package circuit

import (
	"math"

	"barlitre/machines/units"
)

// What all cylinders share: a piston between two pressures, with friction, a moved
// mass and the ends of its stroke.

// movesAlong reports whether blocks of a kind move an axis along a line.
func movesAlong(kind string) bool {
	return kind == kindCylinder || kind == kindDoubleRod || kind == kindPlunger
}

// pistonLeakage is the leakage of cylinders with a piston.
var pistonLeakage = Param{Key: "leakage", Title: "Piston leakage", Symbol: "kl", Dim: units.FlowConductance, Default: "0 L/min per 100 bar", Origin: Assumed, Source: "new seals", Max: 1e-8, Text: "laminar flow past the piston"}

// strokeParams are the parameters of every cylinder, after those of its size.
func strokeParams(sealShare string, more ...Param) []Param {
	ps := []Param{
		{Key: "stroke", Title: "Stroke", Symbol: "s", Dim: units.Length, Above: true, Max: 30, Text: "from end to end; alone it only checks the way of the duty, with a start the piston stops at its ends"},
		{Key: "start", Title: "Position at the start", Symbol: "s0", Dim: units.Length, Max: 30, Text: "where the piston stands when the duty begins, 0 drawn in"},
		{Key: "friction", Title: "Dry friction", Symbol: "Fc", Dim: units.Force, Default: "0 N", Origin: Assumed, Source: "none counted unless given", Max: 1e7, Text: "force that resists motion, of constant size"},
		{Key: "pressure_friction", Title: "Friction by pressure", Symbol: "kp", Dim: units.Ratio, Default: "0", Origin: Assumed, Source: "none counted unless given", Max: 0.5, Text: sealShare},
		{Key: "viscous", Title: "Viscous friction", Symbol: "b", Dim: units.ViscousFriction, Default: "0 N s/m", Origin: Assumed, Source: "none counted unless given", Max: 1e7, Text: "force by speed"},
	}
	ps = append(ps, more...)
	return append(ps,
		Param{Key: "mass", Title: "Moved mass", Symbol: "m", Dim: units.Mass, Default: "0 kg", Origin: Assumed, Source: "the load track holds all of it unless given", Max: 1e7, Text: "its inertia force is added to the load"},
		ratedPressure)
}

var pistonLosses = []LossKind{
	{"friction", ToOil, "P = (σ·(Fc + kp·|pA − pB|·B) + b·v)·v"},
	{"leakage", ToOil, "P = kl·(pA − pB)²"},
	endLoss,
}

// endLoss is what the end of the stroke takes from a piston that it brings to rest:
// the way left is done within the last time step, against the force of the end.
var endLoss = LossKind{"end of stroke", ToOil, "P = N·v, N the force of the end while the piston comes to rest on it"}

var endEquation = Equation{"0 <= x <= s with x = s0 + ∫v dt; N = 0 between the ends, N >= 0 at s, N <= 0 at 0", "contact with the ends, complementarity"}

// checkRod refuses a rod that is not below the bore.
func checkRod(k *Kind, b *Block, key string, bad func(Level, string, string, ...any)) {
	bore, _, ok1 := k.Value(b, "bore")
	rod, _, ok2 := k.Value(b, key)
	if ok1 && ok2 && rod.SI >= bore.SI {
		bad(Stops, key, "rod %s is not below the bore %s", mm(rod.SI), mm(bore.SI))
	}
}

// checkStroke refuses a start outside the stroke.
func checkStroke(k *Kind, b *Block, bad func(Level, string, string, ...any)) {
	stroke, _, ok1 := k.Value(b, "stroke")
	start, _, ok2 := k.Value(b, "start")
	switch {
	case ok2 && !ok1:
		bad(Stops, "stroke", "its start is given but not its stroke; give the stroke too")
	case ok2 && start.SI > stroke.SI:
		bad(Stops, "start", "it starts at %s, beyond its stroke of %s", mm(start.SI), mm(stroke.SI))
	}
}

func mm(x float64) string { return units.Format(x, mustUnit("mm", units.Length), 4) }

func mustUnit(symbol string, d units.Dim) units.Unit {
	u, ok := units.Find(symbol, d)
	if !ok {
		panic("circuit: no unit " + symbol)
	}
	return u
}

// pistonSize names the parameters of the diameters: bore, rod on side B, rod on
// side A (−1 = none). A plunger is a rod as thick as its bore.
type pistonSize struct{ bore, rod, back int }

func (k *compiler) pistonSize(b *Block) pistonSize {
	if b.Kind == kindPlunger {
		d := k.param(b, "diameter")
		return pistonSize{d, d, -1}
	}
	s := pistonSize{k.param(b, "bore"), k.param(b, "rod"), -1}
	if b.Kind == kindDoubleRod {
		if s.back = k.param(b, "back_rod"); s.back < 0 {
			s.back = s.rod
		}
	}
	return s
}

// areas returns the areas on side A and side B [m²].
func (s pistonSize) areas(p []float64) (A, B float64) {
	A = p[s.bore] * p[s.bore]
	B = A - p[s.rod]*p[s.rod]
	if s.back >= 0 {
		A -= p[s.back] * p[s.back]
	}
	return math.Pi / 4 * A, math.Pi / 4 * B
}
