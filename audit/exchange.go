package audit

import "barlitre/circuit"

// Exchange is the energy that machines on one shaft pass to one another over a cycle: what some give to the shaft and
// others take from it at the same instant,
//
//	P = min(Σ max(P_i, 0), Σ max(−P_i, 0))
//
// with P_i the power that machine i takes from the shaft. It never leaves the circuit, so it stands on no side of the balance:
// neither supply nor work nor loss. What it costs is in the losses of the machines it passes.
type Exchange struct {
	Shaft  string
	Blocks []string
	Energy float64 // J
}

// exchanges is the circuit.Receiver that adds them up.
type exchanges struct {
	*integrals
	groups []circuit.ShaftGroup
}

func newExchanges(c *circuit.Compiled) *exchanges {
	g := c.ShaftGroups()
	return &exchanges{groups: g, integrals: newIntegrals(len(g), func(s *circuit.Sample, to []float64) {
		for i := range g {
			to[i] = exchanged(s, g[i].Signals)
		}
	})}
}

// exchanged is what machines pass to one another at a time step [W]; signals are the powers they take from their shaft.
func exchanged(s *circuit.Sample, signals []int) float64 {
	taken, given := 0.0, 0.0
	for _, k := range signals {
		p := s.Signals[k]
		taken, given = taken+max(p, 0), given+max(-p, 0)
	}
	return min(taken, given)
}

// list returns those where something passed, as the mean of the cycles.
func (x *exchanges) list(cycles int) []Exchange {
	var out []Exchange
	for i, g := range x.groups {
		if x.sum[i] > 0 {
			out = append(out, Exchange{g.Name, g.Blocks, x.sum[i] / float64(max(cycles, 1))})
		}
	}
	return out
}

// Exchanged returns what machines pass to one another through shafts over a cycle [J].
func (d *DutyRun) Exchanged() float64 {
	sum := 0.0
	for _, e := range d.Exchanges {
		sum += e.Energy
	}
	return sum
}
