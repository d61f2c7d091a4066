package balance

import "math"

// plan is an elimination worked out once for one set of active bounds and then
// replayed on the numbers: unknowns that rest on a bound are known and drop out,
// the rest is a sparse LU factorisation in a fixed order.
//
// Rows, columns and places are those in work, where it is replayed.
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
	// Of each pivot its place and how many rows are below, of each of these its place in the
	// pivot's column and how many updates, of each of these the place and that in the pivot's
	// row whose share it loses.
	pivots  []pair
	forward []pair   // of each pivot its row and how many rows are below, of each of these its place and row
	back    []pair   // last pivot first: row and column, place and how many other columns, of each of these place and column
	tied    []triple // row, entry of the slopes, column by which known steps enter the other rows
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
