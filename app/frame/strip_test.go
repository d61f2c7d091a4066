package frame

import (
	"strings"
	"testing"

	"barlitre/circuit/duty"
)

// The value at the clock is that of the row, also where a long track is drawn of few of its rows:
// the load here is the number of the row, but for peaks that are drawn beside it.
func TestStripReadsTheRows(t *testing.T) {
	b := newBench(t)
	b.drain()
	d := &duty.Duty{Name: "long"}
	var v []float64
	for i := range 200_000 {
		d.Time = append(d.Time, float64(i))
		x := 20.0
		if i%10 == 3 {
			x = 1e6
		}
		v = append(v, x)
	}
	d.Tracks = []duty.Track{{Of: "ram", What: duty.Load, Values: v}}
	b.strip.asked = nil
	b.strip.plot = b.strip.lanes(d, []duty.Axis{{Name: "ram"}})
	b.clock = 100_001
	if text := b.strip.atClock(); !strings.Contains(text, "0.0200 kN") {
		t.Errorf("the strip says %q", text)
	}
}
