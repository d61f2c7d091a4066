package figures

import "barlitre/circuit/duty"

// PhasesOf returns the named parts of a duty; each lasts to the next, the last to the
// end of the cycle.
func PhasesOf(d *duty.Duty) []Phase {
	var out []Phase
	for i, p := range d.Phases {
		to := p.From
		if i+1 < len(d.Phases) {
			to = d.Phases[i+1].From
		} else if n := len(d.Time); n > 0 {
			to = d.Time[n-1]
		}
		out = append(out, Phase{Name: p.Name, From: p.From, To: to})
	}
	return out
}
