package audit

import (
	"math"
	"sort"
)

// DemandWindow is the time over which supply companies average power [s].
// Common practice in Europe and North America; a tariff may state another.
const DemandWindow = 15 * 60.0

// DemandBasis says how the mean over the window was formed.
type DemandBasis string

// The three ways.
const (
	OverRepeats   DemandBasis = "largest mean over any 15 min of the repeated cycle"
	InRecording   DemandBasis = "largest mean over any 15 min inside the recording"
	ShorterThanIt DemandBasis = "energy of the recording over 15 min: the recording is shorter than that and nothing is known of the rest"
)

// Demand is the largest mean power drawn over a window of 15 minutes. Power
// returned is not set against power drawn.
type Demand struct {
	Mean  float64 // W
	From  float64 // s, start of that window
	Basis DemandBasis
}

// demand finds the window of largest mean power over the powers p [W] at times t
// [s], the drawn part of p being linear between time steps. The mean is exact: a window's energy is a quadratic in its
// start between any two instants at which one of its ends passes a time step, so
// the largest lies at such an instant or at the crest of one of the quadratics.
func demand(t, p []float64, repeats bool, window float64) Demand {
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
