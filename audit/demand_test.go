package audit

import (
	"math"
	"math/rand"
	"testing"
)

// demand hands a meter the points one by one.
func demand(t, p []float64, repeats bool, window float64) Demand {
	m := newMeanMeter(window, 0)
	for k := range t {
		m.take(powerAt{t[k], p[k]})
	}
	return m.demand(repeats)
}

// bruteDemand scans starts densely and integrates by small rectangles at midpoints.
func bruteDemand(t, p []float64, repeats bool, window float64) float64 {
	length := t[len(t)-1] - t[0]
	at := func(x float64) float64 {
		x = math.Mod(x, length) + t[0]
		for k := 1; k < len(t); k++ {
			if x < t[k] && t[k] > t[k-1] {
				a, b := math.Max(p[k-1], 0), math.Max(p[k], 0)
				return a + (b-a)*(x-t[k-1])/(t[k]-t[k-1])
			}
		}
		return math.Max(p[len(p)-1], 0)
	}
	const h = 0.5
	last := length
	if !repeats {
		last = length - window
	}
	best := 0.0
	for s := 0.0; s <= last; s += h {
		e := 0.0
		for x := s + h/2; x < s+window; x += h {
			e += at(x) * h
		}
		best = math.Max(best, e/window)
	}
	return best
}

func TestDemandAgainstBruteForce(t *testing.T) {
	r := rand.New(rand.NewSource(7))
	for n := 0; n < 12; n++ {
		var ts, ps []float64
		x := 100.0
		for k := 0; k < 9; k++ {
			ts, ps = append(ts, x), append(ps, 2000*r.Float64()-300)
			if k == 4 { // a step
				ts, ps = append(ts, x), append(ps, 4000*r.Float64())
			}
			x += float64(1 + r.Intn(40))
		}
		length := ts[len(ts)-1] - ts[0]
		for _, c := range []struct {
			repeats bool
			window  float64
		}{{true, 60}, {true, 2.5 * length}, {false, length / 3}} {
			w := math.Floor(c.window)
			got := demand(ts, ps, c.repeats, w)
			want := bruteDemand(ts, ps, c.repeats, w)
			// brute force misses the crest by up to half a step: it may only be lower, by little
			if got.Mean < want-1e-6*want-0.5 || got.Mean > want*1.01+1 {
				t.Errorf("case %d, repeats %v, window %g of %g: %g, brute force %g", n, c.repeats, w, length, got.Mean, want)
			}
		}
	}
}

// Hand-worked: a triangle 0 → 100 W → 0 over 20 s; the best 10 s lie in the middle,
// 5 to 15 s, with a mean of 75 W.
func TestDemandOfATriangle(t *testing.T) {
	got := demand([]float64{0, 10, 20}, []float64{0, 100, 0}, false, 10)
	wants(t, "mean", got.Mean, 75, 1e-12)
	wants(t, "from", got.From, 5, 1e-9)
	if got.Basis != InRecording {
		t.Errorf("basis %q", got.Basis)
	}
}

func TestDemandBasis(t *testing.T) {
	ts, ps := []float64{0, 12}, []float64{1000, 1000}
	if d := demand(ts, ps, true, DemandWindow); d.Basis != OverRepeats || math.Abs(d.Mean-1000) > 1e-9 {
		t.Errorf("repeated: %+v", d)
	}
	// a recording of 12 s says nothing of the rest of the 15 minutes
	if d := demand(ts, ps, false, DemandWindow); d.Basis != ShorterThanIt || math.Abs(d.Mean-1000*12/900.0) > 1e-9 {
		t.Errorf("short recording: %+v", d)
	}
	if d := demand(nil, nil, true, DemandWindow); d.Mean != 0 {
		t.Errorf("nothing: %+v", d)
	}
	// 7 s at 100 W, 5 s at rest: 75 cycles make exactly 900 s
	if d := demand([]float64{0, 7, 7, 12}, []float64{100, 100, 0, 0}, true, DemandWindow); math.Abs(d.Mean-700.0/12) > 1e-9 {
		t.Errorf("whole cycles: %+v", d)
	}
	// returned power is not set against drawn power
	if d := demand([]float64{0, 450, 450, 900}, []float64{100, 100, -100, -100}, true, DemandWindow); math.Abs(d.Mean-50) > 1e-9 {
		t.Errorf("returned: %+v", d)
	}
}
