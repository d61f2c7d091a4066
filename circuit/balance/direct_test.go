package balance

import (
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/mat"
)

// Full and sparse matrices over twelve decades: the solution is that of a library where
// this calls the matrix sound.
func TestDirectAgainstLibrary(t *testing.T) {
	compared, sparse := 0, 0
	for seed := uint64(0); seed < 600; seed++ {
		r := rand.New(rand.NewPCG(seed, 11))
		n := 1 + r.IntN(90)
		density := 1.0
		if seed%2 == 1 {
			density = 6 / float64(n)
		}
		w, a, b := newPlanner(n), mat.NewDense(n, n, nil), make([]float64, n)
		w.begin()
		for i := range n {
			b[i] = r.Float64() - 0.5
			for k := range n {
				if r.Float64() < density || i == k && density < 1 {
					v := (r.Float64() - 0.5) * math.Pow(10, 12*r.Float64()-6)
					a.Set(i, k, v)
					w.put(i, k, v)
				}
			}
		}
		w.full()
		var lib mat.LU
		lib.Factorize(a)
		var want mat.VecDense
		if lib.Cond() > 1e10 || lib.SolveVecTo(&want, false, mat.NewVecDense(n, append([]float64(nil), b...))) != nil {
			continue
		}
		x := make([]float64, n)
		if !w.solve(b, x) {
			t.Fatalf("seed %d, n = %d: singular, gonum says its condition is %g", seed, n, lib.Cond())
		}
		compared++
		if density < 1 {
			sparse++
		}
		for i := range x {
			if d := math.Abs(x[i] - want.AtVec(i)); d > 1e-14*lib.Cond()*mat.Norm(&want, math.Inf(1))+1e-9*math.Abs(want.AtVec(i)) {
				t.Fatalf("seed %d, n = %d: x[%d] = %g, gonum %g", seed, n, i, x[i], want.AtVec(i))
			}
		}
	}
	if compared < 200 || sparse < 20 {
		t.Errorf("only %d matrices compared, %d of them sparse", compared, sparse)
	}
}

// Singular matrices are told: an empty column, and a row that is twice another.
func TestDirectSingular(t *testing.T) {
	for _, rows := range [][][]float64{{{1, 0}, {2, 0}}, {{1, 2}, {2, 4}}, {{0}}, {{1, 2, 3}, {2, 4, 7}, {1, 2, 5}}} {
		n := len(rows)
		w := newPlanner(n)
		w.begin()
		for i, row := range rows {
			for k, v := range row {
				if v != 0 {
					w.put(i, k, v)
				}
			}
		}
		w.full()
		if w.solve(make([]float64, n), make([]float64, n)) {
			t.Errorf("%v: solved", rows)
		}
	}
}
