package circuit

import (
	"math"

	"barlitre/machines/units"
)

// CheckOil says which machines of a circuit the oil does not suit: too thin or outside the range their maker recommends
// at its working temperature, too thick when they start.
func CheckOil(c *Circuit, oil Conditions) []Finding {
	k := &checker{c: c}
	for _, b := range sorted(c.Blocks) {
		kind := KindNamed(b.Kind)
		if kind == nil || kind.Param("min_viscosity") == nil {
			continue
		}
		k.viscosity(kind, b, &oil)
		if v, ok := b.Values["drain_temperature"]; ok && !oil.changes() && v.SI != oil.Temperature {
			k.say(Stops, b, "drain_temperature", "the case drain was measured at another temperature than that of the oil, whose viscosity is known at one only; give the grade of the oil")
		}
	}
	return k.found
}

// viscosity compares the oil with the limits of a machine.
func (k *checker) viscosity(kind *Kind, b *Block, oil *Conditions) {
	get := func(key string, none float64) float64 {
		if v, _, ok := kind.Value(b, key); ok {
			return v.SI
		}
		return none
	}
	at := func(theta float64) string {
		if theta == 0 {
			return ""
		}
		return " at " + show(theta, units.Temperature)
	}
	nu := oil.Viscosity / oil.Density
	low, from, to := get("min_viscosity", 0), get("optimum_viscosity_from", 0), get("optimum_viscosity_to", math.Inf(1))
	switch {
	case nu < low:
		k.say(Warns, b, "min_viscosity", "the oil has %s%s, below its lowest viscosity of %s: its gaps lose their film of oil and wear. Keep the oil cooler, or take a thicker grade", show(nu, units.KinematicViscosity), at(oil.Temperature), show(low, units.KinematicViscosity))
	case nu < from:
		k.say(Note, b, "optimum_viscosity_from", "the oil has %s%s, thinner than the %s recommended: it slips more than it need", show(nu, units.KinematicViscosity), at(oil.Temperature), show(from, units.KinematicViscosity))
	case nu > to:
		k.say(Note, b, "optimum_viscosity_to", "the oil has %s%s, thicker than the %s recommended: it rubs more than it need", show(nu, units.KinematicViscosity), at(oil.Temperature), show(to, units.KinematicViscosity))
	}
	if oil.Start == 0 || !oil.changes() {
		return
	}
	nu, most := oil.ViscosityAt(oil.Start)/oil.densityAt(oil.Start), get("start_viscosity", math.Inf(1))
	if nu > most {
		k.say(Warns, b, "start_viscosity", "the oil has %s%s, above the %s it may start with: it will not fill and cavitates. Warm the oil before the start, or take a thinner grade", show(nu, units.KinematicViscosity), at(oil.Start), show(most, units.KinematicViscosity))
	}
}
