package balance

import (
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/mat"
)

// The replayed elimination gives the step that a library finds for the full matrix,
// also for other numbers than it was made for.
func TestPlanAgainstLibrary(t *testing.T) {
	solved := 0
	for seed := uint64(0); seed < 400; seed++ {
		r := rand.New(rand.NewPCG(seed, 3))
		n := 1 + r.IntN(90)
		j, key := newSlopes(n), make([]uint64, (n+63)/64)
		add := func(i, k int) {
			if at := i*j.side + k + j.zero; j.at[at] == noPlace {
				j.place(at)
			}
		}
		for i := range n {
			add(i, i)
			for range r.IntN(4) {
				add(i, r.IntN(n))
			}
			if r.IntN(3) == 0 {
				put(key, i)
			}
		}
		draw := func() {
			for k := firstEntry; k < len(j.val); k++ {
				j.val[k] = (1 + r.Float64()) * math.Pow(10, 2*r.Float64()) * float64(1-2*r.IntN(2))
			}
		}
		draw()
		var p plan
		newPlanner(n).make(&p, &j.entries, key, true)
		if !p.sparse {
			continue
		}
		draw()
		work := make([]float64, p.size)
		if !p.run(n, j.val, work) {
			continue // a pivot became small: the solver chooses others
		}
		a, b, dx, rhs := mat.NewDense(n, n, nil), work[:n], work[n:2*n], make([]float64, n)
		for i := range n {
			b[i] = r.Float64() - 0.5
			rhs[i] = -b[i]
			if bit(key, i) {
				dx[i] = -b[i]
				a.Set(i, i, 1)
			}
		}
		for k := firstEntry; k < len(j.val); k++ {
			if i, c := int(j.row[k]), int(j.col[k]); !bit(key, i) {
				a.Set(i, c, j.val[k])
			}
		}
		var lib mat.LU
		lib.Factorize(a)
		var want mat.VecDense
		if lib.Cond() > 1e6 || lib.SolveVecTo(&want, false, mat.NewVecDense(n, rhs)) != nil {
			continue
		}
		p.solve(j.val, work, true)
		for i := range dx {
			if d := math.Abs(dx[i] - want.AtVec(i)); d > 1e-7*mat.Norm(&want, math.Inf(1)) {
				t.Fatalf("seed %d, n = %d: step %d is %g, gonum %g", seed, n, i, dx[i], want.AtVec(i))
			}
		}
		solved++
	}
	if solved < 100 {
		t.Errorf("only %d matrices compared", solved)
	}
}

// A problem that moves between sets of bounds: the answer must not depend on which
// solutions came before.
func TestForetoldStart(t *testing.T) {
	f := func(q float64) problem {
		return problem{3, func(x, g []float64) {
			g[0], g[1], g[2] = x[0]+x[1]*x[1]-math.Sin(q), x[1]-x[0]-0.5*math.Cos(q), x[2]-x[0]*x[1]
		}}
	}
	set := func() *Solver {
		s := NewSolver(3)
		copy(s.Lo, []float64{-0.5, 0, -0.1})
		copy(s.Hi, []float64{0.5, 1, 0.1})
		return s
	}
	cold := func(_ int, x []float64) { clear(x) }
	warm, x := set(), make([]float64, 3)
	for k := range 2000 {
		q := 0.01 * float64(k)
		warm.Foretell = true
		if res := warm.Solve(f(q), x, 3, cold); !res.Solved() {
			t.Fatalf("step %d not solved", k)
		}
		y := make([]float64, 3)
		if res := set().Solve(f(q), y, 3, cold); !res.Solved() {
			t.Fatalf("step %d not solved from cold", k)
		}
		for i := range x {
			if math.Abs(x[i]-y[i]) > 1e-9 {
				t.Fatalf("step %d: x[%d] = %g warm, %g cold", k, i, x[i], y[i])
			}
		}
	}
}

// A plan that counts on an entry being zero is not used where it is not.
func TestLeanPlanCountsOnZeros(t *testing.T) {
	j, ps := newSlopes(2), newPlans(2)
	for i := range j.at {
		j.place(i)
	}
	set := func(a, b, c, d float64) { copy(j.val[firstEntry:], []float64{a, b, c, d}) }
	set(2, 0, 1, 4)
	lean := ps.get(&j.entries, newPlanner(2))
	set(2, 3, 1, 4)
	if full := ps.get(&j.entries, newPlanner(2)); full == lean || len(full.none) != 0 {
		t.Error("the plan for a triangular matrix serves a full one")
	}
}

// More sets of bounds than there is room for plans: answers are those of a fresh solver.
func TestManyPlans(t *testing.T) {
	const n = 14
	r := rand.New(rand.NewPCG(5, 5))
	c := make([]float64, n)
	f := problem{n, func(x, g []float64) {
		for i := range g {
			g[i] = 3*x[i] - x[(i+1)%n] + 0.5*x[(i+5)%n]*x[(i+5)%n] - c[i]
		}
	}}
	set := func() *Solver {
		s := NewSolver(n)
		for i := range n {
			s.Lo[i], s.Hi[i] = 0, 1
		}
		return s
	}
	cold := func(_ int, x []float64) { clear(x) }
	warm, x := set(), make([]float64, n)
	for range 3000 {
		for i := range c {
			c[i] = 12 * (r.Float64() - 0.5)
		}
		y := make([]float64, n)
		if !warm.Solve(f, x, 3, cold).Solved() || !set().Solve(f, y, 3, cold).Solved() {
			t.Fatal("not solved")
		}
		for i := range x {
			if math.Abs(x[i]-y[i]) > 1e-9 {
				t.Fatalf("x[%d] = %g, from a fresh solver %g", i, x[i], y[i])
			}
		}
	}
	if len(warm.plans.made) != mostPlans {
		t.Errorf("%d plans were made: the room for %d was never used up", len(warm.plans.made), mostPlans)
	}
}

// A step whose rows are weighed is the one that a library finds for the full matrix, also with the
// weights of another step, of which some leave a row to its bound alone.
func TestWeightedPlanAgainstLibrary(t *testing.T) {
	solved := 0
	for seed := uint64(0); seed < 300; seed++ {
		r := rand.New(rand.NewPCG(seed, 8))
		n := 1 + r.IntN(70)
		s := NewSolver(n)
		place := func(i, k int) {
			if at := i*s.j.side + k + s.j.zero; s.j.at[at] == noPlace {
				s.j.place(at)
			}
		}
		for i := range n {
			for range 1 + r.IntN(4) {
				place(i, r.IntN(n))
			}
		}
		for round := range 3 {
			if round == 2 { // slopes that come later
				place(r.IntN(n), r.IntN(n))
			}
			for k := firstEntry; k < len(s.j.val); k++ {
				s.j.val[k] = (1 + r.Float64()) * float64(1-2*r.IntN(2))
			}
			rhs, shift := make([]float64, n), r.Float64()
			for i := range n {
				s.rim[i], s.steep[i] = 1+r.Float64(), r.Float64()
				if r.IntN(4) == 0 {
					s.steep[i] = 0
				}
				s.r[i] = r.Float64() - 0.5
				rhs[i] = -s.r[i]
			}
			w := &s.soft
			w.lay(s.j, s.rim, s.steep, shift)
			if p := w.get(&w.entries, s.maker); !p.sparse || !s.factored(&w.plans, w.val, s.load(&w.plans, s.rim)) {
				w.remake(&w.entries, s.maker)
				if !w.last.sparse || !s.factored(&w.plans, w.val, s.load(&w.plans, s.rim)) {
					continue // singular
				}
			}
			w.last.backward(w.work)

			a := mat.NewDense(n, n, nil)
			for k := firstEntry; k < len(s.j.val); k++ {
				i, c := int(s.j.row[k]), int(s.j.col[k])
				a.Set(i, c, s.steep[i]*s.j.val[k])
			}
			for i := range n {
				a.Set(i, i, a.At(i, i)+s.rim[i]+s.steep[i]*shift)
			}
			var lib mat.LU
			lib.Factorize(a)
			var want mat.VecDense
			if lib.Cond() > 1e6 || lib.SolveVecTo(&want, false, mat.NewVecDense(n, rhs)) != nil {
				continue
			}
			for i, d := range s.dx {
				if d := math.Abs(d - want.AtVec(i)); d > 1e-7*mat.Norm(&want, math.Inf(1)) {
					t.Fatalf("seed %d, n = %d, round %d: step %d is %g, gonum %g", seed, n, round, i, s.dx[i], want.AtVec(i))
				}
			}
			solved++
		}
	}
	if solved < 600 {
		t.Errorf("only %d steps compared", solved)
	}
}
