package audit

import (
	"math"
	"testing"

	"barlitre/audit/thermal"
)

// In the breaks of the calendar the machine idles and makes the heat of that duty alone; in the
// shifts it makes the more of the rest. A week has the heat of the mix of the year all the same:
// by hand, the hours of the week times the heat of the mix.
func TestBreaksAreNotWork(t *testing.T) {
	s := sampleWith(t, "handling-machine.yaml", nil)
	for _, c := range s.Circuits {
		h := c.Warmth
		in, pause := h.Plant.Loads[len(h.Loads)], h.Plant.Loads[len(h.Loads)+1]
		at := h.Week.Ran
		heat := func(l thermal.Load) float64 {
			w, err := l.HeatAt(at)
			if err != nil {
				t.Fatal(err)
			}
			return w
		}
		sum, ran, paused := 0.0, 0.0, 0.0
		for _, x := range h.Plant.Spans {
			sum += (x.To - x.From) * heat(h.Plant.Loads[x.Load])
			if ran += x.To - x.From; x.Load == len(h.Loads)+1 {
				paused += x.To - x.From
			}
		}
		wants(t, c.Circuit.Name+", heat of the week", sum, ran*heat(h.Loads[Mix]), 0.01) // planned stops make the hours of breaks a little more than their share
		wants(t, c.Circuit.Name+", breaks", paused, 6*3*1800, 1e-9)
		if a, b := heat(in), heat(pause); a <= b || math.Abs(heat(h.Loads[Mix])-a) < 1e-6*a {
			t.Errorf("%s: %g W in the shifts, %g W in breaks", c.Circuit.Name, a, b)
		}
	}
}
