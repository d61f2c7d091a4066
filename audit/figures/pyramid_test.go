package figures

import (
	"math"
	"math/rand/v2"
	"testing"

	"barlitre/machines/units"
)

var plain = units.Unit{Factor: 1}

// wave is a course with noise, steps, missing values and a long gap.
func wave(n int, seed uint64) (x, y []float64) {
	r := rand.New(rand.NewPCG(seed, 1))
	x, y = make([]float64, n), make([]float64, n)
	t := 0.0
	for i := range x {
		if r.IntN(50) > 0 {
			t += 0.01
		}
		x[i], y[i] = t, 100*math.Sin(float64(i)/3000)+10*r.NormFloat64()
		if r.IntN(5000) == 0 {
			y[i] += 500 // a peak of one point
		}
		if r.IntN(300) == 0 {
			y[i] = math.NaN()
		}
	}
	for i := n / 2; i < n/2+n/20; i++ {
		y[i] = math.NaN()
	}
	return x, y
}

// Ranges against a plain search through all points.
func TestPyramidRange(t *testing.T) {
	for _, n := range []int{0, 1, 31, 32, 33, 255, 256, 257, 5000, 100003} {
		x, y := wave(n, uint64(n))
		p := NewPyramid(x, y)
		r := rand.New(rand.NewPCG(uint64(n), 2))
		for range 300 {
			from := r.Float64() * float64(n) * 0.01
			to := from + r.ExpFloat64()*float64(n)*0.002
			lo, hi, any := math.Inf(1), math.Inf(-1), false
			for i, v := range y {
				if x[i] >= from && x[i] <= to && !math.IsNaN(v) {
					lo, hi, any = min(lo, v), max(hi, v), true
				}
			}
			if a, b, ok := p.Range(from, to); ok != any || ok && (a != lo || b != hi) {
				t.Fatalf("%d points, %g to %g: %g to %g, %v; by all points %g to %g, %v", n, from, to, a, b, ok, lo, hi, any)
			}
		}
	}
	if NewPyramid([]float64{1, 0}, []float64{0, 0}) != nil || NewPyramid([]float64{math.NaN()}, []float64{0}) != nil {
		t.Error("a course that runs back, or has no times, has a pyramid")
	}
}

// Columns against a search through all points, and the long gap is not bridged.
func TestPyramidColumns(t *testing.T) {
	x, y := wave(400000, 7)
	p := &Long{NewPyramid(x, y), plain, plain}
	const n = 600
	last := x[len(x)-1]
	for _, w := range [][2]float64{{0, last}, {last * 0.1, last * 0.4}, {last * 0.45, last * 0.6}, {100, 130}, {-50, last + 50}} {
		width := (w[1] - w[0]) / n
		lo, hi := map[int]float64{}, map[int]float64{}
		for i, v := range y {
			c := int(math.Ceil((x[i]-w[0])/width)) - 1
			if x[i] == w[0] {
				c = 0
			}
			if math.IsNaN(v) || x[i] < w[0] || x[i] > w[1] {
				continue
			}
			if a, ok := lo[c]; !ok || v < a {
				lo[c] = v
			}
			if a, ok := hi[c]; !ok || v > a {
				hi[c] = v
			}
		}
		all := p.columns(w[0], w[1], n)
		wrong, count := 0, 0
		for _, run := range all {
			for _, c := range run {
				k := int((c.x - w[0]) / width)
				if count++; c.low != lo[k] || c.high != hi[k] {
					wrong++
				}
			}
		}
		if count != len(lo) || wrong > count/100 { // a point on the edge of two columns may count in either
			t.Errorf("%v: %d columns of %d, %d of them wrong", w, count, len(lo), wrong)
		}
		if gap := w[0] < last/2 && w[1] > last*0.55; gap && len(all) < 2 {
			t.Errorf("%v: the gap is bridged", w)
		}
		if !p.dense(w[0], w[1], n) {
			t.Errorf("%v: not dense", w)
		}
	}
	few := p.runs(10, 10.1, n)
	if len(few) == 0 || p.dense(10, 10.1, n) || few[0][0].X != 10 {
		t.Errorf("a narrow window: %v", few)
	}
}

// BenchmarkPyramid is the time for the pyramid of ten million points.
func BenchmarkPyramid(b *testing.B) {
	x, y := wave(10_000_000, 3)
	b.ResetTimer()
	for range b.N {
		NewPyramid(x, y)
	}
}
