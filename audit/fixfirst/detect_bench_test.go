package fixfirst_test

import (
	"testing"

	"barlitre/audit"
	"barlitre/audit/fixfirst"
	"barlitre/machines/units"
)

// What a window waits for where it lists the faults of a circuit just solved.
func BenchmarkDetect(b *testing.B) {
	for _, name := range []string{"baling-press", "transfer-station", "handling-machine"} {
		f, _ := audit.Read("../../samples/" + name + ".yaml")
		s, err := audit.Solve(b.Context(), f, audit.Options{})
		if err != nil {
			b.Fatal(err)
		}
		b.Run(name, func(b *testing.B) {
			for b.Loop() {
				fixfirst.Detect(s, s.Circuits[0], units.Metric)
			}
		})
	}
}
