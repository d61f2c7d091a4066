package machines

import (
	"fmt"
	"math"

	"barlitre/machines/units"
)

// Displacement is the loss law of a pump or hydraulic motor. The zero values of the second group leave
// those terms out. NewDisplacement and Family fill it with defaults.
type Displacement struct {
	D  float64 // displacement at full setting, m³/rad, > 0
	Cs float64 // laminar slip, –, >= 0; default 1.5e-8
	Cf float64 // friction torque proportional to pressure, –, >= 0; default 0.03
	Cv float64 // viscous friction torque, –, >= 0; default 6.5e4
	Tc float64 // constant friction torque, N·m, >= 0; default 1.5

	Cst float64 // turbulent slip (Schloesser), –, >= 0; default 0
	Ch  float64 // torque growing with speed squared, –, >= 0; default 0
	K   float64 // compression of the swept volume, –, >= 0; default 0
	Kd  float64 // compression of the dead volume, over displacement, –, >= 0; default 0
}

// turbulentSlipTransition [Pa] rounds the square root of the turbulent slip off near zero, where its
// slope is infinite. 0.1 bar changes the term by less than 0.3 ppm at 100 bar.
const turbulentSlipTransition = 0.1 * units.Bar

// NewDisplacement returns a machine of displacement d [m³/rad] with the default coefficients
// Cs 1.5e-8, Cf 0.03, Cv 6.5e4, Tc 1.5 N·m (assumed, common practice for a piston pump of about 50 cm³/rev near
// 1500 rpm; against one published set of measurements they are up to 8 efficiency points out at
// 500 and 4500 rpm). Tc does not scale: for small or large machines use a Family.
func NewDisplacement(d float64) Displacement {
	return Displacement{D: d, Cs: 1.5e-8, Cf: 0.03, Cv: 6.5e4, Tc: 1.5}
}

// Check returns nil or an error that names the first coefficient out of range.
func (m Displacement) Check() error {
	if !positive(m.D) {
		return fmt.Errorf("displacement is %s cm3/rev, must be above 0", units.Number(m.D/units.CubicCentimetrePerRev, 3))
	}
	for _, c := range []struct {
		name string
		v    float64
	}{{"slip Cs", m.Cs}, {"pressure friction Cf", m.Cf}, {"viscous friction Cv", m.Cv}, {"constant torque Tc", m.Tc},
		{"turbulent slip Cst", m.Cst}, {"speed-squared torque Ch", m.Ch}, {"compression K", m.K}, {"dead volume Kd", m.Kd}} {
		if !notNegative(c.v) {
			return fmt.Errorf("coefficient of %s is %s, must be 0 or above", c.name, units.Number(c.v, 3))
		}
	}
	return nil
}

// Slip returns the flow lost inside the machine [m³/s], with the sign of dp,
//
//	Qs = Cs·D·Δp/μ + Cst·D^(2/3)·√(2|Δp|/ρ)·sign(Δp) + (K·|e| + Kd)·D·|ω|·Δp/B        (1)
//
// e is the setting (−1..1), w the speed [rad/s], dp outlet minus inlet [Pa], mu the dynamic
// viscosity [Pa·s], rho the density [kg/m³], bulk the bulk modulus [Pa], all > 0; rho and bulk are
// not used while Cst, K and Kd are 0. Dead volume is compressed every turn, whatever the setting. Of oil with air bulk is the secant modulus Δp/ε of Compression.
// Below about 0.1 bar the root is rounded off to a finite slope. It never fails.
//
// Source: Wilson (1950), first term; Schloesser, second; Pourmovahed, Beachley and Fronczak,
// ASME J. Dyn. Sys. Meas. Contr. 114 (1992), third with K = 1; Kd is our addition.
func (m Displacement) Slip(e, w, dp, mu, rho, bulk float64) float64 {
	turbulent, _ := m.TurbulentSlip(dp, rho)
	return m.Cs*m.D*dp/mu + turbulent + m.compressed(e, w)*dp/bulk
}

// SlipSlope returns dQs/dΔp of equation (1) [m³/(s·Pa)], >= 0, finite at dp = 0.
func (m Displacement) SlipSlope(e, w, dp, mu, rho, bulk float64) float64 {
	_, turbulent := m.TurbulentSlip(dp, rho)
	return m.Cs*m.D/mu + turbulent + m.compressed(e, w)/bulk
}

// TurbulentSlip returns the second term of equation (1) [m³/s] and its slope by dp [m³/(s·Pa)].
func (m Displacement) TurbulentSlip(dp, rho float64) (q, slope float64) {
	if m.Cst == 0 {
		return 0, 0
	}
	h := math.Hypot(dp, turbulentSlipTransition)
	c := m.Cst * math.Cbrt(m.D*m.D) * math.Sqrt(2/(rho*h))
	return c * dp, c * (1 - dp*dp/(2*h*h))
}

// compressed is the flow whose compression is lost [m³/s].
func (m Displacement) compressed(e, w float64) float64 {
	return (m.K*math.Abs(e) + m.Kd) * m.D * math.Abs(w)
}

// CompressionFlow returns the third term of equation (1) [m³/s] for oil with bulk modulus bulk [Pa] and air (see
// Compression), and its slopes by dp, e and w.
func (m Displacement) CompressionFlow(e, w, dp, bulk, air float64) (q, byDP, byE, byW float64) {
	if m.K == 0 && m.Kd == 0 {
		return 0, 0, 0, 0
	}
	share, slope := Compression(dp, bulk, air)
	c := m.compressed(e, w)
	return c * share, c * slope, m.K * m.D * Sign(e) * math.Abs(w) * share, m.D * (m.K*math.Abs(e) + m.Kd) * Sign(w) * share
}

// Flow returns the flow Q [m³/s] leaving the outlet port,
//
//	Q = e·D·ω − Qs        (2)
//
// with Qs of equation (1) and the arguments of Slip. Q < 0 is flow backwards through the machine. As
// a motor dp < 0, and Q is larger than e·D·ω. Linear in dp unless Cst is set.
func (m Displacement) Flow(e, w, dp, mu, rho, bulk float64) float64 {
	return e*m.D*w - m.Slip(e, w, dp, mu, rho, bulk)
}

// FrictionTorque returns the magnitude of the friction torque [N·m], >= 0, also at standstill,
//
//	Tf = Cf·D·|Δp| + Cv·D·μ·|ω| + Ch·|e|·ρ·ω²·D^(5/3)/2 + Tc        (3)
//
// Friction uses the full displacement, so efficiency falls at part setting. Arguments as for Slip.
//
// Source: Wilson (1950); the Ch term is Schloesser's.
func (m Displacement) FrictionTorque(e, w, dp, mu, rho float64) float64 {
	return m.Cf*m.D*math.Abs(dp) + m.Cv*m.D*mu*math.Abs(w) + m.Tc + m.inertial(rho)*math.Abs(e)*w*w
}

// inertial is the factor of |e|·ω² in equation (3) [N·m·s²].
func (m Displacement) inertial(rho float64) float64 {
	return m.Ch * rho * m.D * math.Cbrt(m.D*m.D) / 2
}

// InertialTorque returns the third term of equation (3) [N·m] with the sign of w, and its slopes by e and w.
func (m Displacement) InertialTorque(e, w, rho float64) (t, byE, byW float64) {
	k := m.inertial(rho)
	return k * math.Abs(e) * w * math.Abs(w), k * Sign(e) * w * math.Abs(w), 2 * k * math.Abs(e*w)
}

// Torque returns the torque T [N·m] the shaft must be given,
//
//	T = e·D·Δp + Tf·sign(ω)        (4)
//
// T·ω < 0 is power taken from the shaft: a motor. At ω = 0 friction has no direction and is
// left out; what the shaft can hold or must break away from is a question for FrictionTorque.
func (m Displacement) Torque(e, w, dp, mu, rho float64) float64 {
	return e*m.D*dp + Sign(w)*m.FrictionTorque(e, w, dp, mu, rho)
}

// SlipLoss returns the power lost by slip [W], Qs·Δp, >= 0.
func (m Displacement) SlipLoss(e, w, dp, mu, rho, bulk float64) float64 {
	return m.Slip(e, w, dp, mu, rho, bulk) * dp
}

// FrictionLoss returns the power lost by friction [W], Tf·|ω|, >= 0.
func (m Displacement) FrictionLoss(e, w, dp, mu, rho float64) float64 {
	return m.FrictionTorque(e, w, dp, mu, rho) * math.Abs(w)
}

// WithLeakage returns the machine with Cs set so that the laminar slip alone is q [m³/s] at a
// pressure difference dp [Pa] and viscosity mu [Pa·s], all > 0: a worn machine from one measured drain flow.
func (m Displacement) WithLeakage(q, dp, mu float64) Displacement {
	m.Cs = q * mu / (m.D * dp)
	return m
}
