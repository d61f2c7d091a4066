package audit

import "barlitre/circuit"

// Check lists all faults at once: those of reading the file, and those that
// circuit.Check finds in each circuit. What concerns a value that could not be
// read is said once.
func (f *File) Check() []circuit.Finding {
	type spot struct{ circuit, block, parameter string }
	out := f.Findings()
	said := map[string]bool{}
	unread := map[spot]bool{}
	for _, n := range out {
		said[n.Text] = true
		unread[spot{n.Circuit, n.Block, n.Parameter}] = true
	}
	for _, e := range f.Circuits {
		for _, n := range circuit.Check(e.Circuit, f.Axes, f.Duties) {
			n.Circuit = e.Name
			if n.Parameter != "" && unread[spot{n.Circuit, n.Block, n.Parameter}] || n.Duty != "" && said[n.Text] {
				continue
			}
			said[n.Text] = said[n.Text] || n.Duty != ""
			out = append(out, n)
		}
	}
	return out
}
