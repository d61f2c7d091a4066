package balance

import "math"

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
	src     []int32  // entries of the slopes, in the order of work
	least   []float64
	factor  []int32 // pivot, count of rows below; each: place, count, (target, source)...
	forward []int32 // (place, row from, row to)...
	back    []int32 // row, column, pivot, count, (place, column)...
	tied    []int32 // (row, entry, column) by which known steps enter the other rows
	size    int
}

const (
	pivotShare = 0.1  // of its column that a pivot must have when a plan is made
	pivotLeast = 1e-5 // of its first value that it must keep
	pivotBad   = 5    // a plan that failed so often is made anew
)

// planner holds what making a plan needs.
type planner struct {
	n     int
	a     []float64 // n×n values, eliminated as the order is found
	slot  []int32   // n×n places in work, −1 = structurally zero
	scale []float64
	inRow []int32 // entries left
	inCol []int32
	rows  []int32 // left to do
	cols  []int32
	at    []int32
}

func newPlanner(n int) *planner {
	return &planner{n: n, a: make([]float64, n*n), slot: make([]int32, n*n), scale: make([]float64, n), inRow: make([]int32, n), inCol: make([]int32, n)}
}

func bit(key []uint64, i int) bool { return key[i>>6]>>(uint(i)&63)&1 != 0 }

// make works out a plan for the slopes j as they are now.
func (w *planner) make(j *Slopes, key []uint64) *plan {
	p := &plan{key: append([]uint64(nil), key...), entries: len(j.val)}
	w.load(j, p)
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
	n := w.n
	w.rows, w.cols = w.rows[:0], w.cols[:0]
	for i := 0; i < n; i++ {
		w.scale[i], w.inRow[i], w.inCol[i] = 0, 0, 0
		if !bit(p.key, i) {
			w.rows, w.cols = append(w.rows, int32(i)), append(w.cols, int32(i))
		}
	}
	for i := range w.slot {
		w.slot[i], w.a[i] = -1, 0
	}
	for k := 1; k < len(j.val); k++ {
		r, c := int(j.row[k]), int(j.col[k])
		switch {
		case bit(p.key, r):
		case bit(p.key, c):
			p.tied = append(p.tied, int32(r), int32(k), int32(c))
		default:
			w.slot[r*n+c], w.a[r*n+c] = int32(len(p.src)), j.val[k]
			p.src = append(p.src, int32(k))
			w.inRow[r]++
			w.inCol[c]++
			w.scale[r] = math.Max(w.scale[r], math.Abs(j.val[k]))
		}
	}
	p.size = len(p.src)
	for _, r := range w.rows {
		if w.scale[r] > 0 {
			w.scale[r] = 1 / w.scale[r]
		}
	}
}

// choose finds the next pivot: a lone entry of its row or column, which costs
// nothing, else the one with the least fill, and of these the largest.
func (w *planner) choose() (r, c int) {
	n := w.n
	for _, i := range w.rows {
		if w.inRow[i] == 1 {
			for _, k := range w.cols {
				if q := int(i)*n + int(k); w.slot[q] >= 0 && math.Abs(w.a[q])*w.scale[i] >= tinyPivot {
					return int(i), int(k)
				}
			}
		}
	}
	for _, k := range w.cols {
		if w.inCol[k] == 1 {
			for _, i := range w.rows {
				if q := int(i)*n + int(k); w.slot[q] >= 0 && math.Abs(w.a[q])*w.scale[i] >= tinyPivot {
					return int(i), int(k)
				}
			}
		}
	}
	return w.cheapest()
}

func (w *planner) cheapest() (r, c int) {
	n := w.n
	r, c = -1, -1
	best, size := int32(math.MaxInt32), 0.0
	for _, k := range w.cols {
		top := 0.0
		w.at = w.at[:0]
		for _, i := range w.rows {
			if q := int(i)*n + int(k); w.slot[q] >= 0 {
				w.at = append(w.at, i)
				top = max(top, math.Abs(w.a[q])*w.scale[i])
			}
		}
		if !(top >= tinyPivot) {
			continue
		}
		for _, i := range w.at {
			v := math.Abs(w.a[int(i)*n+int(k)]) * w.scale[i]
			if !(v >= pivotShare*top) {
				continue
			}
			if cost := (w.inRow[i] - 1) * (w.inCol[k] - 1); cost < best || (cost == best && v > size) {
				best, size, r, c = cost, v, int(i), int(k)
			}
		}
	}
	return r, c
}

// eliminate writes the operations of one pivot and carries them out.
func (w *planner) eliminate(p *plan, r, c int) {
	n := w.n
	w.rows, w.cols = without(w.rows, r), without(w.cols, c)
	piv := w.slot[r*n+c]
	p.least = append(p.least, pivotLeast*math.Abs(w.a[r*n+c]))
	at := len(p.factor) + 1
	p.factor = append(p.factor, piv, 0)
	p.back = append(p.back, int32(r), int32(c), piv, 0)
	us := len(p.back)
	for _, k := range w.cols {
		if u := w.slot[r*n+int(k)]; u >= 0 {
			p.back = append(p.back, u, k)
			w.inCol[k]--
		}
	}
	p.back[us-1] = int32(len(p.back)-us) / 2
	for _, i := range w.rows {
		l := w.slot[int(i)*n+c]
		if l < 0 {
			continue
		}
		p.factor[at]++
		w.inRow[i]--
		p.forward = append(p.forward, l, int32(r), i)
		p.factor = append(p.factor, l, int32(len(p.back)-us)/2)
		m := w.a[int(i)*n+c] / w.a[r*n+c]
		for q := us; q < len(p.back); q += 2 {
			t := int(i)*n + int(p.back[q+1])
			if w.slot[t] < 0 {
				w.slot[t] = int32(p.size)
				p.size++
				w.inRow[i]++
				w.inCol[p.back[q+1]]++
			}
			w.a[t] -= m * w.a[r*n+int(p.back[q+1])]
			p.factor = append(p.factor, w.slot[t], p.back[q])
		}
	}
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

func without(s []int32, v int) []int32 {
	for i, x := range s {
		if int(x) == v {
			return append(s[:i], s[i+1:]...)
		}
	}
	return s
}

// run factors the slopes into work. It reports false when a pivot has become too small.
func (p *plan) run(val, work []float64) bool {
	for i, k := range p.src {
		work[i] = val[k]
	}
	clear(work[len(p.src):p.size])
	ops := p.factor
	for i, k := 0, 0; i < len(ops); k++ {
		v := work[ops[i]]
		if !(math.Abs(v) >= p.least[k]) {
			return false
		}
		v = 1 / v
		work[ops[i]] = v
		below := ops[i+1]
		for i += 2; below > 0; below-- {
			m := work[ops[i]] * v
			work[ops[i]] = m
			end := i + 2 + 2*int(ops[i+1])
			for i += 2; i < end; i += 2 {
				work[ops[i]] -= m * work[ops[i+1]]
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
	ops := p.back
	for i := 0; i < len(ops); {
		sum := -b[ops[i]]
		col, piv := ops[i+1], ops[i+2]
		end := i + 4 + 2*int(ops[i+3])
		for i += 4; i < end; i += 2 {
			sum -= work[ops[i]] * dx[ops[i+1]]
		}
		dx[col] = sum * work[piv]
	}
}
