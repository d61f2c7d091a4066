package machines

import "math"

// Point is one measured steady state of a displacement machine, with the signs of Displacement: as a pump all of E, W,
// DP, Q and T are > 0, as a motor DP and T are < 0.
type Point struct {
	W, E, DP, Q, T float64 // rad/s, −1..1, Pa, m³/s, N·m
	Mu             float64 // dynamic viscosity of the oil, Pa·s; 0 = that of the whole measurement
	Line           int     // in its file, from 1
}

// Oil of a measurement, or of any other state that a law is evaluated in.
type Fluid struct {
	Mu, Rho, Bulk float64 // Pa·s, kg/m³, Pa free of air
	Air           float64 // entrained, share of volume at atmospheric pressure
}

// at is the fluid of one point.
func (f Fluid) at(p Point) Fluid {
	if p.Mu > 0 {
		f.Mu = p.Mu
	}
	return f
}

// modulus is the secant modulus from the atmosphere up to dp [Pa].
func (f Fluid) modulus(dp float64) float64 {
	_, slope := Compression(dp, f.Bulk, f.Air)
	if share, _ := Compression(dp, f.Bulk, f.Air); share != 0 {
		return dp / share
	}
	return 1 / slope
}

// Overall returns the overall efficiency of a measured point, NaN where it has none.
func (p Point) Overall() float64 {
	var eff Efficiency
	if p.T*p.W > 0 {
		eff, _ = PumpEfficiency(p.E, p.W, p.Q, p.DP, p.T)
	} else {
		eff, _ = MotorEfficiency(p.E, p.W, p.Q, -p.DP, -p.T)
	}
	return eff.Overall
}

// EfficiencyIn is Efficiency in a fluid; NaN where there is none.
func (m Displacement) EfficiencyIn(e, w, dp float64, f Fluid) float64 {
	eff, ok := m.Efficiency(e, w, dp, f.Mu, f.Rho, f.modulus(dp))
	if !ok {
		return math.NaN()
	}
	return eff.Overall
}
