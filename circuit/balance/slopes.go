package balance

// Slopes is the Jacobian of G: a square matrix of which only the entries are
// kept that were ever added to. Entry 0 takes what has no place yet.
type Slopes struct {
	n        int
	at       []int32 // n×n: index into val, 0 = no place yet
	val      []float64
	row, col []int32 // of each entry
	missed   int     // a place that is not there yet, plus one
}

func newSlopes(n int) *Slopes {
	return &Slopes{n: n, at: make([]int32, n*n), val: make([]float64, 1), row: make([]int32, 1), col: make([]int32, 1)}
}

// Add adds v to the derivative of row r by unknown c.
func (j *Slopes) Add(r, c int, v float64) {
	i := r*j.n + c
	k := j.at[i]
	if k == 0 {
		j.missed = i + 1
	}
	j.val[k] += v
}

// place makes room for the entry that was missed last and reports whether there was one.
func (j *Slopes) place() bool {
	if j.missed == 0 {
		return false
	}
	i := j.missed - 1
	j.missed = 0
	j.at[i] = int32(len(j.val))
	j.val = append(j.val, 0)
	j.row, j.col = append(j.row, int32(i/j.n)), append(j.col, int32(i%j.n))
	return true
}

// eval evaluates p with slopes, again and again until every entry has its place.
func (j *Slopes) eval(p Problem, x, g []float64) {
	for {
		clear(g)
		clear(j.val)
		p.Eval(x, g, j)
		if !j.place() {
			return
		}
	}
}
