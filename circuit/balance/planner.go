package balance

import (
	"math"
	"math/bits"
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
		pivots: p.pivots[:0], back: p.back[:0], tied: p.tied[:0]}
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
	p.pivots = append(p.pivots, pairOf(piv, below), pairOf(int32(r), int32(w.perRow[r]-1)))
	w.right = append(w.right, pairOf(int32(r), w.step(c)), pairOf(piv, int32(w.perRow[r]-1)))
	from := len(w.right)
	each(w.inRow[r], func(k int) { w.right = append(w.right, pairOf(w.slot[r*n+k], w.step(k))) })
	w.ends = append(w.ends, len(w.right))
	right := w.right[from:]
	each(w.inCol[c], func(i int) {
		l := w.slot[i*n+c]
		p.pivots = append(p.pivots, pairOf(l, int32(i)))
		m := w.a[i*n+c] / w.a[r*n+c]
		for _, u := range right {
			k := u.b() - n
			if !bit(w.inRow[i], k) {
				w.slot[i*n+k], w.a[i*n+k] = int32(p.size), 0
				p.size++
				w.put(i, k)
			}
			w.a[i*n+k] -= m * w.a[r*n+k]
			p.pivots = append(p.pivots, pairOf(w.slot[i*n+k], int32(u.a())))
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
