package audit

import (
	"sort"

	"barlitre/circuit"
	"barlitre/machines/units"
)

// Track is the course of one quantity over a cycle, for plots and for reading
// values at an instant. T does not fall; two equal times are a step.
type Track struct {
	Name, Title string
	Dim         units.Dim
	T, V        []float64 // s, SI
}

// At returns the value at time x [SI], linear between the points kept; outside the
// cycle the nearest end, at a step the value after it. An empty track gives 0.
func (k *Track) At(x float64) float64 {
	n := len(k.T)
	if n == 0 {
		return 0
	}
	i := sort.Search(n, func(i int) bool { return k.T[i] > x })
	switch {
	case i == 0:
		return k.V[0]
	case i == n:
		return k.V[n-1]
	}
	t0, t1 := k.T[i-1], k.T[i]
	return k.V[i-1] + (k.V[i]-k.V[i-1])*(x-t0)/(t1-t0)
}

// Plot holds the courses of a run: its signals, and the powers of its channels.
// A long run is thinned to at most Points points a track: of each stretch the
// lowest and the highest value are kept, so that no peak is lost.
type Plot struct {
	Signals  []Track // by Compiled.Signals
	Powers   []Track // W, by Compiled.Channels
	Measured []Track // what the duty says was measured; Name is that of the signal it belongs to
	Channels []circuit.Channel
	Thinned  bool
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
