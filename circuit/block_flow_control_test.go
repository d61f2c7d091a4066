package circuit

import (
	"math"
	"testing"
)

const controlled = rail + `
FC1 flow_control; set_flow: 30 L/min; least_drop: 8 bar
V1 valve; follows: ram; nominal_flow: 60 L/min; nominal_drop: 5 bar
- P1.P RV1.P V1.P
- V1.A FC1.A
- FC1.B C1.A
- V1.B C1.B
- V1.T TK.T
`

// The set flow whatever the load; below the least drop two orifices in series,
// (160 bar − (k1 + k2)·(A·v)²)·A − k1·(B·v)²·B = F.
func TestFlowControlDoesNotFeelTheLoad(t *testing.T) {
	for _, F := range []float64{0, 20e3, 50e3, 70e3} {
		near(t, "speed", steady(t, controlled, ramAxis, pushing(F, 1)).last(t, "C1.v"), 30*lpm/boreArea, 1e-9)
	}
	const F = 78e3
	k1, k2 := 5e5/(60*lpm)/(60*lpm), 8e5/(30*lpm)/(30*lpm)
	v := math.Sqrt((160e5*boreArea - F) / ((k1+k2)*math.Pow(boreArea, 3) + k1*math.Pow(rodArea, 3)))
	if v >= 30*lpm/boreArea {
		t.Fatal("the case is not below the least drop")
	}
	near(t, "speed below the least drop", steady(t, controlled, ramAxis, pushing(F, 1)).last(t, "C1.v"), v, 1e-4)
}

// Back it is an orifice; with a check valve that takes most of the flow beside it.
func TestFlowControlBackwards(t *testing.T) {
	r := steady(t, controlled, ramAxis, pushing(5e3, -0.5))
	q := r.last(t, "FC1.B.q") / (30 * lpm)
	near(t, "drop back", r.last(t, "FC1.B.p")-r.last(t, "FC1.A.p"), 8e5*q*q, 1e-4)
	r = steady(t, replaced(t, controlled, "least_drop: 8 bar", "least_drop: 8 bar; reverse: free"), ramAxis, pushing(5e3, -0.5))
	dp := r.last(t, "FC1.B.p") - r.last(t, "FC1.A.p")
	near(t, "flow back", r.last(t, "FC1.B.q"), 30*lpm*math.Sqrt(dp/8e5)+60*lpm*math.Sqrt((dp-0.5e5)/1e5), 1e-4)
}

func TestFlowControlInRandomCircuits(t *testing.T) {
	survive(t, toBore("flow_control; set_flow: 20 L/min", "A", "B"))
	survive(t, toBore("flow_control; set_flow: 20 L/min; reverse: free", "A", "B"))
	survive(t, toBore("flow_control; set_flow: 20 L/min; reverse: free", "B", "A"))
	survive(t, onRail("flow_control; set_flow: 20 L/min", "A", "B"))
}
