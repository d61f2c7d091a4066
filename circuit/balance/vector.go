//go:build !checked && !race

package balance

import "unsafe"

// Vector is a slice that is read and written without a look at its length: circuits do so some
// hundred times a step, at places that were worked out once and stay as they are. Built with the
// tag checked, or for the race detector, it looks.
type Vector struct{ first unsafe.Pointer }

// VectorOf returns v with place 0 at v[zero]; those before it have negative places. Where there are
// none from 0 up, v must have room for one more.
func VectorOf(v []float64, zero int) Vector {
	if zero < 0 || zero > len(v) || zero > 0 && zero == cap(v) {
		panic("balance: place 0 of a vector lies outside of it")
	}
	return Vector{unsafe.Add(unsafe.Pointer(unsafe.SliceData(v)), zero*8)}
}

func (v Vector) at(i int) *float64 { return (*float64)(unsafe.Add(v.first, i*8)) }

// At returns the number at place i.
func (v Vector) At(i int) float64 { return *v.at(i) }

// Put puts a number at place i.
func (v Vector) Put(i int, x float64) { *v.at(i) = x }

// Add adds to the number at place i.
func (v Vector) Add(i int, x float64) { *v.at(i) += x }

// codes is a slice of pairs, read as a Vector is.
type codes struct{ first unsafe.Pointer }

func codesOf(c []pair) codes { return codes{unsafe.Pointer(unsafe.SliceData(c))} }

func (c codes) at(i int) pair { return *(*pair)(unsafe.Add(c.first, i*8)) }
