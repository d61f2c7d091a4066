package balance

import "math"

// aim is what an iteration drives to zero: the min/max form of the conditions
// (the zero aim), or the Fischer-Burmeister form, either with
// delta·(x − anchor) added to G.
type aim struct {
	smooth bool
	delta  float64
	loose  float64 // factor on the tolerance, 0 = 1
	wary   bool    // it is given up at the first step that has to be halved
}

// weighed reports whether rows may weigh their bound and G against one another.
func (a aim) weighed() bool { return a.smooth || a.delta > 0 }

// row turns G, x and the bounds into a residual and the two weights of its
// Jacobian row: dr_i = wx·dx_i + wg·dG_i.
func (a aim) row(x, g, lo, hi, weight float64) (r, wx, wg float64) {
	if a.smooth {
		return fb(x, g, lo, hi, weight)
	}
	return minmax(x, g, lo, hi, weight)
}

// minmax is mid(a(x−h), a(x−l), G): zero exactly at a solution. An unknown that
// the bounds fix is on its bound whatever G says.
func minmax(x, g, lo, hi, a float64) (r, wx, wg float64) {
	if lo == hi {
		return a * (x - lo), a, 0
	}
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

// norm evaluates the problem at x, with its slopes if asked for, leaves the
// residual in s.r and returns its 2-norm.
func (s *Solver) norm(p Problem, x []float64, a aim, slopes bool) float64 {
	if slopes {
		s.j.eval(p, x, s.rows)
	} else {
		p.Eval(x, s.rows, nil)
	}
	s.now.slopes = slopes
	if a.weighed() {
		s.smoothResidual(x, a)
	} else {
		s.residual(x)
	}
	return s.now.norm
}

// residual is the min/max form. It also notes which unknowns rest on a bound.
func (s *Solver) residual(x []float64) {
	g, key, sum := s.g, s.plans.key, 0.0
	n := len(g)
	lo, hi, weight, out := s.Lo[:n], s.Hi[:n], s.Weight[:n], s.r[:n]
	clear(key)
	for i, v := range x[:n] {
		r, w := g[i], weight[i]
		l, h := w*(v-lo[i]), w*(v-hi[i])
		if !(h < r && r < l) { // else it is between its bounds
			if l < r || l == h {
				r = l
				put(key, i)
			}
			if h > r {
				r = h
				put(key, i)
			}
		}
		out[i] = r
		sum += r * r
	}
	s.setNorm(sum)
}

func (s *Solver) smoothResidual(x []float64, a aim) {
	sum := 0.0
	for i, g := range s.g {
		if a.delta > 0 {
			g += a.delta * (x[i] - s.anchor[i])
		}
		r, _, _ := a.row(x[i], g, s.Lo[i], s.Hi[i], s.Weight[i])
		s.r[i] = r
		sum += r * r
	}
	s.setNorm(sum)
}

func (s *Solver) setNorm(sum float64) {
	s.now.norm = math.Sqrt(sum)
	if sum != sum {
		s.now.norm = math.Inf(1)
	}
}

// worst is the row with the largest residual at the last evaluated point.
func (s *Solver) worst() int {
	worst, big := 0, -1.0
	for i, r := range s.r {
		if v := math.Abs(r); v > big || v != v {
			worst, big = i, v
		}
	}
	return worst
}
