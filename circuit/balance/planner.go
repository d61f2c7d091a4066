package balance

import (
	"math"
	"math/bits"
)

// planner eliminates a sparse matrix pivot by pivot, choosing each by its fill: once to find
// an order that a plan replays, or to solve it (direct.go). Sets of rows and columns are bits.
type planner struct {
	n          int
	a          []float64 // n×n values, eliminated as the order is found
	slot       []int32   // n×n places in work, where the bits say there is one
	inRow      [][]uint64
	inCol      [][]uint64
	perRow     []int // entries left in each row; gone once it is done, or on a bound
	perCol     []int
	head       []int32   // of the columns with so many entries, −1 where there is none
	next, prev []int32   // of such columns; prev of the first is −1 − their number of entries
	left       int       // pivots to be found
	alone      []int32   // rows, and −1 − columns, that were left with one entry
	scale      []float64 // of each row: one over the largest value it was loaded with
	right      []int32   // other columns of the pivot's row
	rows, cols []int32   // the pivots so far
	back       []pair    // back of the plan, first pivot first
	ends       []int     // of each pivot's part of it
}

// gone marks rows and columns that are not in the matrix any more.
const gone = -1

func newPlanner(n int) *planner {
	w := &planner{n: n, a: make([]float64, n*n), slot: make([]int32, n*n), scale: make([]float64, n), perRow: make([]int, n), perCol: make([]int, n),
		head: make([]int32, n+1), next: make([]int32, n), prev: make([]int32, n)}
	words := (n + 63) / 64
	sets := make([]uint64, 2*n*words)
	for i := 0; i < n; i++ {
		k := 2 * i * words
		w.inRow, w.inCol = append(w.inRow, sets[k:k+words]), append(w.inCol, sets[k+words:k+2*words])
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

// make works out the plan p for the entries j as they are now; with lean set it leaves out
// entries that are zero, and holds while they are.
func (w *planner) make(p *plan, j *entries, key []uint64, lean bool) {
	*p = plan{key: append(p.key[:0], key...), lean: lean, entries: len(j.val), none: p.none[:0], fixed: p.fixed[:0], least: p.least[:0],
		pivots: p.pivots[:0], back: p.back[:0], tied: p.tied[:0]}
	w.load(j, p, lean)
	for w.left > 0 {
		r, c := w.choose()
		if r < 0 {
			return
		}
		w.note(p, r, c)
		w.eliminate(p, r, c, nil)
	}
	p.sparse = true
	w.turn(p)
}

// begin empties the matrix.
func (w *planner) begin() {
	for i := range w.n {
		w.scale[i], w.perRow[i], w.perCol[i] = 0, 0, 0
		clear(w.inRow[i])
		clear(w.inCol[i])
	}
	w.left, w.alone = w.n, w.alone[:0]
	w.rows, w.cols, w.back, w.ends = w.rows[:0], w.cols[:0], w.back[:0], w.ends[:0]
}

// without takes row and column i out of a matrix that has no entries yet.
func (w *planner) without(i int) {
	w.perRow[i], w.perCol[i] = gone, gone
	w.left--
}

// put enters a value at row r, column c.
func (w *planner) put(r, c int, v float64) {
	w.a[r*w.n+c] = v
	put(w.inRow[r], c)
	put(w.inCol[c], r)
	w.perRow[r]++
	w.perCol[c]++
	w.scale[r] = max(w.scale[r], math.Abs(v))
}

// full ends loading.
func (w *planner) full() {
	for i := range w.n {
		w.scale[i] = 1 / w.scale[i] // no entry of an empty row is ever looked at
		w.lone(w.perRow[i], i)
		w.lone(w.perCol[i], -1-i)
	}
	for k := range w.head {
		w.head[k] = -1
	}
	for i := w.n - 1; i >= 0; i-- {
		if w.perCol[i] != gone {
			w.link(i)
		}
	}
}

// link puts column k first among those with as many entries.
func (w *planner) link(k int) {
	n := w.perCol[k]
	first := w.head[n]
	w.next[k], w.prev[k], w.head[n] = first, int32(-1-n), int32(k)
	if first >= 0 {
		w.prev[first] = int32(k)
	}
}

// unlink takes column k from among them.
func (w *planner) unlink(k int) {
	next, prev := w.next[k], w.prev[k]
	if prev >= 0 {
		w.next[prev] = next
	} else {
		w.head[-1-prev] = next
	}
	if next >= 0 {
		w.prev[next] = prev
	}
}

// lone notes a row or column that has a single entry left.
func (w *planner) lone(entries, which int) {
	if entries == 1 {
		w.alone = append(w.alone, int32(which))
	}
}

// load lays the rows that are not on a bound out in w.
func (w *planner) load(j *entries, p *plan, lean bool) {
	w.begin()
	for i := range w.n {
		if bit(p.key, i) {
			p.fixed = append(p.fixed, int32(i))
			w.without(i)
		}
	}
	for k := firstEntry; k < len(j.val); k++ {
		r, c := int(j.row[k]), int(j.col[k])
		switch {
		case w.perRow[r] == gone:
		case lean && j.val[k] == 0:
			p.none = append(p.none, int32(k))
		case w.perCol[c] == gone:
			p.tied = append(p.tied, triple{int32(r), int32(k), w.step(c)})
		default:
			w.slot[r*w.n+c] = int32(2*w.n + k)
			w.put(r, c, j.val[k])
		}
	}
	p.size = 2*w.n + len(j.val)
	w.full()
}

// step is the place in work of the step of an unknown.
func (w *planner) step(c int) int32 { return int32(w.n + c) }

// choose finds the next pivot: a lone entry of its row or column, which costs
// nothing, else one with little fill.
func (w *planner) choose() (r, c int) {
	for len(w.alone) > 0 {
		i := int(w.alone[len(w.alone)-1])
		w.alone = w.alone[:len(w.alone)-1]
		switch {
		case i >= 0 && w.perRow[i] == 1:
			r, c = i, first(w.inRow[i])
		case i < 0 && w.perCol[-1-i] == 1:
			c = -1 - i
			r = first(w.inCol[c])
		default:
			continue
		}
		if w.sizeable(r, c) >= tinyPivot {
			return r, c
		}
	}
	return w.cheapest()
}

// sizeable is an entry as a share of the largest that its row was loaded with.
func (w *planner) sizeable(r, c int) float64 { return math.Abs(w.a[r*w.n+c]) * w.scale[r] }

// cheapest takes the first column, of those with the fewest entries, that has a pivot: to compare more of
// them costs more than the fill it saves.
func (w *planner) cheapest() (r, c int) {
	for _, k := range w.head[1:] {
		for ; k >= 0; k = w.next[k] {
			if r := w.ofColumn(int(k)); r >= 0 {
				return r, int(k)
			}
		}
	}
	return -1, -1
}

// ofColumn returns the row of the pivot with the least fill in a column, of these the largest; −1 where
// there is none.
func (w *planner) ofColumn(c int) int {
	top := 0.0
	for at, set := range w.inCol[c] {
		for ; set != 0; set &= set - 1 {
			top = max(top, w.sizeable(at<<6+bits.TrailingZeros64(set), c))
		}
	}
	if !(top >= tinyPivot) {
		return -1
	}
	r, fewest, size := -1, math.MaxInt, 0.0
	for at, set := range w.inCol[c] {
		for ; set != 0; set &= set - 1 {
			i := at<<6 + bits.TrailingZeros64(set)
			v := w.sizeable(i, c)
			if !(v >= pivotShare*top) {
				continue
			}
			if n := w.perRow[i]; n < fewest || (n == fewest && v > size) {
				r, fewest, size = i, n, v
			}
		}
	}
	return r
}

// eliminate takes the pivot at row r, column c out of the matrix, and out of the right side b
// unless that is nil; what it does it writes into the plan p, unless that is nil.
func (w *planner) eliminate(p *plan, r, c int, b []float64) {
	n, a := w.n, w.a
	w.left--
	w.unlink(c)
	w.perRow[r], w.perCol[c] = gone, gone
	drop(w.inRow[r], c)
	drop(w.inCol[c], r)
	w.rows, w.cols, w.right = append(w.rows, int32(r)), append(w.cols, int32(c)), w.right[:0]
	for at, set := range w.inRow[r] {
		for ; set != 0; set &= set - 1 {
			k := at<<6 + bits.TrailingZeros64(set)
			w.right = append(w.right, int32(k))
			drop(w.inCol[k], r)
			w.unlink(k)
			w.perCol[k]--
		}
	}
	pivot := a[r*n : r*n+n]
	for at, set := range w.inCol[c] {
		for ; set != 0; set &= set - 1 {
			i := at<<6 + bits.TrailingZeros64(set)
			drop(w.inRow[i], c)
			row, m := a[i*n:i*n+n], a[i*n+c]/pivot[c]
			if b != nil {
				b[i] -= m * b[r]
			}
			if p != nil {
				p.pivots = append(p.pivots, pairOf(w.slot[i*n+c], int32(i)))
			}
			w.perRow[i]--
			for _, k := range w.right {
				if !bit(w.inRow[i], int(k)) {
					w.fill(p, i, int(k))
				}
				row[k] -= m * pivot[k]
				if p != nil {
					p.pivots = append(p.pivots, pairOf(w.slot[i*n+int(k)], w.slot[r*n+int(k)]))
				}
			}
			w.lone(w.perRow[i], i)
		}
	}
	for _, k := range w.right {
		w.link(int(k))
		w.lone(w.perCol[k], -1-int(k))
	}
}

// fill makes an entry at row i, column k, with a place of its own in the plan.
func (w *planner) fill(p *plan, i, k int) {
	w.a[i*w.n+k] = 0
	put(w.inRow[i], k)
	put(w.inCol[k], i)
	w.perRow[i]++
	w.perCol[k]++
	if p != nil {
		w.slot[i*w.n+k] = int32(p.size)
		p.size++
	}
}

// note writes the head of a pivot, and its part of the way back.
func (w *planner) note(p *plan, r, c int) {
	piv := w.slot[r*w.n+c]
	p.least = append(p.least, pivotLeast*math.Abs(w.a[r*w.n+c]))
	below, right := int32(w.perCol[c]-1), int32(w.perRow[r]-1)
	p.pivots = append(p.pivots, pairOf(piv, below), pairOf(int32(r), right))
	w.back = append(w.back, pairOf(int32(r), w.step(c)), pairOf(piv, right))
	for at, set := range w.inRow[r] {
		for ; set != 0; set &= set - 1 {
			if k := at<<6 + bits.TrailingZeros64(set); k != c {
				w.back = append(w.back, pairOf(w.slot[r*w.n+k], w.step(k)))
			}
		}
	}
	w.ends = append(w.ends, len(w.back))
}

// turn puts the unknowns into the order in which they are found: last pivot first.
func (w *planner) turn(p *plan) {
	for k := len(w.ends) - 1; k >= 0; k-- {
		from := 0
		if k > 0 {
			from = w.ends[k-1]
		}
		p.back = append(p.back, w.back[from:w.ends[k]]...)
	}
}
