package figures

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

// hides reports whether a sign is left out.
func (o *SheetOptions) hides(s Signs) bool { return o.Hide&s != 0 }
