package machines

import (
	"fmt"
	"math"
	"strings"

	"barlitre/machines/units"
)

// Temperatures of the two reference viscosities, of the reference density and of the specific heat [K].
const (
	theta40  = units.ZeroCelsius + 40
	theta100 = units.ZeroCelsius + 100
	theta15  = units.ZeroCelsius + 15
	theta20  = units.ZeroCelsius + 20
)

// Defaults of a plain mineral oil.
const (
	DefaultDensity15    = 870.0  // kg/m³, handbook value, from memory
	DefaultExpansion    = 7e-4   // 1/K; handbooks give 6.5e-4 to 7e-4, from memory
	DefaultSpecificHeat = 1880.0 // J/(kg·K) at 20 °C; textbooks print 1760 to 2060
	DefaultHeatSlope    = 1.9e-3 // 1/K, its growth; Cragoe, NBS Misc. Publ. 97 (1929), from memory
	DefaultBulkModulus  = 1.4e9  // Pa, free of air; assumed, common practice (1.2e9 to 1.8e9)
)

// Oil is a hydraulic oil of one batch.
type Oil struct {
	Density15    float64 // at 15 °C, kg/m³, > 0
	Nu40, Nu100  float64 // kinematic viscosity at 40 and 100 °C, m²/s, Nu40 > Nu100 > 0
	SpecificHeat float64 // at 20 °C, J/(kg·K), > 0
	HeatSlope    float64 // growth of the specific heat, 1/K, >= 0
	Expansion    float64 // of volume, 1/K, >= 0
	BulkModulus  float64 // free of air, Pa, > 0
	Air          float64 // entrained, share of volume at atmospheric pressure, 0..0.3; default 0
}

// NewOil returns an oil with the two kinematic viscosities [m²/s] and the default other properties.
func NewOil(nu40, nu100 float64) Oil {
	return Oil{Density15: DefaultDensity15, Nu40: nu40, Nu100: nu100, SpecificHeat: DefaultSpecificHeat,
		HeatSlope: DefaultHeatSlope, Expansion: DefaultExpansion, BulkModulus: DefaultBulkModulus}
}

// NewOilByIndex returns an oil with the kinematic viscosity at 40 °C [m²/s] and the viscosity
// index. The error is that of NuAt100.
func NewOilByIndex(nu40, index float64) (Oil, error) {
	nu100, err := NuAt100(nu40, index)
	return NewOil(nu40, nu100), err
}

// Grade is a viscosity grade of ISO 3448: the number is the kinematic viscosity at 40 °C in mm²/s, which a
// fresh oil meets within 10 %.
type Grade struct {
	VG            int
	Min, Mid, Max float64 // at 40 °C, m²/s
	Nu100         float64 // default at 100 °C, m²/s, for a plain mineral oil
}

// Grades are the grades used in hydraulics. The default viscosities at 100 °C give a viscosity index of 97 to 102
// (assumed, common practice for plain mineral oil); for VG 22 and 150 they were chosen for an index of about 100 and 97.
var Grades = []Grade{
	grade(22, 4.29), grade(32, 5.4), grade(46, 6.8), grade(68, 8.7), grade(100, 11.2), grade(150, 14.7),
}

func grade(vg int, nu100 float64) Grade {
	mid := float64(vg) * units.SquareMMPerSec
	return Grade{VG: vg, Min: 0.9 * mid, Mid: mid, Max: 1.1 * mid, Nu100: nu100 * units.SquareMMPerSec}
}

// NewOilOfGrade returns a plain mineral oil of an ISO VG grade; the error lists the grades.
func NewOilOfGrade(vg int) (Oil, error) {
	var names []string
	for _, g := range Grades {
		if g.VG == vg {
			return NewOil(g.Mid, g.Nu100), nil
		}
		names = append(names, fmt.Sprint(g.VG))
	}
	return Oil{}, fmt.Errorf("ISO VG %d is not in the list; use %s, or type the viscosity at 40 and 100 C", vg, strings.Join(names, ", "))
}

// Check returns nil or an error that names the first property out of range.
func (o Oil) Check() error {
	mm2 := func(nu float64) string { return units.Number(nu/units.SquareMMPerSec, 4) + " mm2/s" }
	switch {
	case !positive(o.Density15):
		return fmt.Errorf("oil: density is %s kg/m3, must be above 0", units.Number(o.Density15, 4))
	case !positive(o.Nu100) || o.Nu100 < 0.3e-6:
		return fmt.Errorf("oil: viscosity at 100 C is %s, must be 0.3 mm2/s or above", mm2(o.Nu100))
	case !positive(o.Nu40) || o.Nu40 <= o.Nu100:
		return fmt.Errorf("oil: viscosity at 40 C is %s, must be above that at 100 C, %s", mm2(o.Nu40), mm2(o.Nu100))
	case !positive(o.SpecificHeat):
		return fmt.Errorf("oil: specific heat is %s J/(kg K), must be above 0", units.Number(o.SpecificHeat, 4))
	case !(o.Expansion >= 0 && o.Expansion < 2e-3):
		return fmt.Errorf("oil: thermal expansion is %s 1/K, must be 0 to 0.002 1/K", units.Number(o.Expansion, 3))
	case !(o.HeatSlope >= 0 && o.HeatSlope < 0.01):
		return fmt.Errorf("oil: growth of the specific heat is %s 1/K, must be 0 to 0.01 1/K", units.Number(o.HeatSlope, 3))
	case !(o.Air >= 0 && o.Air <= 0.3):
		return fmt.Errorf("oil: air content is %s %%, must be 0 to 30 %%", units.Number(100*o.Air, 3))
	case !positive(o.BulkModulus):
		return fmt.Errorf("oil: bulk modulus is %s MPa, must be above 0", units.Number(o.BulkModulus/units.Megapascal, 3))
	}
	return nil
}

// Walther returns the constants of the viscosity-temperature line through two points,
//
//	log10 log10(ν + 0.7) = A − B·log10 θ,  ν in mm²/s, θ in K        (9)
//
// nu1, nu2 are kinematic viscosities [m²/s] > 0.3 mm²/s at the different temperatures theta1, theta2 [K].
//
// Source: ASTM D341 (the short form, good from 2 mm²/s up).
func Walther(nu1, theta1, nu2, theta2 float64) (a, b float64) {
	y1, y2 := waltherY(nu1), waltherY(nu2)
	b = (y1 - y2) / (math.Log10(theta2) - math.Log10(theta1))
	return y1 + b*math.Log10(theta1), b
}

// waltherY is the left side of equation (9).
func waltherY(nu float64) float64 {
	return math.Log10(math.Log10(nu/units.SquareMMPerSec + 0.7))
}

// KinematicViscosity returns ν [m²/s] at temperature theta [K] by equation (9) through the two reference points. Sensible
// from the pour point to about 150 °C; wax and additives make real oils thicker in the cold.
func (o Oil) KinematicViscosity(theta float64) float64 {
	a, b := Walther(o.Nu40, theta40, o.Nu100, theta100)
	exponent := math.Pow(10, a-b*math.Log10(theta))
	return (math.Pow(10, exponent) - 0.7) * units.SquareMMPerSec
}

// Density returns ρ [kg/m³] at temperature theta [K], ρ15/(1 + β·(θ − 15 °C)).
func (o Oil) Density(theta float64) float64 {
	return o.Density15 / (1 + o.Expansion*(theta-theta15))
}

// DynamicViscosity returns μ = ν·ρ [Pa·s] at temperature theta [K].
func (o Oil) DynamicViscosity(theta float64) float64 {
	return o.KinematicViscosity(theta) * o.Density(theta)
}

// Heat returns the specific heat [J/(kg·K)] at temperature theta [K], cp20·(1 + s·(θ − 20 °C)).
func (o Oil) Heat(theta float64) float64 {
	return o.SpecificHeat * (1 + o.HeatSlope*(theta-theta20))
}

// ThrottlingRise returns by how much oil at theta [K] warms [K] when a pressure drop dp [Pa] turns
// into heat, Δp/(ρ·cp): 5.5 to 6.7 K per 100 bar.
func (o Oil) ThrottlingRise(dp, theta float64) float64 {
	return dp / (o.Density(theta) * o.Heat(theta))
}

// EffectiveBulkModulus returns B [Pa] of oil with entrained air at absolute pressure pAbs [Pa] > 0,
//
//	1/Be = α/(n·p) + (1 − α)/B,  α = α0·(p0/p)^(1/n)        (10)
//
// air is α0, the volume fraction at atmospheric pressure p0 (0..1), n the exponent of the gas (1 slow, 1.4
// fast). The air is taken as never dissolving, which makes Be too small above some 50 bar.
//
// Source: Rabie, Fluid Power Engineering (2009), eq. 2.57, with the shrinking of the gas added.
func (o Oil) EffectiveBulkModulus(pAbs, air, n float64) float64 {
	alpha := air * math.Pow(units.AtmosphericPressure/pAbs, 1/n)
	return 1 / (alpha/(n*pAbs) + (1-alpha)/o.BulkModulus)
}

// Compression returns by what share of its volume oil with entrained air is compressed from atmospheric pressure to dp [Pa]
// above it, odd in dp, and the slope by dp [1/Pa], > 0,
//
//	ε = Δp/Bs,  1/Bs = α/(|Δp| + p0) + (1 − α)/B        (10a)
//
// bulk is the modulus free of air [Pa], air the volume fraction α at atmospheric pressure p0. The gas follows Boyle's law.
//
// Source: Rabie, Fluid Power Engineering (2009), eq. 2.57 as printed, with n = 1, where it is the secant modulus.
func Compression(dp, bulk, air float64) (share, slope float64) {
	const p0 = units.AtmosphericPressure
	p := math.Abs(dp) + p0
	return dp * (air/p + (1-air)/bulk), air*p0/(p*p) + (1-air)/bulk
}
