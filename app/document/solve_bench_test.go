package document

import (
	"bytes"
	"fmt"
	"testing"

	"barlitre/audit"
)

// From an edit of the first sample to its energy, and to its oil temperatures; and to the energy of the sample without tank and
// cooler, which is to be no faster. Each edit comes while the temperatures of the one before are being worked out.
func BenchmarkEditToVerdict(b *testing.B) {
	b.Run("energy", func(b *testing.B) { benchmarkEdits(b, Solved, nil) })
	b.Run("temperatures", func(b *testing.B) { benchmarkEdits(b, Warmed, nil) })
	b.Run("no heat section", func(b *testing.B) {
		benchmarkEdits(b, Solved, func(f *audit.File) error { f.Replace(withoutHeat(f.Bytes())); return nil })
	})
}

// withoutHeat is the text of a sample without its section heat.
func withoutHeat(text []byte) []byte {
	from := bytes.Index(text, []byte("\nheat:\n")) + 1
	to := from + len("heat:\n")
	for text[to] == ' ' {
		to += bytes.IndexByte(text[to:], '\n') + 1
	}
	return append(append([]byte{}, text[:from]...), text[to:]...)
}

func benchmarkEdits(b *testing.B, until EventKind, first func(f *audit.File) error) {
	told := make(chan int, 1000)
	d := New(Options{Notify: func(e Event) {
		if e.Kind == until {
			told <- e.Revision
		}
	}})
	defer d.Abandon()
	check(b, d.OpenSample(press))
	<-told
	if first != nil {
		check(b, d.Edit("Prepare", first))
	}
	b.ResetTimer()
	for i := range b.N {
		check(b, d.Set("As found/RV1.crack", fmt.Sprintf("%d bar", 231+i%2)))
		for <-told != d.Revision() {
		}
	}
	b.ReportMetric(float64(b.Elapsed().Microseconds())/1e3/float64(b.N), "ms/edit")
}

func BenchmarkSet(b *testing.B) {
	d := newDocument(Options{}, quick)
	defer d.Abandon()
	check(b, d.OpenSample(press))
	for i := range b.N {
		check(b, d.Set("As found/RV1.crack", fmt.Sprintf("%d bar", 231+i%2)))
	}
}
