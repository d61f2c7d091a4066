package balance

import "math"

// Problem evaluates G into g and, unless j is nil, adds its slopes; row i pairs with
// x[i]. x is what Solve was given. g has a place for each known number (see Border)
// before the rows. Eval must not allocate.
type Problem interface {
	Eval(x, g []float64, j *Slopes)
}

// Mild is a problem that can be put more mildly, from 1 down to 0, the problem itself.
type Mild interface{ Ease(e float64) }

// Rung names the part of the ladder that solved a step.
type Rung int

// The rungs, in the order they are tried.
const (
	Warm          Rung = iota // Newton from the step before
	WarmSmooth                // Fischer-Burmeister from the step before
	Cold                      // Newton from a cold start
	ColdSmooth                // Fischer-Burmeister from a cold start
	Eased                     // by way of a milder problem
	WarmTransient             // pseudo-transient from the step before
	ColdTransient             // pseudo-transient from a cold start
	Levels                    // cold starts at other levels
	Failed
)

var rungNames = [...]string{
	"Newton from the step before", "smoothed Newton from the step before", "Newton from a cold start",
	"smoothed Newton from a cold start", "by way of a leakier circuit", "pseudo-transient from the step before",
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
	Worst      int     // row with the largest residual, of a failure
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
	// Foretell lets Solve move the start on by what the last solutions foretell,
	// where the caller left it at the last one.
	Foretell bool

	n               int
	maker           *planner
	j               *Slopes
	rows, g         []float64 // g is the end of rows
	r, dx, xt, best []float64
	start, anchor   []float64
	mark            []float64
	rim, steep      []float64 // weights of bound and G in each row, of a step without a plan
	hist            [5]float64
	now             point
	plans           plans
	soft            weighted // the same for rows that are weighed
	used            *plans   // by the last step with a plan
	past            past
	far             bool     // the step in dx may have to be shortened
	halved          bool     // the last step was
	guessed         struct { // what the evaluation of a guess left; the guess itself is in best
		g, r []float64
		key  []uint64
	}
}

// point tells what the workspace holds.
type point struct {
	norm   float64
	slopes bool // s.j belongs to this point
}

// NewSolver makes the workspace for n unknowns, all without bounds.
func NewSolver(n int) *Solver {
	s := &Solver{n: n, maker: newPlanner(n), j: newSlopes(n), Long: make([]bool, n), plans: newPlans(n), soft: weighted{plans: newPlans(n)}, past: newPast(n)}
	for _, p := range []*[]float64{&s.Lo, &s.Hi, &s.Weight, &s.r, &s.dx, &s.xt, &s.best, &s.start, &s.anchor, &s.mark, &s.rim, &s.steep, &s.guessed.g, &s.guessed.r} {
		*p = make([]float64, n)
	}
	s.guessed.key = make([]uint64, len(s.plans.key))
	s.Border(0)
	s.Reset()
	return s
}

// Reset makes s as new, but for what Border was told: all it has learned is forgotten, only
// its memory is kept.
func (s *Solver) Reset() {
	for i := range s.Lo {
		s.Lo[i], s.Hi[i], s.Weight[i], s.Long[i] = math.Inf(-1), math.Inf(1), 1, false
	}
	s.Foretell, s.far, s.now = false, false, point{}
	s.border(s.j.known)
	s.plans.forget()
	s.past.forget()
}

// Border lets the problem count known numbers, from −1 down to −known, as unknowns:
// their rows and slopes are taken and not looked at. It returns where the problem will
// find its rows, with the known ones before them.
func (s *Solver) Border(known int) []float64 {
	if s.rows == nil || known != s.j.known {
		s.border(known)
		s.rows = make([]float64, known+s.n, known+s.n+1) // room for place 0, if there are no unknowns
		s.g = s.rows[known:]
	}
	return s.rows
}

// border makes room for known numbers and forgets all slopes, and what was weighed of them.
func (s *Solver) border(known int) {
	s.j.border(known)
	s.soft.border(s.n)
}

// Restate asks the problem for its steady slopes again (Slopes.AddSteady): something has changed them.
// The next solution may lie far off: there the smoothed form comes as soon as a step of Newton's
// method leads astray.
func (s *Solver) Restate() { s.j.stale = true }

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
	foretold := s.Foretell && s.past.guess(x, s.Lo, s.Hi)
	worse, turned := false, s.j.stale && s.past.count > 0 // from the last solution to another form
	s.norm(p, x, aim{}, true)
	if foretold && s.now.norm > poorGuess {
		foretold = s.keepGuess(p, x)
		worse = !foretold
	}
	ok, it := s.iterate(p, x, aim{wary: turned}, warmSteps)
	if !ok && turned {
		done, more := s.smoothed(p, x)
		it += more
		if done {
			s.past.begin(x)
			return Result{Rung: WarmSmooth, Iterations: it, Norm: s.now.norm}
		}
	}
	if !ok && (foretold || turned) {
		worse = true
		copy(x, s.start)
		more := 0
		ok, more = s.newton(p, x, warmSteps)
		it += more
	}
	if ok {
		if s.Foretell {
			s.past.keep(x, it, worse)
		} else {
			s.past.begin(x)
		}
		return Result{Rung: Warm, Iterations: it, Norm: s.now.norm}
	}
	s.past.forget()
	s.j.Tangent = true
	defer func() { s.j.Tangent = false }()
	res := s.ladder(p, x, it, levels, cold, turned)
	if res.Solved() {
		s.past.begin(x)
	}
	return res
}

// smoothed runs smooth from the start, as the first rung of the ladder does.
func (s *Solver) smoothed(p Problem, x []float64) (bool, int) {
	copy(x, s.start)
	s.j.Tangent = true
	defer func() { s.j.Tangent = false }()
	return s.smooth(p, x, smoothSteps)
}

// A guess that leaves more than poorGuess is weighed against where it started; warmSteps bounds
// the iterations from either, smoothSteps those of the smoothed form from the step before.
const (
	poorGuess   = 1e-3
	warmSteps   = 15
	smoothSteps = 40
)

// keepGuess goes back to the start from a guess that does not leave much less than the start does,
// and reports whether it stays with the guess.
func (s *Solver) keepGuess(p Problem, x []float64) bool {
	guessed := s.now
	copy(s.best, x)
	copy(s.guessed.g, s.g)
	copy(s.guessed.r, s.r)
	copy(s.guessed.key, s.plans.key)
	copy(x, s.start)
	if s.norm(p, x, aim{}, false) < 2*guessed.norm {
		s.norm(p, x, aim{}, true)
		return false
	}
	copy(x, s.best) // the slopes are still the guess's
	copy(s.g, s.guessed.g)
	copy(s.r, s.guessed.r)
	copy(s.plans.key, s.guessed.key)
	s.now = guessed
	return true
}

// ladder goes on where Newton from the step before has ended, after total iterations; smoothed reports
// whether the first of its rungs has been tried.
func (s *Solver) ladder(p Problem, x []float64, total, levels int, cold func(level int, x []float64), smoothed bool) Result {
	bestNorm := math.Inf(1)
	try := func(rung Rung, run func() (bool, int)) (Result, bool) {
		ok, it := run()
		total += it
		norm := s.norm(p, x, aim{}, false)
		if !ok && norm < bestNorm {
			bestNorm = norm
			copy(s.best, x[:s.n])
		}
		return Result{rung, total, norm, s.worst()}, ok
	}
	try(Warm, func() (bool, int) { return false, 0 })
	type rung struct {
		r    Rung
		from int // −1 the step before, else a cold level
		run  func() (bool, int)
	}
	newton := func(it int) func() (bool, int) { return func() (bool, int) { return s.newton(p, x, it) } }
	smooth := func(it int) func() (bool, int) { return func() (bool, int) { return s.smooth(p, x, it) } }
	transient := func(d0 float64) func() (bool, int) {
		return func() (bool, int) { return s.transient(p, x, d0) }
	}
	eased := func() (bool, int) { return s.eased(p, x) }
	rungs := []rung{
		{WarmSmooth, -1, smooth(smoothSteps)}, {Cold, 0, newton(30)}, {ColdSmooth, 0, smooth(60)},
		{Eased, -1, eased}, {Eased, 0, eased},
		{WarmTransient, -1, transient(1)}, {ColdTransient, 0, transient(10)},
	}
	if smoothed {
		rungs = rungs[1:]
	}
	for _, l := range rungs {
		s.restart(x, l.from, cold)
		if res, ok := try(l.r, l.run); ok {
			return res
		}
	}
	for level := 1; level < levels; level++ {
		for _, run := range []func() (bool, int){smooth(60), eased, transient(10), transient(1000)} {
			s.restart(x, level, cold)
			if res, ok := try(Levels, run); ok {
				return res
			}
		}
	}
	copy(x, s.best)
	norm := s.norm(p, x, aim{}, false)
	return Result{Failed, total, norm, s.worst()}
}

func (s *Solver) restart(x []float64, from int, cold func(int, []float64)) {
	if from < 0 {
		copy(x, s.start)
	} else {
		cold(from, x)
	}
}

// smooth runs Fischer-Burmeister and then a few min/max steps, which make the
// bounds exact.
func (s *Solver) smooth(p Problem, x []float64, maxIt int) (bool, int) {
	ok, it := s.from(p, x, aim{smooth: true, loose: 100}, maxIt)
	if !ok {
		return false, it
	}
	ok, more := s.newton(p, x, 8)
	if ok && more == 0 {
		s.polish(p, x)
	}
	return ok, it + more
}

// polish takes one more step of Newton's method from a solution that another form has found near enough,
// and back if that leaves more: it makes bounds and linear rows exact.
func (s *Solver) polish(p Problem, x []float64) {
	before := s.now.norm
	if before == 0 || !s.planned(x, aim{}) || s.far {
		return
	}
	if !(s.norm(p, x, aim{}, false) <= before) {
		copy(x, s.xt)
		s.norm(p, x, aim{}, false)
	}
}

// eased solves milder problems first, each from the one before. Of what rescues a
// step it rescues most: pressures that hang on leaks alone are found on the way.
func (s *Solver) eased(p Problem, x []float64) (bool, int) {
	m, ok := p.(Mild)
	if !ok {
		return false, 0
	}
	defer m.Ease(0)
	total := 0
	for e := 1.0; ; e /= 10 {
		if e < 1e-7 {
			e = 0
		}
		m.Ease(e)
		copy(s.mark, x[:s.n])
		ok, it := s.newton(p, x, 15)
		total += it
		if !ok {
			copy(x, s.mark)
			ok, it = s.smooth(p, x, 60)
			total += it
		}
		if !ok {
			copy(x, s.mark)
			ok, it = s.transient(p, x, 1)
			total += it
		}
		if !ok || e == 0 {
			return ok, total
		}
	}
}

// transient marches x' = −G implicitly, with steps that grow as the residual
// falls, then polishes.
func (s *Solver) transient(p Problem, x []float64, delta float64) (bool, int) {
	total := 0
	old := s.norm(p, x, aim{}, false)
	for step := 0; step < 120; step++ {
		copy(s.anchor, x[:s.n])
		_, it := s.from(p, x, aim{smooth: true, loose: 100, delta: delta}, 4)
		total += it
		now := s.norm(p, x, aim{}, false)
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
