package balance

import "math"

// Slopes is the Jacobian of G: a square matrix of which only the entries are
// kept that were ever added to.
type Slopes struct {
	n          int
	known      int     // rows and columns before the first that count for nothing
	at         []int32 // (known+n)²: index into val
	side, zero int     // known+n, and the place of row 0, column 0 in it
	val        []float64
	row, col   []int32 // of each entry
}

// The first entries take what has no place yet, and what counts for nothing.
const (
	noPlace = iota
	noMatter
	firstEntry
)

func newSlopes(n int) *Slopes {
	j := &Slopes{n: n}
	for range firstEntry {
		j.val, j.row, j.col = append(j.val, 0), append(j.row, 0), append(j.col, 0)
	}
	j.border(0)
	return j
}

// border makes room for known numbers, −1, −2, … −known.
func (j *Slopes) border(known int) {
	side := known + j.n
	j.known, j.side, j.zero = known, side, known*side+known
	j.at = make([]int32, side*side)
	for i := range j.at {
		if i/side < known || i%side < known {
			j.at[i] = noMatter
		}
	}
}

// Add adds v to the derivative of row r by unknown c. Rows and columns of known
// numbers, which are below 0, are passed over, and so are numbers that are not there.
func (j *Slopes) Add(r, c int, v float64) {
	if i := uint(r*j.side + c + j.zero); i < uint(len(j.at)) {
		j.val[j.at[i]] += v
	}
}

// untouched is −0: no sum that anything but −0 was added to is it.
var untouched = math.Copysign(0, -1)

// touched reports whether anything was added to what began as untouched.
func touched(v float64) bool { return math.Float64bits(v) != 1<<63 }

// eval evaluates p with slopes, again where an entry had no place.
func (j *Slopes) eval(p Problem, x, g []float64) {
	clear(j.val)
	j.val[noPlace] = untouched
	p.Eval(x, g, j)
	if touched(j.val[noPlace]) {
		j.grow(p, x, g)
		clear(j.val)
		p.Eval(x, g, j)
	}
}

// grow gives a place to every entry that p adds to at x.
func (j *Slopes) grow(p Problem, x, g []float64) {
	at, val := j.at, j.val
	j.at, j.val = append([]int32(nil), at...), append([]float64(nil), val...)
	for i, k := range at {
		if k == noPlace { // a place of its own, for this once
			j.at[i] = int32(len(j.val))
			j.val = append(j.val, untouched)
		}
	}
	p.Eval(x, g, j)
	tried, sums := j.at, j.val
	j.at, j.val = at, val
	for i, k := range at {
		if k == noPlace && touched(sums[tried[i]]) {
			j.place(i)
		}
	}
}

// place makes room for an entry.
func (j *Slopes) place(i int) {
	j.at[i] = int32(len(j.val))
	j.val = append(j.val, 0)
	j.row, j.col = append(j.row, int32(i/j.side-j.known)), append(j.col, int32(i%j.side-j.known))
}
