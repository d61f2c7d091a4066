package circuit

import (
	"math"
	"regexp"
	"strings"
	"testing"
)

// sqrt keeps formulas of tests readable.
func sqrt(x float64) float64 { return math.Sqrt(x) }

const regenerative = rail + `
V1 valve; follows: ram; nominal_flow: 20 L/min; nominal_drop: 5 bar; extend: regenerative
- P1.P RV1.P V1.P
- V1.A C1.A
- V1.B C1.B
- V1.T TK.T
`

// Hand calculation: A and B at the supply ps behind equal edges, k = ΔpN/qN²:
// F = (ps − k·(A·v)²)·A − (ps + k·(B·v)²)·B, v = √((ps·(A − B) − F)/(k·(A³ + B³))).
// The supply gives only (A − B)·v.
func TestRegenerativePosition(t *testing.T) {
	k := 5e5 / (20 * lpm) / (20 * lpm)
	for _, F := range []float64{0, 10e3, 30e3} {
		r := steady(t, regenerative, ramAxis, pushing(F, 1))
		v := sqrt((160e5*(boreArea-rodArea) - F) / (k * (math.Pow(boreArea, 3) + math.Pow(rodArea, 3))))
		near(t, "speed", r.last(t, "C1.v"), v, 1e-4)
		near(t, "flow into P", r.last(t, "V1.P.q"), (boreArea-rodArea)*v, 1e-4)
		near(t, "flow to T", r.last(t, "V1.T.q"), 0, 0)
	}
	// the other position is as ever
	r, n := steady(t, regenerative, ramAxis, pushing(5e3, -1)), steady(t, replaced(t, regenerative, "; extend: regenerative", ""), ramAxis, pushing(5e3, -1))
	near(t, "speed back", r.last(t, "C1.v"), n.last(t, "C1.v"), 1e-12)
}

func TestRegenerativeInRandomCircuits(t *testing.T) {
	row := regexp.MustCompile(`(?m)^V1 valve;`)
	survive(t, func(text string) string {
		if !strings.Contains(text, "\nC1 cylinder") { // a motor has no area left to push with
			return ""
		}
		return row.ReplaceAllString(text, "V1 valve; extend: regenerative;")
	})
}
