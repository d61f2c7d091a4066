package audit

import (
	"math"
	"math/rand"
	"sort"
	"testing"
)

// The meter that sees points once finds what a search over all of them finds.
func TestDemandAsPointsCome(t *testing.T) {
	r := rand.New(rand.NewSource(11))
	for n := range 400 {
		count := 2 + r.Intn(300)
		if n%40 == 0 {
			count = 6000 // many more than the window holds
		}
		ts, ps := make([]float64, count), make([]float64, count)
		x := 1000 * r.Float64()
		for k := range ts {
			if r.Intn(6) > 0 { // else a step
				x += 5 * r.Float64()
			}
			ts[k], ps[k] = x, 2000*r.Float64()-300
		}
		length := ts[count-1] - ts[0]
		if length == 0 {
			continue
		}
		for _, window := range []float64{length * r.Float64(), length * (1 + 3*r.Float64()), length, 2 * length, 60, 900} {
			for _, repeats := range []bool{true, false} {
				got, want := demand(ts, ps, repeats, window), wholeDemand(ts, ps, repeats, window)
				if math.Abs(got.Mean-want.Mean) > 1e-10*want.Mean || got.Basis != want.Basis {
					t.Errorf("case %d, %d points, repeats %v, window %g of %g: %+v, want %+v", n, count, repeats, window, length, got, want)
				}
				// the window found holds what is said of it
				if c := newCourse(ts, ps); repeats || window <= length {
					from := got.From - ts[0]
					if e := c.energy(from+window) - c.energy(from); math.Abs(e/window-got.Mean) > 1e-9*want.Mean {
						t.Errorf("case %d: the window from %g holds a mean of %g, not %g", n, got.From, e/window, got.Mean)
					}
				}
			}
		}
	}
}

// wholeDemand has all points at hand and tries every window that can be the largest: those
// with an end at a point, and the crest of the quadratic between each two of them.
func wholeDemand(t, p []float64, repeats bool, window float64) Demand {
	if len(t) < 2 || t[len(t)-1] <= t[0] {
		return Demand{Basis: ShorterThanIt}
	}
	c := newCourse(t, p)
	if !repeats {
		if window > c.length {
			return Demand{Mean: c.total() / window, From: t[0], Basis: ShorterThanIt}
		}
		start, e := c.largest(window, c.length-window)
		return Demand{Mean: e / window, From: t[0] + start, Basis: InRecording}
	}
	n := math.Floor(window / c.length)
	rest := window - n*c.length
	start, e := c.largest(rest, c.length)
	return Demand{Mean: (n*c.total() + e) / window, From: t[0] + start, Basis: OverRepeats}
}

// course is a power over time with its running integral, repeated for ever.
type course struct {
	t, p   []float64 // t from 0
	e      []float64 // J, integral up to t
	length float64
}

func newCourse(t, p []float64) *course {
	n := len(t)
	c := &course{t: make([]float64, n), p: make([]float64, n), e: make([]float64, n)}
	for k := range t {
		c.t[k], c.p[k] = t[k]-t[0], math.Max(p[k], 0)
		if k > 0 {
			c.e[k] = c.e[k-1] + (c.p[k]+c.p[k-1])/2*(c.t[k]-c.t[k-1])
		}
	}
	c.length = c.t[n-1]
	return c
}

func (c *course) total() float64 { return c.e[len(c.e)-1] }

// energy returns the integral from 0 to x >= 0 [J].
func (c *course) energy(x float64) float64 {
	n := math.Floor(x / c.length)
	x -= n * c.length
	k := sort.SearchFloat64s(c.t, x) // t[k-1] < x <= t[k]
	e := n * c.total()
	if k == 0 {
		return e
	}
	k = min(k, len(c.t)-1)
	h, s := c.t[k]-c.t[k-1], x-c.t[k-1]
	return e + c.e[k-1] + s*(c.p[k-1]+(c.p[k]-c.p[k-1])*s/h/2)
}

// largest returns the start in [0, last] of the window of the given length with
// the most energy, and that energy [J].
func (c *course) largest(window, last float64) (start, energy float64) {
	in := func(x float64) float64 { return c.energy(x+window) - c.energy(x) }
	starts := make([]float64, 0, 2*len(c.t)+2)
	starts = append(starts, 0, last)
	for _, t := range c.t {
		starts = append(starts, t)
		if x := t - window; x >= 0 {
			starts = append(starts, x)
		} else {
			starts = append(starts, x+c.length)
		}
	}
	sort.Float64s(starts)
	energy = math.Inf(-1)
	try := func(x float64) {
		if e := in(x); x >= 0 && x <= last && e > energy {
			start, energy = x, e
		}
	}
	for i, a := range starts {
		try(a)
		if i+1 < len(starts) && starts[i+1] > a {
			b := starts[i+1]
			// the quadratic through both ends and the middle
			ga, gm, gb := in(a), in((a+b)/2), in(b)
			if bend := ga - 2*gm + gb; bend < 0 {
				try((a+b)/2 + (b-a)*(ga-gb)/bend/4)
			}
		}
	}
	return start, energy
}
