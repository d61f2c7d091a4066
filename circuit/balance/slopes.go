package balance

import "math"

// Slopes is the Jacobian of G: a square matrix of which only the entries are
// kept that were ever added to.
type Slopes struct {
	n          int
	known      int     // rows and columns before the first that count for nothing
	side, zero int     // known+n, and the place of row 0, column 0 in at
	at         []int32 // side²: index into val
	entries

	steady  []float64 // by entry: that part of val which stays as it is from one evaluation to the next
	stale   bool      // until something changes it
	stating bool      // an evaluation states it anew

	// Tangent asks for true derivatives; else those that lead on from flat places may stand in.
	Tangent bool

	tried      []int32 // room for grow
	sums, rest []float64
}

// entries are those of a sparse matrix: value, row and column of each.
type entries struct {
	val      []float64
	row, col []int32
}

// The first entries take what has no place yet, and what counts for nothing.
const (
	noPlace = iota
	noMatter
	firstEntry
)

func newSlopes(n int) *Slopes {
	j := &Slopes{n: n}
	j.border(0)
	return j
}

// border makes room for known numbers, −1, −2, … −known, and forgets all entries.
func (j *Slopes) border(known int) {
	side := known + j.n
	j.known, j.side, j.zero, j.stale = known, side, known*side+known, true
	for _, of := range []*[]float64{&j.val, &j.steady} {
		*of = append((*of)[:0], make([]float64, firstEntry)...)
	}
	for _, of := range []*[]int32{&j.row, &j.col} {
		*of = append((*of)[:0], make([]int32, firstEntry)...)
	}
	if len(j.at) != side*side {
		j.at = make([]int32, side*side)
	}
	clear(j.at) // noPlace
	for r := range known {
		for c := range side {
			j.at[r*side+c], j.at[c*side+r] = noMatter, noMatter
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

// on returns the slope of row i by its own unknown.
func (j *Slopes) on(i int) float64 {
	if k := j.at[i*(j.side+1)+j.zero]; k >= firstEntry {
		return j.val[k]
	}
	return 0
}

// Stating reports whether AddSteady is to be called in this evaluation.
func (j *Slopes) Stating() bool { return j.stating }

// AddSteady adds what stays as it is until Solver.Restate: it is asked for in the next evaluation
// only, and counts in all that follow.
func (j *Slopes) AddSteady(r, c int, v float64) {
	if i := uint(r*j.side + c + j.zero); i < uint(len(j.at)) {
		k := j.at[i]
		j.steady[k] += v
		j.val[k] += v // where it has no place, this tells
	}
}

// untouched is −0: no sum that anything but −0 was added to is it.
var untouched = math.Copysign(0, -1)

// touched reports whether anything was added to what began as untouched.
func touched(v float64) bool { return math.Float64bits(v) != 1<<63 }

// eval evaluates p with slopes. Steady ones are stated in an evaluation of their own, so that
// the sums are the same to the last bit whenever that was.
func (j *Slopes) eval(p Problem, x, g []float64) {
	if j.stale {
		j.stating = true
		clear(j.steady)
		if j.once(p, x, g) {
			clear(j.steady)
			j.once(p, x, g)
		}
		j.stating, j.stale = false, false
	}
	if j.once(p, x, g) {
		j.once(p, x, g)
	}
}

// once evaluates p with slopes. It reports whether an entry had no place: then it has one now,
// and p is to be evaluated again.
func (j *Slopes) once(p Problem, x, g []float64) bool {
	copy(j.val, j.steady)
	j.val[noPlace] = untouched
	p.Eval(x, g, j)
	if touched(j.val[noPlace]) {
		j.grow(p, x, g)
		return true
	}
	return false
}

// grow gives a place to every entry that p adds to at x.
func (j *Slopes) grow(p Problem, x, g []float64) {
	at, val, steady := j.at, j.val, j.steady
	tried, sums := append(j.tried[:0], at...), append(j.sums[:0], val...)
	for i, k := range at {
		if k == noPlace { // a place of its own, for this once
			tried[i] = int32(len(sums))
			sums = append(sums, untouched)
		}
	}
	rest := append(j.rest[:0], sums...)
	j.at, j.val, j.steady = tried, sums, rest
	p.Eval(x, g, j)
	j.at, j.val, j.steady = at, val, steady
	j.tried, j.sums, j.rest = tried, sums, rest
	for i, k := range at {
		if k == noPlace && touched(sums[tried[i]]) {
			j.place(i)
		}
	}
}

// place makes room for an entry.
func (j *Slopes) place(i int) {
	j.at[i] = int32(len(j.val))
	j.val, j.steady = append(j.val, 0), append(j.steady, 0)
	j.row, j.col = append(j.row, int32(i/j.side-j.known)), append(j.col, int32(i%j.side-j.known))
}
