package audit

import "barlitre/circuit"

// Check lists all faults at once: those of reading the file, and those that
// circuit.Check finds in each circuit. What concerns a value or a duty that could
// not be read is said once.
func (f *File) Check() []circuit.Finding {
	type spot struct{ circuit, block, parameter string }
	out := f.Findings()
	unread := map[spot]bool{}
	unreadDuty := map[string]bool{}
	for _, n := range out {
		unread[spot{n.Circuit, n.Block, n.Parameter}] = n.Parameter != ""
		unreadDuty[n.Duty] = n.Duty != ""
	}
	for _, e := range f.Circuits {
		for _, n := range f.checkCircuit(e.Circuit) {
			if !unread[spot{n.Circuit, n.Block, n.Parameter}] && !unreadDuty[n.Duty] {
				out = append(out, n)
			}
		}
	}
	return out
}

// checkCircuit lists what is wrong with a circuit, its duties and its oil.
func (f *File) checkCircuit(c *circuit.Circuit) []circuit.Finding {
	found := circuit.Check(c, f.Axes, f.Duties)
	if oil, err := f.Conditions(); err == nil && !circuit.AnyStops(found) {
		found = append(found, circuit.CheckOil(c, oil)...)
	}
	return found
}
