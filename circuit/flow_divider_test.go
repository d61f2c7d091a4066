package circuit

import (
	"math"
	"testing"
)

// still is a duty without axes: what runs, runs steadily.
var still = points("still", 0.5, []float64{0, 1})

const dividerBench = `
TK tank
M1 electric_motor; rated_power: 22 kW; efficiency: 0.93; speed: 1480 rpm
P1 pump; displacement: 40 cm3/rev; case_share: 0; slip: 0
RV1 relief; crack: 250 bar
RVA relief; crack: 100 bar; override: 0 bar per 100 L/min
RVB relief; crack: 20 bar; override: 0 bar per 100 L/min
- M1.shaft P1.shaft
- P1.S TK.T
- P1.P RV1.P FD1.P
- FD1.A RVA.P
- FD1.B RVB.P
- RVA.T RVB.T RV1.T TK.T
`

const lossless = "; slip: 0; friction: 0; viscous: 0; drag: 0 N m"

// Without losses the flows stand as the sections and the power is the same: with the
// share r of A, pP = r·pA + (1 − r)·pB. Of 59.2 L/min, against 100 and 20 bar (by hand).
func TestFlowDividerLossless(t *testing.T) {
	for _, r := range []float64{0.5, 0.25, 0.9} {
		ratio := map[float64]string{0.5: "", 0.25: "; ratio: 0.25", 0.9: "; ratio: 0.9"}[r]
		o := observe(t, dividerBench+"FD1 flow_divider; displacement: 20 cm3/rev"+ratio+lossless, nil, still)
		within(t, "pressure before", o.sigAt(t, "FD1.P.p", 1), (r*100+(1-r)*20)*1e5, 1e-7)
		within(t, "flow to A", -o.sigAt(t, "FD1.A.q", 1), r*59.2e-3/60, 1e-7)
		within(t, "flow to B", -o.sigAt(t, "FD1.B.q", 1), (1-r)*59.2e-3/60, 1e-7)
		within(t, "speed", o.sigAt(t, "FD1.w", 1), 59.2e-3/60/(20e-6/(2*math.Pi)), 1e-7)
	}
}

// With losses: share 0.4, Cs 1.6e-8, Cf 0.05, Cv 1.8e5, Tc 1 N m, 0.04 Pa s; flow and
// torque balance are two linear equations in speed and pressure, solved by hand.
func TestFlowDividerLosses(t *testing.T) {
	o := observe(t, dividerBench+"FD1 flow_divider; displacement: 20 cm3/rev; ratio: 0.4", nil, still)
	within(t, "speed", o.sigAt(t, "FD1.w", 1), 2949.46682*2*math.Pi/60, 1e-6)
	within(t, "pressure before", o.sigAt(t, "FD1.P.p", 1), 79.5758066e5, 1e-6)
	within(t, "flow to A", -o.sigAt(t, "FD1.A.q", 1), 23.5333228e-3/60, 1e-6)
	within(t, "flow to B", -o.sigAt(t, "FD1.B.q", 1), 35.6666772e-3/60, 1e-6)
	within(t, "slip", o.ledger.energy(Loss, "FD1", "slip"), 29.2389926, 1e-6)
	within(t, "friction", o.ledger.energy(Loss, "FD1", "friction"), 2711.13089, 1e-6)
}

// A side that leads to the tank doubles the pressure of the other, as equal areas of
// an intensifier do, until a relief valve ends it.
func TestFlowDividerIntensifies(t *testing.T) {
	text := `
TK tank
M1 electric_motor; rated_power: 22 kW; efficiency: 0.93; speed: 1480 rpm
P1 pump; displacement: 40 cm3/rev; case_share: 0; slip: 0
RV1 relief; crack: 250 bar
RVA relief; crack: 180 bar; override: 0 bar per 100 L/min
FD1 flow_divider; displacement: 20 cm3/rev` + lossless + `
- M1.shaft P1.shaft
- P1.S TK.T
- P1.P RV1.P FD1.P
- FD1.A RVA.P
- FD1.B RVA.T RV1.T TK.T
`
	o := observe(t, text, nil, still)
	within(t, "pressure before", o.sigAt(t, "FD1.P.p", 1), 90e5, 1e-7)
	within(t, "pressure at A", o.sigAt(t, "FD1.A.p", 1), 180e5, 1e-7)
}

// It joins flows too: what comes in by A and B leaves by P, backwards.
func TestFlowDividerJoins(t *testing.T) {
	text := `
TK tank
M1 electric_motor; rated_power: 22 kW; efficiency: 0.93; speed: 1480 rpm
P1 pump; displacement: 20 cm3/rev; case_share: 0; slip: 0
P2 pump; displacement: 20 cm3/rev; case_share: 0; slip: 0
RV1 relief; crack: 250 bar
RV2 relief; crack: 250 bar
RV3 relief; crack: 50 bar; override: 0 bar per 100 L/min
FD1 flow_divider; displacement: 20 cm3/rev` + lossless + `
- M1.shaft P1.shaft P2.shaft
- P1.S P2.S TK.T
- P1.P RV1.P FD1.A
- P2.P RV2.P FD1.B
- FD1.P RV3.P
- RV1.T RV2.T RV3.T TK.T
`
	o := observe(t, text, nil, still)
	within(t, "speed", o.sigAt(t, "FD1.w", 1), -1480*2*2*math.Pi/60, 1e-7)
	within(t, "pressure after", o.sigAt(t, "FD1.P.p", 1), 50e5, 1e-7)
	within(t, "flow out", -o.sigAt(t, "FD1.P.q", 1), 59.2e-3/60, 1e-7)
}
