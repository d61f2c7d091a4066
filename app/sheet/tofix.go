package sheet

// Of the link below a finding of fix first.
const (
	fixSuffix = ".fix"
	fixText   = "What to do and what it is worth"
	fixPage   = "Payback/Fix first"
)

// fixRoom is the height that the link takes below its finding.
func (f *findings) fixRoom(i int) float64 {
	if !f.faults[i] {
		return 0
	}
	return cureHeight + cureGap
}
