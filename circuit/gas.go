package circuit

import (
	"math"

	"barlitre/machines/units"
)

// gas is the filling of an accumulator under the exponent law: pAbs·V^n = p0·v0^n.
type gas struct{ p0, v0, n float64 } // Pa absolute, m³

// pressure returns the gauge pressure at a gas volume [Pa].
func (g gas) pressure(v float64) float64 {
	return g.p0*math.Pow(g.v0/v, g.n) - units.AtmosphericPressure
}

// volumeAt returns the gas volume at a gauge pressure [m³], the whole volume below the pre-charge.
func (g gas) volumeAt(p float64) float64 {
	return math.Min(g.v0, g.v0*math.Pow(g.p0/(p+units.AtmosphericPressure), 1/g.n))
}

// gammaGas is cp/cv of nitrogen as an ideal gas of two atoms; handbook value.
const gammaGas = 1.4

// thermalGas is an ideal gas that exchanges heat with its wall at θw:
//
//	dθ/dt = (θw − θ)/τ − (γ − 1)·(θ/V)·dV/dt, p·V = m·R·θ
//
// The thermal time constant is that of Otis and Pourmovahed, J. Dyn. Sys. Meas. Control
// 107 (1985), and Rotthäuser 1993; from memory. Real-gas effects are left out.
type thermalGas struct {
	mR   float64 // J/K
	wall float64 // K
	tau  float64 // s
}

// warmed is the temperature at volume v after dt from volume v1 at temperature t1, and
// its slope by v: heat for half the time, compression without heat, heat for the other
// half. So it is exact for a volume that stands and for a gas without wall, and the
// error of all between goes with dt².
func (g thermalGas) warmed(t1, v1, v, dt float64) (t, slope float64) {
	e := math.Exp(-dt / (2 * g.tau))
	mid := (g.wall + (t1-g.wall)*e) * math.Pow(v1/v, gammaGas-1)
	return g.wall + (mid-g.wall)*e, -(gammaGas - 1) * mid / v * e
}

// pressure is the gauge pressure [Pa].
func (g thermalGas) pressure(t, v float64) float64 { return g.mR*t/v - units.AtmosphericPressure }

// lost is the power lost by heat that crosses from the gas to its wall at another
// temperature [W], >= 0 whichever way it goes:
//
//	P = Q·(1 − θw/θ), Q = m·cv·(θ − θw)/τ the heat given to the wall
//
// What is left of p·q changes the free energy of the gas at θw, which is a state: over a
// closed cycle it comes back, and the loss is all the heat that the wall kept.
func (g thermalGas) lost(t float64) float64 {
	d := t - g.wall
	return g.mR / (gammaGas - 1) * d * d / (g.tau * t)
}
