package circuit

import (
	"math"
	"testing"
)

const meteredIn = rail + `
TC1 throttle_check; nominal_flow: 20 L/min; nominal_drop: 5 bar
V1 valve; follows: ram; nominal_flow: 60000 L/min; nominal_drop: 5 bar
- P1.P RV1.P V1.P
- V1.A TC1.A
- TC1.B C1.A
- V1.B C1.B
- V1.T TK.T
`

// Meter-in, A. Esposito, Fluid Power with Applications, example 9.4: Cv = 1.0, relief
// valve 1400 psi, piston 3.14 in², load 4000 lb, specific gravity 0.9: 14.5 in/s
// (14.51 in/s with unrounded intermediate values). Cv: 1 gpm of specific gravity 0.9
// at 0.9 psi.
func TestThrottleCheckMetersIn(t *testing.T) {
	const psi, gpm, inch, lb = 6894.757, 6.30902e-5, 0.0254, 4.448222
	text := meteredIn
	for _, s := range [][2]string{{"crack: 160 bar", "crack: 96.52660 bar"}, {"bore: 80 mm; rod: 56 mm", "bore: 50.787 mm; rod: 5 mm"},
		{"nominal_flow: 20 L/min; nominal_drop: 5 bar", "nominal_flow: 3.785412 L/min; nominal_drop: 0.06205281 bar"}} {
		text = replaced(t, text, s[0], s[1])
	}
	r := steady(t, text, ramAxis, pushing(4000*lb, 1))
	near(t, "speed, in/s", r.last(t, "C1.v")/inch, 14.51, 0.002)
	near(t, "drop, psi", (r.last(t, "TC1.A.p")-r.last(t, "TC1.B.p"))/psi, 126.1, 0.002)
	near(t, "flow, gpm", r.last(t, "TC1.A.q")/gpm, 11.84, 0.002)
}

func TestThrottleCheckFreeWay(t *testing.T) {
	r := steady(t, replaced(t, meteredIn, "nominal_flow: 60000 L/min", "nominal_flow: 60 L/min"), ramAxis, pushing(5e3, -0.5))
	dp := r.last(t, "TC1.B.p") - r.last(t, "TC1.A.p")
	near(t, "flow back", r.last(t, "TC1.B.q"), 20*lpm*math.Sqrt(dp/5e5)+60*lpm*math.Sqrt((dp-0.5e5)/1e5), 1e-4)
}

func TestThrottleCheckInRandomCircuits(t *testing.T) {
	survive(t, toBore("throttle_check; nominal_flow: 20 L/min", "A", "B"))
	survive(t, toBore("throttle_check; nominal_flow: 20 L/min", "B", "A"))
}
