package circuit

import (
	"math"
	"regexp"
	"strings"
	"testing"

	"barlitre/circuit/duty"
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

const independent = rail + `
V1 valve; follows: ram; nominal_flow: 60 L/min; nominal_drop: 5 bar; meter_out: separate; in_pressure: 4 bar
- P1.P RV1.P V1.P
- V1.A C1.A
- V1.B C1.B
- V1.T TK.T
`

// Hand calculation of an edge to tank of its own, supply ps = 160 bar, per-edge law
// Δp = ΔpN·(q/(x·qN))². Driven by its load the port fed stands at 4 bar and the edge to
// tank takes the rest: retracting under F pA = (F + pB·B)/A, w = A·v/(qN·√(pA/ΔpN)), u = B·v/(qN·√((ps − pB)/ΔpN)).
// Against its load the edge to tank is wide open: pB = ΔpN·(B·v/qN)², pA = (F + pB·B)/A.
func TestSeparateMeterOut(t *testing.T) {
	const v, qN = 0.1, 60 * lpm
	x := func(q, dp float64) float64 { return q / (qN * sqrt(dp/5e5)) }
	given := func(F, v float64) *duty.Duty {
		return points("given", 0.5, []float64{0, 1}, duty.Track{Of: "ram", What: duty.Load, Values: []float64{F, F}},
			duty.Track{Of: "ram", What: duty.Speed, Values: []float64{v, v}})
	}
	const F = 30e3
	r := steady(t, independent, ramAxis, given(F, -v))
	pA := (F + 4e5*rodArea) / boreArea
	near(t, "lowering: speed", r.last(t, "C1.v"), -v, 1e-9)
	near(t, "lowering: port fed", r.last(t, "C1.B.p"), 4e5, 1e-6)
	near(t, "lowering: load side", r.last(t, "C1.A.p"), pA, 1e-6)
	near(t, "lowering: edge to tank", r.last(t, "V1.w"), x(boreArea*v, pA), 1e-4)
	near(t, "lowering: edge fed", r.last(t, "V1.u"), -x(rodArea*v, 160e5-4e5), 1e-4)

	r = steady(t, independent, ramAxis, given(F, v))
	pB := 5e5 * (rodArea * v / qN) * (rodArea * v / qN)
	pA = (F + pB*rodArea) / boreArea
	near(t, "lifting: edge to tank", r.last(t, "V1.w"), 1, 1e-12)
	near(t, "lifting: return side", r.last(t, "C1.B.p"), pB, 1e-4)
	near(t, "lifting: edge fed", r.last(t, "V1.u"), x(boreArea*v, 160e5-pA), 1e-4)
}

func TestSeparateMeterOutIsRefused(t *testing.T) {
	for change, want := range map[string]string{"meter_out: separate; extend: regenerative": "has no edge to tank", "meter_out: coupled": "only counts with a separate edge to tank"} {
		_, found := Compile(build(t, replaced(t, independent, "meter_out: separate", change)), ramAxis, pushing(1e3, 1))
		if !finds(found, want) {
			t.Errorf("%s: %v", change, found)
		}
	}
	_, found := Compile(build(t, replaced(t, independent, "follows: ram;", "directs: ram;")), ramAxis, pushing(1e3, 1))
	if !finds(found, "for a valve that follows an axis") {
		t.Errorf("directs: %v", found)
	}
}

func TestSeparateMeterOutInRandomCircuits(t *testing.T) {
	row := regexp.MustCompile(`(?m)^V1 valve; follows`)
	survive(t, func(text string) string {
		if !row.MatchString(text) {
			return ""
		}
		return row.ReplaceAllString(text, "V1 valve; meter_out: separate; follows")
	})
}

// finds reports whether a finding has the words.
func finds(found []Finding, words string) bool {
	for _, f := range found {
		if strings.Contains(f.Text, words) {
			return true
		}
	}
	return false
}
