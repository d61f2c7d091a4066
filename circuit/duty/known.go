package duty

import (
	"sync"
	"weak"
)

// What takes a walk over all rows is kept for long columns: each edit of a file makes its
// duties anew, of the same columns. A column is not changed any more once a duty has it.
var known = struct {
	sync.Mutex
	of map[columnKey]float64
}{of: map[columnKey]float64{}}

// columnKey tells a column, which it does not keep alive, and what is known of it.
type columnKey struct {
	first weak.Pointer[float64]
	rows  int
	what  fact
}

type fact int

const (
	largest      fact = iota // of its absolute values
	inOrder                  // as time stamps; 1 where nothing is wrong
	finite                   // 1 where all values are numbers
	asCommand                // 1 where they also lie between −1 and 1
	notBelowZero             // 1 where they also do not lie below 0
)

const (
	longColumn = 100_000 // rows from which on something is kept
	mostKnown  = 200
)

// recall returns what is known of a column, if it is.
func recall(column []float64, what fact) (v float64, ok bool) {
	if len(column) < longColumn {
		return 0, false
	}
	known.Lock()
	defer known.Unlock()
	v, ok = known.of[columnKey{weak.Make(&column[0]), len(column), what}]
	return v, ok
}

// keep keeps it.
func keep(column []float64, what fact, v float64) {
	if len(column) < longColumn {
		return
	}
	known.Lock()
	defer known.Unlock()
	if len(known.of) >= mostKnown {
		clear(known.of)
	}
	known.of[columnKey{weak.Make(&column[0]), len(column), what}] = v
}
