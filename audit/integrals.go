package audit

import "barlitre/circuit"

// interval tells a receiver that integrates how long it is since the time step before.
type interval struct {
	t     float64
	begun bool
}

// to goes on to a time step and returns the seconds since the one before, 0 for the first. That time does not
// run backwards the ledger sees to, which comes first.
func (v *interval) to(t float64) float64 {
	dt := t - v.t
	if !v.begun {
		dt = 0
	}
	v.t, v.begun = t, true
	return dt
}

// integrals is the circuit.Receiver that integrates figures of the time steps by the trapezoid rule.
type integrals struct {
	interval
	of             func(s *circuit.Sample, to []float64) // fills in the figures; keeps nothing, for parts share it
	now, last, sum []float64
}

func newIntegrals(figures int, of func(s *circuit.Sample, to []float64)) *integrals {
	return &integrals{of: of, now: make([]float64, figures), last: make([]float64, figures), sum: make([]float64, figures)}
}

// Sample takes one time step.
func (x *integrals) Sample(s *circuit.Sample) error {
	half := x.to(s.T) / 2
	x.of(s, x.now)
	if half > 0 {
		for k, v := range x.now {
			x.sum[k] += half * (x.last[k] + v)
		}
	}
	x.now, x.last = x.last, x.now
	return nil
}

// Part integrates the time steps after before, and the time from it to the first of them.
func (x *integrals) Part(_, _ int, before *circuit.Sample) circuit.Receiver {
	p := newIntegrals(len(x.sum), x.of)
	if before != nil {
		_ = p.Sample(before) // never fails, and adds nothing yet
	}
	return p
}

// Join adds what a part has integrated.
func (x *integrals) Join(part circuit.Receiver) error {
	for k, v := range part.(*integrals).sum {
		x.sum[k] += v
	}
	return nil
}
