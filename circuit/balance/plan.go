package balance

import "math"

// plan is an elimination worked out once for one set of active bounds and then
// replayed on the numbers: unknowns that rest on a bound are known and drop out,
// the rest is a sparse LU factorisation in a fixed order.
//
// Rows, columns and places are those in work, where it is replayed.
//
// Order: Markowitz, The elimination form of the inverse, Management Science 3
// (1957), in the column with the fewest entries, among pivots of at least a tenth of it (rows scaled).
type plan struct {
	key     []uint64 // which unknowns rest on a bound
	entries int      // of the slopes when it was made; it counts on those that came later being zero
	none    []int32  // entries that were zero when it was made, and count on being so
	lean    bool     // whether there may be any of these
	sparse  bool     // false: singular when it was made
	bad     int      // times a pivot was too small
	next    *plan    // another one of the same key
	fixed   []int32  // the unknowns that rest on a bound
	least   []float64
	// Of each pivot its place and how many rows are below, its row and how many updates each of these
	// needs; then of each row below its place in the pivot's column and its row, and of each update the
	// place and that in the pivot's row whose share it loses.
	pivots []pair
	back   []pair   // last pivot first: row and column, place and how many other columns, of each of these place and column
	tied   []triple // row, entry of the slopes, column by which known steps enter the other rows
	size   int      // of work: residuals, steps, the entries of the slopes, then the fill
}

type triple struct{ a, b, c int32 }

// pair is two numbers in one word, which is read in one go.
type pair uint64

func pairOf(a, b int32) pair { return pair(uint32(a)) | pair(b)<<32 }

func (p pair) a() int { return int(uint32(p)) }
func (p pair) b() int { return int(p >> 32) }

const (
	pivotShare = 0.1  // of its column that a pivot must have when a plan is made
	pivotLeast = 1e-5 // of its first value that it must keep
	surePivot  = 0.1  // of its first value, from which on a pivot is as good as a new one
	pivotBad   = 5    // a plan that failed so often is made anew
)

// run factors the slopes into work, and carries the residual along that lies at its start. It
// reports false when a pivot has become too small.
func (p *plan) run(n int, val, work []float64) bool {
	work = work[:p.size]
	entries := work[2*n:]
	clear(entries[copy(entries, val[:p.entries]):])
	w, code, at := VectorOf(work, 0), codesOf(p.pivots), 0
	for _, least := range p.least {
		pivot, row := code.at(at), code.at(at+1)
		at += 2
		v := w.At(pivot.a())
		if !(v >= least || v <= -least) {
			return false
		}
		v = 1 / v
		w.Put(pivot.a(), v)
		r := w.At(row.a())
		for more := pivot.b(); more > 0; more-- {
			below := code.at(at)
			at++
			m := w.At(below.a()) * v
			w.Put(below.a(), m)
			w.Add(below.b(), -(m * r))
			for end := at + row.b(); at < end; at++ {
				u := code.at(at)
				w.Add(u.a(), -(m * w.At(u.b())))
			}
		}
	}
	return true
}

// sure reports whether the pivots of the last factors are hardly less than when the plan was
// made: then other factors would give the same step.
func (p *plan) sure(work []float64) bool {
	code := p.pivots
	for _, least := range p.least {
		pivot, row := code[0], code[1]
		if v := work[pivot.a()]; !(math.Abs(v)*least < pivotLeast/surePivot) { // v is one over the pivot
			return false
		}
		code = code[2+pivot.b()*(1+row.b()):]
	}
	return true
}

// solve turns another residual at the start of work into the step behind it; the steps of
// unknowns on a bound are there already, and with moved set they enter the other rows.
func (p *plan) solve(val, work []float64, moved bool) {
	if moved {
		p.tie(val, work)
	}
	w, code := VectorOf(work[:p.size], 0), codesOf(p.pivots)
	for at, end := 0, len(p.pivots); at < end; {
		pivot, row := code.at(at), code.at(at+1)
		at += 2
		r := w.At(row.a())
		for more := pivot.b(); more > 0; more-- {
			below := code.at(at)
			at += 1 + row.b()
			w.Add(below.b(), -(w.At(below.a()) * r))
		}
	}
	p.backward(work)
}

// tie lets the steps of unknowns on a bound enter the other rows of a residual.
func (p *plan) tie(val, work []float64) {
	for _, t := range p.tied {
		work[t.a] += val[t.b] * work[t.c]
	}
}

// backward turns the residual that was carried along into the step behind it.
func (p *plan) backward(work []float64) {
	w, code := VectorOf(work[:p.size], 0), codesOf(p.back)
	for at, last := 0, len(p.back); at < last; {
		to, pivot := code.at(at), code.at(at+1)
		at += 2
		sum := w.At(to.a())
		for end := at + pivot.b(); at < end; at++ {
			e := code.at(at)
			sum += w.At(e.a()) * w.At(e.b())
		}
		w.Put(to.b(), -sum*w.At(pivot.a()))
	}
}
