package audit

import "sync"

// Way is how far something has gone that moves at the speed of a track: its integral by
// trapezoids over the points kept.
type Way struct {
	speed     *Track
	gone      []float64 // by point
	low, high float64
}

// At is how far it is at time x from its lowest place of all [SI].
func (w *Way) At(x float64) float64 {
	k := w.speed
	if len(k.T) == 0 {
		return 0
	}
	i := k.after(x)
	switch {
	case i == 0:
		return -w.low
	case i == len(k.T):
		return w.gone[i-1] - w.low
	}
	part, share := x-k.T[i-1], (x-k.T[i-1])/(k.T[i]-k.T[i-1])
	return w.gone[i-1] - w.low + part*(k.V[i-1]+0.5*share*(k.V[i]-k.V[i-1]))
}

// Span is the way between its lowest and its highest place [SI].
func (w *Way) Span() float64 { return w.high - w.low }

// ways keeps the ways of a plot once they were asked for.
type ways struct {
	mu sync.Mutex
	of map[int]*Way
}

// Way returns the way of the signal at a place in Signals, which must be a speed. It is worked
// out when first asked for.
func (p *Plot) Way(signal int) *Way {
	if p.ways == nil {
		return wayOf(&p.Signals[signal])
	}
	p.ways.mu.Lock()
	defer p.ways.mu.Unlock()
	w := p.ways.of[signal]
	if w == nil {
		w = wayOf(&p.Signals[signal])
		if p.ways.of == nil {
			p.ways.of = map[int]*Way{}
		}
		p.ways.of[signal] = w
	}
	return w
}

func wayOf(k *Track) *Way {
	w := &Way{speed: k, gone: make([]float64, len(k.T))}
	s := 0.0
	for i := 1; i < len(k.T); i++ {
		s += (k.T[i] - k.T[i-1]) * (k.V[i-1] + 0.5*(k.V[i]-k.V[i-1]))
		w.gone[i] = s
		w.low, w.high = min(w.low, s), max(w.high, s)
	}
	return w
}
