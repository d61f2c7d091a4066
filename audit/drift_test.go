package audit_test

import (
	"testing"

	"barlitre/audit"
	"barlitre/circuit/duty"
)

// By hand: out 0.1 m/s for 3 s = 0.3 m, back 0.2 m/s for 1 s = 0.2 m.
func TestStrokeDrift(t *testing.T) {
	d := &duty.Duty{Time: []float64{0, 3, 3, 4}, Tracks: []duty.Track{
		{Of: "ram", What: duty.Speed, Values: []float64{0.1, 0.1, -0.2, -0.2}},
		{Of: "arm", What: duty.Position, Values: []float64{1, 2, 2, 0.5}},
		{Of: "drum", What: duty.Command, Values: []float64{0, 0, 1, 1}},
	}}
	for _, c := range []struct {
		axis       string
		drift, way float64
		known      bool
	}{{"ram", 0.1, 0.5, true}, {"arm", -0.5, 2.5, true}, {"drum", 0, 0, false}, {"none", 0, 0, false}} {
		drift, way, known := audit.StrokeDrift(d, c.axis)
		if abs(drift-c.drift) > 1e-12 || abs(way-c.way) > 1e-12 || known != c.known {
			t.Errorf("%s: drift %g of %g (%v), want %g of %g (%v)", c.axis, drift, way, known, c.drift, c.way, c.known)
		}
	}
	back := &duty.Duty{Time: []float64{0, 0.1, 0.3}, Tracks: []duty.Track{{Of: "ram", What: duty.Speed, Values: []float64{0.2, 0.2, -0.4}}}}
	if drift, _, _ := audit.StrokeDrift(back, "ram"); drift != 0 {
		t.Errorf("a stroke that closes drifts by %g", drift)
	}
}

func abs(x float64) float64 {
	if x < 0 {
		return -x
	}
	return x
}
