package sheet

import (
	"slices"

	"barlitre/circuit"
)

// Of the link below a finding of fix first.
const (
	fixSuffix = ".fix"
	fixText   = "What to do and what it is worth"
	fixPage   = "Payback/Fix first"
)

// withFaults adds the faults of the circuits as found that fix first knows to a list of findings, and returns those that have
// the link to its page: the faults, and what is said of the same setting already.
func (f *findings) withFaults(list []circuit.Finding) (all, linked []circuit.Finding) {
	ctx := f.s.ctx
	for _, x := range ctx.Doc().Faults(ctx.System()) {
		i := slices.IndexFunc(list, func(g circuit.Finding) bool {
			return x.Param != "" && g.Level == circuit.Warns && g.Circuit == x.Circuit && g.Block == x.Block && g.Parameter == x.Param
		})
		if i < 0 {
			i = len(list)
			list = append(list, circuit.Finding{Level: circuit.Warns, Circuit: x.Circuit, Duty: x.Duty, Block: x.Block, Parameter: x.Param, Time: x.Time, Text: x.Text})
		}
		linked = append(linked, list[i])
	}
	return list, linked
}

// fixRoom is the height that the link takes below its finding.
func (f *findings) fixRoom(i int) float64 {
	if !f.faults[i] {
		return 0
	}
	return cureHeight + cureGap
}
