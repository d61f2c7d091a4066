package circuit

import (
	"math"
	"testing"
)

const reduced = rail + `
RD1 reducing; set: 80 bar; nominal_drop: 2 bar
V1 valve; follows: ram; nominal_flow: 10 L/min; nominal_drop: 5 bar
- P1.P RV1.P RD1.P
- RD1.A V1.P
- V1.A C1.A
- V1.B C1.B
- V1.T TK.T
- RD1.T TK.T
`

// Hand calculation: with the outlet at ps and both edges of the valve open,
// F = (ps − k·(A·v)²)·A − k·(B·v)²·B with k = ΔpN/qN², so v = √((ps·A − F)/(k·(A³ + B³))).
func TestReducingHoldsItsOutlet(t *testing.T) {
	k := 5e5 / (10 * lpm) / (10 * lpm)
	for _, F := range []float64{5e3, 20e3, 39e3} {
		r := steady(t, reduced, ramAxis, pushing(F, 1))
		v := math.Sqrt((80e5*boreArea - F) / (k * (math.Pow(boreArea, 3) + math.Pow(rodArea, 3))))
		near(t, "speed", r.last(t, "C1.v"), v, 1e-4)
		near(t, "outlet", r.last(t, "RD1.A.p"), 80e5, 1e-9)
		near(t, "inlet", r.last(t, "RD1.P.p"), 160e5, 1e-9)
	}
}

// Below its setting it is wide open: two restrictions in series.
func TestReducingWideOpen(t *testing.T) {
	k := 5e5 / (10 * lpm) / (10 * lpm)
	const low = 70e5 // the relief valve is below the setting now
	r := steady(t, replaced(t, reduced, "crack: 160 bar", "crack: 70 bar"), ramAxis, pushing(10e3, 1))
	q := r.last(t, "RD1.P.q")
	v := math.Sqrt((low*boreArea - 10e3) / ((k+2e5/(60*lpm)/(60*lpm))*math.Pow(boreArea, 3) + k*math.Pow(rodArea, 3)))
	near(t, "speed wide open", q/boreArea, v, 1e-4)
}

// A load that pushes back meets a closed valve, or oil that is relieved to T at the
// setting, its step and its override: found by bisection on the force balance.
func TestReducingPushedBack(t *testing.T) {
	const F = 44e3 // 87.5 bar
	r := steady(t, replaced(t, reduced, "rod: 56 mm", "rod: 56 mm; leakage: 0.05 L/min per 100 bar"), ramAxis, pushing(F, 1))
	near(t, "pressure under the load", r.last(t, "C1.A.p"), F/boreArea, 1e-4)
	if q := r.last(t, "RD1.P.q"); math.Abs(q) > 1e-12 {
		t.Errorf("%g m³/s pass backwards", q)
	}
	r = steady(t, replaced(t, reduced, "set: 80 bar", "relieving: yes; set: 80 bar"), ramAxis, pushing(F, 1))
	k := 5e5 / (10 * lpm) / (10 * lpm)
	v := zero(0, 1, func(v float64) float64 {
		q := boreArea * v
		pA := 85e5 + 10e5/(100*lpm)*q + k*q*q
		pB := -k * rodArea * v * rodArea * v
		return pA*boreArea - pB*rodArea - F
	})
	near(t, "speed back", -r.last(t, "C1.v"), v, 1e-3)
	near(t, "flow to T", -r.last(t, "RD1.T.q"), boreArea*v, 1e-3)
}

// With a drain under pressure the setting rises by it.
func TestReducingDrain(t *testing.T) {
	text := rail + `
RD1 reducing; set: 60 bar
LP1 pressure_source; pressure: 10 bar
V1 valve; follows: ram; nominal_flow: 10 L/min
- LP1.P RD1.T
- P1.P RV1.P RD1.P
- RD1.A V1.P
- V1.A C1.A
- V1.B C1.B
- V1.T TK.T
`
	near(t, "outlet", steady(t, text, ramAxis, pushing(5e3, 1)).last(t, "RD1.A.p"), 70e5, 1e-9)
}

func TestReducingReturnsThroughItsCheck(t *testing.T) {
	text := replaced(t, reduced, "RD1 reducing;", "RD1 reducing; reverse: free;")
	text = replaced(t, text, "- P1.P RV1.P RD1.P\n- RD1.A V1.P\n- V1.A C1.A", "- P1.P RV1.P V1.P\n- V1.A RD1.P\n- RD1.A C1.A")
	r := steady(t, text, ramAxis, pushing(5e3, -0.5))
	q := r.last(t, "RD1.P.q") / (60 * lpm)
	if q >= -0.1 {
		t.Fatalf("flow %g", q)
	}
	near(t, "drop back", r.last(t, "RD1.A.p")-r.last(t, "RD1.P.p"), 0.5e5+1e5*q*q, 1e-4)
}

func TestReducingInRandomCircuits(t *testing.T) {
	for _, relieving := range []string{"no", "yes"} {
		survive(t, toBore("reducing; set: 60 bar; reverse: free; relieving: "+relieving, "P", "A"))
		survive(t, onRail("reducing; set: 60 bar; relieving: "+relieving, "P", "A"))
	}
}
