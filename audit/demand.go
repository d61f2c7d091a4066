package audit

import "math"

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

// powerAt is a power at a time [s, W].
type powerAt struct{ t, p float64 }

// meanMeter finds the window of largest mean power over points as they come, in the
// order of time; the drawn part of the power is linear between them. Only what the
// window needs is kept.
type meanMeter struct {
	window float64 // s
	from   float64 // s, first point; inside, times count from it
	length float64 // s
	total  float64 // J
	last   powerAt
	head   []powerAt // up to the first one a window after the start
	scan   scan
}

// newMeanMeter makes a meter; the first so many points are taken without an allocation.
func newMeanMeter(window float64, points int) *meanMeter {
	return &meanMeter{window: window, head: make([]powerAt, 0, min(points, 1<<16)), scan: scan{window: window}}
}

// take takes the next point.
func (m *meanMeter) take(x powerAt) {
	if len(m.head) == 0 {
		m.from = x.t
	}
	x.t, x.p = x.t-m.from, max(x.p, 0)
	if len(m.head) > 0 {
		m.total += (x.t - m.last.t) * (m.last.p + x.p) / 2
	}
	if len(m.head) == 0 || m.last.t < m.window {
		m.head = append(m.head, x)
	}
	m.scan.take(x)
	m.length, m.last = x.t, x
}

// demand returns the largest mean; repeats says whether the points are a cycle that
// repeats without pause.
func (m *meanMeter) demand(repeats bool) Demand {
	switch {
	case m.length <= 0:
		return Demand{Basis: ShorterThanIt}
	case !repeats && m.window > m.length:
		return Demand{Mean: m.total / m.window, From: m.from, Basis: ShorterThanIt}
	case !repeats:
		return Demand{Mean: m.scan.most / m.window, From: m.from + m.scan.at, Basis: InRecording}
	}
	cycles := math.Floor(m.window / m.length)
	s := m.scan.clone()
	if cycles > 0 { // the window is whole cycles, and a rest of one
		s = &scan{window: m.window - cycles*m.length}
		for _, x := range m.head {
			s.take(x)
		}
	}
	for _, x := range m.head {
		s.take(powerAt{m.length + x.t, x.p})
	}
	return Demand{Mean: (cycles*m.total + s.most) / m.window, From: m.from + s.at, Basis: OverRepeats}
}
