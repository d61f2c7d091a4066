package balance

import (
	"math"
	"math/bits"
)

// plan is an elimination worked out once for one set of active bounds and then
// replayed on the numbers: unknowns that rest on a bound are known and drop out,
// the rest is a sparse LU factorisation in a fixed order.
//
// Order: Markowitz, The elimination form of the inverse, Management Science 3
// (1957), among pivots of at least a tenth of their column (rows scaled).
type plan struct {
	key     []uint64 // which unknowns rest on a bound
	entries int      // of the slopes it was made for
	sparse  bool     // false: singular when it was made, use the dense factors
	bad     int      // times a pivot was too small
	fixed   []int32  // the unknowns that rest on a bound
	least   []float64
	factor  []int32 // pivot, count of rows below; each: place, count, (target, source)...
	forward []int32 // (place, row from, row to)...
	back    []int32 // row, column, pivot, count, (place, column)...
	tied    []int32 // (row, entry, column) by which known steps enter the other rows
	size    int     // of work: the entries of the slopes, then the fill
}

const (
	pivotShare = 0.1  // of its column that a pivot must have when a plan is made
	pivotLeast = 1e-5 // of its first value that it must keep
	pivotBad   = 5    // a plan that failed so often is made anew
)

// planner holds what making a plan needs. Sets of rows and columns are bits.
type planner struct {
	n, words int
	a        []float64 // n×n values, eliminated as the order is found
	slot     []int32   // n×n places in work, where the bits say there is one
	inRow    [][]uint64
	inCol    [][]uint64
	scale    []float64
	rows     []int // left to do
	cols     []int
}

func newPlanner(n int) *planner {
	w := &planner{n: n, words: (n + 63) / 64, a: make([]float64, n*n), slot: make([]int32, n*n), scale: make([]float64, n)}
	sets := make([]uint64, 2*n*w.words)
	for i := 0; i < n; i++ {
		k := 2 * i * w.words
		w.inRow, w.inCol = append(w.inRow, sets[k:k+w.words]), append(w.inCol, sets[k+w.words:k+2*w.words])
	}
	return w
}

func bit(set []uint64, i int) bool { return set[i>>6]>>(uint(i)&63)&1 != 0 }

func put(set []uint64, i int) { set[i>>6] |= 1 << (uint(i) & 63) }

func drop(set []uint64, i int) { set[i>>6] &^= 1 << (uint(i) & 63) }

func size(set []uint64) (n int) {
	for _, w := range set {
		n += bits.OnesCount64(w)
	}
	return n
}

// each calls f for the members of a set, in order.
func each(set []uint64, f func(i int)) {
	for k, w := range set {
		for ; w != 0; w &= w - 1 {
			f(k<<6 + bits.TrailingZeros64(w))
		}
	}
}

// make works out a plan for the slopes j as they are now.
func (w *planner) make(j *Slopes, key []uint64) *plan {
	p := &plan{key: append([]uint64(nil), key...), entries: len(j.val)}
	w.load(j, p)
	n := len(w.rows)
	p.least, p.factor = make([]float64, 0, n), make([]int32, 0, 8*n)
	p.forward, p.back = make([]int32, 0, 4*n), make([]int32, 0, 8*n)
	for len(w.rows) > 0 {
		r, c := w.choose()
		if r < 0 {
			return p
		}
		w.eliminate(p, r, c)
	}
	p.sparse = true
	w.turn(p)
	return p
}

// load lays the rows that are not on a bound out in w.
func (w *planner) load(j *Slopes, p *plan) {
	w.rows, w.cols = w.rows[:0], w.cols[:0]
	for i := 0; i < w.n; i++ {
		w.scale[i] = 0
		clear(w.inRow[i])
		clear(w.inCol[i])
		if !bit(p.key, i) {
			w.rows, w.cols = append(w.rows, i), append(w.cols, i)
		} else {
			p.fixed = append(p.fixed, int32(i))
		}
	}
	for k := firstEntry; k < len(j.val); k++ {
		r, c := int(j.row[k]), int(j.col[k])
		switch {
		case bit(p.key, r):
		case bit(p.key, c):
			p.tied = append(p.tied, int32(r), int32(k), int32(c))
		default:
			w.slot[r*w.n+c], w.a[r*w.n+c] = int32(k), j.val[k]
			put(w.inRow[r], c)
			put(w.inCol[c], r)
			w.scale[r] = max(w.scale[r], math.Abs(j.val[k]))
		}
	}
	p.size = len(j.val)
	for _, r := range w.rows {
		if w.scale[r] > 0 {
			w.scale[r] = 1 / w.scale[r]
		}
	}
}

// choose finds the next pivot: a lone entry of its row or column, which costs
// nothing, else the one with the least fill, and of these the largest.
func (w *planner) choose() (r, c int) {
	r, c = -1, -1
	lone := func(i, k int) {
		if math.Abs(w.a[i*w.n+k])*w.scale[i] >= tinyPivot {
			r, c = i, k
		}
	}
	for _, i := range w.rows {
		if size(w.inRow[i]) == 1 {
			if each(w.inRow[i], func(k int) { lone(i, k) }); r >= 0 {
				return r, c
			}
		}
	}
	for _, k := range w.cols {
		if size(w.inCol[k]) == 1 {
			if each(w.inCol[k], func(i int) { lone(i, k) }); r >= 0 {
				return r, c
			}
		}
	}
	return w.cheapest()
}

func (w *planner) cheapest() (r, c int) {
	r, c = -1, -1
	best, most := math.MaxInt, 0.0
	for _, k := range w.cols {
		others := size(w.inCol[k]) - 1
		if others > best { // no row here has a single entry
			continue
		}
		top := 0.0
		each(w.inCol[k], func(i int) { top = max(top, math.Abs(w.a[i*w.n+k])*w.scale[i]) })
		if !(top >= tinyPivot) {
			continue
		}
		each(w.inCol[k], func(i int) {
			v := math.Abs(w.a[i*w.n+k]) * w.scale[i]
			if !(v >= pivotShare*top) {
				return
			}
			if cost := (size(w.inRow[i]) - 1) * others; cost < best || (cost == best && v > most) {
				best, most, r, c = cost, v, i, k
			}
		})
	}
	return r, c
}

// eliminate writes the operations of one pivot and carries them out.
func (w *planner) eliminate(p *plan, r, c int) {
	n := w.n
	w.rows, w.cols = without(w.rows, r), without(w.cols, c)
	each(w.inRow[r], func(k int) { drop(w.inCol[k], r) })
	each(w.inCol[c], func(i int) { drop(w.inRow[i], c) })
	drop(w.inRow[r], c)
	piv := w.slot[r*n+c]
	p.least = append(p.least, pivotLeast*math.Abs(w.a[r*n+c]))
	p.factor = append(p.factor, piv, int32(size(w.inCol[c])))
	p.back = append(p.back, int32(r), int32(c), piv, int32(size(w.inRow[r])))
	us := len(p.back)
	each(w.inRow[r], func(k int) { p.back = append(p.back, w.slot[r*n+k], int32(k)) })
	each(w.inCol[c], func(i int) {
		l := w.slot[i*n+c]
		p.forward = append(p.forward, l, int32(r), int32(i))
		p.factor = append(p.factor, l, int32(len(p.back)-us)/2)
		m := w.a[i*n+c] / w.a[r*n+c]
		for q := us; q < len(p.back); q += 2 {
			k := int(p.back[q+1])
			if !bit(w.inRow[i], k) {
				w.slot[i*n+k], w.a[i*n+k] = int32(p.size), 0
				p.size++
				put(w.inRow[i], k)
				put(w.inCol[k], i)
			}
			w.a[i*n+k] -= m * w.a[r*n+k]
			p.factor = append(p.factor, w.slot[i*n+k], p.back[q])
		}
	})
}

// turn puts the records of back into the order in which they are needed: last pivot first.
func (w *planner) turn(p *plan) {
	var starts []int
	for i := 0; i < len(p.back); i += 4 + 2*int(p.back[i+3]) {
		starts = append(starts, i)
	}
	out := make([]int32, 0, len(p.back))
	for k := len(starts) - 1; k >= 0; k-- {
		i := starts[k]
		out = append(out, p.back[i:i+4+2*int(p.back[i+3])]...)
	}
	p.back = out
}

func without(s []int, v int) []int {
	for i, x := range s {
		if x == v {
			return append(s[:i], s[i+1:]...)
		}
	}
	return s
}

// run factors the slopes into work. It reports false when a pivot has become too small.
func (p *plan) run(val, work []float64) bool {
	work = work[:p.size]
	clear(work[copy(work, val):])
	ops, least := p.factor, p.least
	for len(ops) >= 2 && len(least) > 0 {
		v := work[ops[0]]
		if l := least[0]; !(v >= l || v <= -l) {
			return false
		}
		v = 1 / v
		work[ops[0]] = v
		below := ops[1]
		ops, least = ops[2:], least[1:]
		for ; below > 0 && len(ops) >= 2; below-- {
			m := work[ops[0]] * v
			work[ops[0]] = m
			count := ops[1]
			for ops = ops[2:]; count > 0 && len(ops) >= 2; count-- {
				work[ops[0]] -= m * work[ops[1]]
				ops = ops[2:]
			}
		}
	}
	return true
}

// solve turns the residual b into the step dx; the steps of unknowns on a bound
// are there already, and with moved set they enter the other rows.
func (p *plan) solve(val, work, b, dx []float64, moved bool) {
	if moved {
		for t := p.tied; len(t) >= 3; t = t[3:] {
			b[t[0]] += val[t[1]] * dx[t[2]]
		}
	}
	for f := p.forward; len(f) >= 3; f = f[3:] {
		b[f[2]] -= work[f[0]] * b[f[1]]
	}
	for ops := p.back; len(ops) >= 4; {
		sum, col, piv, count := -b[ops[0]], ops[1], ops[2], ops[3]
		for ops = ops[4:]; count > 0 && len(ops) >= 2; count-- {
			sum -= work[ops[0]] * dx[ops[1]]
			ops = ops[2:]
		}
		dx[col] = sum * work[piv]
	}
}
