package samples

import (
	"context"
	"testing"

	"barlitre/audit"
)

// BenchmarkAudit measures the audit of each sample, all circuits over all duties, for
// each time step that is reported.
func BenchmarkAudit(b *testing.B) {
	for _, name := range Names() {
		b.Run(name, func(b *testing.B) {
			data, err := Read(name)
			if err != nil {
				b.Fatal(err)
			}
			f, found := audit.Parse(data, nil, name)
			if f == nil {
				b.Fatal(found)
			}
			b.ReportAllocs()
			b.ResetTimer()
			steps := 0
			for range b.N {
				s, err := audit.Solve(context.Background(), f, audit.Options{})
				if err != nil {
					b.Fatal(err)
				}
				steps = 0
				for _, c := range s.Circuits {
					for _, d := range c.Duties {
						steps += d.Certificate.Steps
					}
				}
			}
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/float64(steps), "ns/step")
			b.ReportMetric(float64(steps), "steps")
		})
	}
}
