package frame

import (
	"slices"

	"barlitre/app/station"
	"barlitre/audit"
)

// pairOf is what the solution of two circuits was taken from.
type pairOf struct {
	solution *audit.Solution
	beside   string
}

// Beside returns the circuit that stands beside the one as found.
func (f *Frame) Beside() string {
	names := f.doc.File().Besides()
	switch {
	case slices.Contains(names, f.beside):
		return f.beside
	case len(names) > 0:
		return names[0]
	}
	return ""
}

// View returns what the sheets show.
func (f *Frame) View() *station.View { return &f.view }

// Pick takes another circuit beside the one as found; every station follows.
func (f *Frame) Pick(circuit string) {
	if !f.pick(circuit) {
		return
	}
	f.circuit, f.block = -1, ""
	f.changed(station.Solution | station.Selection)
}

// pick reports whether another circuit was taken.
func (f *Frame) pick(circuit string) bool {
	if circuit == f.Beside() || !slices.Contains(f.doc.File().Besides(), circuit) {
		return false
	}
	f.beside = circuit
	return true
}

// Solution returns the last finished solution of the two circuits that are shown.
func (f *Frame) Solution() *audit.Solution {
	if of := (pairOf{f.solution, f.Beside()}); of != f.pairOf || f.pair == nil {
		f.pairOf, f.pair = of, f.solution.Beside(of.beside)
	}
	return f.pair
}
