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
	none    []int32  // entries that were zero when it was made, and count on being so
	sparse  bool     // false: singular when it was made, use the dense factors
	bad     int      // times a pivot was too small
	next    *plan    // another one of the same key
	fixed   []int32  // the unknowns that rest on a bound
	least   []float64
	pivots  []pair   // pivot by pivot: its place, and how many rows below; of each of these its place in the pivot's column, and how many updates; of each of these the place, and that in the pivot's row whose share it loses
	forward []pair   // pivot by pivot: its row, and how many rows below; of each of these its place and row
	back    []pair   // last pivot first: row and column; its place, and how many other columns; of each of these place and column
	tied    []triple // row, entry, column by which known steps enter the other rows; all these are places in work
	size    int      // of work: residuals, steps, the entries of the slopes, then the fill
}

type (
	pair   struct{ a, b int32 }
	triple struct{ a, b, c int32 }
)

const (
	pivotShare = 0.1  // of its column that a pivot must have when a plan is made
	pivotLeast = 1e-5 // of its first value that it must keep
	surePivot  = 0.1  // of its first value, from which on a pivot is as good as a new one
	pivotBad   = 5    // a plan that failed so often is made anew
)

// planner holds what making a plan needs. Sets of rows and columns are bits.
type planner struct {
	n, words int
	a        []float64 // n×n values, eliminated as the order is found
	slot     []int32   // n×n places in work, where the bits say there is one
	inRow    [][]uint64
	inCol    [][]uint64
	perRow   []int // entries left in each row
	perCol   []int
	scale    []float64
	rows     []int // left to do
	cols     []int
	right    []pair // back of the plan, first pivot first
	ends     []int  // of each pivot's part of it
}

func newPlanner(n int) *planner {
	w := &planner{n: n, words: (n + 63) / 64, a: make([]float64, n*n), slot: make([]int32, n*n), scale: make([]float64, n), perRow: make([]int, n), perCol: make([]int, n)}
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

// first is the first member of a set that is not empty.
func first(set []uint64) int {
	for k, w := range set {
		if w != 0 {
			return k<<6 + bits.TrailingZeros64(w)
		}
	}
	return -1
}

// each calls f for the members of a set, in order.
func each(set []uint64, f func(i int)) {
	for k, w := range set {
		for ; w != 0; w &= w - 1 {
			f(k<<6 + bits.TrailingZeros64(w))
		}
	}
}

// make works out the plan p for the slopes j as they are now; with lean set it leaves out
// entries that are zero, and holds while they are.
func (w *planner) make(p *plan, j *Slopes, key []uint64, lean bool) {
	*p = plan{key: append(p.key[:0], key...), entries: len(j.val), none: p.none[:0], fixed: p.fixed[:0], least: p.least[:0],
		pivots: p.pivots[:0], forward: p.forward[:0], back: p.back[:0], tied: p.tied[:0]}
	w.load(j, p, lean)
	w.ends, w.right = w.ends[:0], w.right[:0]
	for len(w.rows) > 0 {
		r, c := w.choose()
		if r < 0 {
			return
		}
		w.eliminate(p, r, c)
	}
	p.sparse = true
	w.turn(p)
}

// load lays the rows that are not on a bound out in w.
func (w *planner) load(j *Slopes, p *plan, lean bool) {
	w.rows, w.cols = w.rows[:0], w.cols[:0]
	for i := 0; i < w.n; i++ {
		w.scale[i], w.perRow[i], w.perCol[i] = 0, 0, 0
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
		case lean && j.val[k] == 0:
			p.none = append(p.none, int32(k))
		case bit(p.key, c):
			p.tied = append(p.tied, triple{int32(r), int32(k), w.step(c)})
		default:
			w.slot[r*w.n+c], w.a[r*w.n+c] = int32(2*w.n+k), j.val[k]
			w.put(r, c)
			w.scale[r] = max(w.scale[r], math.Abs(j.val[k]))
		}
	}
	p.size = 2*w.n + len(j.val)
	for _, r := range w.rows {
		if w.scale[r] > 0 {
			w.scale[r] = 1 / w.scale[r]
		}
	}
}

// put notes an entry at row r, column c.
func (w *planner) put(r, c int) {
	put(w.inRow[r], c)
	put(w.inCol[c], r)
	w.perRow[r]++
	w.perCol[c]++
}

// step is the place in work of the step of an unknown.
func (w *planner) step(c int) int32 { return int32(w.n + c) }

// choose finds the next pivot: a lone entry of its row or column, which costs
// nothing, else the one with the least fill, and of these the largest.
func (w *planner) choose() (r, c int) {
	for _, i := range w.rows {
		if w.perRow[i] == 1 {
			if k := first(w.inRow[i]); math.Abs(w.a[i*w.n+k])*w.scale[i] >= tinyPivot {
				return i, k
			}
		}
	}
	for _, k := range w.cols {
		if w.perCol[k] == 1 {
			if i := first(w.inCol[k]); math.Abs(w.a[i*w.n+k])*w.scale[i] >= tinyPivot {
				return i, k
			}
		}
	}
	return w.cheapest()
}

func (w *planner) cheapest() (r, c int) {
	r, c = -1, -1
	best, most := math.MaxInt, 0.0
	for _, k := range w.cols {
		others := w.perCol[k] - 1
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
			if cost := (w.perRow[i] - 1) * others; cost < best || (cost == best && v > most) {
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
	each(w.inRow[r], func(k int) { drop(w.inCol[k], r); w.perCol[k]-- })
	each(w.inCol[c], func(i int) { drop(w.inRow[i], c); w.perRow[i]-- })
	drop(w.inRow[r], c)
	piv := w.slot[r*n+c]
	p.least = append(p.least, pivotLeast*math.Abs(w.a[r*n+c]))
	below := int32(w.perCol[c])
	p.pivots = append(p.pivots, pair{piv, below})
	p.forward = append(p.forward, pair{int32(r), below})
	w.right = append(w.right, pair{int32(r), w.step(c)}, pair{piv, int32(w.perRow[r] - 1)})
	from := len(w.right)
	each(w.inRow[r], func(k int) { w.right = append(w.right, pair{w.slot[r*n+k], w.step(k)}) })
	w.ends = append(w.ends, len(w.right))
	right := w.right[from:]
	each(w.inCol[c], func(i int) {
		l := w.slot[i*n+c]
		p.forward = append(p.forward, pair{l, int32(i)})
		p.pivots = append(p.pivots, pair{l, int32(len(right))})
		m := w.a[i*n+c] / w.a[r*n+c]
		for _, u := range right {
			k := int(u.b) - n
			if !bit(w.inRow[i], k) {
				w.slot[i*n+k], w.a[i*n+k] = int32(p.size), 0
				p.size++
				w.put(i, k)
			}
			w.a[i*n+k] -= m * w.a[r*n+k]
			p.pivots = append(p.pivots, pair{w.slot[i*n+k], u.a})
		}
	})
}

// turn puts the unknowns into the order in which they are found: last pivot first.
func (w *planner) turn(p *plan) {
	for k := len(w.ends) - 1; k >= 0; k-- {
		from := 0
		if k > 0 {
			from = w.ends[k-1]
		}
		p.back = append(p.back, w.right[from:w.ends[k]]...)
	}
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
func (p *plan) run(n int, val, work []float64) bool {
	work = work[:p.size]
	entries := work[2*n:]
	clear(entries[copy(entries, val):])
	code, at := p.pivots, 0
	for _, least := range p.least {
		pivot := code[at]
		at++
		v := work[pivot.a]
		if !(v >= least || v <= -least) {
			return false
		}
		v = 1 / v
		work[pivot.a] = v
		for below := pivot.b; below > 0; below-- {
			row := code[at]
			at++
			m := work[row.a] * v
			work[row.a] = m
			for updates := row.b; updates > 0; updates-- {
				u := code[at]
				at++
				work[u.a] -= m * work[u.b]
			}
		}
	}
	return true
}

// sure reports whether the pivots of the last run are hardly less than when the plan was
// made: then other factors would give the same step.
func (p *plan) sure(work []float64) bool {
	code, at := p.pivots, 0
	for _, least := range p.least {
		pivot := code[at]
		if v := work[pivot.a]; !(math.Abs(v)*least < pivotLeast/surePivot) { // v is one over the pivot
			return false
		}
		for at++; pivot.b > 0; pivot.b-- {
			at += 1 + int(code[at].b)
		}
	}
	return true
}

// solve turns the residual at the start of work into the step behind it; the steps of
// unknowns on a bound are there already, and with moved set they enter the other rows.
func (p *plan) solve(val, work []float64, moved bool) {
	if moved {
		for _, t := range p.tied {
			work[t.a] += val[t.b] * work[t.c]
		}
	}
	for code, at := p.forward, 0; at < len(code); {
		pivot := code[at]
		at++
		v := work[pivot.a]
		for below := pivot.b; below > 0; below-- {
			row := code[at]
			at++
			work[row.b] -= work[row.a] * v
		}
	}
	for code, at := p.back, 0; at+1 < len(code); {
		to, pivot := code[at], code[at+1]
		at += 2
		sum := -work[to.a]
		for others := pivot.b; others > 0; others-- {
			e := code[at]
			at++
			sum -= work[e.a] * work[e.b]
		}
		work[to.b] = sum * work[pivot.a]
	}
}
