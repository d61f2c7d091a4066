package audit

import (
	"slices"

	"barlitre/circuit"
	"barlitre/circuit/duty"
	"barlitre/machines/units"
)

// Track is the course of one quantity over a cycle, for plots and for reading
// values at an instant. T does not fall; two equal times are a step.
type Track struct {
	Name, Title string
	Dim         units.Dim
	T, V        []float64 // s, SI
	Steps       []float64 // SI, at Plot.Steps; nil in a plot that is not thinned, and of a constant
}

// At returns the value at time x [SI], linear between the points kept; outside the
// cycle the nearest end, at a step the value after it. An empty track gives 0.
func (k *Track) At(x float64) float64 {
	n := len(k.T)
	if n == 0 {
		return 0
	}
	return k.between(k.after(x), x)
}

// between is the value at time x, which lies behind i points.
func (k *Track) between(i int, x float64) float64 {
	switch {
	case i == 0:
		return k.V[0]
	case i == len(k.V):
		return k.V[i-1]
	}
	t0, t1 := k.T[i-1], k.T[i]
	return k.V[i-1] + (k.V[i]-k.V[i-1])*(x-t0)/(t1-t0)
}

// after is the first point behind a time: most tracks are about evenly spaced, so it is looked
// for from where it would then be, in steps that grow.
func (k *Track) after(x float64) int {
	n := len(k.T)
	lo, hi := 0, n // it lies between: all before lo are not behind x, and hi is, or the end
	if share := (x - k.T[0]) / (k.T[n-1] - k.T[0]) * float64(n-1); share >= 0 && share < float64(n-1) {
		i := 1 + int(share)
		if k.T[i] > x {
			for hi, lo = i, i-1; lo > 0 && k.T[lo-1] > x; lo = max(0, lo-2*(i-lo)) {
				hi = lo
			}
		} else {
			for lo, hi = i+1, i+1; hi < n && k.T[hi] <= x; hi = min(n, hi+2*(hi-i)) {
				lo = hi + 1
			}
		}
	}
	for lo < hi {
		if m := (lo + hi) / 2; k.T[m] > x {
			hi = m
		} else {
			lo = m + 1
		}
	}
	return lo
}

// Instant reads tracks at one time [SI]. Those that share their times are searched once.
type Instant struct {
	x    float64
	last *float64 // the first of the times that were searched last, and what was found there
	n, i int
}

// NewInstant is the instant x.
func NewInstant(x float64) *Instant { return &Instant{x: x} }

// Of is what At says of a track.
func (in *Instant) Of(k *Track) float64 {
	n := len(k.T)
	if n == 0 {
		return 0
	}
	if in.last != &k.T[0] || in.n != n {
		in.last, in.n, in.i = &k.T[0], n, k.after(in.x)
	}
	return k.between(in.i, in.x)
}

// shareTimes lets tracks with the same times as the first one have them in common.
func (p *Plot) shareTimes() {
	var first []float64
	for _, list := range [][]Track{p.Signals, p.Powers} {
		for i := range list {
			if k := &list[i]; first == nil {
				first = slices.Clip(k.T)
				k.T = first
			} else if slices.Equal(k.T, first) {
				k.T = first
			}
		}
	}
}

// Plot holds the courses of a run: its signals, and the powers of its channels.
// A long run is thinned to at most Points points a track: of each stretch the
// lowest and the highest value are kept, so that no peak is lost. Tracks then have other
// instants each; to be set against one another they are read at Steps.
type Plot struct {
	Signals  []Track // by Compiled.Signals
	Powers   []Track // W, by Compiled.Channels
	Measured []Track // what the duty says was measured; Name is that of the signal it belongs to
	Channels []circuit.Channel
	Thinned  bool
	Steps    []float64 // s, of a thinned plot: the time step that ends each stretch, at which every track is known
	ways     *ways     // of these signals
}

// PlotPoints is the largest number of points a track keeps: more than a wide
// screen has columns.
const PlotPoints = 2000

// Signal finds the track of a signal by name, or nil.
func (p *Plot) Signal(name string) *Track {
	for i := range p.Signals {
		if p.Signals[i].Name == name {
			return &p.Signals[i]
		}
	}
	return nil
}

// PowerAt adds up the powers [W] of some channels at a time.
func (p *Plot) PowerAt(t float64, of func(circuit.Channel) bool) float64 {
	sum := 0.0
	for i, c := range p.Channels {
		if of(c) {
			sum += p.Powers[i].At(t)
		}
	}
	return sum
}

// CourseOf returns what a track of a duty asks for over time, thinned as in a Plot.
func CourseOf(d *duty.Duty, asked duty.Track) Track {
	t, v := d.Time, asked.Values
	n := min(len(t), len(v))
	k := Track{Name: asked.Of, Title: asked.What.String(), T: t[:n:n], V: v[:n:n]}
	if n <= PlotPoints {
		return k
	}
	k.T, k.V = make([]float64, 0, PlotPoints), make([]float64, 0, PlotPoints)
	k.put(t[0], v[0])
	stretch := strideOf(n)
	for from := 1; from < n-1; from += stretch {
		low, top := from, from
		for i := from; i < min(from+stretch, n-1); i++ {
			if v[i] < v[low] {
				low = i
			}
			if v[i] > v[top] {
				top = i
			}
		}
		k.put(t[min(low, top)], v[min(low, top)])
		if low != top {
			k.put(t[max(low, top)], v[max(low, top)])
		}
	}
	k.put(t[n-1], v[n-1])
	return k
}

// strideOf is how many time steps a stretch has where steps are too many to keep.
func strideOf(steps int) int {
	const stretches = (PlotPoints - 2) / 2 // the first and the last step are kept besides
	return (steps + stretches - 1) / stretches
}
