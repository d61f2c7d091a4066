// Package thermal answers how warm the oil of a machine gets: from a cold start, over the shifts of a week, on a hot day, with a
// cooler that is too small, too large, fouled or off.
//
// The machine is two bodies at most, the oil with its tank and, where a coupling is given, the steel around it:
//
//	C·dT/dt = P(T) − UA·(T − Ta) − Q(T) − G·(T − Ts)        (1)
//	Cs·dTs/dt = G·(T − Ts) − UAs·(Ts − Ta)
//
// P is what the machine puts into the oil while it does one of its Loads; it is known at a few temperatures and interpolated
// between them so that it rises and falls only where they do (Fritsch and Butland). Whoever makes a Load solves the circuit at
// those temperatures, so the viscosity acts on every loss. Q is what the Cooler takes (see Cooler).
//
// The temperature of a line is quasi-steady: oil leaves the tank at T and arrives at the end of a line warmer by the heat it
// took up, H/(ρc·q). A line through which nothing flows cools nothing.
//
// Plant.March steps (1) by the method of Dormand and Prince with the heat that each way takes as further unknowns. A
// Runge-Kutta method keeps linear sums of its unknowns to the last digit, so heat in is what is stored and what leaves, over any
// run. The density and the specific heat of the oil are constant over a run, as are those of the steel.
//
// The package knows no circuits and no files. All values are SI: K, W, J, W/K, J/K, m³/s; times of a week in s from Monday 0:00.
//
//	p := thermal.Plant{Body: body, Cooler: cooler, Air: thermal.Air{Mean: 298}, Loads: loads, Spans: shifts.Spans(0)}
//	if err := p.Prepare(); err != nil { ... }
//	week, err := p.Periodic()
package thermal
