package audit_test

import (
	"math"
	"slices"
	"testing"

	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// Published results, each with its source. Examples are audit files in testdata/published;
// they say how the numbers of the example became those of the blocks. Sources:
//
//	[ESP] A. Esposito, Fluid Power with Applications, as re-worked in an open textbook companion
//	[SUL] J. Sullivan, Fluid Power: Theory and Applications, 4th edition
//	[PEE] Peerless, Basic Fluid Mechanics
//	[CHE] test data of an open process-engineering library (Crane TP-410)
//
// Books round on their way. Where the exact result of an example lies outside its printed
// digits, or a printed one is known to be wrong, the recomputed value stands here, with why.

// example is a solved published example.
type example struct {
	*testing.T
	s   *audit.Solution
	d   *audit.DutyRun // first circuit, first duty
	run *run
}

// published solves an example. Every run must close and be balanced.
func published(t *testing.T, file string) example {
	t.Helper()
	f := parsed(t, text(t, "published/"+file+".yaml"))
	s := solved(t, f)
	for _, c := range s.Circuits {
		for _, d := range c.Duties {
			sound(t, d)
		}
	}
	return example{t, s, s.Circuits[0].Duties[0], ran(t, f, f.Circuits[0].Circuit, f.Duties[0])}
}

// at is a signal at a time [s] in a unit.
func (e example) at(expr string, at float64, unit string, d units.Dim) float64 {
	e.Helper()
	u, err := units.ParseUnit(unit, d)
	if err != nil {
		e.Fatal(err)
	}
	return u.FromSI(e.run.at(e, expr, at))
}

// mean is an energy of a cycle as mean power [W].
func mean(d *audit.DutyRun, e audit.Split) float64 { return e.Total() / d.Balance.Cycle }

// loss is the mean power [W] lost in blocks.
func loss(d *audit.DutyRun, blocks ...string) float64 {
	sum := 0.0
	for _, l := range d.Balance.Losses {
		for _, b := range blocks {
			if l.Block == b {
				sum += l.Energy.Total()
			}
		}
	}
	return sum / d.Balance.Cycle
}

// [ESP] 9.5 p. 352. Published 40.7 gpm, 569 psi, 15.7 hp, 1057 rpm, 582 lb in, 62.2 %. Recomputed
// in SI: 154.04 L/min, 39.238 bar, 11.730 kW, 8.762 kW, 7.255 kW, 61.85 %: the book rounds the
// motor's input up to 11.8 hp. Tolerance 0.5 %.
func TestPublishedChain(t *testing.T) {
	e := published(t, "l10_chain")
	near(t, "flow [gpm]", -e.at("P1.P.q", 5, "gpm", units.Flow), 40.7, 0.005, 0)
	near(t, "flow [L/min]", -e.at("P1.P.q", 5, "L/min", units.Flow), 154.04, 0.005, 0)
	near(t, "pump outlet [psi]", e.at("P1.P.p", 5, "psi", units.Pressure), 569, 0.005, 0)
	near(t, "pump inlet [psi]", e.at("P1.S.p", 5, "psi", units.Pressure), -4, 0.005, 0)
	near(t, "motor inlet [psi]", e.at("HM1.A.p", 5, "psi", units.Pressure), 500, 0.005, 0)
	near(t, "motor outlet [psi]", e.at("HM1.B.p", 5, "psi", units.Pressure), 5, 0.005, 0)
	near(t, "drive [hp]", e.at("M1.shaft", 5, "hp", units.Power), 15.73, 0.005, 0)
	near(t, "motor speed [rpm]", e.at("HM1.w", 5, "rpm", units.AngularSpeed), 1057, 0.005, 0)
	in, out := mean(e.d, e.d.Balance.SupplyIn), mean(e.d, e.d.Balance.WorkPositive())
	near(t, "in [kW]", in/1e3, 11.730, 0.005, 0)
	near(t, "out [kW]", out/1e3, 7.255, 0.005, 0)
	near(t, "overall [%]", 100*out/in, 61.85, 0.005, 0)
	// The split of the losses was recomputed from the example's formulas, it is not printed.
	near(t, "pump [kW]", loss(e.d, "P1")/1e3, 1.586, 0.005, 0)
	near(t, "line [kW]", loss(e.d, "L1")/1e3, 1.085, 0.005, 0)
	near(t, "lift [kW]", mean(e.d, e.d.Balance.StoredEnergy())/1e3, 0.138, 0.005, 0)
	near(t, "motor [kW]", loss(e.d, "HM1")/1e3, 1.507, 0.005, 0)
	near(t, "inlet and outlet [kW]", loss(e.d, "S1", "R1")/1e3, 0.16, 0, 0.005)
}

// [ESP] 7.7 p. 268: flow 33.62 L/min, motor 77.3 cm³/rev (its 400 rpm and 70 bar are what must
// come out here), pump shaft 5.4356 kW, out 3.2477 kW, chain 0.82·0.88·0.92·0.90. Tolerance 0.1 %.
func TestPublishedHydrostaticDrive(t *testing.T) {
	e := published(t, "m9_hydrostatic_drive")
	near(t, "flow [L/min]", -e.at("P1.P.q", 5, "L/min", units.Flow), 33.62, 0.001, 0)
	near(t, "pressure [bar]", e.at("P1.P.p", 5, "bar", units.Pressure), 70, 0.001, 0)
	near(t, "motor speed [rpm]", e.at("HM1.w", 5, "rpm", units.AngularSpeed), 400, 0.001, 0)
	near(t, "torque [N m]", e.at("HM1.load", 5, "N m", units.Torque), 77.533, 0.001, 0)
	near(t, "pump shaft [kW]", e.at("M1.shaft", 5, "kW", units.Power), 5.4356, 0.001, 0)
	in, out := mean(e.d, e.d.Balance.SupplyIn), mean(e.d, e.d.Balance.WorkPositive())
	near(t, "out [kW]", out/1e3, 3.2477, 0.001, 0)
	near(t, "chain", out/in, 0.82*0.88*0.92*0.90, 0.001, 0)
}

// [ESP] 5.5 p. 178: the compensated pump saves 13.5 hp at stall; exactly 19.3 gpm · 1200 psi =
// 13.512 hp, 10.44 kW against 0.365 kW. Tolerance 0.2 %.
func TestPublishedStalledCylinder(t *testing.T) {
	e := published(t, "m17_stalled")
	a, b := e.d, e.s.Circuits[1].Duties[0]
	near(t, "over the relief valve [kW]", mean(a, a.Balance.SupplyIn)/1e3, 10.44, 0.002, 0)
	near(t, "relief loss [kW]", loss(a, "RV1")/1e3, 10.44, 0.002, 0)
	near(t, "compensated [kW]", mean(b, b.Balance.SupplyIn)/1e3, 0.365, 0.002, 0)
	near(t, "leakage [kW]", loss(b, "P1")/1e3, 0.365, 0.002, 0)
	near(t, "work [W]", mean(a, a.Balance.WorkPositive()), 0, 0, 1e-9)
	near(t, "shortfall [s]", a.Shortfalls[0].Seconds, 10, 1e-9, 0)
	c := e.s.Comparisons[0]
	near(t, "saved [hp]", c.SavedDrawn/units.Hour/units.Horsepower, 13.512, 0.002, 0)
}

// [ESP] 8.2 and 8.3 p. 299: 11.7 hp over the relief valve, 0.29 hp unloaded; exactly 11.669 and
// 0.2917 hp. Tolerance 0.6 %, and 0.1 % for the exact ones.
func TestPublishedUnloading(t *testing.T) {
	e := published(t, "m18_unloading")
	a, b := e.d, e.s.Circuits[1].Duties[0]
	near(t, "relief valve [hp], printed", mean(a, a.Balance.SupplyIn)/units.Horsepower, 11.7, 0.006, 0)
	near(t, "unloaded [hp], printed", mean(b, b.Balance.SupplyIn)/units.Horsepower, 0.29, 0.006, 0)
	near(t, "relief valve [hp]", mean(a, a.Balance.SupplyIn)/units.Horsepower, 11.669, 0.001, 0)
	near(t, "unloaded [hp]", mean(b, b.Balance.SupplyIn)/units.Horsepower, 0.2917, 0.001, 0)
	kinds := map[string]float64{}
	for _, l := range append(slices.Clone(a.Balance.Losses), b.Balance.Losses...) {
		kinds[l.Kind] += l.Energy.Total()
	}
	near(t, "spilled, the first alone [J]", kinds["relief spill"], a.Balance.SupplyIn.Total(), 1e-9, 0)
	near(t, "let round, the second alone [J]", kinds["unloaded circulation"], b.Balance.SupplyIn.Total(), 1e-9, 0)
	near(t, "booked as idle [J]", a.Balance.SupplyIn.Idle, a.Balance.SupplyIn.Total(), 1e-12, 0)
}

// [ESP] 9.4 p. 347: 14.5 in/s; recomputed 1273.9 psi, 126.1 psi over the valve, 11.84 gpm, 14.51 in/s
// (one companion hides an error and sets the result by hand). Tolerance 0.2 %.
func TestPublishedMeterIn(t *testing.T) {
	e := published(t, "v5_meter_in")
	near(t, "load pressure [psi]", e.at("C1.A.p", 5, "psi", units.Pressure), 1273.9, 0.002, 0)
	near(t, "valve drop [psi]", e.at("V1.P.p-V1.A.p", 5, "psi", units.Pressure), 126.1, 0.002, 0)
	near(t, "flow [gpm]", e.at("C1.A.q", 5, "gpm", units.Flow), 11.84, 0.002, 0)
	near(t, "speed [in/s]", e.at("C1.v", 5, "in/s", units.Velocity), 14.51, 0.002, 0)
}

// [ESP] 9.1 p. 331: extending 11.0 in/s, 7000 lb, 11.7 hp (11.67); retracting 4.28 in/s (4.278),
// 18,000 lb, 11.7 hp. Tolerance 0.1 %.
func TestPublishedRegenerativeCylinder(t *testing.T) {
	e := published(t, "c3_regenerative")
	near(t, "motion given: setting", e.at("P1.e", 5, "", units.Ratio), 0.5, 0.001, 0)
	near(t, "motion given: pump flow [gpm]", -e.at("P1.P.q", 5, "gpm", units.Flow), 20, 0.001, 0)
	near(t, "motion given: pressure [psi]", e.at("P1.P.p", 5, "psi", units.Pressure), 1000, 0.001, 0)
	for _, d := range e.s.Circuits[0].Duties {
		near(t, d.Duty.Name+": power [hp]", mean(d, d.Balance.SupplyIn)/units.Horsepower, 11.67, 0.001, 0)
		near(t, d.Duty.Name+": speed [in/s]", mean(d, d.Balance.WorkPositive())/(7000*units.LbForce)/units.Inch, 11.00, 0.001, 0)
	}
	e = published(t, "c3_retracting")
	near(t, "retracting: speed [in/s]", e.at("C1.v", 5, "in/s", units.Velocity), -4.278, 0.001, 0)
	near(t, "retracting: pressure [psi]", e.at("C1.B.p", 5, "psi", units.Pressure), 1000, 0.001, 0)
	near(t, "retracting: power [hp]", mean(e.d, e.d.Balance.SupplyIn)/units.Horsepower, 11.67, 0.001, 0)
}

// [PEE] 13.1 p. 512: 0.493, 152 hp in, 0.171 ft³/s; recomputed 0.4928, 152.2, 0.1705. Tolerance 0.3 %.
func TestPublishedTransmission(t *testing.T) {
	e := published(t, "s10_transmission")
	in, out := mean(e.d, e.d.Balance.SupplyIn), mean(e.d, e.d.Balance.WorkPositive())
	near(t, "efficiency", out/in, 0.4928, 0.003, 0)
	near(t, "in [hp]", in/units.Horsepower, 152.2, 0.003, 0)
	near(t, "out [hp]", out/units.Horsepower, 75, 0.003, 0)
	near(t, "flow [ft3/s]", e.run.at(t, "L1.A.q", 5)/math.Pow(units.Foot, 3), 0.1705, 0.003, 0)
	near(t, "pump [psi]", e.at("P1.P.p", 5, "psi", units.Pressure), 3000, 0.003, 0)
	near(t, "line, share of the pump pressure", e.at("L1.A.p-L1.B.p", 5, "psi", units.Pressure)/3000, 4.0/11, 0.003, 0)
}

// [ESP] 5.10 p. 203: 4884 USD a year, 1419 USD of it loss; recomputed 44,352 kWh, 4878.7 and 1416.1
// USD (the book rounds 14.784 and 4.291 kW to 14.8 and 4.3). Tolerance 0.3 %. The pump is that
// of [ESP] 5.9 p. 201: 83.5 % ± 0.1 %; the 89.8 % printed there is typed in by hand and wrong.
func TestPublishedAnnualCost(t *testing.T) {
	e := published(t, "m3_annual_cost")
	y, c := e.s.Circuits[0].Year, e.s.Circuits[0].Money
	near(t, "drawn [kWh]", y.Drawn.Total()/units.KilowattHour, 44352, 0.003, 0)
	near(t, "cost [USD]", c.Net(), 4878.7, 0.003, 0)
	lost := y.LossTo(circuit.ToOil).Plus(y.LossTo(circuit.ToAir)).Total()
	near(t, "cost of the losses [USD]", lost*e.s.Tariff.Price, 1416.1, 0.003, 0)
	near(t, "electric [kW]", e.at("M1.electric", 5, "kW", units.Power), 14.784, 0.003, 0)
	near(t, "shaft [kW]", e.at("M1.shaft", 5, "kW", units.Power), 12.566, 0.003, 0)
	near(t, "torque [N m]", e.at("M1.T", 5, "N m", units.Torque), 120, 0.001, 0)
	flow := -e.run.at(t, "P1.P.q", 5)
	near(t, "flow [m3/s]", flow, 0.0015, 0.001, 0)
	near(t, "pump overall", flow*e.run.at(t, "P1.P.p", 5)/e.run.at(t, "P1.shaft", 5), 0.835, 0, 0.001)
	if e.s.Tariff.Currency != "USD" {
		t.Errorf("currency %q", e.s.Tariff.Currency)
	}
}

// [ESP] 7.6 p. 267: volumetric 91.1 % (the companion adds 0.9 by hand and prints 91.2), mechanical
// 93.0 %, overall 84.8 %, 35.6 kW; recomputed 91.11, 93.04, 84.77 %, 35.605 kW. Tolerance 0.15 %.
func TestPublishedMotor(t *testing.T) {
	e := published(t, "m8_motor")
	near(t, "pressure [bar]", e.at("HM1.A.p", 5, "bar", units.Pressure), 70, 0.0015, 0)
	speed := e.at("HM1.w", 5, "rpm", units.AngularSpeed)
	near(t, "speed [rpm]", speed, 2000, 0.0015, 0)
	flow := e.run.at(t, "HM1.A.q", 5)
	near(t, "volumetric [%]", 100*speed/60*164e-6/flow, 91.11, 0.0015, 0)
	near(t, "mechanical [%]", 100*e.run.at(t, "HM1.load", 5)/(e.run.at(t, "HM1.A.p", 5)*164e-6/(2*math.Pi)), 93.04, 0.0015, 0)
	out := mean(e.d, e.d.Balance.WorkPositive())
	near(t, "out [kW]", out/1e3, 35.605, 0.0015, 0)
	near(t, "overall [%]", 100*out/mean(e.d, e.d.Balance.SupplyIn), 84.77, 0.0015, 0)
}

// [ESP] 6.1 p. 219: 318 psi, 2.05 ft/s, 3.72 hp extending, 425 psi, 2.73 ft/s, 4.96 hp retracting;
// recomputed 318.3, 2.042, 3.712 and 424.4, 2.722, 4.950 (the book rounds up). Tolerance 0.5 %.
func TestPublishedCylinder(t *testing.T) {
	e := published(t, "c1_cylinder")
	for _, w := range []struct {
		at, psi, speed, hp float64
		port               string
	}{{2, 318, 2.05, 3.72, "C1.A"}, {7, 425, -2.73, 4.96, "C1.B"}} {
		near(t, w.port+" [psi]", e.at(w.port+".p", w.at, "psi", units.Pressure), w.psi, 0.005, 0)
		near(t, w.port+" speed [ft/s]", e.at("C1.v", w.at, "ft/s", units.Velocity), w.speed, 0.005, 0)
		near(t, w.port+" power [hp]", e.at("M1.shaft", w.at, "hp", units.Power), w.hp, 0.005, 0)
	}
	near(t, "energy of both strokes [J]", e.d.Balance.SupplyIn.Total(), 5*(3.712+4.950)*units.Horsepower, 0.001, 0)
}

// [ESP] 11.1 p. 409: 500 psi and 20 gpm become 2500 psi and 4 gpm. Tolerance 0.05 %.
func TestPublishedIntensifier(t *testing.T) {
	e := published(t, "c4_intensifier")
	near(t, "in [psi]", e.at("P1.P.p", 5, "psi", units.Pressure), 500, 0.0005, 0)
	near(t, "in [gpm]", e.at("C1.A.q", 5, "gpm", units.Flow), 20, 0.0005, 0)
	near(t, "out [psi]", e.at("C1.B.p", 5, "psi", units.Pressure), 2500, 0.0005, 0)
	near(t, "out [gpm]", -e.at("C1.B.q", 5, "gpm", units.Flow), 4, 0.0005, 0)
}

// [ESP] 8.1 p. 293: cracks at 667 psi (666.7), 1000 psi at full flow, override 50 %. Tolerance 0.1 %.
// Half the flow lies half-way, 833.3 psi, since the spring is linear and the flow taken so.
func TestPublishedReliefOverride(t *testing.T) {
	e := published(t, "v1_relief")
	full := e.at("RV1.P.p", 0.5, "psi", units.Pressure)
	crack := e.at("RV1.P.p", 2.5, "psi", units.Pressure)
	near(t, "full flow [psi]", full, 1000, 0.001, 0)
	near(t, "half flow [psi]", e.at("RV1.P.p", 1.5, "psi", units.Pressure), 833.3, 0.001, 0)
	near(t, "cracking [psi]", crack, 666.7, 0.001, 0)
	near(t, "override [%]", 100*(full/crack-1), 50, 0, 0.2)
}

// [ESP] 4.3 p. 134: 60 psi; recomputed 60.15. Tolerance 0.3 %. Reynolds number 774, [ESP] 4.1 p. 132.
func TestPublishedLaminarLine(t *testing.T) {
	e := published(t, "l2_laminar")
	near(t, "drop [psi], printed", e.at("L1.A.p-L1.B.p", 5, "psi", units.Pressure), 60, 0.003, 0)
	near(t, "drop [psi]", e.at("L1.A.p-L1.B.p", 5, "psi", units.Pressure), 60.15, 0.001, 0)
	near(t, "velocity [ft/s]", e.at("L1.v", 5, "ft/s", units.Velocity), 10, 0.001, 0)
	near(t, "Reynolds number", e.run.at(t, "L1.v", 5)*units.Inch/100e-6, 774, 0.001, 0)
}

// [CHE] Crane TP-410 example 7.13: 66,500 Pa with f = 0.0230 read from a diagram; with Colebrook
// f = 0.022702 and 65,759 Pa, Re 68,000, 3.50 m/s. Tolerance 1.5 % and 0.1 %.
func TestPublishedTurbulentLine(t *testing.T) {
	e := published(t, "l5_turbulent")
	near(t, "drop [Pa], diagram", e.run.at(t, "L1.A.p-L1.B.p", 5), 66500, 0.015, 0)
	near(t, "drop [Pa], Colebrook", e.run.at(t, "L1.A.p-L1.B.p", 5), 65759, 0.001, 0)
	near(t, "velocity [m/s]", e.run.at(t, "L1.v", 5), 3.50, 0.001, 0)
	near(t, "Reynolds number", e.run.at(t, "L1.v", 5)*0.05248/2.7e-6, 68000, 0.001, 0)
}

// [SUL] 5.7 p. 97: the book prints 224.7 psi; recomputed with its own constants 225.24 psi and
// 13.14 hp. Strict SI gives 225.9 psi. Tolerance 0.3 %.
func TestPublishedLinesInSeries(t *testing.T) {
	e := published(t, "l8_series")
	near(t, "drop [psi]", e.at("L1.A.p-L2.B.p", 5, "psi", units.Pressure), 225.24, 0.003, 0)
	near(t, "loss [hp]", loss(e.d, "L1", "L2")/units.Horsepower, 13.14, 0.003, 0)
}

// [ESP] 8.4 p. 302: 252 gpm; strict SI 251.5 gpm, 952 L/min. Tolerance 0.4 %, and 0.1 % in SI. What the
// source gives is lost in the orifice.
func TestPublishedOrifice(t *testing.T) {
	e := published(t, "v2_orifice")
	near(t, "flow [gpm], printed", e.at("O1.A.q", 5, "gpm", units.Flow), 252, 0.004, 0)
	near(t, "flow [gpm]", e.at("O1.A.q", 5, "gpm", units.Flow), 251.5, 0.001, 0)
	near(t, "flow [L/min]", e.at("O1.A.q", 5, "L/min", units.Flow), 952, 0.001, 0)
	near(t, "stored [J]", e.d.Balance.StoredEnergy().Total(), -e.d.Balance.HeatToOil().Total(), 1e-9, 0)
}

// [ESP] 11.3 p. 424: 54.3 °C; recomputed 54.345 °C. Tolerance 0.1 K, and 0.01 K.
func TestPublishedTemperatureRise(t *testing.T) {
	e := published(t, "t2_rise")
	rise := e.s.Circuits[0].Heat.Year.Mean / (e.s.Conditions.Density * 1800 * e.run.at(t, "RV1.P.q", 5))
	near(t, "leaves at [C], printed", e.s.Oil-units.ZeroCelsius+rise, 54.3, 0, 0.1)
	near(t, "leaves at [C]", e.s.Oil-units.ZeroCelsius+rise, 54.345, 0, 0.01)
}

// [ESP] 11.5 p. 426: 6.41 kW; recomputed 6.4075. Tolerance 0.1 %. The parts are 15 % of 10.376 kW, half
// of 8.82 kW, and a tenth of the other half.
func TestPublishedCooler(t *testing.T) {
	e := published(t, "t4_cooler")
	h := e.s.Circuits[0].Heat.Year
	near(t, "heat to oil [kW]", h.Mean/1e3, 6.4075, 0.001, 0)
	near(t, "pump [kW]", loss(e.d, "P1")/1e3, 0.15*8.82/0.85, 0.001, 0)
	near(t, "relief valve [kW]", loss(e.d, "RV1")/1e3, 4.41, 0.001, 0)
	near(t, "line [kW]", loss(e.d, "O1")/1e3, 0.441, 0.001, 0)
	near(t, "cooler at 60 C oil and 30 C air [W/K]", h.Cooler, 6407.5/30, 0.001, 0)
}
