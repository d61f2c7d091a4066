package balance

import (
	"math"
	"testing"
)

// problem adapts a function; the Jacobian is by central differences, so that
// the tests do not hang on hand-made derivatives.
type problem struct {
	n int
	f func(x, g []float64)
}

func (p problem) Eval(x, g []float64, jac *Slopes) {
	p.f(x, g)
	if jac == nil {
		return
	}
	hi, lo := make([]float64, p.n), make([]float64, p.n)
	for j := 0; j < p.n; j++ {
		h := 1e-6 * (1 + math.Abs(x[j]))
		old := x[j]
		x[j] = old + h
		p.f(x, hi)
		x[j] = old - h
		p.f(x, lo)
		x[j] = old
		for i := 0; i < p.n; i++ {
			jac.Add(i, j, (hi[i]-lo[i])/(2*h))
		}
	}
}

func inf() float64 { return math.Inf(1) }

// Published problems with known solutions.
func TestKnownProblems(t *testing.T) {
	cases := []struct {
		name   string
		source string
		n      int
		lo, hi []float64
		f      func(x, g []float64)
		start  []float64
		want   []float64
		tol    float64
	}{
		{"Powell badly scaled", "Moré, Garbow, Hillstrom, ACM TOMS 7 (1981), problem 3", 2,
			[]float64{-inf(), -inf()}, []float64{inf(), inf()},
			func(x, g []float64) {
				g[1] = 1e4*x[0]*x[1] - 1
				g[0] = math.Exp(-x[0]) + math.Exp(-x[1]) - 1.0001
			}, []float64{0, 1}, []float64{1.098159e-5, 9.106146}, 1e-6},
		{"Josephy", "Josephy 1979, as in Dirkse and Ferris, MCPLIB (1995): x = (√6/2, 0, 0, 1/2) is a solution", 4,
			[]float64{0, 0, 0, 0}, []float64{inf(), inf(), inf(), inf()},
			kojima, []float64{1.2, 0.1, 0.1, 0.4}, []float64{math.Sqrt(6) / 2, 0, 0, 0.5}, 1e-8},
		{"Murty linear", "Murty 1988, Linear Complementarity: x = (0, 0, 0, 1) for upper triangular M with q = −1", 4,
			[]float64{0, 0, 0, 0}, []float64{inf(), inf(), inf(), inf()},
			func(x, g []float64) {
				for i := range g {
					g[i] = x[i] - 1
					for j := i + 1; j < 4; j++ {
						g[i] += 2 * x[j]
					}
				}
			}, []float64{5, 5, 5, 5}, []float64{0, 0, 0, 1}, 1e-10},
		{"both bounds", "x − 2 on [0, 1]: at the upper bound; x + 2: at the lower; x − 0.5: inside (by hand)", 3,
			[]float64{0, 0, 0}, []float64{1, 1, 1},
			func(x, g []float64) { g[0], g[1], g[2] = x[0]-2, x[1]+2, x[2]-0.5 },
			[]float64{0.5, 0.5, 0}, []float64{1, 0, 0.5}, 1e-12},
	}
	for _, c := range cases {
		s := NewSolver(c.n)
		copy(s.Lo, c.lo)
		copy(s.Hi, c.hi)
		x := append([]float64(nil), c.start...)
		res := s.Solve(problem{c.n, c.f}, x, 3, func(level int, x []float64) {
			for i := range x {
				x[i] = c.start[i] * (1 + 0.3*float64(level))
			}
		})
		if !res.Solved() {
			t.Errorf("%s: not solved, norm %g", c.name, res.Norm)
			continue
		}
		for i := range x {
			if math.Abs(x[i]-c.want[i]) > c.tol*(1+math.Abs(c.want[i])) {
				t.Errorf("%s: x[%d] = %.9g, want %.9g (%s)", c.name, i, x[i], c.want[i], c.source)
			}
		}
	}
}

// kojima is the Kojima-Shindo problem; (√6/2, 0, 0, 1/2) and (1, 0, 3, 0) solve it.
func kojima(x, g []float64) {
	g[0] = 3*x[0]*x[0] + 2*x[0]*x[1] + 2*x[1]*x[1] + x[2] + 3*x[3] - 6
	g[1] = 2*x[0]*x[0] + x[0] + x[1]*x[1] + 10*x[2] + 2*x[3] - 2
	g[2] = 3*x[0]*x[0] + x[0]*x[1] + 2*x[1]*x[1] + 2*x[2] + 9*x[3] - 9
	g[3] = x[0]*x[0] + 3*x[1]*x[1] + 2*x[2] + 3*x[3] - 3
}

// A polynomial of order k is foretold exactly by order k: its differences of order k+1
// vanish (Newton's backward differences).
func TestForetoldPolynomial(t *testing.T) {
	for order := 0; order <= mostOrder; order++ {
		f := func(t float64) float64 { return 1 + math.Pow(t/3-1, float64(order)) }
		p := newPast(1)
		for k := range 20 {
			p.keep([]float64{f(float64(k))}, 3, true)
		}
		p.order = max(order, 1) // a line foretells a constant too; order 0 leaves the start alone
		x := []float64{f(19)}
		if !p.guess(x, []float64{-inf()}, []float64{inf()}) {
			t.Fatalf("order %d: no guess", order)
		}
		if want := f(20); math.Abs(x[0]-want) > 1e-11*(1+math.Abs(want)) {
			t.Errorf("order %d foretells %.15g, the polynomial is %.15g", order, x[0], want)
		}
	}
}

// After a corner in a smooth way only what came since is extrapolated: a parabola is foretold
// exactly from its third point on.
func TestForetoldCorner(t *testing.T) {
	f := func(k int) float64 {
		if k <= 40 {
			return math.Sin(0.1 * float64(k))
		}
		s := float64(k - 40)
		return math.Sin(4) + 0.7*s - 0.03*s*s
	}
	p := newPast(1)
	for k := range 60 {
		x := []float64{f(k - 1)}
		p.guess(x, []float64{-inf()}, []float64{inf()})
		missed := math.Abs(x[0] - f(k))
		if k > 42 && missed > 1e-12 {
			t.Errorf("%d points after the corner the parabola is missed by %g", k-40, missed)
		}
		steps := 1
		if missed > 1e-2 {
			steps = 3
		}
		p.keep([]float64{f(k)}, steps, false)
	}
}

// The order is the lowest that serves: noise is not extrapolated.
func TestForetoldOrder(t *testing.T) {
	smooth, noisy, state := newPast(1), newPast(1), uint64(1)
	for k := range 200 {
		state = state*6364136223846793005 + 1442695040888963407
		smooth.keep([]float64{math.Sin(0.1 * float64(k))}, 3, true)
		noisy.keep([]float64{float64(int64(state>>11)) / float64(1<<52)}, 3, true)
		if k > 10 && noisy.order > 2 {
			t.Fatalf("order %d for noise", noisy.order)
		}
	}
	if smooth.order < 4 {
		t.Errorf("order %d for a sine of 63 samples", smooth.order)
	}
}

// bordered is x0·a = 2, x1 = x0 + b with a and b known, called −1 and −2.
type bordered struct{ a, b float64 }

func (p bordered) Eval(x, g []float64, j *Slopes) {
	g[0], g[1] = 7, 7 // rows of known numbers are nobody's concern
	g[2], g[3] = p.a*x[0]-2, x[1]-x[0]-p.b
	if j == nil {
		return
	}
	j.Add(0, 0, p.a)
	j.Add(0, -1, x[0])
	j.Add(1, 1, 1)
	j.Add(1, 0, -1)
	j.Add(1, -2, -1)
	j.Add(-1, 0, 1e6)
	j.Add(-2, -1, 1e6)
	j.Add(1, math.MinInt32, 1e6) // a number that is not there
}

func TestBorder(t *testing.T) {
	s := NewSolver(2)
	s.Border(2)
	x := []float64{0, 0}
	if res := s.Solve(bordered{4, 3}, x, 1, func(int, []float64) {}); !res.Solved() {
		t.Fatal(res)
	}
	if x[0] != 0.5 || x[1] != 3.5 {
		t.Errorf("x = %v, want 0.5, 3.5", x)
	}
}

// A problem without a solution must say so and name the row.
func TestNoSolution(t *testing.T) {
	s := NewSolver(2)
	x := []float64{0, 0}
	res := s.Solve(problem{2, func(x, g []float64) { g[0], g[1] = x[0]-1, x[1]*x[1]+1 }}, x, 2, func(int, []float64) {})
	if res.Solved() {
		t.Fatalf("solved x² + 1 = 0: x = %v", x)
	}
	if res.Worst != 1 || res.Norm < 0.5 {
		t.Errorf("worst row %d with norm %g, want row 1", res.Worst, res.Norm)
	}
}
