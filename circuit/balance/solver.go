package balance

import "math"

// Problem evaluates G and its Jacobian. Both come zeroed; row i pairs with x[i].
// J is row-major, n×n. Eval must not allocate and must not keep the slices.
type Problem interface {
	Eval(x, g, jac []float64)
}

// Rung names the part of the ladder that solved a step.
type Rung int

// The rungs, in the order they are tried.
const (
	Warm          Rung = iota // Newton from the step before
	WarmSmooth                // Fischer-Burmeister from the step before
	Cold                      // Newton from a cold start
	ColdSmooth                // Fischer-Burmeister from a cold start
	WarmTransient             // pseudo-transient from the step before
	ColdTransient             // pseudo-transient from a cold start
	Levels                    // cold starts at other levels
	Failed
)

var rungNames = [...]string{
	"Newton from the step before", "smoothed Newton from the step before", "Newton from a cold start",
	"smoothed Newton from a cold start", "pseudo-transient from the step before",
	"pseudo-transient from a cold start", "cold starts at other pressure levels", "failed",
}

func (r Rung) String() string { return rungNames[r] }

// Tried lists the rungs up to and with r, in words.
func Tried() []string { return rungNames[:Failed] }

// Result tells how a solve went.
type Result struct {
	Rung       Rung
	Iterations int
	Norm       float64 // scaled 2-norm of the min/max residual
	Worst      int     // row with the largest residual
}

// Solved reports whether x satisfies the conditions.
func (r Result) Solved() bool { return r.Rung != Failed }

// Tolerances and limits. Unknowns and rows are scaled to order one by the
// caller, so one number serves all. Tol leaves two digits to the rounding of a
// hundred-fold unknown; Newton's last step usually ends far below it.
const (
	Tol       = 1e-11
	maxStep   = 3.0 // a step may move an unknown by this plus twice its size
	tinyPivot = 1e-14
)

// Solver holds the workspace for one problem size. Not for use by several
// goroutines at once. Lo and Hi may change between solves.
type Solver struct {
	Lo, Hi []float64
	Weight []float64 // of the distance to a bound against the row, > 0
	Long   []bool    // unknowns that enter linearly: steps are not limited for them

	n               int
	f               *lu
	g, jac          []float64
	r, dx, xt, best []float64
	start, anchor   []float64
	hist            [5]float64
}

// NewSolver makes the workspace for n unknowns, all without bounds.
func NewSolver(n int) *Solver {
	s := &Solver{n: n, f: newLU(n), Long: make([]bool, n)}
	for _, p := range []*[]float64{&s.Lo, &s.Hi, &s.Weight, &s.g, &s.r, &s.dx, &s.xt, &s.best, &s.start, &s.anchor} {
		*p = make([]float64, n)
	}
	s.jac = make([]float64, n*n)
	for i := 0; i < n; i++ {
		s.Lo[i], s.Hi[i], s.Weight[i] = math.Inf(-1), math.Inf(1), 1
	}
	return s
}

// Residual evaluates the min/max residual of row i at the last evaluated point.
func (s *Solver) Residual(i int) float64 { return s.r[i] }

// Row returns the value of G_i at the last evaluated point: at a bound, what the
// bound holds back.
func (s *Solver) Row(i int) float64 { return s.g[i] }

// Solve finds x, starting from it; when nothing solves it, x is the nearest point
// found. cold fills a cold start for a level
// (0 = the usual one, 1.. = others); it is called only when the start fails.
func (s *Solver) Solve(p Problem, x []float64, levels int, cold func(level int, x []float64)) Result {
	copy(s.start, x)
	total, bestNorm := 0, math.Inf(1)
	try := func(rung Rung, run func() (bool, int)) (Result, bool) {
		ok, it := run()
		total += it
		norm, worst := s.norm(p, x, minmax, 0, nil)
		if !ok && norm < bestNorm {
			bestNorm = norm
			copy(s.best, x[:s.n])
		}
		return Result{rung, total, norm, worst}, ok
	}
	type rung struct {
		r    Rung
		from int // −1 the step before, else a cold level
		run  func() (bool, int)
	}
	newton := func(it int) func() (bool, int) { return func() (bool, int) { return s.newton(p, x, minmax, it) } }
	smooth := func(it int) func() (bool, int) { return func() (bool, int) { return s.smooth(p, x, it) } }
	transient := func(d0 float64) func() (bool, int) {
		return func() (bool, int) { return s.transient(p, x, d0) }
	}
	ladder := []rung{
		{Warm, -1, newton(15)}, {WarmSmooth, -1, smooth(40)}, {Cold, 0, newton(30)}, {ColdSmooth, 0, smooth(60)},
		{WarmTransient, -1, transient(1)}, {ColdTransient, 0, transient(10)},
	}
	for _, l := range ladder[:1] { // the usual way out, before any closure of the rest is made
		if res, ok := try(l.r, l.run); ok {
			return res
		}
	}
	for _, l := range ladder[1:] {
		s.restart(x, l.from, cold)
		if res, ok := try(l.r, l.run); ok {
			return res
		}
	}
	for level := 1; level < levels; level++ {
		for _, run := range []func() (bool, int){smooth(60), transient(10), transient(1000)} {
			s.restart(x, level, cold)
			if res, ok := try(Levels, run); ok {
				return res
			}
		}
	}
	copy(x, s.best)
	norm, worst := s.norm(p, x, minmax, 0, nil)
	return Result{Failed, total, norm, worst}
}

func (s *Solver) restart(x []float64, from int, cold func(int, []float64)) {
	if from < 0 {
		copy(x, s.start)
	} else {
		cold(from, x)
	}
}

// form turns G, x and the bounds into a residual and the two weights of its
// Jacobian row: dr_i = wx·dx_i + wg·dG_i.
type form func(x, g, lo, hi, a float64) (r, wx, wg float64)

// minmax is mid(a(x−h), a(x−l), G): zero exactly at a solution.
func minmax(x, g, lo, hi, a float64) (r, wx, wg float64) {
	r, wx, wg = g, 0, 1
	if d := a * (x - lo); d < r {
		r, wx, wg = d, a, 0
	}
	if d := a * (x - hi); d > r {
		r, wx, wg = d, a, 0
	}
	return
}

// fb is the Fischer-Burmeister function, nested for two bounds (Billups).
func fb(x, g, lo, hi, a float64) (r, wx, wg float64) {
	if lo == hi {
		return a * (x - lo), a, 0
	}
	r, wx, wg = g, 0, 1
	if !math.IsInf(hi, 1) {
		q, du, dv := phi(a*(hi-x), -g)
		r, wx, wg = -q, a*du, dv
	}
	if !math.IsInf(lo, -1) {
		q, du, dv := phi(a*(x-lo), r)
		r, wx, wg = q, a*du+dv*wx, dv*wg
	}
	return
}

// phi(u,v) = u + v − √(u²+v²), zero where u, v >= 0 and uv = 0, with its derivatives.
func phi(u, v float64) (q, du, dv float64) {
	h := math.Hypot(u, v)
	if h < 1e-300 {
		return 0, 1 - math.Sqrt2/2, 1 - math.Sqrt2/2
	}
	return u + v - h, 1 - u/h, 1 - v/h
}

// norm evaluates the problem at x, leaves the residual in s.r and, with jac
// set, the Jacobian of the residual in s.f.a. delta adds delta·(x − anchor) to G.
func (s *Solver) norm(p Problem, x []float64, form form, delta float64, anchor []float64) (float64, int) {
	clear(s.g)
	clear(s.jac)
	p.Eval(x, s.g, s.jac)
	sum, worst, big := 0.0, 0, -1.0
	for i, g := range s.g {
		if delta > 0 {
			g += delta * (x[i] - anchor[i])
		}
		r, _, _ := form(x[i], g, s.Lo[i], s.Hi[i], s.Weight[i])
		s.r[i] = r
		sum += r * r
		if v := math.Abs(r); v > big || v != v {
			big, worst = v, i
		}
	}
	if sum != sum {
		return math.Inf(1), worst
	}
	return math.Sqrt(sum), worst
}

// direction solves for the Newton step of the last evaluated point into s.dx.
// A nearly singular matrix is met with a proximal shift, growing once.
func (s *Solver) direction(x []float64, form form, delta float64, anchor []float64) bool {
	n := s.n
	for _, shift := range [...]float64{0, 1e-6, 1e-2} {
		for i := 0; i < n; i++ {
			g := s.g[i]
			if delta > 0 {
				g += delta * (x[i] - anchor[i])
			}
			_, wx, wg := form(x[i], g, s.Lo[i], s.Hi[i], s.Weight[i])
			row, src := s.f.a[i*n:i*n+n], s.jac[i*n:i*n+n]
			if wg == 0 {
				clear(row)
			} else {
				for j, v := range src {
					row[j] = wg * v
				}
			}
			row[i] += wx + wg*(delta+shift)
		}
		if piv := s.f.factor(); piv >= tinyPivot {
			s.f.solve(s.r, s.dx)
			for i := range s.dx {
				s.dx[i] = -s.dx[i]
				if s.dx[i] != s.dx[i] {
					return false
				}
			}
			return true
		}
	}
	return false
}

// newton iterates on a form of the conditions until the norm is below
// tolerance. It returns whether it got there and the iterations used.
func (s *Solver) newton(p Problem, x []float64, form form, maxIt int) (bool, int) {
	return s.iterate(p, x, form, maxIt, 0, nil, 1)
}

func (s *Solver) iterate(p Problem, x []float64, form form, maxIt int, delta float64, anchor []float64, tolScale float64) (bool, int) {
	norm, _ := s.norm(p, x, form, delta, anchor)
	for i := range s.hist {
		s.hist[i] = norm
	}
	for it := 0; ; it++ {
		if tol := tolScale * s.tol(x); norm <= tol || (norm < 1e-6 && delta == 0 && s.rounded(x, form, tol)) {
			return true, it
		}
		if it == maxIt || math.IsInf(norm, 1) {
			return false, it
		}
		if !s.direction(x, form, delta, anchor) {
			return false, it
		}
		norm = s.lineSearch(p, x, form, delta, anchor)
		s.hist[it%len(s.hist)] = norm
	}
}

// tol grows with the size of the unknowns, as what rounding leaves of a residual
// does, but not without end: an unknown that runs away is no solution.
func (s *Solver) tol(x []float64) float64 {
	m := 0.0
	for i, v := range x[:s.n] {
		if s.Long[i] {
			continue
		}
		if v := math.Abs(v); v > m {
			m = v
		}
	}
	return Tol * (1 + 0.1*math.Min(m, 1e3))
}

// rounded reports whether the residual is within tolerance of what rounding of
// the unknowns can leave in steep rows: rows are weighed by their largest slope,
// from 10,000 up.
func (s *Solver) rounded(x []float64, form form, tol float64) bool {
	sum := 0.0
	for i, r := range s.r {
		if _, _, wg := form(x[i], s.g[i], s.Lo[i], s.Hi[i], s.Weight[i]); wg != 0 {
			steep := 0.0
			for _, v := range s.jac[i*s.n : i*s.n+s.n] {
				steep = math.Max(steep, math.Abs(v))
			}
			r /= math.Max(1, 1e-4*steep)
		}
		sum += r * r
	}
	return math.Sqrt(sum) <= tol
}

// lineSearch moves x along s.dx: a full step, shortened as a whole where it
// would carry an unknown too far, halved until the norm is below the largest of
// the last few, else the best of the points tried.
func (s *Solver) lineSearch(p Problem, x []float64, form form, delta float64, anchor []float64) float64 {
	ref := s.hist[0]
	for _, h := range s.hist[1:] {
		ref = math.Max(ref, h)
	}
	t := 1.0
	for i, d := range s.dx {
		if lim := maxStep + 2*math.Abs(x[i]); !s.Long[i] && math.Abs(d)*t > lim {
			t = lim / math.Abs(d)
		}
	}
	bestNorm, bestT := math.Inf(1), t
	copy(s.xt, x[:s.n])
	for k := 0; k <= 8; k++ {
		for i := range s.dx {
			x[i] = s.xt[i] + t*s.dx[i]
		}
		norm, _ := s.norm(p, x, form, delta, anchor)
		if norm < ref || norm == 0 {
			return norm
		}
		if norm < bestNorm {
			bestNorm, bestT = norm, t
		}
		t /= 2
	}
	for i := range s.dx {
		x[i] = s.xt[i] + bestT*s.dx[i]
	}
	norm, _ := s.norm(p, x, form, delta, anchor)
	return norm
}

// smooth runs Fischer-Burmeister and then a few min/max steps, which make the
// bounds exact.
func (s *Solver) smooth(p Problem, x []float64, maxIt int) (bool, int) {
	ok, it := s.iterate(p, x, fb, maxIt, 0, nil, 100)
	if !ok {
		return false, it
	}
	ok, more := s.newton(p, x, minmax, 8)
	return ok, it + more
}

// transient marches x' = −G implicitly, with steps that grow as the residual
// falls, then polishes.
func (s *Solver) transient(p Problem, x []float64, delta float64) (bool, int) {
	total := 0
	old, _ := s.norm(p, x, minmax, 0, nil)
	for step := 0; step < 120; step++ {
		copy(s.anchor, x[:s.n])
		_, it := s.iterate(p, x, fb, 4, delta, s.anchor, 100)
		total += it
		now, _ := s.norm(p, x, minmax, 0, nil)
		if math.IsInf(now, 1) {
			return false, total
		}
		if now < 1e-6 || delta < 1e-9 {
			break
		}
		ratio := old / now
		if ratio > 0.99 && ratio < 1.01 {
			ratio = 1.5
		}
		delta /= math.Max(0.5, math.Min(4, ratio))
		old = now
	}
	ok, it := s.smooth(p, x, 30)
	return ok, total + it
}
