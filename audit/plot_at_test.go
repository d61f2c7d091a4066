package audit

import (
	"math"
	"math/rand/v2"
	"sort"
	"testing"
)

// The point behind a time is that of the library's search, on even and uneven tracks, on
// steps, before, behind and on the points themselves.
func TestTrackAfter(t *testing.T) {
	r := rand.New(rand.NewPCG(8, 1))
	for range 300 {
		k := Track{T: make([]float64, 1+r.IntN(60))}
		for i := range k.T {
			k.T[i] = float64(i) * 0.1
			if r.IntN(3) == 0 && i > 0 {
				k.T[i] = k.T[i-1] + r.Float64()*float64(r.IntN(2)) // some twice
			}
		}
		sort.Float64s(k.T)
		k.V = make([]float64, len(k.T))
		xs := append([]float64{-1, 1e9, math.Inf(1), math.Inf(-1), math.NaN()}, k.T...)
		for range 30 {
			xs = append(xs, r.Float64()*k.T[len(k.T)-1])
		}
		for _, x := range xs {
			if got, want := k.after(x), sort.Search(len(k.T), func(i int) bool { return k.T[i] > x }); got != want {
				t.Fatalf("point behind %g in %v: %d, want %d", x, k.T, got, want)
			}
		}
	}
}
