package balance

import "testing"

// Place 0 lies where it was said to, those before it have negative places, and a place 0
// outside of the slice is refused.
func TestVector(t *testing.T) {
	all := []float64{1, 2, 3, 4, 5}
	v := VectorOf(all, 2)
	v.Put(-2, 10)
	v.Add(2, 0.5)
	if all[0] != 10 || all[4] != 5.5 || v.At(0) != 3 || v.At(-1) != 2 {
		t.Errorf("%v, place 0 holds %g", all, v.At(0))
	}
	none := VectorOf(make([]float64, 2, 3), 2) // no unknowns, but known numbers before them
	none.Put(-2, 7)
	if v := none.At(-2); v != 7 {
		t.Errorf("place -2 holds %g", v)
	}
	for _, zero := range []int{-1, 5, 6} {
		func() {
			defer func() {
				if recover() == nil {
					t.Errorf("place 0 at %d of 5 numbers is not refused", zero)
				}
			}()
			VectorOf(all, zero)
		}()
	}
}
