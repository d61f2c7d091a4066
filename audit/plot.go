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

// recorder is the circuit.Receiver that fills a Plot. It knows the number of time steps
// to come, and does not allocate after its creation.
type recorder struct {
	plot     *Plot
	stride   int // time steps a stretch
	seen, of int
	low, top []sampled // of the stretch so far, by track
}

type sampled struct{ t, v float64 }

func newRecorder(signals []circuit.Signal, channels []circuit.Channel, steps int) *recorder {
	p := &Plot{Channels: channels, Thinned: steps > PlotPoints}
	r := &recorder{plot: p, stride: 1, of: steps}
	size := steps
	if p.Thinned {
		stretches := (PlotPoints - 2) / 2 // the first and the last step are kept besides
		r.stride = (steps + stretches - 1) / stretches
		size = PlotPoints
	}
	track := func(name, title string, d units.Dim) Track {
		return Track{Name: name, Title: title, Dim: d, T: make([]float64, 0, size), V: make([]float64, 0, size)}
	}
	for _, s := range signals {
		p.Signals = append(p.Signals, track(s.Name, s.Title, s.Dim))
	}
	for _, c := range channels {
		p.Powers = append(p.Powers, track(c.Block, c.Kind, units.Power))
	}
	n := len(signals) + len(channels)
	r.low, r.top = make([]sampled, n), make([]sampled, n)
	return r
}

func (r *recorder) track(i int) *Track {
	if n := len(r.plot.Signals); i >= n {
		return &r.plot.Powers[i-n]
	}
	return &r.plot.Signals[i]
}

// Sample keeps one time step, or takes it into the stretch it belongs to.
func (r *recorder) Sample(s *circuit.Sample) error {
	edge := r.seen == 0 || r.seen == r.of-1
	begins := (r.seen-1)%r.stride == 0 || r.seen == 1
	ends := r.seen%r.stride == 0 || r.seen == r.of-2
	for i := range r.low {
		p := sampled{t: s.T}
		if n := len(s.Signals); i < n {
			p.v = s.Signals[i]
		} else {
			p.v = s.Power[i-n]
		}
		if !r.plot.Thinned || edge {
			r.track(i).put(p)
			continue
		}
		if begins || p.v < r.low[i].v {
			r.low[i] = p
		}
		if begins || p.v > r.top[i].v {
			r.top[i] = p
		}
		if ends {
			a, b := r.low[i], r.top[i]
			if a.t > b.t {
				a, b = b, a
			}
			r.track(i).put(a)
			if b != a {
				r.track(i).put(b)
			}
		}
	}
	r.seen++
	return nil
}

func (k *Track) put(p sampled) { k.T, k.V = append(k.T, p.t), append(k.V, p.v) }
