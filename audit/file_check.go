package audit

import (
	"slices"

	"barlitre/circuit"
)

// Check lists all faults at once: those of reading the file, and those that
// circuit.Check finds in each circuit. What concerns something that could
// not be read is said once.
func (f *File) Check() []circuit.Finding {
	out := f.Findings()
	read := len(out)
	for _, e := range f.Circuits {
		for _, n := range f.checkCircuit(e.Circuit) {
			if !f.follows(out[:read], &e, n) {
				out = append(out, n)
			}
		}
	}
	return out
}

// follows reports whether a finding of a circuit only says that something is not there which the file has, but which could
// not be read: that is found already.
func (f *File) follows(found []circuit.Finding, e *CircuitEntry, n circuit.Finding) bool {
	switch n.Cause {
	case circuit.UnknownAxis:
		if slices.Contains(f.unreadAxes, n.Axis) {
			return true
		}
	case circuit.OpenPort, circuit.OpenLine, circuit.NoTank, circuit.NoDrive:
		if e.unreadLine {
			return true
		}
	}
	return slices.ContainsFunc(found, func(x circuit.Finding) bool {
		switch {
		case x.Level != circuit.Stops:
			return false
		case n.Duty != "" && x.Duty == n.Duty:
			return true
		case x.Circuit != n.Circuit:
			return false
		case n.Cause == circuit.UnknownBlock:
			return x.Block == n.Port.Block
		case x.Parameter == "" || x.Block != n.Block:
			return false
		}
		return x.Parameter == n.Parameter || n.Cause == circuit.MissingValue && !e.needs(n.Block, n.Parameter)
	})
}

// needs reports whether a parameter must be given, whatever the other parameters of its block say.
func (e *CircuitEntry) needs(block, key string) bool {
	b := e.Block(block)
	if b == nil {
		return false
	}
	kind := circuit.KindNamed(b.Kind)
	return kind != nil && kind.Param(key) != nil && kind.Param(key).Need
}

// checkCircuit lists what is wrong with a circuit, its duties and its oil.
func (f *File) checkCircuit(c *circuit.Circuit) []circuit.Finding {
	found := circuit.Check(c, f.Axes, f.Duties)
	if oil, err := f.Conditions(); err == nil && !circuit.AnyStops(found) {
		found = append(found, circuit.CheckOil(c, oil)...)
	}
	return found
}
