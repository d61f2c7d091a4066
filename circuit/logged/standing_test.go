package logged

import (
	"context"
	"testing"

	"barlitre/circuit/duty"
	"barlitre/circuit/recording/cycles"
)

// A machine that stands without a load is off only where something says that its pump stands:
// a pressure or a power that was measured. Loads alone do not (made up: 20 cycles of 10 s).
func TestStandingIsNotOff(t *testing.T) {
	d := &duty.Duty{Sampled: true}
	var speed, load, high, low []float64
	for i := range 4000 {
		at, v, f, p := i%200, 0.0, 0.0, 184e5
		if at < 80 {
			v, f = 0.1, 40e3
			if at >= 40 {
				v, f = -0.1, 8e3
			}
		}
		off := p
		if i > 3000 && at >= 80 {
			off = 0
		}
		d.Time = append(d.Time, 0.05*float64(i))
		speed, load, high, low = append(speed, v), append(load, f), append(high, p), append(low, off)
	}
	moved := []duty.Track{{Of: "ram", What: duty.Speed, Values: speed}, {Of: "ram", What: duty.Load, Values: load}}
	for name, c := range map[string]struct {
		more []duty.Track
		off  bool
	}{
		"loads alone":         {nil, false},
		"pressure kept":       {[]duty.Track{{Of: "P1", What: duty.MeasuredPressure, Values: high}}, false},
		"pressure falls":      {[]duty.Track{{Of: "P1", What: duty.MeasuredPressure, Values: low}}, true},
		"power falls instead": {[]duty.Track{{Of: "P1", What: duty.MeasuredPressure, Values: high}, {Of: "M1", What: duty.MeasuredPower, Values: low}}, true},
	} {
		d.Tracks = append(moved[:2:2], c.more...)
		r, err := Cycles(context.Background(), d, Works(d))
		if err != nil {
			t.Fatal(name, err)
		}
		found := map[cycles.State]bool{}
		for _, s := range r.States {
			found[s.State] = true
		}
		if !found[cycles.Work] || !found[cycles.Idle] || found[cycles.Off] != c.off {
			t.Errorf("%s: states %v, off wanted: %v", name, found, c.off)
		}
	}
}
