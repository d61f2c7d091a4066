package look

import (
	"math"
	"testing"

	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/circuit/duty"
	"barlitre/machines/units"
)

// In a thinned plot the highest of one signal is that of all its points, also those between two steps; what two signals
// differ by is read at steps alone, for their own points lie at other instants.
func TestThinnedPlot(t *testing.T) {
	plot := &audit.Plot{Thinned: true, Steps: []float64{0, 4, 8}, Signals: []audit.Track{
		{Name: "L1.A.p", T: []float64{0, 1, 4, 5, 8}, V: []float64{10, 90, 10, 40, 10}, Steps: []float64{10, 10, 10}},
		{Name: "L1.B.p", T: []float64{0, 3, 4, 7, 8}, V: []float64{9, 39, 9, 89, 9}, Steps: []float64{9, 9, 9}},
	}}
	run := &audit.CircuitRun{Circuit: &circuit.Circuit{}, Duties: []*audit.DutyRun{{Duty: &duty.Duty{Name: "d"}, Plot: plot}}}
	p := New(&audit.Solution{}, run, units.Metric)
	if m := p.Highest("L1.A.p", Always); !m.OK || m.V != 90 || m.T != 1 || m.Duty != "d" {
		t.Errorf("highest %+v, want 90 at 1 s", m)
	}
	if m := p.Lowest("L1.B.p", Always); m.V != 9 || m.T != 0 {
		t.Errorf("lowest %+v, want 9 at 0 s", m)
	}
	if m := p.Highest("L1.A.p", Moving); m.OK || !math.IsInf(m.V, -1) {
		t.Errorf("nothing moves, yet %+v", m)
	}
	m := p.Top(Always, func(d *audit.DutyRun, c *Course, i int) float64 {
		return ValueOf(Track(d, "L1.A.p"), c, i) - ValueOf(Track(d, "L1.B.p"), c, i)
	})
	if m.V != 1 {
		t.Errorf("apart by %+v, want 1", m)
	}
}
