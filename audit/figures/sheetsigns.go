package figures

import "barlitre/circuit"

// Signs is a set of the signs by which a sheet shows results.
type Signs int

// The signs.
const (
	Tint     Signs = 1 << iota // the pressure of a line
	Width                      // the flow of a line
	Chevrons                   // the way of the flow
	Discs                      // the heat of a block
	Numbers                    // pressures, flows, heats and motions in figures
)

// AllSigns lists them in the order of a menu.
var AllSigns = []Signs{Tint, Width, Chevrons, Discs, Numbers}

// String says what a sign shows: "Pressure as tint".
func (s Signs) String() string {
	return map[Signs]string{Tint: "Pressure as tint", Width: "Flow as width", Chevrons: "Direction as chevrons",
		Discs: "Heat as discs", Numbers: "Results as numbers"}[s]
}

// Word names a sign in one word, for commands and scripts: "tint".
func (s Signs) Word() string {
	return map[Signs]string{Tint: "tint", Width: "width", Chevrons: "chevrons", Discs: "discs", Numbers: "numbers"}[s]
}

// hides reports whether a sign is left out.
func (o *SheetOptions) hides(s Signs) bool { return o.Hide&s != 0 }

// Marks are the worst levels of findings by circuit and block, for SheetOptions.Findings.
func Marks(list []circuit.Finding) map[string]map[string]circuit.Level {
	out := map[string]map[string]circuit.Level{}
	for _, level := range []circuit.Level{circuit.Caution, circuit.Warns, circuit.Stops} {
		for _, g := range list {
			if g.Level != level || !g.Marked() {
				continue
			}
			if out[g.Circuit] == nil {
				out[g.Circuit] = map[string]circuit.Level{}
			}
			out[g.Circuit][g.Block] = level
		}
	}
	return out
}
