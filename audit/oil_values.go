package audit

import (
	"fmt"
	"math"

	"barlitre/circuit"
	"barlitre/machines"
	"barlitre/machines/units"
)

// OilValue is a number that the audit file may say of the oil, with what holds where it says nothing.
type OilValue struct {
	Key, Title string
	Dim        units.Dim
	Text       string        // what it is for
	Value      circuit.Value // as given, or the default with its origin and reason
	Given      bool
	Known      bool // given, or there is a default
	Need       bool
}

// OilValues lists what a screen may ask of the oil besides its grade.
func (f *File) OilValues() []OilValue {
	o := &f.Oil
	out := []OilValue{
		{Key: "temperature", Title: "Oil temperature", Dim: units.Temperature, Value: o.Temperature, Given: o.HasTemperature, Need: true, Text: "at work, in the tank"},
		{Key: "viscosity_index", Title: "Viscosity index", Dim: units.Count, Value: o.VI, Given: o.HasVI, Text: "ISO 2909: the higher, the less the viscosity changes with temperature"},
		{Key: "density", Title: "Density", Dim: units.Density, Value: o.Density, Given: o.HasDensity, Text: "at 15 °C; with a viscosity of its own, at the oil temperature"},
		{Key: "viscosity", Title: "Viscosity at work", Dim: units.DynamicViscosity, Value: o.Viscosity, Given: o.HasViscosity, Text: "dynamic, at the oil temperature; holds there in place of that of the grade"},
		{Key: "air", Title: "Entrained air", Dim: units.Ratio, Value: o.Air, Given: o.HasAir, Text: "share of volume at atmospheric pressure; makes the oil softer"},
		{Key: "start_temperature", Title: "Temperature at start", Dim: units.Temperature, Value: o.Start, Given: o.HasStart, Text: "of the oil when the machine starts; without it the start is not checked"},
	}
	for i := range out {
		v := &out[i]
		if v.Known = v.Given; v.Known {
			continue
		}
		switch v.Key {
		case "viscosity_index":
			v.Value, v.Known = o.usualIndex()
		case "air":
			v.Value, v.Known = circuit.Given(0), true
			v.Value.Origin, v.Value.Note = circuit.Assumed, "no air"
		}
	}
	return out
}

// usualIndex is the viscosity index that follows from the grade or the viscosities.
func (o *Oil) usualIndex() (circuit.Value, bool) {
	law, err := o.law()
	if err != nil {
		return circuit.Value{}, false
	}
	vi, err := machines.ViscosityIndex(law.Nu40, law.Nu100)
	if err != nil {
		return circuit.Value{}, false
	}
	v := circuit.Given(math.Round(vi))
	v.Origin, v.Note = circuit.Assumed, "generic oil of its grade"
	if o.HasViscosity100 {
		v.Note = "from its viscosities"
	}
	return v, true
}

// OilLimitText says in a sentence how the oil suits a circuit.
func OilLimitText(l circuit.OilLimit, s units.System) string {
	in := func(si float64, d units.Dim) string { return units.Format(si, units.Preferred(d, s), 3) }
	at := ""
	if l.Theta > 0 {
		at = " at " + in(l.Theta, units.Temperature)
	}
	verdict := map[bool]string{true: "passed", false: "not passed"}[l.Passed()]
	if l.Start {
		return fmt.Sprintf("%s%s at start; %s stands at most %s: %s", in(l.Nu, units.KinematicViscosity), at, l.Block, in(l.High, units.KinematicViscosity), verdict)
	}
	return fmt.Sprintf("%s%s at work; %s needs at least %s: %s", in(l.Nu, units.KinematicViscosity), at, l.Block, in(l.Low, units.KinematicViscosity), verdict)
}
