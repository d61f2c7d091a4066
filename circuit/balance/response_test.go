package balance

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/mat"
)

// On a linear problem the response is the diagonal of the inverse (gonum), of the unknowns
// off their bounds alone; of one on its bound it is zero, and Solve goes on as before.
func TestResponse(t *testing.T) {
	A := mat.NewDense(3, 3, []float64{4, -1, 0.5, 2, 5, 1, 0.25, -1, 3})
	p := problem{3, func(x, g []float64) {
		var out mat.VecDense
		out.MulVec(A, mat.NewVecDense(3, append([]float64(nil), x[:3]...)))
		for i := range g {
			g[i] = out.AtVec(i) - float64(i+1)
		}
	}}
	for _, bound := range []int{-1, 1} {
		s := NewSolver(3)
		var free []int
		for i := range 3 {
			if i != bound {
				free = append(free, i)
			}
		}
		if bound >= 0 {
			s.Lo[bound] = 2 // above where it would go
		}
		x := make([]float64, 3)
		if !s.Solve(p, x, 0, nil).Solved() {
			t.Fatal("not solved")
		}
		kept, got := append([]float64(nil), x...), make([]float64, 3)
		s.Response(p, x, []int{0, 1, 2}, got)
		M := mat.NewDense(len(free), len(free), nil)
		for a, i := range free {
			for b, k := range free {
				M.Set(a, b, A.At(i, k))
			}
		}
		var inverse mat.Dense
		if err := inverse.Inverse(M); err != nil {
			t.Fatal(err)
		}
		want := make([]float64, 3)
		for a, i := range free {
			want[i] = inverse.At(a, a)
		}
		for i := range got {
			if math.Abs(got[i]-want[i]) > 1e-8 || x[i] != kept[i] { // the slopes are differences of 1e-6
				t.Errorf("bound %d: unknown %d responds by %g, want %g; it moved by %g", bound, i, got[i], want[i], x[i]-kept[i])
			}
		}
		if res := s.Solve(p, x, 0, nil); res.Rung != Warm || res.Iterations != 0 {
			t.Errorf("bound %d: %+v from its own solution", bound, res)
		}
	}
}

// Where nothing determines an unknown its response is without end.
func TestResponseOfTheUndetermined(t *testing.T) {
	s, x, got := NewSolver(2), []float64{1, 5}, make([]float64, 2)
	s.Response(problem{2, func(x, g []float64) { g[0], g[1] = x[0]-1, 0 }}, x, []int{1}, got[:1])
	if !math.IsInf(got[0], 1) {
		t.Errorf("a free unknown responds by %g", got[0])
	}
}
