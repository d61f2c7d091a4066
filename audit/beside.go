package audit

import "slices"

// Base returns the circuit that proposals are compared with: the first as found, nil
// where there is none.
func (f *File) Base() *CircuitEntry {
	for i := range f.Circuits {
		if f.Circuits[i].Role == AsFound {
			return &f.Circuits[i]
		}
	}
	return nil
}

// Besides lists the names of the circuits that may stand beside the first of the file
// that is as found: all proposals, and further circuits as found.
func (f *File) Besides() []string {
	base := f.Base()
	var out []string
	for i := range f.Circuits {
		if &f.Circuits[i] != base && (base != nil || i > 0) {
			out = append(out, f.Circuits[i].Name)
		}
	}
	return out
}

// Beside returns the solution with only the circuit as found and one other in it, for
// screens that show two: the one named, else the first there is. All sums and figures of
// these two are those of the whole solution. It shares what it holds with s.
func (s *Solution) Beside(name string) *Solution {
	if s == nil || len(s.Circuits) < 3 {
		return s
	}
	base := slices.IndexFunc(s.Circuits, func(c *CircuitRun) bool { return !c.Proposal })
	base = max(base, 0)
	other := slices.IndexFunc(s.Circuits, func(c *CircuitRun) bool { return c.Circuit.Name == name })
	if other < 0 || other == base {
		other = 0
		if base == 0 {
			other = 1
		}
	}
	out := *s
	out.Circuits = []*CircuitRun{s.Circuits[base], s.Circuits[other]}
	out.Comparisons = nil
	for _, c := range s.Comparisons {
		if c.Proposal == s.Circuits[other] {
			out.Comparisons = append(out.Comparisons, c)
		}
	}
	return &out
}
