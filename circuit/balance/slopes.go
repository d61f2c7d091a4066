package balance

// Slopes is the Jacobian of G: a square matrix of which only the entries are
// kept that were ever added to.
type Slopes struct {
	n          int
	known      int     // rows and columns before the first that count for nothing
	at         []int32 // (known+n)²: index into val
	side, zero int     // known+n, and the place of row 0, column 0 in it
	val        []float64
	row, col   []int32  // of each entry
	missed     [100]int // places that are not there yet
	misses     int
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
// numbers, which are below 0, are passed over.
func (j *Slopes) Add(r, c int, v float64) {
	i := r*j.side + c + j.zero
	if uint(i) >= uint(len(j.at)) { // a number that is not there
		return
	}
	k := j.at[i]
	if k == noPlace && j.misses < len(j.missed) {
		j.missed[j.misses] = i
		j.misses++
	}
	j.val[k] += v
}

// eval evaluates p with slopes, again until every entry has its place.
func (j *Slopes) eval(p Problem, x, g []float64) {
	for {
		clear(j.val)
		p.Eval(x, g, j)
		if j.misses == 0 {
			return
		}
		for _, i := range j.missed[:j.misses] {
			j.place(i)
		}
		j.misses = 0
	}
}

// place makes room for an entry that was missed, perhaps more than once.
func (j *Slopes) place(i int) {
	if j.at[i] != noPlace {
		return
	}
	j.at[i] = int32(len(j.val))
	j.val = append(j.val, 0)
	j.row, j.col = append(j.row, int32(i/j.side-j.known)), append(j.col, int32(i%j.side-j.known))
}
