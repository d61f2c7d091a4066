package circuit

import "testing"

const priority = rail + `
FC1 flow_control_3; set_flow: 30 L/min; drop: 8 bar; nominal_flow: 60 L/min; nominal_drop: 2 bar
V1 valve; follows: ram; nominal_flow: 60 L/min; nominal_drop: 5 bar
- P1.P RV1.P FC1.P
- FC1.A V1.P
- V1.A C1.A
- V1.B C1.B
- V1.T TK.T
`

// The set flow to A, the rest to T, the inlet at the load plus the drop held.
func TestFlowControl3BypassesAtLoadPressure(t *testing.T) {
	for _, F := range []float64{5e3, 20e3, 60e3} {
		r := steady(t, priority+"- FC1.T TK.T\n", ramAxis, pushing(F, 1))
		near(t, "speed", r.last(t, "C1.v"), 30*lpm/boreArea, 1e-7)
		near(t, "rest", -r.last(t, "FC1.T.q"), 45e-6*1480/60-30*lpm, 1e-6)
		near(t, "drop", r.last(t, "FC1.P.p")-r.last(t, "FC1.A.p"), 8e5, 1e-6)
		// load pressure by hand: F/A + the drops of both edges of the valve
		q := 30 * lpm / (60 * lpm)
		back := 5e5 * q * q * rodArea * rodArea / boreArea / boreArea * rodArea / boreArea
		near(t, "inlet", r.last(t, "FC1.P.p"), F/boreArea+back+5e5*q*q+8e5, 1e-4)
	}
}

// A higher pressure at T raises the inlet; A keeps its flow.
func TestFlowControl3KeepsPriority(t *testing.T) {
	r := steady(t, priority+"RV2 relief; crack: 120 bar; override: 0 bar per 100 L/min\n- FC1.T RV2.P\n- RV2.T TK.T\n", ramAxis, pushing(20e3, 1))
	q := (45e-6*1480/60 - 30*lpm) / (60 * lpm)
	near(t, "speed", r.last(t, "C1.v"), 30*lpm/boreArea, 1e-7)
	near(t, "inlet", r.last(t, "FC1.P.p"), 120e5+2e5*q*q, 1e-5)
}

// A small pump gives all it has to A.
func TestFlowControl3WithTooLittle(t *testing.T) {
	text := replaced(t, priority, "displacement: 45 cm3/rev", "displacement: 12 cm3/rev") + "- FC1.T TK.T\n"
	r := steady(t, text, ramAxis, pushing(20e3, 1))
	q := 12e-6 * 1480 / 60
	near(t, "flow to A", -r.last(t, "FC1.A.q"), q, 1e-6)
	near(t, "drop", r.last(t, "FC1.P.p")-r.last(t, "FC1.A.p"), 8e5*q*q/(30*lpm)/(30*lpm), 1e-4)
}

func TestFlowControl3InRandomCircuits(t *testing.T) {
	change := onRail("flow_control_3; set_flow: 20 L/min", "P", "A")
	survive(t, func(text string) string {
		if text = change(text); text != "" {
			text += "- K1.T TK.T\n"
		}
		return text
	})
}
