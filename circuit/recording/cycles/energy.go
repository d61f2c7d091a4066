package cycles

import "math"

// work returns the positive and the negative integral of a power from a to b, straight between rows.
func work(t, p []float64, a, b float64) (positive, negative float64) {
	if p == nil {
		return 0, 0
	}
	for i := 1; i < len(t); i++ {
		if t[i] <= a || t[i-1] >= b || t[i] == t[i-1] {
			continue
		}
		from, to := math.Max(a, t[i-1]), math.Min(b, t[i])
		at := func(x float64) float64 { return p[i-1] + (p[i]-p[i-1])*(x-t[i-1])/(t[i]-t[i-1]) }
		up, down := trapezoid(at(from), at(to), to-from)
		positive, negative = positive+up, negative+down
	}
	return positive, negative
}

// trapezoid integrates a straight line, what is above zero and what is below apart.
func trapezoid(p, q, h float64) (up, down float64) {
	if p*q >= 0 {
		w := (p + q) / 2 * h
		return math.Max(w, 0), math.Min(w, 0)
	}
	zero := h * p / (p - q)
	a, b := p*zero/2, q*(h-zero)/2
	return math.Max(a, 0) + math.Max(b, 0), math.Min(a, 0) + math.Min(b, 0)
}

func (r *Result) energies() {
	for i := range r.Cycles {
		c := &r.Cycles[i]
		lo, hi := r.in.rows(c.From, c.To)
		var p []float64
		if r.in.Power != nil {
			p = r.in.Power[lo:hi]
		}
		c.Positive, c.Negative = work(r.in.T[lo:hi], p, c.From, c.To)
	}
}

// shares sums up the time and the energy of the states.
func (r *Result) shares() {
	for _, state := range []State{Work, Hold, Idle, Off} {
		s := Share{State: state}
		for _, x := range r.States {
			if x.State != state {
				continue
			}
			s.Times++
			s.Time += x.To - x.From
			if r.in.Power != nil {
				b := min(x.b+1, len(r.in.T))
				up, down := work(r.in.T[x.a:b], r.in.Power[x.a:b], x.From, x.To)
				s.Energy += up + down
			}
		}
		if s.Times > 0 {
			r.Shares = append(r.Shares, s)
		}
	}
}
