package circuit

import (
	"strings"
	"testing"

	"barlitre/circuit/duty"
)

const sharing = `
TK tank
M1 electric_motor; rated_power: 22 kW; efficiency: 0.93; speed: 1480 rpm
P1 pump; displacement: 45 cm3/rev; case_share: 0; slip: 0; control: load_sensing; margin: 20 bar
RV1 relief; crack: 250 bar
V1 valve; follows: ram; nominal_flow: 40 L/min; nominal_drop: 5 bar
V2 valve; follows: arm; nominal_flow: 40 L/min; nominal_drop: 5 bar
FS1 flow_sharing; setting: 5 bar; nominal_flow: 60 L/min; nominal_drop: 2 bar
FS2 flow_sharing; setting: 5 bar; nominal_flow: 60 L/min; nominal_drop: 2 bar
C1 cylinder; axis: ram; hold: valve; bore: 80 mm; rod: 56 mm
C2 cylinder; axis: arm; hold: valve; bore: 100 mm; rod: 56 mm
SH1 shuttle
- M1.shaft P1.shaft
- P1.S TK.T
- P1.P RV1.P V1.P V2.P
- RV1.T TK.T
- V1.A FS1.P
- V2.A FS2.P
- FS1.A C1.A SH1.X
- FS2.A C2.A SH1.Y
- SH1.A P1.LS FS1.LS FS2.LS
- V1.B C1.B
- V2.B C2.B
- V1.T V2.T TK.T
`

var sharingAxes = []duty.Axis{{Name: "ram", Kind: duty.Linear}, {Name: "arm", Kind: duty.Linear}}

func sharedDuty(load1, u1, load2, u2 float64) *duty.Duty {
	return points("shared", 0.5, []float64{0, 1},
		duty.Track{Of: "ram", What: duty.Load, Values: []float64{load1, load1}}, duty.Track{Of: "ram", What: duty.Command, Values: []float64{u1, u1}},
		duty.Track{Of: "arm", What: duty.Load, Values: []float64{load2, load2}}, duty.Track{Of: "arm", What: duty.Command, Values: []float64{u2, u2}})
}

// With enough oil each section gets u·qN·√((margin − setting)/ΔpN), whatever its
// load; an exhausted pump shares its flow in the ratio of the openings.
func TestFlowSharingKeepsTheRatio(t *testing.T) {
	small := replaced(t, sharing, "displacement: 45 cm3/rev", "displacement: 16 cm3/rev")
	for _, loads := range [][2]float64{{60e3, 10e3}, {10e3, 90e3}, {30e3, 45e3}} {
		d := sharedDuty(loads[0], 0.4, loads[1], 0.25)
		r := steady(t, sharing, sharingAxes, d)
		full := 40 * lpm * 1.7320508075688772 // √3
		near(t, "flow 1", r.last(t, "FS1.P.q"), 0.4*full, 1e-4)
		near(t, "flow 2", r.last(t, "FS2.P.q"), 0.25*full, 1e-4)
		near(t, "setting", r.last(t, "FS1.P.p")-r.last(t, "P1.LS.p"), 5e5, 1e-6)
		before := r.last(t, "C1.v") / r.last(t, "C2.v")
		r = steady(t, small, sharingAxes, d)
		near(t, "flow of the exhausted pump", r.last(t, "FS1.P.q")+r.last(t, "FS2.P.q"), 16e-6*1480/60, 1e-6)
		near(t, "setting of the pump", r.last(t, "P1.e"), 1, 0)
		near(t, "ratio of the speeds", r.last(t, "C1.v")/r.last(t, "C2.v"), before, 0.01)
	}
}

func TestFlowSharingInRandomCircuits(t *testing.T) {
	change := toBore("flow_sharing; reverse: free", "P", "A")
	survive(t, func(text string) string { return strings.Replace(change(text), "- K1.A C1.A", "- K1.A K1.LS C1.A", 1) })
}
