package circuit

import "math"

// OilLimit sets the viscosity of the oil at a temperature against the machine of a circuit that is least content with it.
type OilLimit struct {
	Block string
	Start bool    // at the start temperature, else at the working temperature
	Theta float64 // K
	Nu    float64 // m²/s, of the oil
	Low   float64 // m²/s, 0 where there is none
	High  float64 // m²/s, +Inf where there is none
}

// Passed reports whether the oil lies within the limits.
func (l OilLimit) Passed() bool { return l.Nu >= l.Low && l.Nu <= l.High }

// OilLimits returns the limits of the oil in a circuit: the lowest viscosity at work, and where a start temperature is
// known the highest at start; none for a circuit without displacement machines.
func OilLimits(c *Circuit, oil Conditions) []OilLimit {
	work := OilLimit{Theta: oil.Temperature, Nu: oil.Viscosity / oil.Density, High: math.Inf(1)}
	start := OilLimit{Start: true, Theta: oil.Start, High: math.Inf(1)}
	for _, b := range sorted(c.Blocks) {
		kind := KindNamed(b.Kind)
		if kind == nil || kind.Param("min_viscosity") == nil {
			continue
		}
		if v, _, ok := kind.Value(b, "min_viscosity"); ok && (work.Block == "" || v.SI > work.Low) {
			work.Block, work.Low = b.ID, v.SI
		}
		if v, _, ok := kind.Value(b, "start_viscosity"); ok && (start.Block == "" || v.SI < start.High) {
			start.Block, start.High = b.ID, v.SI
		}
	}
	var out []OilLimit
	if work.Block != "" {
		out = append(out, work)
	}
	if start.Block != "" && oil.Start > 0 && oil.changes() {
		start.Nu = oil.ViscosityAt(oil.Start) / oil.densityAt(oil.Start)
		out = append(out, start)
	}
	return out
}
