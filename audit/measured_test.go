package audit_test

import (
	"bytes"
	"encoding/json"
	"fmt"
	"math"
	"strings"
	"testing"

	"barlitre/audit"
	"barlitre/machines/units"
)

const metered = `format: barlitre/1
title: measuring points
oil: {temperature: 50 C, density: 870 kg/m3, viscosity: 40 mPa s}
axes: {ram: linear}
duties:
- name: day
  hours: 2000 h
  repeats: no
  step: 0 s
  instants: no
  points:
    "t [s]": [0, 1, 2, 4, 5, 6]
    "ram.speed [m/s]": [0.05, 0.1, 0.12, -0.1, -0.15, -0.05]
    "ram.load [kN]": [10, 20, 45, 5, 4, 4]
circuits:
- name: As found
  pump_at_rest: keep
  blocks:
    TK: {kind: tank}
    M1: {kind: electric_motor, rated_power: 22 kW, efficiency: 0.92}
    P1: {kind: pump, displacement: 45 cm3/rev}
    RV1: {kind: relief, crack: 160 bar}
    V1: {kind: valve, follows: ram, nominal_flow: 60 L/min}
    C1: {kind: cylinder, axis: ram, hold: valve, bore: 80 mm, rod: 56 mm}
    X1: {kind: pressure_point}
    Q1: {kind: flow_point}
  lines:
  - M1.shaft - P1.shaft
  - P1.S - RV1.T - Q1.B - TK.T
  - P1.P - RV1.P - V1.P
  - V1.A - C1.A - X1.P
  - V1.B - C1.B
  - V1.T - Q1.A
`

// row writes a track with every digit.
func row(name string, values []float64) string {
	var out []string
	for _, v := range values {
		out = append(out, fmt.Sprintf("%.17g", v))
	}
	return fmt.Sprintf("    %q: [%s]\n", name, strings.Join(out, ", "))
}

// with adds rows to the points of the duty.
func with(t *testing.T, text, rows string) string {
	t.Helper()
	return changed(t, text, "circuits:\n", rows+"circuits:\n")
}

// What is measured is what the model gives plus a known error: mean difference, NMBE,
// CV(RMSE) and the largest difference must be those of the error. Both by their
// definition in ASHRAE Guideline 14 with p = 1 (from memory).
func TestMeasuredChannelsGiveTheKnownError(t *testing.T) {
	f := parsed(t, metered)
	base := solved(t, f)
	r := ran(t, f, f.Circuits[0].Circuit, f.Duties[0])
	errs := map[string][]float64{"X1.pressure": {2e5, -1e5, 3e5, 4e5, -6e5, 1e5}, "Q1.flow": {1e-5, 2e-5, -1e-5, 0, 1e-5, -4e-5}, "M1.power": {500, -200, 300, 0, -900, 100}}
	signal := map[string]string{"X1.pressure": "X1.P.p", "Q1.flow": "Q1.A.q", "M1.power": "M1.electric"}
	unit := map[string]string{"X1.pressure": "Pa", "Q1.flow": "m3/s", "M1.power": "W"}
	worst := map[string]float64{"X1.pressure": 5, "Q1.flow": 6, "M1.power": 5} // s
	measured := map[string][]float64{}
	rows := ""
	for _, point := range []string{"X1.pressure", "Q1.flow", "M1.power"} {
		for i, at := range f.Duties[0].Time {
			measured[point] = append(measured[point], r.at(t, signal[point], at)+errs[point][i])
		}
		rows += row(point+" ["+unit[point]+"]", measured[point])
	}
	s := solved(t, parsed(t, with(t, metered, rows)))
	d := s.Circuits[0].Duties[0]
	if a, b := d.Balance.SupplyIn, base.Circuits[0].Duties[0].Balance.SupplyIn; a != b {
		t.Errorf("measuring changes what is drawn: %v, %v", a, b)
	}
	if len(d.Measured) != 3 {
		t.Fatalf("%d comparisons", len(d.Measured))
	}
	for i, m := range d.Measured {
		sum, squares, mean, largest := 0.0, 0.0, 0.0, 0.0
		for i, e := range errs[m.Point] {
			sum, squares, mean = sum+e, squares+e*e, mean+measured[m.Point][i]/6
			if math.Abs(e) > math.Abs(largest) {
				largest = e
			}
		}
		near(t, m.Point+" mean difference", m.Difference, sum/6, 1e-9, 0)
		near(t, m.Point+" NMBE", m.NMBE, sum/(5*mean), 1e-9, 0)
		near(t, m.Point+" CV(RMSE)", m.CVRMSE, math.Sqrt(squares/5)/mean, 1e-9, 0)
		near(t, m.Point+" largest", m.Largest, largest, 1e-9, 0)
		near(t, m.Point+" when", m.At, worst[m.Point], 0, 0)
		near(t, m.Point+" mean", m.Measured, mean, 1e-12, 0)
		near(t, m.Point+" rows", float64(m.Rows), 6, 0, 0)
		tr := d.Plot.Measured[i]
		if tr.Name != signal[m.Point] || tr.At(5) != measured[m.Point][4] {
			t.Errorf("the plot has %+v", tr)
		}
	}
	printed(t, s)
}

// printed looks for the comparison in the report and in the result file.
func printed(t *testing.T, s *audit.Solution) {
	t.Helper()
	table := s.Report(units.Metric).Circuits[0].Duties[0].Measured
	if len(table.Rows) != 3 || table.Rows[0].Cells[0] != "X1.pressure" || table.Rows[0].Cells[6] != "−6.00\u202fbar" || table.Rows[0].Cells[3] != "0.500\u202fbar" {
		t.Errorf("the report has %+v", table.Rows)
	}
	var b bytes.Buffer
	if err := s.Result().Write(&b); err != nil {
		t.Fatal(err)
	}
	var r audit.Result
	if err := json.Unmarshal(b.Bytes(), &r); err != nil {
		t.Fatal(err)
	}
	m := r.Circuits[0].Duties[0].Measured
	if len(m) != 3 || m[1].Point != "Q1.flow" || float64(m[1].NMBE) != s.Circuits[0].Duties[0].Measured[1].NMBE || m[1].At != 6 {
		t.Errorf("the result has %+v", m)
	}
}

// Over a period of several cycles, with instants of switching between, every row counts once a cycle.
func TestMeasuredOverAPeriod(t *testing.T) {
	c6 := text(t, "trials/c6.yaml")
	plain := parsed(t, c6)
	n := len(plain.Duties[0].Time)
	values := make([]string, n)
	for i := range values {
		values[i] = "165"
	}
	c6 = changed(t, c6, "circuits:\n", "    \"X1.pressure [bar]\": ["+strings.Join(values, ", ")+"]\ncircuits:\n")
	c6 = changed(t, c6, "  blocks:\n", "  blocks:\n    X1: {kind: pressure_point}\n")
	c6 = changed(t, c6, "AC1.P", "AC1.P - X1.P")
	d := solved(t, parsed(t, c6)).Circuits[0].Duties[0]
	m := d.Measured[0]
	if d.Cycles != 2 || m.Rows != 2*n {
		t.Errorf("%d cycles, %d rows compared, the duty has %d", d.Cycles, m.Rows, n)
	}
	near(t, "measured", m.Measured, 165e5, 1e-12, 0)
	if m.Computed < 150e5 || m.Computed > 180e5 {
		t.Errorf("the mean computed is %g Pa, the accumulator works between 150 and 180 bar", m.Computed)
	}
}

func TestMeasuredPointsThatAreWrong(t *testing.T) {
	values := []float64{1, 2, 3, 4, 5, 6}
	for _, c := range []struct{ track, want string }{
		{"X9.pressure [bar]", `there is no axis or block "X9"`},
		{"X1.presure [bar]", "is not a track"},
		{"ram.pressure [bar]", "ram is an axis; pressure is for a measuring point"},
		{"X1.pressure [L/min]", `unit "L/min" is not a unit of pressure`},
		{"RV1.pressure [bar]", "RV1 is a relief valve; put a pressure measuring point there"},
		{"Q1.pressure [bar]", "Q1 is a flow measuring point; put a pressure measuring point there"},
		{"X1.load [kN]", "a measuring point a pressure or a flow"},
	} {
		f, found := audit.Parse([]byte(with(t, metered, row(c.track, values))), nil, "")
		if len(found) == 0 {
			s, err := audit.Solve(t.Context(), f, audit.Options{})
			if err != nil {
				t.Fatal(err)
			}
			found = s.Circuits[0].Findings
		}
		says(t, found, "stops", c.want)
	}
}
