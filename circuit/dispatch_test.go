package circuit

import (
	"context"
	"testing"
)

// BenchmarkDispatch sets the evaluation of the shortest kind of block, a check valve, through the interface of
// models against direct calls: the difference is what the interface costs a call at most. All is one evaluation of
// the circuit, of so many blocks, to set it against.
func BenchmarkDispatch(b *testing.B) {
	k, found := Compile(build(b, c3), trialAxes, bothDuty)
	if k == nil {
		b.Fatal(found)
	}
	s := k.Series(bothDuty)
	r := newRun(k, k.Defaults(), trialOil, s)
	if _, _, err := r.all(context.Background(), State{}, 0, len(s.T)/4, nobody{}); err != nil {
		b.Fatal(err)
	}
	var models []model
	var direct []*checkModel
	for _, m := range r.models {
		if c, ok := m.(*checkModel); ok {
			models, direct = append(models, m), append(direct, c)
		}
	}
	r.Eval(nil, nil, nil) // no slopes from here on
	b.Run("interface", func(b *testing.B) {
		for range b.N {
			for _, m := range models {
				m.eval(&r.ev)
			}
		}
		b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N*len(models)), "ns/call")
	})
	b.Run("direct", func(b *testing.B) {
		for range b.N {
			for _, m := range direct {
				m.eval(&r.ev)
			}
		}
		b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N*len(direct)), "ns/call")
	})
	b.Run("all", func(b *testing.B) {
		for range b.N {
			r.Eval(nil, nil, nil)
		}
		b.ReportMetric(float64(len(r.models)), "blocks")
	})
}
