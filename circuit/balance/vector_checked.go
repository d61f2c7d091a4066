//go:build checked || race

package balance

// Vector is a slice whose place 0 may lie inside it; see the other one.
type Vector struct {
	all  []float64
	zero int
}

// VectorOf returns v with place 0 at v[zero]; those before it have negative places. Where there are
// none from 0 up, v must have room for one more.
func VectorOf(v []float64, zero int) Vector {
	if zero < 0 || zero > len(v) || zero > 0 && zero == cap(v) {
		panic("balance: place 0 of a vector lies outside of it")
	}
	return Vector{v, zero}
}

// At returns the number at place i.
func (v Vector) At(i int) float64 { return v.all[i+v.zero] }

// Put puts a number at place i.
func (v Vector) Put(i int, x float64) { v.all[i+v.zero] = x }

// Add adds to the number at place i.
func (v Vector) Add(i int, x float64) { v.all[i+v.zero] += x }

// codes is a slice of pairs.
type codes []pair

func codesOf(c []pair) codes { return c }

func (c codes) at(i int) pair { return c[i] }
