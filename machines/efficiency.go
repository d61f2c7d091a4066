package machines

import (
	"fmt"
	"math"
)

// Efficiency holds the three efficiencies of a displacement machine, as fractions.
type Efficiency struct {
	Volumetric      float64 // flow: delivered/derived for a pump, derived/taken for a motor
	Hydromechanical float64 // torque: derived/needed for a pump, given/derived for a motor
	Overall         float64 // power out/power in; the product of the other two
}

var noEfficiency = Efficiency{math.NaN(), math.NaN(), math.NaN()}

// PumpEfficiency evaluates measured values: displacement d in use [m³/rad], speed w [rad/s], outlet flow
// q [m³/s], pressure difference dp [Pa] and shaft torque [N·m], all > 0,
//
//	ηv = q/(D·ω),  ηhm = D·Δp/T,  ηt = q·Δp/(T·ω)
//
// The derived displacement is the one at zero pressure. ok is false, and the values NaN, where a
// power is zero or flows the other way.
//
// Source: ISO 4409 definitions, for incompressible oil.
func PumpEfficiency(d, w, q, dp, torque float64) (eff Efficiency, ok bool) {
	if !(d*w*dp > 0 && q*dp > 0 && torque*w > 0) {
		return noEfficiency, false
	}
	return Efficiency{Volumetric: q / (d * w), Hydromechanical: d * dp / torque, Overall: q * dp / (torque * w)}, true
}

// MotorEfficiency evaluates measured values of a motor: q is the flow taken, dp inlet minus outlet, torque
// what the shaft gives, all > 0,
//
//	ηv = D·ω/q,  ηhm = T/(D·Δp),  ηt = T·ω/(q·Δp)
//
// ok and the source are as for PumpEfficiency.
func MotorEfficiency(d, w, q, dp, torque float64) (eff Efficiency, ok bool) {
	if !(d*w*dp > 0 && q*dp > 0 && torque*w > 0) {
		return noEfficiency, false
	}
	return Efficiency{Volumetric: d * w / q, Hydromechanical: torque / (d * dp), Overall: torque * w / (q * dp)}, true
}

// Efficiency returns the efficiencies by the loss law, as a pump where shaft power goes in and
// hydraulic power comes out, as a motor the other way round. ok is false, and the values NaN, at zero power
// and where both powers go in (all of it is lost). Arguments as for Slip.
func (m Displacement) Efficiency(e, w, dp, mu, rho, bulk float64) (eff Efficiency, ok bool) {
	q, t := m.Flow(e, w, dp, mu, rho, bulk), m.Torque(e, w, dp, mu, rho)
	if t*w > 0 {
		return PumpEfficiency(e*m.D, w, q, dp, t)
	}
	return MotorEfficiency(e*m.D, w, q, -dp, -t)
}

// TorqueSplit says how the friction torque at the best point is shared among the terms of
// equation (3). The shares are >= 0 and sum to 1.
type TorqueSplit struct{ Pressure, Viscous, Constant float64 }

// DefaultSplit is assumed, common practice: the default coefficients share 0.44/0.37/0.19 for
// 45 cm³/rev at 160 bar and 1480 rpm.
var DefaultSplit = TorqueSplit{Pressure: 0.45, Viscous: 0.37, Constant: 0.18}

// FromEfficiency returns the coefficients that give a pump of displacement d [m³/rad] the
// efficiencies etaV and etaHM (0..1) at full setting, pressure difference dp [Pa], speed w [rad/s] and
// viscosity mu [Pa·s], all > 0,
//
//	Cs = (1 − ηv)·μ·ω/Δp
//	Cf·D·Δp, Cv·D·μ·ω, Tc = shares of D·Δp·(1/ηhm − 1)
//
// in the shares of DefaultSplit. One point cannot separate the terms: away from it the
// result is a guess. An error names the value out of range.
func FromEfficiency(d, etaV, etaHM, dp, w, mu float64) (Displacement, error) {
	if err := checkPoint(d, etaV, etaHM, dp, w, mu); err != nil {
		return Displacement{}, err
	}
	return fromLosses(d, 1-etaV, 1/etaHM-1, dp, w, mu), nil
}

// FromMotorEfficiency is FromEfficiency for a motor, whose efficiencies are defined the other way round,
//
//	Cs = (1/ηv − 1)·μ·ω/Δp,  friction torque = D·Δp·(1 − ηhm)
func FromMotorEfficiency(d, etaV, etaHM, dp, w, mu float64) (Displacement, error) {
	if err := checkPoint(d, etaV, etaHM, dp, w, mu); err != nil {
		return Displacement{}, err
	}
	return fromLosses(d, 1/etaV-1, 1-etaHM, dp, w, mu), nil
}

// fromLosses takes the losses relative to the derived flow D·ω and the derived torque D·Δp.
func fromLosses(d, slip, friction, dp, w, mu float64) Displacement {
	s := DefaultSplit
	return Displacement{
		D:  d,
		Cs: slip * mu * w / dp,
		Cf: s.Pressure * friction,
		Cv: s.Viscous * friction * dp / (mu * w),
		Tc: s.Constant * friction * d * dp,
	}
}

func checkPoint(d, etaV, etaHM, dp, w, mu float64) error {
	for _, c := range []struct {
		name string
		v    float64
	}{{"displacement", d}, {"pressure difference", dp}, {"speed", w}, {"viscosity", mu}} {
		if !positive(c.v) {
			return fmt.Errorf("best point: %s is %g, must be above 0", c.name, c.v)
		}
	}
	if !(etaV > 0 && etaV <= 1) {
		return fmt.Errorf("best point: volumetric efficiency is %.4g %%, must be above 0 and at most 100 %%", 100*etaV)
	}
	if !(etaHM > 0 && etaHM <= 1) {
		return fmt.Errorf("best point: hydromechanical efficiency is %.4g %%, must be above 0 and at most 100 %%", 100*etaHM)
	}
	return nil
}
