package fixfirst

import (
	"fmt"
	"math"

	"barlitre/circuit"
	"barlitre/machines"
	"barlitre/machines/units"
)

// oilTemperature finds oil so warm or so cold that the cooler must be at fault: by what its temperature comes to where the file
// says of tank and cooler, else by the temperature in the file alone.
func oilTemperature(p *plant) []*Finding {
	if math.IsNaN(p.S.Oil) || !changes(p) {
		return nil
	}
	if h := p.Run.Warmth; h != nil && h.Week != nil {
		return cooled(p, h)
	}
	top, kind := p.tooHot()
	if p.S.Oil >= tooCold && p.S.Oil <= top {
		return nil
	}
	nu := p.S.Conditions.Viscosity / p.S.Conditions.Density
	f := p.found(nil, coolerSmall, Repair, LowCost)
	f.Caution, f.Basis = coolerCaution, coolerBasis
	f.Evidence = []Quantity{
		{"oil temperature", p.Shown(p.S.Oil, units.Temperature), oilLimits},
		{"viscosity there", p.Shown(nu, units.KinematicViscosity), "16 to 36 mm²/s"},
		{"mean heat to the oil", p.Shown(p.Run.Heat.Year.Mean, units.Power), ""},
	}
	for _, h := range p.Run.Heat.Duties {
		f.Duty = h.Duty
		break
	}
	if p.S.Oil > top {
		f.Text = fmt.Sprintf("The oil runs at %s, too warm for %s: the cooler is off, dirty, bypassed or too small.", p.Shown(p.S.Oil, units.Temperature), kind)
		f.Do = coolerDo + " Then cure what makes the heat, first in this list."
		f.Cures = []Cure{{{set, "oil.temperature", "55 C"}}}
	} else {
		f = p.overcooled(f, fmt.Sprintf("The oil runs at %s: the cooler takes out more than the machine puts in, and the thick oil costs power.", p.Shown(p.S.Oil, units.Temperature)))
		f.Cures = []Cure{{{set, "oil.temperature", "45 C"}}}
	}
	return []*Finding{f}
}

func changes(p *plant) bool { return p.S.Conditions.Oil.Nu40 > 0 }

// Viscosity in normal running [m²/s]: 16 to 36 mm²/s is the optimum of most machines, 10 the least for a short time.
const (
	thinnest = 12e-6
	thickest = 100e-6
)

// oilGrade finds oil of the wrong viscosity at its working temperature.
func oilGrade(p *plant) []*Finding {
	nu := p.S.Conditions.Viscosity / p.S.Conditions.Density
	if nu >= thinnest && nu <= thickest || !changes(p) || len(oilTemperature(p)) > 0 {
		return nil
	}
	f := p.found(nil, "oil too thick", Repair, LowCost)
	f.Text = fmt.Sprintf("At its %s the oil has %s; machines are made for 16 to 36 mm²/s.", p.Shown(p.S.Oil, units.Temperature), p.Shown(nu, units.KinematicViscosity))
	if nu < thinnest {
		f.Rule = "oil too thin"
	}
	f.Evidence = []Quantity{{"viscosity at work", p.Shown(nu, units.KinematicViscosity), "optimum 16 to 36 mm²/s, at least 10 for a short time"}, {"grade in the file", p.S.File.Oil.Grade, ""}}
	if len(p.Run.Circuit.Blocks) > 0 {
		for _, l := range circuit.OilLimits(p.C, p.S.Conditions) {
			if !l.Start {
				f.Evidence = append(f.Evidence, Quantity{"least that " + l.Block + " may run with", p.Shown(l.Low, units.KinematicViscosity), ""})
			}
		}
	}
	f.Do = "Compare the label of the drum with the lubrication plan, and have a sample measured at 40 °C. Fill the grade that lies between 16 and 36 mm²/s at the working temperature; flush where kinds were mixed."
	f.Caution = "Ask the makers of pumps and valves for their limits, and for what their seals stand, before the kind of oil is changed."
	f.Basis = "16 to 36 mm²/s optimum, 10 least: trade literature; alarm below 12 and above 100: common practice, no source"
	if g := p.grade(); g != "" {
		f.Cures = []Cure{{{set, "oil.grade", g}}}
	}
	return []*Finding{f}
}

// grade is the ISO VG grade nearest to 26 mm²/s at the working temperature, "" where the file names none.
func (p *plant) grade() string {
	if p.S.File.Oil.Grade == "" || p.S.File.Oil.HasViscosity40 || p.S.File.Oil.HasViscosity {
		return ""
	}
	best, at := "", math.Inf(1)
	for _, vg := range []float64{10, 15, 22, 32, 46, 68, 100, 150} {
		vi := 100.0
		if p.S.File.Oil.HasVI {
			vi = p.S.File.Oil.VI.SI
		}
		oil, err := machines.NewOilByIndex(vg*1e-6, vi)
		if err != nil {
			continue
		}
		if d := math.Abs(math.Log(oil.KinematicViscosity(p.S.Oil) / 26e-6)); d < at {
			best, at = fmt.Sprintf("ISO VG %g", vg), d
		}
	}
	return best
}
