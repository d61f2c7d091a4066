// Package units declares every physical quantity once: its name, its units, how a
// value is read from text and how it is shown.
//
// Everything else in the program calculates in SI (Pa, m³/s, rad/s, m³/rad, K).
// Units appear only at the edges: audit files, entry fields, tables, charts, reports.
//
//	p, u, err := units.Parse("160 bar", units.Pressure) // p = 1.6e7 Pa
//	units.Format(p, u, 3)                               // "160 bar", for the screen
//	units.FileText(p, u)                                // "160 bar", for a file
//	p = 160 * units.Bar                                 // in code
//
// Pressures are gauge pressures; the package has no absolute pressure units, because
// an offset of one atmosphere would be wrong for every pressure difference. A displacement is
// written per revolution and kept per radian: D = V/2π. Temperatures and temperature
// differences are different quantities (F to K has another formula for each).
//
// # Quotients
//
// A quantity that is one quantity per another can be written with any units of the two:
// "10 bar per 100 L/min", "0.1 bar/(L/min)", "0.02 L/min per 100 bar", "0.18 EUR/kWh".
//
// # Sources
//
// The inch (25.4 mm), pound (0.45359237 kg), standard gravity (9.80665 m/s²), US gallon
// (231 in³) and atmosphere (101 325 Pa) are exact definitions, and psi, lbf, hp, gpm follow
// from them. The Btu is the international table one, 1055.05585262 J; hp is 550 ft·lbf/s; PS is
// 75 m·kp/s. The definitions are quoted from memory of ISO 80000 and NIST SP 811.
package units
