package audit

import (
	"math"
	"math/rand/v2"
	"sort"
	"testing"

	"gonum.org/v1/gonum/integrate"
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

// The way of a speed is its integral: against the trapezoid rule of a library at the points,
// and a parabola's closed form between them.
func TestWay(t *testing.T) {
	k := Track{}
	for i := range 201 {
		x := float64(i) * 0.05
		k.T, k.V = append(k.T, x), append(k.V, math.Sin(x))
	}
	w := (&Plot{Signals: []Track{k}, ways: &ways{}}).Way(0)
	for i := 1; i < len(k.T); i++ {
		if got, want := w.At(k.T[i]), integrate.Trapezoidal(k.T[:i+1], k.V[:i+1]); math.Abs(got-want) > 1e-12 {
			t.Fatalf("way at %g: %g, want %g", k.T[i], got, want)
		}
	}
	if got := w.Span(); math.Abs(got-2) > 1e-3 { // from 0 to 2, as 1 - cos
		t.Errorf("span %g", got)
	}
	line := Track{T: []float64{0, 2, 2, 4}, V: []float64{-1, -1, 0, 4}} // 2 back, then x²/1 from rest
	w = wayOf(&line)
	for _, c := range [][2]float64{{-1, 2}, {0, 2}, {1, 1}, {2, 0}, {3, 1}, {3.5, 2.25}, {4, 4}, {9, 4}} {
		if got := w.At(c[0]); math.Abs(got-c[1]) > 1e-12 {
			t.Errorf("way at %g: %g, want %g", c[0], got, c[1])
		}
	}
	if w.Span() != 4 {
		t.Errorf("span %g", w.Span())
	}
}

// An instant reads what the tracks themselves say, whether they share their times or not.
func TestInstant(t *testing.T) {
	times := []float64{0, 1, 1, 3}
	a, b := Track{T: times, V: []float64{1, 2, 5, 6}}, Track{T: times, V: []float64{0, 0, 9, 1}}
	c, d := Track{T: []float64{0, 3}, V: []float64{4, 1}}, Track{T: times[:2], V: []float64{3, 4}}
	for _, x := range []float64{-1, 0, 0.5, 1, 2, 3, 4} {
		in := NewInstant(x)
		for i, k := range []*Track{&a, &b, &c, {}, &b, &d, &a} {
			if got := in.Of(k); got != k.At(x) {
				t.Errorf("track %d at %g: %g, want %g", i, x, got, k.At(x))
			}
		}
	}
}
