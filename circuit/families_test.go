package circuit

import (
	"context"
	"testing"
)

// Every model is in one family.
func TestFamilies(t *testing.T) {
	k, found := Compile(build(t, c3), trialAxes, bothDuty)
	if k == nil {
		t.Fatal(found)
	}
	all := newRun(k, k.Defaults(), trialOil, k.Series(bothDuty)).models
	f := familiesOf(all)
	sorted := len(f.pistons) + len(f.motors) + len(f.pumps) + len(f.valves) + len(f.compensators) + len(f.checks) + len(f.filters) + len(f.others)
	if sorted != len(all) || len(f.pistons) != 1 || len(f.valves) != 2 || len(f.compensators) != 2 || len(f.checks) != 2 {
		t.Errorf("%d of %d models sorted: %d pistons, %d valves, %d compensators, %d checks", sorted, len(all), len(f.pistons), len(f.valves), len(f.compensators), len(f.checks))
	}
}

// BenchmarkDispatch sets one evaluation of all blocks through the interface of models
// against that of the families: what the interface costs.
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
	r.ev.slopes = nil
	b.Run("interface", func(b *testing.B) {
		for range b.N {
			clear(r.ev.rows)
			for _, m := range r.models {
				m.eval(&r.ev)
			}
		}
	})
	b.Run("by-kind", func(b *testing.B) {
		for range b.N {
			clear(r.ev.rows)
			r.families.eval(&r.ev)
		}
	})
}
