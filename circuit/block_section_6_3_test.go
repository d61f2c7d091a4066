package circuit

import (
	"fmt"
	"regexp"
	"strings"
	"testing"

	"barlitre/circuit/duty"
)

const openCentre = rail + `
S1 section_6_3; follows: ram; nominal_flow: 40 L/min; nominal_drop: 5 bar; flow_bypass: 60 L/min
- P1.P RV1.P S1.P S1.C1
- S1.A C1.A
- S1.B C1.B
- S1.T TK.T
`

// metered is the speed of a cylinder behind edges open by u at a supply pressure, by
// bisection on its force balance.
func metered(p, u, qN, A, B, F float64) float64 {
	k := 5e5 / (u * qN) / (u * qN)
	return zero(0, 3, func(v float64) float64 {
		return F - (p-k*A*v*A*v)*A + k*B*v*B*v*B
	})
}

// Hand calculation: the pump flow splits between the through-channel, (1 − u)·qC·√(p/ΔpN),
// and the cylinder; p by bisection.
func TestSectionAtAPartialOpening(t *testing.T) {
	Q, ran := 45e-6*1480/60, 0
	for _, u := range []float64{0.3, 0.6, 0.8} {
		for _, F := range []float64{1e3, 10e3} {
			d := pushing(F, u)
			p := zero(F/boreArea, 160e5, func(p float64) float64 {
				return (1-u)*60*lpm*sqrt(p/5e5) + boreArea*metered(p, u, 40*lpm, boreArea, rodArea, F) - Q
			})
			if k := (1 - u) * 60 * lpm * sqrt(F/boreArea/5e5); k > Q {
				continue // the load stands
			}
			ran++
			r := steady(t, openCentre+"- S1.C2 TK.T\n", ramAxis, d)
			near(t, fmt.Sprintf("pressure at %g, %g N", u, F), r.last(t, "S1.P.p"), p, 1e-4)
			near(t, fmt.Sprintf("speed at %g, %g N", u, F), r.last(t, "C1.v"), metered(p, u, 40*lpm, boreArea, rodArea, F), 1e-3)
		}
	}
	if ran != 5 {
		t.Errorf("%d cases ran, want 5", ran)
	}
}

const twoSections = rail + `
S1 section_6_3; follows: ram; nominal_flow: 40 L/min; nominal_drop: 5 bar; flow_bypass: 60 L/min
S2 section_6_3; follows: arm; nominal_flow: 40 L/min; nominal_drop: 5 bar; flow_bypass: 60 L/min
C2 cylinder; axis: arm; hold: valve; bore: 80 mm; rod: 56 mm
- P1.P RV1.P S1.P S1.C1 S2.P
- S1.C2 S2.C1
- S2.C2 TK.T
- S1.A C1.A
- S1.B C1.B
- S2.A C2.A
- S2.B C2.B
- S1.T S2.T TK.T
`

// Two in series: the channel passes 1/√(Σ 1/(1 − u)²) of what one open channel would.
func TestSectionsInSeries(t *testing.T) {
	Q := 45e-6 * 1480 / 60
	u1, u2, F1, F2 := 0.5, 0.7, 8e3, 3e3
	r := steady(t, twoSections, sharingAxes, sharedDuty(F1, u1, F2, u2))
	channel := 60 * lpm / sqrt(1/(1-u1)/(1-u1)+1/(1-u2)/(1-u2))
	p := zero(F1/boreArea, 160e5, func(p float64) float64 {
		return channel*sqrt(p/5e5) + boreArea*(metered(p, u1, 40*lpm, boreArea, rodArea, F1)+metered(p, u2, 40*lpm, boreArea, rodArea, F2)) - Q
	})
	near(t, "pressure", r.last(t, "S1.P.p"), p, 1e-4)
	near(t, "speed 1", r.last(t, "C1.v"), metered(p, u1, 40*lpm, boreArea, rodArea, F1), 1e-3)
	near(t, "speed 2", r.last(t, "C2.v"), metered(p, u2, 40*lpm, boreArea, rodArea, F2), 1e-3)
	mid := p * (1 / (1 - u2) / (1 - u2)) / (1/(1-u1)/(1-u1) + 1/(1-u2)/(1-u2))
	near(t, "pressure between", r.last(t, "S2.C1.p"), mid, 1e-4)
}

// At rest the channels are open and the pump circulates; a section that follows a
// motion finds the opening that moves it so.
func TestSectionFollowsAndRests(t *testing.T) {
	d := points("ram", 0.05, []float64{0, 0.1, 1, 1.1, 1.5, 1.6, 2.4, 2.5, 3},
		duty.Track{Of: "ram", What: duty.Speed, Values: []float64{0, .1, .1, 0, 0, -.12, -.12, 0, 0}},
		duty.Track{Of: "ram", What: duty.Load, Values: []float64{5e3, 5e3, 30e3, 30e3, 5e3, 5e3, 5e3, 5e3, 5e3}})
	r := steady(t, openCentre+"- S1.C2 TK.T\nat rest: unload\n", ramAxis, d)
	moved := 0
	for i, a := range r.axes {
		if a[0].Standing {
			near(t, "circulation pressure", r.sig["S1.P.p"][i], 5e5*(66.6/60)*(66.6/60), 1e-4)
			continue
		}
		moved++
		near(t, fmt.Sprintf("speed at %g s", r.t[i]), a[0].Speed, a[0].Demand, 1e-6)
	}
	if moved < 30 {
		t.Errorf("only %d steps moved", moved)
	}
}

// A pump that strokes back by the pressure before an orifice in the return of the
// stack needs no block of its own for that orifice: its pilot port stands on the line.
const negativeFlow = `
TK tank
M1 electric_motor; rated_power: 22 kW; efficiency: 0.93; speed: 1480 rpm
P1 pump; displacement: 45 cm3/rev; case_share: 0; slip: 0; control: negative_flow; signal_start: 5 bar; signal_end: 30 bar; min_setting: 0.1
RV1 relief; crack: 160 bar; override: 0 bar per 100 L/min
S1 section_6_3; follows: ram; nominal_flow: 40 L/min; nominal_drop: 5 bar; flow_bypass: 60 L/min
O1 orifice; nominal_flow: 15 L/min; nominal_drop: 20 bar
C1 cylinder; axis: ram; hold: valve; bore: 80 mm; rod: 56 mm
- M1.shaft P1.shaft
- P1.S TK.T
- P1.P RV1.P S1.P S1.C1
- RV1.T TK.T
- S1.A C1.A
- S1.B C1.B
- S1.T TK.T
- S1.C2 O1.A P1.LS
- O1.B TK.T
`

// Hand calculation: all flow passes the orifice, e·Q = qo·√(p/Δpo) and
// e = 1 − 0.9·(p − p1)/(p2 − p1), a quadratic in √p; closed channel: full setting.
func TestNegativeFlowPump(t *testing.T) {
	Q, k := 45e-6*1480/60, 15*lpm/sqrt(20e5)
	a, b, c := 0.9*Q/25e5, k, -Q*(1+0.9*5/25.0)
	x := (-b + sqrt(b*b-4*a*c)) / (2 * a)
	r := steady(t, negativeFlow, ramAxis, pushing(5e3, 0))
	near(t, "pilot pressure", r.last(t, "P1.LS.p"), x*x, 1e-4)
	near(t, "setting", r.last(t, "P1.e"), 1-0.9*(x*x-5e5)/25e5, 1e-4)
	near(t, "setting with the channel closed", steady(t, negativeFlow, ramAxis, pushing(5e3, 1)).last(t, "P1.e"), 1, 1e-9)
	// a narrow orifice: the pump stands at its lowest setting
	r = steady(t, replaced(t, negativeFlow, "nominal_flow: 15 L/min", "nominal_flow: 3 L/min"), ramAxis, pushing(5e3, 0))
	near(t, "lowest setting", r.last(t, "P1.e"), 0.1, 1e-9)
	for _, bad := range []string{replaced(t, negativeFlow, " P1.LS", ""), replaced(t, negativeFlow, "signal_end: 30 bar", "signal_end: 4 bar")} {
		if !AnyStops(Check(build(t, bad), ramAxis, nil)) {
			t.Errorf("not refused: %s", bad)
		}
	}
}

var valveRow = regexp.MustCompile(`(?m)^V1 valve;(.*); centre: \w+$`)

func TestSectionInRandomCircuits(t *testing.T) {
	for _, negative := range []bool{false, true} {
		survive(t, func(text string) string {
			if strings.Contains(text, "control:") || !valveRow.MatchString(text) {
				return ""
			}
			text = valveRow.ReplaceAllString(text, "V1 section_6_3;$1")
			text = strings.Replace(text, "- P1.P RV1.P", "- P1.P RV1.P V1.C1", 1)
			if !negative {
				return text + "- V1.C2 TK.T\n"
			}
			text = strings.Replace(text, "P1 pump;", "P1 pump; control: negative_flow;", 1)
			return text + "O1 orifice; nominal_flow: 30 L/min; nominal_drop: 20 bar\n- V1.C2 O1.A P1.LS\n- O1.B TK.T\n"
		})
	}
}
