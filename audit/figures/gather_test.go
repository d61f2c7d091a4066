package figures

import (
	"math"
	"testing"

	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// TestGather: 100 kJ drawn, 20 received, so that steps below 1.2 kJ are gathered: those
// to the oil in one step, the single one to the air stays itself.
func TestGather(t *testing.T) {
	c := &circuit.Circuit{Name: "Press", Blocks: []circuit.Block{{ID: "V1", Kind: "valve"}, {ID: "M1", Kind: "electric_motor"},
		{ID: "F1", Kind: "filter"}, {ID: "L1", Kind: "line"}, {ID: "U1", Kind: "converter"}, {ID: "RV1", Kind: "relief"}}}
	row := func(block, kind string, sink circuit.Sink, kJ float64) audit.LossRow {
		return audit.LossRow{Block: block, Kind: kind, Sink: sink, Energy: audit.Split{Working: 1e3 * kJ}}
	}
	basis := StepsBasis{Supply: 100e3, Returned: 5e3, WorkPositive: 30e3, WorkNegative: -20e3, Stored: 1e3, Losses: []audit.LossRow{
		row("RV1", "relief spill", circuit.ToOil, 1.2), row("V1", "metering", circuit.ToOil, 70), row("F1", "filter", circuit.ToOil, 1.1),
		row("L1", "line", circuit.ToOil, 0.7), row("U1", "converter", circuit.ToAir, 1), row("M1", "electric motor", circuit.ToAir, 10), row("V1", "rounding", circuit.ToOil, 1e-11)}}
	f, behind := Gather(c, "one cycle", units.Preferred(units.Energy, units.Metric), basis)
	if f.Title != "Press" || f.Subtitle != "one cycle" || f.Supply != 100 || f.Returned != 5 || f.WorkPositive != 30 || f.WorkNegative != 20 || f.Stored != 1 {
		t.Errorf("%+v", f)
	}
	want := []Step{{"M1: electric motor", 10, false}, {"V1: metering", 70, true}, {"RV1: relief spill", 1.2, true},
		{"other losses to the oil", 1.8, true}, {"U1: converter", 1, false}}
	if len(f.Steps) != len(want) || len(behind) != len(want) {
		t.Fatalf("%d steps, %d lists of losses, want %d: %+v", len(f.Steps), len(behind), len(want), f.Steps)
	}
	for i, s := range f.Steps {
		sum := 0.0
		for _, r := range behind[i] {
			sum += r.Energy.Total() / 1e3
		}
		if s.Label != want[i].Label || s.Heat != want[i].Heat || math.Abs(s.Value-want[i].Value) > 1e-9 || math.Abs(sum-s.Value) > 1e-9 {
			t.Errorf("step %d: %+v, want %+v; behind it %g", i, s, want[i], sum)
		}
	}
}
