// Package machines holds the laws by which a machine loses energy: pumps and motors,
// electric motors, frequency converters, oil, lines and orifices. Plain numbers go in and come
// out; there are no files, no time and no network of blocks here.
//
// # Units and signs
//
// Everything is SI. Pressures are gauge. dp of a machine is outlet minus inlet, dp of a
// conduit is inlet minus outlet. Temperatures are in kelvin. Power and loss are in watt; a loss is never
// negative. Functions do not check their arguments: values out of range give NaN or Inf at worst.
// Types have a Check that says what is wrong in words.
//
// A displacement machine is one law in four quadrants. Shaft power T·ω > 0 goes into the shaft,
// hydraulic power Q·Δp > 0 leaves with the oil:
//
//	shaft power = hydraulic power + slip·Δp + friction·|ω|
//
// As a pump both powers are positive, as a motor both negative.
//
// # Symbols
//
//	D, V          displacement, m³/rad, and m³ a turn: D = V/2π
//	e, ω          setting −1..1, shaft speed, rad/s
//	Δp, p         pressure difference, pressure, Pa
//	Q, q          flow of a machine, of a conduit, m³/s
//	T, P          torque, N·m, power, W
//	Cs, Cst       laminar and turbulent slip coefficients, –
//	Cf, Cv, Ch    pressure, viscous and w² friction coefficients, –
//	Tc            constant torque, N·m
//	K, Kd         compression of the swept and of the dead volume, –
//	μ, ν, ρ, B    dynamic viscosity, Pa·s, kinematic, m²/s, density, kg/m³, bulk modulus, Pa
//	x, N, Vc      fraction of cylinders at work −1..1, their number, swept volume of one, m³
//	θ             temperature, K
//	f, ε, Re, ζ   friction factor (Darcy), roughness, m, Reynolds number, loss coefficient of fittings
//
// # Sources
//
// Wilson (1950) for slip and friction, Schloesser for the turbulent and inertial terms,
// ISO 4409 for efficiencies, IEC 60034-30-1 for motor classes, ASTM D341, ASTM D2270, ISO 3448
// for oil, Rabie (2009) for its compression, Darcy-Weisbach, Hagen-Poiseuille and Colebrook for lines. Values without
// a published source say "assumed, common practice" or "from memory" beside them.
//
// # Measured points
//
// ReadPoints makes points of a table, FitPoints a law of points, NewMap a map of both; NewHull tells where they lie.
//
//	pump := machines.NewDisplacement(45 * units.CubicCentimetrePerRev)
//	pump.Flow(1, 1480*units.RPM, 160*units.Bar, 0.040, 870, 1.4e9) // 64.02 L/min
package machines

import "math"

// positive reports whether x is a finite number above zero.
func positive(x float64) bool { return x > 0 && !math.IsInf(x, 1) }

// notNegative reports whether x is a finite number, zero or above.
func notNegative(x float64) bool { return x >= 0 && !math.IsInf(x, 1) }
