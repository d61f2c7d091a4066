package pdf

import (
	"math"

	"barlitre/audit"
	"barlitre/circuit"
)

// instant is the moment at which all circuits are drawn.
type instant struct {
	of   *audit.CircuitRun // whose power is largest then; nil = nothing is solved
	duty int               // its number
	t    float64           // s
}

// nearMost is the share of the largest power that counts as that power: the largest
// value itself often stands in a ramp that lasts for hundredths of a second.
const nearMost = 0.95

// mostDrawn finds where the circuit as found, or, where none is solved, the first circuit
// that is, draws most power in the duty that stands for the year, of those that are solved:
// the middle of the longest stretch near it.
func mostDrawn(s *audit.Solution) instant {
	order := s.File.DutiesByYear()
	for _, proposal := range []bool{false, true} {
		for _, c := range s.Circuits {
			for _, i := range order {
				at := instant{of: c, duty: i}
				if run := at.run(c); c.Proposal == proposal && run != nil {
					at.t = middleOfMost(run)
					return at
				}
			}
		}
	}
	return instant{}
}

// middleOfMost is the middle of the longest stretch in which a run draws nearMost of
// its largest power, or the time of the largest power where there is no such stretch.
// Courses are read after a step; where power falls in one, the time is just before it.
func middleOfMost(run *audit.DutyRun) float64 {
	limit := nearMost * run.Balance.PeakSupply
	mid, longest, from := run.Balance.PeakSupplyAt, 0.0, 0.0
	t, v := total(run.Plot, func(ch circuit.Channel) bool { return ch.Role == circuit.Supply })
	for i := range t {
		if v[i] < limit {
			continue
		}
		if i == 0 || v[i-1] < limit {
			from = t[i]
		}
		if length := t[i] - from; length > longest {
			mid, longest = from+length/2, length
		}
	}
	if before := math.Nextafter(mid, math.Inf(-1)); drawnAt(run.Plot, mid) < limit && drawnAt(run.Plot, before) >= limit {
		return before
	}
	return mid
}

// drawnAt is the power drawn at time t [W].
func drawnAt(p *audit.Plot, t float64) float64 {
	return p.PowerAt(t, func(c circuit.Channel) bool { return c.Role == circuit.Supply })
}

// run returns the duty of a circuit that is drawn, nil where it is not solved.
func (at instant) run(c *audit.CircuitRun) *audit.DutyRun {
	if at.of == nil || at.duty >= len(c.Duties) || c.Duties[at.duty].Balance == nil || c.Duties[at.duty].Plot == nil {
		return nil
	}
	return c.Duties[at.duty]
}
