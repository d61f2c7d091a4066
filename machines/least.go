package machines

import (
	"math"
	"math/bits"

	"gonum.org/v1/gonum/mat"
)

// least is a least-squares problem without negative unknowns: |rows·x − right| is smallest, x >= 0. It has few columns.
type least struct {
	rows  [][]float64
	right []float64
}

// solve returns the solution by trying every set of columns that may be above zero, which for a handful of columns is
// quick and always right. Columns that are all zero stay zero.
func (l least) solve() []float64 {
	n := len(l.rows[0])
	best, least := make([]float64, n), math.Inf(1)
	for set := uint(0); set < 1<<n; set++ {
		x, ok := l.within(set)
		if !ok {
			continue
		}
		if r := l.left(x); r < least*(1-1e-12) {
			best, least = x, r
		}
	}
	return best
}

// within solves with the columns of a set alone; ok is false where one would be negative or cannot be told.
func (l least) within(set uint) (x []float64, ok bool) {
	n := len(l.rows[0])
	x = make([]float64, n)
	k := bits.OnesCount(set)
	if k == 0 {
		return x, true
	}
	if k > len(l.rows) {
		return x, false
	}
	a, columns, size := l.matrix(set)
	var qr mat.QR
	qr.Factorize(a)
	var y mat.VecDense
	if err := qr.SolveVecTo(&y, false, mat.NewVecDense(len(l.right), append([]float64(nil), l.right...))); err != nil {
		return x, false
	}
	for i, c := range columns {
		v := y.AtVec(i) / size[i]
		if !(v >= 0) || math.IsInf(v, 0) {
			return x, false
		}
		x[c] = v
	}
	return x, true
}

// matrix returns the columns of a set, each scaled to length one, with their places and lengths before.
func (l least) matrix(set uint) (a *mat.Dense, columns []int, size []float64) {
	for c := range l.rows[0] {
		if set&(1<<c) != 0 {
			columns = append(columns, c)
			sum := 0.0
			for _, r := range l.rows {
				sum += r[c] * r[c]
			}
			size = append(size, math.Sqrt(sum))
		}
	}
	a = mat.NewDense(len(l.rows), len(columns), nil)
	for i, r := range l.rows {
		for j, c := range columns {
			a.Set(i, j, r[c]/size[j])
		}
	}
	return a, columns, size
}

// left is the sum of squares that a solution leaves.
func (l least) left(x []float64) float64 {
	sum := 0.0
	for i, r := range l.rows {
		d := -l.right[i]
		for j, v := range r {
			d += v * x[j]
		}
		sum += d * d
	}
	return sum
}

// entangled reports how well the columns that are above zero in x can be told apart: the condition number of the scaled
// columns and, where it is large, those columns that share what cannot be told apart.
//
// Source: condition index and variance shares of Belsley, Kuh and Welsch, Regression Diagnostics (1980): an index above 30
// with shares above one half is harmful. From memory.
func (l least) entangled(x []float64) (condition float64, columns []int) {
	set := uint(0)
	for i, v := range x {
		if v > 0 {
			set |= 1 << i
		}
	}
	if bits.OnesCount(set) < 2 {
		return 1, nil
	}
	a, of, _ := l.matrix(set)
	var svd mat.SVD
	if !svd.Factorize(a, mat.SVDThin) {
		return math.Inf(1), of
	}
	s := svd.Values(nil)
	var v mat.Dense
	svd.VTo(&v)
	last := len(s) - 1
	condition = s[0] / s[last]
	if condition <= harmful {
		return condition, nil
	}
	for i, c := range of {
		sum := 0.0
		for k := range s {
			sum += sq(v.At(i, k) / s[k])
		}
		if sq(v.At(i, last)/s[last]) > sum/2 {
			columns = append(columns, c)
		}
	}
	return condition, columns
}

// harmful is the condition number from which terms cannot be told apart.
const harmful = 30

func sq(x float64) float64 { return x * x }
