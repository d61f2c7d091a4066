package machines

import (
	"fmt"
	"slices"
	"strings"

	"barlitre/machines/units"
)

// Family is a kind of displacement machine with the best point its default coefficients come from.
type Family struct {
	Name             string
	Motor            bool    // the efficiencies are those of a motor
	EtaV, EtaHM      float64 // at the best point, fractions
	DP, Speed, Mu    float64 // best point: Pa, rad/s, Pa·s
	StartingFraction float64 // torque at standstill over the derived torque, as a motor
	Origin           string
}

const assumed = "assumed, common practice; no source"

// bestPointViscosity is about that of VG 46 oil at 50 °C.
const bestPointViscosity = 0.026

// Families are the default machines. The figures describe good new machines of medium size.
var Families = []Family{
	{"external gear", false, 0.93, 0.90, 180 * units.Bar, 1500 * units.RPM, bestPointViscosity, 0.80, assumed},
	{"vane", false, 0.92, 0.92, 140 * units.Bar, 1500 * units.RPM, bestPointViscosity, 0.85, assumed},
	{"axial piston", false, 0.96, 0.945, 200 * units.Bar, 1500 * units.RPM, bestPointViscosity, 0.82, assumed},
	{"bent axis", false, 0.97, 0.955, 200 * units.Bar, 1500 * units.RPM, bestPointViscosity, 0.90, assumed},
	{"radial piston", false, 0.965, 0.945, 200 * units.Bar, 1500 * units.RPM, bestPointViscosity, 0.92, assumed},
	{"orbital motor", true, 0.92, 0.86, 120 * units.Bar, 250 * units.RPM, bestPointViscosity, 0.75, assumed},
}

// FindFamily returns the family of that name. The error lists the names there are.
func FindFamily(name string) (Family, error) {
	var names []string
	for _, f := range Families {
		if f.Name == name {
			return f, nil
		}
		names = append(names, f.Name)
	}
	slices.Sort(names)
	return Family{}, fmt.Errorf("machine family %q is not known; use %s", name, strings.Join(names, ", "))
}

// Displacement returns a machine of this family with displacement d [m³/rad], d > 0. Cs, Cf and Cv do
// not depend on size; Tc grows with it. The error is that of FromEfficiency.
func (f Family) Displacement(d float64) (Displacement, error) {
	if f.Motor {
		return FromMotorEfficiency(d, f.EtaV, f.EtaHM, f.DP, f.Speed, f.Mu)
	}
	return FromEfficiency(d, f.EtaV, f.EtaHM, f.DP, f.Speed, f.Mu)
}

// BestPoint writes the point the coefficients of the family come from.
func (f Family) BestPoint() string {
	show := func(x float64, d units.Dim) string { return units.Format(x, units.Preferred(d, units.Metric), 3) }
	return fmt.Sprintf("%s volumetric and %s hydromechanical at %s, %s and %s", units.Format(f.EtaV, units.Percent, 3), units.Format(f.EtaHM, units.Percent, 3),
		show(f.DP, units.Pressure), show(f.Speed, units.AngularSpeed), show(f.Mu, units.DynamicViscosity))
}
