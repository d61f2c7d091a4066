package audit_test

import (
	"context"
	"fmt"
	"math"
	"strings"
	"testing"

	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/machines"
	"barlitre/machines/units"
)

// pumpTable is an invented table of measured points of a known law, with semicolons and decimal commas.
func pumpTable(law machines.Displacement, mu float64, rpm ...float64) string {
	var b strings.Builder
	b.WriteString("n [1/min]; V [cm3/rev]; dp [bar]; q [L/min]; T [N m]\n")
	for _, n := range rpm {
		for _, e := range []float64{0.4, 1} {
			for _, bar := range []float64{40, 120, 220, 300} {
				w, dp := n*units.RPM, bar*units.Bar
				q, T := law.Flow(e, w, dp, mu, 870, 1.4e9), law.Torque(e, w, dp, mu, 870)
				fmt.Fprintf(&b, "%g; %g; %g; %.9g; %.9g\n", n, e*law.D/units.CubicCentimetrePerRev, bar, q/units.LitrePerMinute, T)
			}
		}
	}
	return strings.ReplaceAll(b.String(), ".", ",")
}

const measuredPress = `format: barlitre/1
oil: {temperature: 50 C, density: 870 kg/m3, viscosity: 40 mPa s}
axes: {ram: linear}
duties:
- name: day
  hours: 1000 h
  points: {t: [0 s, 0.1 s, 2 s, 2.1 s, 4 s], ram.speed: [0 m/s, 0.1 m/s, 0.1 m/s, 0 m/s, 0 m/s], ram.load: [5 kN, 5 kN, 50 kN, 5 kN, 5 kN]}
circuits:
- name: As found
  pump_at_rest: keep
  blocks:
    T1: {kind: tank}
    M1: {kind: electric_motor, rated_power: 22 kW, efficiency: 0.93, speed: 1480 rpm}
    P1: {kind: pump, displacement: 45 cm3/rev, points: pump.csv, points_viscosity: 35 mPa s}
    RV1: {kind: relief, crack: 160 bar}
    V1: {kind: valve, follows: ram, nominal_flow: 60 L/min, nominal_drop: 5 bar}
    C1: {kind: cylinder, axis: ram, hold: brake, bore: 80 mm, rod: 56 mm}
  lines: [M1.shaft - P1.shaft, P1.S - T1.T, P1.P - RV1.P - V1.P, RV1.T - V1.T - T1.T, V1.A - C1.A, V1.B - C1.B]
`

var pumpLaw = machines.Displacement{D: 45 * units.CubicCentimetrePerRev, Cs: 9e-9, Kd: 1.2, Cf: 0.02, Cv: 5e4, Tc: 2}

// parsePress reads the press with one file beside it.
func parsePress(press, table string) (*audit.File, []circuit.Finding) {
	return audit.Parse([]byte(press), audit.FromBytes(func(string) ([]byte, error) { return []byte(table), nil }), "press.yaml")
}

// The coefficients of a pump come from its measured points, are shown as such, and go into the balance.
func TestMeasuredPointsInTheFile(t *testing.T) {
	f, found := parsePress(measuredPress, pumpTable(pumpLaw, 0.035, 700, 1200, 1800, 2600))
	if f == nil || circuit.AnyStops(found) {
		t.Fatal(found)
	}
	b := f.Circuits[0].Block("P1")
	k := circuit.KindNamed("pump")
	for key, want := range map[string]float64{"slip": pumpLaw.Cs, "dead_volume": pumpLaw.Kd, "friction": pumpLaw.Cf, "viscous": pumpLaw.Cv, "drag": pumpLaw.Tc} {
		v, byDefault, ok := k.Value(b, key)
		if !ok || !byDefault || v.Origin != circuit.Measured || !strings.Contains(v.Note, "32 points of pump.csv") {
			t.Errorf("%s is shown as %+v", key, v)
		}
		if math.Abs(v.SI-want) > 1e-5*want {
			t.Errorf("%s is %g, the points were made with %g", key, v.SI, want)
		}
	}
	s, err := audit.Solve(context.Background(), f, audit.Options{})
	if err != nil {
		t.Fatal(err)
	}
	run := s.Circuits[0]
	d := run.Duties[0]
	if d.Balance == nil || d.Balance.Closure() > 1e-9 {
		t.Fatalf("not solved, or closure off: %v", run.Findings)
	}
	kinds := map[string]float64{}
	for _, l := range d.Balance.Losses {
		if l.Block == "P1" {
			kinds[l.Kind] = l.Energy.Total()
		}
	}
	if !(kinds["slip"] > 0 && kinds["compression"] > 0 && kinds["friction"] > 0) || math.Abs(kinds["hydrodynamic torque"]) > 1e-3 { // J; the table is rounded
		t.Errorf("the pump books %v", kinds)
	}
	// What passes the shaft in its states is the work at the shaft: the energy the motor draws less its loss.
	states, seconds := 0.0, 0.0
	for _, x := range d.Operating["P1"] {
		states += x.Energy
		seconds += x.Seconds
	}
	motor := 0.0
	for _, l := range d.Balance.Losses {
		if l.Block == "M1" {
			motor += l.Energy.Total()
		}
	}
	if want := d.Balance.SupplyIn.Total() - motor; math.Abs(states-want) > 1e-9*want || math.Abs(seconds-4) > 1e-9 {
		t.Errorf("%g J in %g s over all states, want %g J in 4 s", states, seconds, want)
	}
	m := s.MachineMap(run, "P1")
	if m == nil || m.Motor || len(m.States) == 0 {
		t.Fatal("no map of the pump")
	}
	if got, want := m.Efficiency(1, 150, 1e7), pumpLaw.EfficiencyIn(1, 150, 1e7, m.Fluid); math.Abs(got-want) > 1e-6 {
		t.Errorf("the map has %g, the law %g", got, want)
	}
	if s.MachineMap(run, "C1") != nil || s.MachineMap(run, "none") != nil {
		t.Error("a map of something that is no such machine")
	}
}

// A duty within the measured points says nothing of extrapolation; one whose pressures lie below them warns, in either use
// of the points; as a map of exact points the energies are those of the law.
func TestMeasuredPointsAsMap(t *testing.T) {
	solve := func(press, table string) (*audit.CircuitRun, string) {
		f, found := parsePress(press, table)
		if f == nil || circuit.AnyStops(found) {
			t.Fatal(found)
		}
		s, err := audit.Solve(context.Background(), f, audit.Options{})
		if err != nil {
			t.Fatal(err)
		}
		said := ""
		for _, n := range s.Circuits[0].Findings {
			if n.Parameter == "points" {
				said += string(n.Level) + ": " + n.Text + "\n"
			}
		}
		return s.Circuits[0], said
	}
	table := pumpTable(pumpLaw, 0.035, 700, 1200, 1800, 2600)
	asMap := strings.Replace(measuredPress, "points: pump.csv", "points: pump.csv, points_as: map", 1)
	law, quiet := solve(measuredPress, table)
	chart, _ := solve(asMap, table)
	if quiet != "" {
		t.Errorf("within the points it says %q", quiet)
	}
	a, b := law.Duties[0].Balance, chart.Duties[0].Balance
	if b.Closure() > 1e-9 || math.Abs(a.SupplyIn.Total()-b.SupplyIn.Total()) > 1e-5*a.SupplyIn.Total() {
		t.Errorf("as a map of exact points it draws %g J, by their law %g J; closure %g", b.SupplyIn.Total(), a.SupplyIn.Total(), b.Closure())
	}
	_, loud := solve(strings.Replace(asMap, "crack: 160 bar", "crack: 315 bar", 1), table)
	if !strings.HasPrefix(loud, "warns: P1: ") || !strings.Contains(loud, "extrapolated") {
		t.Errorf("above the points it says %q", loud)
	}
}

func TestMeasuredPointsRefused(t *testing.T) {
	table := pumpTable(pumpLaw, 0.035, 700, 1200, 1800, 2600)
	for _, c := range []struct{ press, table, want string }{
		{measuredPress, strings.Replace(table, "T [N m]", "T [s]", 1), "no column gives the torque"},
		{measuredPress, strings.Join(strings.SplitN(table, "\n", 6)[:5], "\n"), "fewer points than terms"},
		{measuredPress, "", "is empty"},
		{strings.Replace(measuredPress, "pump.csv", "../pump.csv", 1), table, "beside the audit file"},
		{strings.Replace(measuredPress, "45 cm3/rev", "28 cm3/rev", 1), table, "above 110"},
	} {
		_, found := parsePress(c.press, c.table)
		said := ""
		for _, f := range found {
			said += f.Text + "\n"
			if f.Block != "P1" || f.Line != 14 {
				t.Errorf("a fault of the points stands at %q, line %d", f.Block, f.Line)
			}
		}
		if !strings.Contains(said, c.want) {
			t.Errorf("says %q, want %q", said, c.want)
		}
	}
}

// Points of two near speeds: check and audit name the terms that they cannot tell apart.
func TestMeasuredPointsWarn(t *testing.T) {
	f, _ := parsePress(measuredPress, pumpTable(pumpLaw, 0.035, 1200, 1260))
	said := ""
	for _, n := range f.Check() {
		if n.Parameter == "points" && n.Level == circuit.Warns {
			said += n.Text
		}
	}
	if !strings.Contains(said, "cannot tell") || !strings.Contains(said, "speeds only") {
		t.Errorf("check says %q", said)
	}
}

// What the file says of the oil: index of an HV oil, air and modulus, temperature of the start.
func TestOilOfTheFile(t *testing.T) {
	at := func(oil string) (circuit.Conditions, string) {
		f, found := audit.Parse([]byte(strings.Replace(strings.Replace(measuredPress, ", points: pump.csv, points_viscosity: 35 mPa s", "", 1), "oil: {temperature: 50 C, density: 870 kg/m3, viscosity: 40 mPa s}", "oil: "+oil, 1)), nil, "")
		said := ""
		for _, n := range append(found, f.Check()...) {
			said += n.Text + "\n"
		}
		c, _ := f.Conditions()
		return c, said
	}
	c, _ := at("{grade: ISO VG 46 HV, temperature: 50 C, air: 1 %, bulk_modulus: 1.6 GPa, start_temperature: -10 C, specific_heat: 2 kJ/(kg K)}")
	if vi, err := machines.ViscosityIndex(c.Oil.Nu40, c.Oil.Nu100); err != nil || math.Abs(vi-150) > 0.1 || c.Air != 0.01 || c.BulkModulus != 1.6e9 || c.Oil.SpecificHeat != 2000 {
		t.Errorf("index %g, %+v", vi, c)
	}
	_, said := at("{grade: ISO VG 46, temperature: 50 C, start_temperature: -10 C}")
	if !strings.Contains(said, "P1: the oil has") || !strings.Contains(said, "may start with") {
		t.Errorf("a cold start says %q", said)
	}
	for oil, want := range map[string]string{
		"{temperature: 50 C, density: 870 kg/m3, viscosity: 40 mPa s, start_temperature: 0 C}": "give the grade too",
		"{grade: ISO VG 46, temperature: 50 C, air: 40 %}":                                     "must be 0 to 30 %",
		"{grade: ISO VG 46 XY, temperature: 50 C}":                                             "is not an ISO VG grade",
	} {
		if _, said := at(oil); !strings.Contains(said, want) {
			t.Errorf("%s says %q, want %q", oil, said, want)
		}
	}
}
