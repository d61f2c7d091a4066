package circuit

import (
	"context"
	"testing"
)

// stated holds at every time step that the slopes which were stated once are those that would be stated now:
// the answer of the solution to each of its rows is the same to the last bit when all are stated anew.
type stated struct {
	t     *testing.T
	r     *run
	of    []int
	a, b  []float64
	name  string
	steps int
}

func (s *stated) Sample(x *Sample) error {
	solver := s.r.solver
	solver.Response(s.r, s.r.step.x, s.of, s.a)
	solver.Restate()
	solver.Response(s.r, s.r.step.x, s.of, s.b)
	for i, v := range s.a {
		if v != s.b[i] {
			s.t.Errorf("%s at %g s: row %d answers with %g, with slopes stated anew %g", s.name, x.T, i, v, s.b[i])
		}
	}
	s.steps++
	return nil
}

// A block that adds other nodes or other steady slopes than before says so (step.changes).
func TestSteadySlopesAreKeptUpToDate(t *testing.T) {
	steps := 0
	for seed := uint64(1); seed <= 60; seed++ {
		text, axes, d := grow(seed)
		k, found := Compile(build(t, text), axes, d)
		if k == nil {
			t.Fatal(seed, found)
		}
		series := k.Series(d)
		r := newRun(k, k.Defaults(), trialOil, series)
		s := &stated{t: t, r: r, a: make([]float64, k.n), b: make([]float64, k.n), name: text}
		for i := range k.n {
			s.of = append(s.of, i)
		}
		if _, _, err := r.all(context.Background(), State{}, 0, min(400, len(series.T)), s); err != nil {
			t.Fatal(seed, err)
		}
		steps += s.steps
	}
	if steps < 1000 {
		t.Errorf("only %d time steps looked at", steps)
	}
}
