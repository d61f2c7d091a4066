package circuit

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"barlitre/circuit/duty"
)

// A winch hangs on a closed valve that leaks nowhere: its motor turns as its own slip lets oil pass from the loaded side
// to the other.
func creeping(hold string) string {
	return `
TK tank
M1 electric_motor; rated_power: 22 kW; efficiency: 0.93
P1 pump; displacement: 45 cm3/rev; case_share: 0
RV1 relief; crack: 200 bar
V1 valve; follows: drum; nominal_flow: 60 L/min; nominal_drop: 5 bar
CV1 check; opens: 0 bar; nominal_drop: 0 bar
CV2 check; opens: 0 bar; nominal_drop: 0 bar
HM1 motor; axis: drum; hold: ` + hold + `; displacement: 80 cm3/rev; case_share: 0; slip: 1.5e-8; friction: 0; viscous: 0; drag: 0 N m
- M1.shaft P1.shaft
- P1.S TK.T
- P1.P RV1.P V1.P
- RV1.T TK.T
- V1.A HM1.A CV1.out
- V1.B HM1.B CV2.out
- CV1.in CV2.in TK.T
- V1.T TK.T
`
}

func hanging(given string) *duty.Duty {
	d := points("hang", 0.1, []float64{0, 2, 2, 4},
		duty.Track{Of: "drum", What: duty.Load, Values: []float64{120, 120, 120, 120}})
	if given == "command" {
		d.Tracks = append(d.Tracks, duty.Track{Of: "drum", What: duty.Command, Values: []float64{0.5, 0.5, 0, 0}})
	} else {
		d.Tracks = append(d.Tracks, duty.Track{Of: "drum", What: duty.Speed, Values: []float64{20, 20, 0, 0}})
	}
	return d
}

// 120 N m on 80 cm³ are Δp = 94.25 bar; the slip Cs·D·Δp/μ turns the motor at Cs·Δp/μ = 3.534 rad/s at 40 mPa s: 212 rad/min.
// Said where load and command are given as where motion and load are; a brake holds.
func TestCreepOfAHeldAxis(t *testing.T) {
	dp := 120 / (80e-6 / turn)
	w := 1.5e-8 * dp / 0.040
	for _, given := range []string{"command", "motion"} {
		o := observe(t, creeping("valve"), drumAxis, hanging(given))
		near(t, given+": speed at rest", math.Abs(o.last(t, "HM1.w")), w, 1e-4)
		g := gateNamed(t, o.watch, "creep while held")
		near(t, given+": creep", g.Value, w, 1e-4)
		if g.Unit.Symbol != "rad/min" || g.Passed || !strings.Contains(g.Reason, "leaks past the valves") {
			t.Errorf("%s: %+v", given, g)
		}
		said := map[string]string{"command": "it creeps at 212", "motion": "it is not held"}[given]
		if s := fmt.Sprint(o.watch.Findings()); !strings.Contains(s, said) {
			t.Errorf("%s: no %q in %s", given, said, s)
		}
	}
	o := observe(t, creeping("brake"), drumAxis, hanging("command"))
	for _, g := range o.watch.Gates() {
		if g.Name == "creep while held" {
			t.Errorf("on the brake: %+v", g)
		}
	}
}

// A ram on a closed valve without leakage does not creep: passed, in mm/min.
func TestTightCylinderHolds(t *testing.T) {
	g := gateNamed(t, observe(t, c1, ramAxis, ramDuty).watch, "creep while held")
	if !g.Passed || g.Unit.Symbol != "mm/min" || g.Value > 1e-9 {
		t.Errorf("%+v", g)
	}
}
