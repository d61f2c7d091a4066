package sheet

import "barlitre/circuit"

// Of the link below a finding of fix first.
const (
	fixSuffix = ".fix"
	fixText   = "What to do and what it is worth"
	fixPage   = "Payback/Fix first"
)

// toFix are the faults of the circuits as found that fix first knows, as findings.
func (f *findings) toFix() (out []circuit.Finding) {
	ctx := f.s.ctx
	for _, x := range ctx.Doc().Faults(ctx.System()) {
		out = append(out, circuit.Finding{Level: circuit.Warns, Circuit: x.Circuit, Duty: x.Duty, Block: x.Block, Parameter: x.Param, Time: x.Time, Text: x.Text})
	}
	return out
}

// fixRoom is the height that the link takes below its finding.
func (f *findings) fixRoom(i int) float64 {
	if !f.faults[i] {
		return 0
	}
	return cureHeight + cureGap
}
