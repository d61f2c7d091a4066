package balance

import "math"

// lu is a dense factorisation with partial pivoting of a row-equilibrated
// matrix, in place and without allocation. Circuits of tens of unknowns are
// too small for a general library to win.
type lu struct {
	n   int       // may be made smaller
	a   []float64 // n×n, row-major
	row []int
	inv []float64 // 1/row scale
	out []float64 // room for a solution
}

func newLU(n int) *lu {
	return &lu{n: n, a: make([]float64, n*n), row: make([]int, n), inv: make([]float64, n), out: make([]float64, n)}
}

// factor factors lu.a and returns the smallest pivot of the equilibrated
// matrix; 0 or NaN when it is singular.
func (f *lu) factor() float64 {
	n, a := f.n, f.a
	for i := 0; i < n; i++ {
		ri := a[i*n : i*n+n]
		m := 0.0
		for _, v := range ri {
			if v := math.Abs(v); v > m || v != v {
				m = v
			}
		}
		if m == 0 || m != m {
			return m
		}
		s := 1 / m
		f.inv[i] = s
		for j := range ri {
			ri[j] *= s
		}
		f.row[i] = i
	}
	small := math.Inf(1)
	for k := 0; k < n; k++ {
		p, best := k, math.Abs(a[k*n+k])
		for i := k + 1; i < n; i++ {
			if v := math.Abs(a[i*n+k]); v > best {
				p, best = i, v
			}
		}
		if best < small || best != best {
			small = best
		}
		if best == 0 || best != best {
			return best
		}
		if p != k {
			rk, rp := a[k*n:k*n+n], a[p*n:p*n+n]
			for j := range rk {
				rk[j], rp[j] = rp[j], rk[j]
			}
			f.row[k], f.row[p] = f.row[p], f.row[k]
		}
		d := 1 / a[k*n+k]
		rk := a[k*n+k+1 : k*n+n]
		for i := k + 1; i < n; i++ {
			m := a[i*n+k]
			if m == 0 {
				continue
			}
			m *= d
			a[i*n+k] = m
			ri := a[i*n+k+1 : i*n+n][:len(rk)]
			for j, v := range rk {
				ri[j] -= m * v
			}
		}
	}
	return small
}

// solve overwrites x with the solution of A x = b.
func (f *lu) solve(b, x []float64) {
	n, a := f.n, f.a
	for i := 0; i < n; i++ {
		s := b[f.row[i]] * f.inv[f.row[i]]
		ri := a[i*n : i*n+i]
		for j, m := range ri {
			s -= m * x[j]
		}
		x[i] = s
	}
	for i := n - 1; i >= 0; i-- {
		s := x[i]
		ri := a[i*n : i*n+n]
		for j := i + 1; j < n; j++ {
			s -= ri[j] * x[j]
		}
		x[i] = s / ri[i]
	}
}
