package balance

import "math/bits"

// solve solves the loaded matrix for the right side b, which it uses up, into the rows of x that
// are in it. It reports false where the matrix is singular.
func (w *planner) solve(b, x []float64) bool {
	for w.left > 0 {
		r, c := w.choose()
		if r < 0 {
			return false
		}
		w.eliminate(nil, r, c, b)
	}
	for at := len(w.rows) - 1; at >= 0; at-- {
		r, c := int(w.rows[at]), int(w.cols[at])
		row, sum := w.a[r*w.n:r*w.n+w.n], b[r]
		for word, set := range w.inRow[r] {
			for ; set != 0; set &= set - 1 {
				k := word<<6 + bits.TrailingZeros64(set)
				sum -= row[k] * x[k]
			}
		}
		x[c] = sum / row[c]
	}
	return true
}

// direction solves for the Newton step of the last evaluated point into s.dx, with pivots found
// for it alone. A nearly singular matrix is met with a proximal shift, growing once.
func (s *Solver) direction(x []float64, a aim) bool {
	s.weigh(x, a)
	for _, shift := range [...]float64{0, 1e-6, 1e-2} {
		s.lay(a.delta + shift)
		b := s.xt // free between steps
		for i, r := range s.r {
			b[i] = -r
		}
		s.tieOpen(b)
		if s.maker.solve(b, s.dx) {
			return s.numbers()
		}
	}
	return false
}

// weigh finds the weights of bound and G in each row, and the steps of unknowns whose row is
// their bound alone: these are known and drop out.
func (s *Solver) weigh(x []float64, a aim) {
	for i, g := range s.g {
		if a.delta > 0 {
			g += a.delta * (x[i] - s.anchor[i])
		}
		_, s.rim[i], s.steep[i] = a.row(x[i], g, s.Lo[i], s.Hi[i], s.Weight[i])
		if s.steep[i] == 0 && s.rim[i] != 0 {
			s.dx[i] = -s.r[i] / s.rim[i]
		}
	}
}

// onBound reports whether the last weights leave unknown i on a bound.
func (s *Solver) onBound(i int) bool { return s.steep[i] == 0 && s.rim[i] != 0 }

// lay lays the matrix of the other unknowns out, with a shift on its diagonal.
func (s *Solver) lay(shift float64) {
	w := s.maker
	w.begin()
	for i := range s.r {
		if s.onBound(i) {
			w.without(i)
		}
	}
	for e := firstEntry; e < len(s.j.val); e++ {
		i, c := int(s.j.row[e]), int(s.j.col[e])
		if v := s.steep[i] * s.j.val[e]; v != 0 && w.perRow[i] != gone && w.perCol[c] != gone && i != c {
			w.put(i, c, v)
		}
	}
	for i := range s.r {
		if v := s.rim[i] + s.steep[i]*(shift+s.j.on(i)); v != 0 && w.perRow[i] != gone {
			w.put(i, i, v)
		}
	}
	w.full()
}

// tieOpen lets the steps of unknowns on a bound enter the other rows of the right side b.
func (s *Solver) tieOpen(b []float64) {
	for e := firstEntry; e < len(s.j.val); e++ {
		if i, c := int(s.j.row[e]), int(s.j.col[e]); s.onBound(c) && !s.onBound(i) {
			b[i] -= s.steep[i] * s.j.val[e] * s.dx[c]
		}
	}
}
