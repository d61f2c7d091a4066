package audit

import (
	"errors"
	"fmt"
	"math"
	"regexp"
	"strconv"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/circuit"
	"barlitre/machines"
	"barlitre/machines/units"
)

func (r *reader) oil(n, root *yaml.Node) {
	s := scope{where: "oil", title: oilTitle}
	if isNull(n) && r.misspelt {
		return
	}
	if isNull(n) {
		r.bad(s, root, "", "is missing; write oil: {grade: ISO VG 46, temperature: 50 C}")
		return
	}
	before := len(r.found)
	f := r.fields(s, n, "", "grade", "temperature", "density", "viscosity", "viscosity_index", "viscosity_40", "viscosity_100",
		"specific_heat", "bulk_modulus", "air", "start_temperature")
	o := &r.file.Oil
	if e, ok := f["grade"]; ok {
		o.Grade, _ = r.scalar(s, e.value, "grade", "a grade such as ISO VG 46")
	}
	o.Temperature, o.HasTemperature = r.positive(s, f, "temperature", units.Temperature)
	o.Density, o.HasDensity = r.positive(s, f, "density", units.Density)
	o.Viscosity, o.HasViscosity = r.positive(s, f, "viscosity", units.DynamicViscosity)
	o.Viscosity40, o.HasViscosity40 = r.positive(s, f, "viscosity_40", units.KinematicViscosity)
	o.Viscosity100, o.HasViscosity100 = r.positive(s, f, "viscosity_100", units.KinematicViscosity)
	o.VI, o.HasVI = r.optional(s, f, "viscosity_index", units.Count)
	o.SpecificHeat, o.HasSpecificHeat = r.positive(s, f, "specific_heat", units.SpecificHeat)
	o.BulkModulus, o.HasBulkModulus = r.positive(s, f, "bulk_modulus", units.Pressure)
	o.Air, o.HasAir = r.optional(s, f, "air", units.Ratio)
	o.Start, o.HasStart = r.positive(s, f, "start_temperature", units.Temperature)
	if len(r.found) > before {
		return // the rest would only repeat it
	}
	if _, err := r.file.Conditions(); err != nil {
		r.bad(scope{}, n, "", "%v", err)
	}
	if _, err := o.law(); err != nil && o.HasStart {
		r.bad(s, f["start_temperature"].value, "start_temperature", "tells nothing while the viscosity is known at the working temperature only; give the grade too")
	}
}

// gradeNumber finds the number of an ISO 3448 grade in "ISO VG 46", "VG46" or "46", and the class behind it if there is one:
// HM, a plain mineral oil, or HV, one whose viscosity changes less.
var gradeNumber = regexp.MustCompile(`(?i)^(?:(?:ISO[ -]?)?VG[ -]?)?(\d{1,5})(?: (HM|HV))?$`)

// highIndex is the viscosity index of a generic HV oil: assumed, common practice for fresh ones 140 to 160.
const highIndex = 150

// law returns how the oil changes with temperature, from its grade or its
// viscosities at 40 and 100 °C; the error says what is missing.
func (o *Oil) law() (machines.Oil, error) {
	var oil machines.Oil
	var err error
	m := gradeNumber.FindStringSubmatch(o.Grade)
	switch {
	case o.HasViscosity100 && o.HasVI:
		return oil, errors.New("oil: viscosity at 100 °C and viscosity index (viscosity_100, viscosity_index) are both given; keep one")
	case o.HasViscosity40:
		oil = machines.NewOil(o.Viscosity40.SI, 0)
	case m != nil:
		vg, _ := strconv.Atoi(m[1])
		if oil, err = machines.NewOilOfGrade(vg); err != nil {
			return oil, fmt.Errorf("oil: %w", err)
		}
		if strings.EqualFold(m[2], "HV") {
			if oil.Nu100, err = machines.NuAt100(oil.Nu40, highIndex); err != nil {
				return oil, fmt.Errorf("oil: %w", err)
			}
		}
	case o.Grade != "":
		return oil, fmt.Errorf("oil: grade %q is not an ISO VG grade; write one such as ISO VG 46 or ISO VG 46 HV, or give the viscosities at 40 and 100 °C (viscosity_40, viscosity_100)", o.Grade)
	default:
		return oil, errors.New("oil: give a grade such as ISO VG 46, or the viscosity at the working temperature")
	}
	switch {
	case o.HasViscosity100:
		oil.Nu100 = o.Viscosity100.SI
	case o.HasVI:
		if oil.Nu100, err = machines.NuAt100(oil.Nu40, o.VI.SI); err != nil {
			return oil, fmt.Errorf("oil: %w", err)
		}
	case o.HasViscosity40:
		return oil, errors.New("oil: the viscosity at 40 °C (viscosity_40) needs that at 100 °C or a viscosity index beside it (viscosity_100, viscosity_index)")
	}
	if o.HasDensity && !o.HasViscosity {
		oil.Density15 = o.Density.SI
	}
	oil = o.compressible(oil)
	return oil, oil.Check()
}

// compressible gives an oil what the file says of its heat, compression and air.
func (o *Oil) compressible(oil machines.Oil) machines.Oil {
	if o.HasSpecificHeat {
		oil.SpecificHeat = o.SpecificHeat.SI
	}
	if o.HasBulkModulus {
		oil.BulkModulus = o.BulkModulus.SI
	}
	if o.HasAir {
		oil.Air = o.Air.SI
	}
	return oil
}

// ErrOneTemperature is returned where the oil is known at its working
// temperature only and another is asked for.
var ErrOneTemperature = errors.New("oil: its viscosity is given at the working temperature only; give its grade too")

// Conditions returns the oil at its working temperature.
func (f *File) Conditions() (circuit.Conditions, error) {
	if !f.Oil.HasTemperature {
		return circuit.Conditions{}, errors.New("oil: the temperature is missing; write temperature: 50 C")
	}
	return f.ConditionsAt(f.Oil.Temperature.SI)
}

// ConditionsAt returns the oil at temperature theta [K]. A viscosity typed for
// the working temperature is scaled by the law of the grade, and so is a density
// typed with it; without a grade theta must be the working temperature
// (ErrOneTemperature).
func (f *File) ConditionsAt(theta float64) (circuit.Conditions, error) {
	o := &f.Oil
	law, lawErr := o.law()
	c := circuit.Conditions{Temperature: theta}
	plain := o.compressible(machines.NewOil(2e-6, 1e-6)) // what does not hang on the viscosity
	if err := plain.Check(); err != nil {
		return c, err
	}
	c.BulkModulus, c.Air = plain.BulkModulus, plain.Air
	if lawErr == nil {
		c.Oil = law
		if o.HasStart {
			c.Start = o.Start.SI
		}
	}
	if !o.HasViscosity {
		if lawErr != nil {
			return c, lawErr
		}
		c.Density, c.Viscosity = law.Density(theta), law.DynamicViscosity(theta)
		return finite(c, theta)
	}
	at := o.Temperature.SI
	c.Density, c.Viscosity = o.Density.SI, o.Viscosity.SI
	if !o.HasDensity {
		if lawErr != nil {
			return c, errors.New("oil: the density at the working temperature is missing; write density: 870 kg/m3")
		}
		c.Density = law.Density(at)
	}
	if theta == at {
		return c, nil
	}
	if lawErr != nil {
		return c, ErrOneTemperature
	}
	c.Density *= law.Density(theta) / law.Density(at)
	c.Viscosity *= law.DynamicViscosity(theta) / law.DynamicViscosity(at)
	return finite(c, theta)
}

// finite refuses what comes out of the laws far outside the temperatures they are for.
func finite(c circuit.Conditions, theta float64) (circuit.Conditions, error) {
	for _, x := range []float64{c.Density, c.Viscosity} {
		if !(x > 0) || math.IsInf(x, 0) {
			return c, fmt.Errorf("oil: no viscosity can be told at %.0f C; a temperature between -40 C and 150 C is sensible", theta-units.ZeroCelsius)
		}
	}
	return c, nil
}
