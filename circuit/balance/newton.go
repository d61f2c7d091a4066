package balance

import "math"

// newton iterates on the min/max form from x until the norm is below tolerance. It
// returns whether it got there and the iterations used.
func (s *Solver) newton(p Problem, x []float64, maxIt int) (bool, int) {
	return s.from(p, x, aim{}, maxIt)
}

// from evaluates the problem at x and iterates.
func (s *Solver) from(p Problem, x []float64, a aim, maxIt int) (bool, int) {
	s.norm(p, x, a, true)
	return s.iterate(p, x, a, maxIt)
}

// iterate goes on from x, where the problem is evaluated with slopes.
func (s *Solver) iterate(p Problem, x []float64, a aim, maxIt int) (bool, int) {
	norm := s.now.norm
	for i := range s.hist {
		s.hist[i] = norm
	}
	before, planned, repeated := 0.0, false, false
	for it := 0; ; it++ {
		tol := Tol
		if norm > tol && norm < 1e-6 && (it > 0 || norm <= mostTol || a.loose > 0) { // else the size of x cannot decide it
			tol = s.tol(x)
		}
		if a.loose > 0 {
			tol *= a.loose
		}
		if tol > Tol && !a.smooth && !s.onBounds(x) {
			tol = Tol
		}
		if repeated { // what old factors leave tends to lie in one row, and must be far below tolerance
			if norm <= tol/64 {
				return true, it
			}
		} else if norm <= tol || (it > 0 && norm < 1e-6 && norm > before/16 && a.delta == 0 && s.rounded(p, x, a, tol)) {
			return true, it
		}
		if it == maxIt || math.IsInf(norm, 1) {
			return false, it
		}
		if !s.now.slopes {
			if left := norm * norm / before; planned && !a.weighed() && !repeated && !s.halved && 4*left <= tol && s.again(p, x, norm) {
				norm, before, repeated = s.now.norm, norm, true
				continue
			}
			norm = s.norm(p, x, a, true)
		}
		before, repeated = norm, false
		planned = s.planned(x, a)
		if !planned && !s.direction(x, a) {
			return false, it
		}
		norm = s.lineSearch(p, x, a, planned)
		if norm > lostShare*max(1, before) || a.wary && s.halved {
			return false, it + 1
		}
		s.hist[it%len(s.hist)] = norm
	}
}

// farOff is a norm from which one step does not lead to a solution: its end is evaluated with slopes,
// for the next.
const farOff = 1e-3

// lostShare is by how much the norm may grow in a step that no shortening helps; beyond it nothing
// is found any more.
const lostShare = 1e3

// again takes another step with the factors of the point before, whose slopes
// are near enough when the last step went far and whole. It leaves x as it is when that
// does not help.
func (s *Solver) again(p Problem, x []float64, norm float64) bool {
	if !s.plans.last.met(s.plans.key) {
		return false
	}
	s.step()
	s.stride(x)
	if s.norm(p, x, aim{}, false) < norm {
		return true
	}
	copy(x, s.xt)
	return false
}

// onBounds reports whether unknowns that rest on a bound do so to the rounding of their own size: a
// tolerance that has grown with the size of others is not for them.
func (s *Solver) onBounds(x []float64) bool {
	for i, r := range s.r {
		if bit(s.plans.key, i) && math.Abs(r) > s.Weight[i]*Tol*max(1, math.Abs(x[i])) {
			return false
		}
	}
	return true
}

// tol grows with the size of the unknowns, as what rounding leaves of a residual
// does, but not without end: an unknown that runs away is no solution.
func (s *Solver) tol(x []float64) float64 {
	return Tol * (1 + 0.1*min(s.largest(x), mostSize))
}

// largest is the size of the largest unknown.
func (s *Solver) largest(x []float64) float64 {
	m := 0.0
	for i, v := range x[:s.n] {
		if v := math.Abs(v); v > m && !s.Long[i] {
			m = v
		}
	}
	return m
}

// mostSize is the largest unknown that tolerances grow with; mostTol is the largest that tol returns.
const (
	mostSize = 1e3
	mostTol  = (1 + 0.1*mostSize) * Tol
)

// rounded reports whether the residual is within tolerance of what rounding of
// the unknowns can leave in steep rows: rows are weighed by their largest slope,
// from 10,000 up, more where unknowns are so large that they are not known better.
func (s *Solver) rounded(p Problem, x []float64, a aim, tol float64) bool {
	if !s.now.slopes {
		s.norm(p, x, a, true)
	}
	steep := s.xt // free between steps
	clear(steep)
	for k, v := range s.j.val[firstEntry:] {
		i := s.j.row[k+firstEntry]
		steep[i] = max(steep[i], math.Abs(v))
	}
	sum, fine := 0.0, 1e-4*max(1, min(s.largest(x), mostSize)/10)
	for i, r := range s.r {
		if _, _, wg := a.row(x[i], s.g[i], s.Lo[i], s.Hi[i], s.Weight[i]); wg != 0 {
			r /= max(1, fine*steep[i])
		}
		sum += r * r
	}
	return math.Sqrt(sum) <= tol
}

// lineSearch moves x along s.dx: a full step, which a plan has taken already unless it is long,
// shortened as a whole where it would carry an unknown too far, halved until the norm is below
// the largest of the last few, else the best of the points tried.
func (s *Solver) lineSearch(p Problem, x []float64, a aim, planned bool) float64 {
	before, gone, t := s.now.norm, planned && !s.far, 1.0
	if !gone {
		t = s.reach(x)
		copy(s.xt, x[:s.n])
	}
	bestNorm, bestT := math.Inf(1), t
	s.halved = false
	for k := 0; k <= 8; k++ {
		if !gone {
			s.move(x, t)
		}
		gone = false
		norm := s.norm(p, x, a, k == 0 && before > farOff)
		if norm < before || norm < s.recent() || norm == 0 {
			return norm
		}
		if planned && k == 0 && !s.used.last.sure(s.used.work) { // the safer factors first
			planned = false
			copy(x, s.xt)
			s.norm(p, x, a, true)
			if !s.direction(x, a) { // nowhere to go
				return math.Inf(1)
			}
			copy(s.xt, x[:s.n])
			t, k = s.reach(x), -1
			continue
		}
		if norm < bestNorm {
			bestNorm, bestT = norm, t
		}
		t /= 2
		s.halved = true
	}
	s.move(x, bestT)
	return s.norm(p, x, a, true)
}

// recent is the largest norm of the last few points.
func (s *Solver) recent() float64 {
	m := s.hist[0]
	for _, h := range s.hist[1:] {
		m = max(m, h)
	}
	return m
}

// move puts x a share of the step s.dx on from s.xt.
func (s *Solver) move(x []float64, share float64) {
	dx := s.dx
	x, from := x[:len(dx)], s.xt[:len(dx)]
	for i, d := range dx {
		x[i] = from[i] + share*d
	}
}

// reach is how much of the step s.dx from x may be taken at most.
func (s *Solver) reach(x []float64) float64 {
	t := 1.0
	for i, d := range s.dx {
		if d := math.Abs(d); d > maxStep { // most steps are short
			if lim := maxStep + 2*math.Abs(x[i]); d*t > lim && !s.Long[i] {
				t = lim / d
			}
		}
	}
	return t
}
