package audit

import (
	"barlitre/circuit"
	"barlitre/machines/units"
)

// recorder is the circuit.Receiver that fills a Plot. The first and the last time step
// are kept, and of each stretch between the lowest and the highest value of every track, and its last step.
type recorder struct {
	plot   *Plot
	stride int // time steps a stretch
	seen   int
	now    stretch // so far
	values []float64
	t      float64   // of values
	full   []stretch // of a part: what has ended
	part   bool
}

// stretch holds the extremes of some time steps, by track: the signals, then the powers; once it has
// ended, its last step too.
type stretch struct {
	lowT, low, topT, top []float64
	last                 []float64
	lastT                float64
	begun                bool
}

func newStretch(tracks int) stretch {
	v := make([]float64, 5*tracks)
	return stretch{lowT: v[:tracks], low: v[tracks : 2*tracks], topT: v[2*tracks : 3*tracks], top: v[3*tracks : 4*tracks], last: v[4*tracks:]}
}

// newRecorder makes a recorder for about so many time steps.
func newRecorder(signals []circuit.Signal, channels []circuit.Channel, steps int) *recorder {
	p := &Plot{Channels: channels, Thinned: steps > PlotPoints, ways: &ways{}}
	r := &recorder{plot: p, stride: 1}
	size := steps
	if p.Thinned {
		r.stride, size = strideOf(steps), PlotPoints
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
	r.now, r.values = newStretch(n), make([]float64, n)
	return r
}

// Sample takes one time step into the stretch it belongs to.
func (r *recorder) Sample(s *circuit.Sample) error {
	r.t = s.T
	copy(r.values[copy(r.values, s.Signals):], s.Power)
	r.now.take(s.T, r.values)
	if r.seen%r.stride == 0 {
		r.close()
	}
	r.seen++
	return nil
}

func (w *stretch) take(t float64, values []float64) {
	if !w.begun {
		w.begun = true
		for i, v := range values {
			w.lowT[i], w.low[i], w.topT[i], w.top[i] = t, v, t, v
		}
		return
	}
	low, top := w.low[:len(values)], w.top[:len(values)]
	for i, v := range values {
		if v < low[i] {
			low[i], w.lowT[i] = v, t
		}
		if v > top[i] {
			top[i], w.topT[i] = v, t
		}
	}
}

// join takes the extremes and the last step of a later part of the stretch.
func (w *stretch) join(o *stretch) {
	if !w.begun {
		*w, *o = *o, *w
		return
	}
	for i := range w.low {
		if o.low[i] < w.low[i] {
			w.low[i], w.lowT[i] = o.low[i], o.lowT[i]
		}
		if o.top[i] > w.top[i] {
			w.top[i], w.topT[i] = o.top[i], o.topT[i]
		}
	}
	w.lastT, w.last, o.last = o.lastT, o.last, w.last
}

// close ends the stretch with the time step at hand.
func (r *recorder) close() {
	r.now.lastT = r.t
	copy(r.now.last, r.values)
	r.end()
}

// end keeps the stretch so far and begins another.
func (r *recorder) end() {
	if r.part {
		r.full = append(r.full, r.now)
		r.now = newStretch(len(r.values))
		return
	}
	w := &r.now
	for i := range w.low {
		k, t, v, t2, v2 := r.track(i), w.lowT[i], w.low[i], w.topT[i], w.top[i]
		if t > t2 {
			t, v, t2, v2 = t2, v2, t, v
		}
		k.put(t, v)
		if t2 != t || v2 != v {
			k.put(t2, v2)
		}
		if r.plot.Thinned {
			k.Steps = append(k.Steps, w.last[i])
		}
	}
	if r.plot.Thinned {
		r.plot.Steps = append(r.plot.Steps, w.lastT)
	}
	w.begun = false
}

// Part takes time steps into stretches that end where those of the whole do. It reads nothing that Join changes meanwhile.
func (r *recorder) Part(from, _ int, _ *circuit.Sample) circuit.Receiver {
	n := len(r.plot.Signals) + len(r.plot.Powers)
	return &recorder{stride: r.stride, seen: from, part: true, now: newStretch(n), values: make([]float64, n)}
}

// Join puts the stretches of a part behind what is there.
func (r *recorder) Join(part circuit.Receiver) error {
	p := part.(*recorder)
	for i := range p.full {
		r.now.join(&p.full[i])
		r.end()
	}
	if p.now.begun {
		r.now.join(&p.now)
	}
	r.seen, r.t, r.values = p.seen, p.t, p.values
	return nil
}

// done returns the plot once all time steps have come.
func (r *recorder) done() *Plot {
	if r.now.begun {
		r.close()
	}
	for i, v := range r.values {
		if k := r.track(i); r.seen > 0 && (k.T[len(k.T)-1] != r.t || k.V[len(k.V)-1] != v) {
			k.put(r.t, v)
		}
	}
	r.plot.shareTimes()
	return r.plot
}

func (r *recorder) track(i int) *Track {
	if n := len(r.plot.Signals); i >= n {
		return &r.plot.Powers[i-n]
	}
	return &r.plot.Signals[i]
}

func (k *Track) put(t, v float64) { k.T, k.V = append(k.T, t), append(k.V, v) }
