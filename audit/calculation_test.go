package audit_test

import (
	"context"
	"math"
	"strings"
	"testing"

	"barlitre/audit"
	"barlitre/machines/units"
	"barlitre/samples"
)

func sampleSolved(t *testing.T, name string) *audit.Solution {
	t.Helper()
	data, err := samples.Read(name)
	if err != nil {
		t.Fatal(err)
	}
	s, err := audit.Solve(context.Background(), parsed(t, string(data)), audit.Options{})
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// TestRowsPrintAsTheReport holds the rows to the tables of the report: the same
// names, and every printed digit.
func TestRowsPrintAsTheReport(t *testing.T) {
	for _, name := range samples.Names() {
		s := sampleSolved(t, name)
		for _, sys := range []units.System{units.Metric, units.US, units.SI} {
			r := s.Report(sys)
			for i := range s.Circuits {
				for d := range s.File.Duties {
					compareRows(t, s.EnergyRows(i, d), r.Circuits[i].Duties[d].Losses, func(e audit.EnergyRow) map[int]string {
						u := audit.CycleUnit(sys)
						return map[int]string{2: units.Format(e.Energy.Total(), u, 4), 3: percent(e.Share), 4: units.Format(e.Energy.Driving, u, 4),
							5: units.Format(e.Energy.Holding, u, 4), 6: units.Format(e.Energy.Idle, u, 4)}
					})
				}
				compareRows(t, s.EnergyRows(i, audit.WholeYear), r.Circuits[i].Losses, func(e audit.EnergyRow) map[int]string {
					return map[int]string{2: units.Format(e.Energy.Total(), audit.YearUnit(), 4), 3: percent(e.Share), 4: units.Number(e.Money, 4) + "\u202fEUR"}
				})
			}
		}
	}
}

func percent(x float64) string {
	if math.IsNaN(x) {
		return "n/a"
	}
	return units.Format(x, units.Percent, 3)
}

func compareRows(t *testing.T, rows []audit.EnergyRow, table audit.Table, cells func(audit.EnergyRow) map[int]string) {
	t.Helper()
	if len(rows) != len(table.Rows) {
		t.Fatalf("%s: %d rows, the report has %d", table.Title, len(rows), len(table.Rows))
	}
	at := map[string]audit.TableRow{}
	for _, r := range table.Rows {
		at[r.Cells[0]] = r
	}
	sum := 0.0
	for _, e := range rows {
		want := at[e.Name]
		if want.Cells == nil || want.Cells[1] != e.To || want.Sum != e.Sum {
			t.Errorf("%s: row %q (%s, %v), the report has %v", table.Title, e.Name, e.To, e.Sum, want)
			continue
		}
		for i, got := range cells(e) {
			if got != want.Cells[i] {
				t.Errorf("%s: %s, %s: %q, the report prints %q", table.Title, e.Name, table.Head[i], got, want.Cells[i])
			}
		}
		if !e.Sum {
			sum += e.Energy.Total()
		} else if math.Abs(sum-e.Energy.Total()) > 1e-6*e.Energy.Total() {
			t.Errorf("%s: rows add up to %g J, not to %g J", table.Title, sum, e.Energy.Total())
		}
	}
}

// TestEveryRowHasACalculation opens every row of every sample: the printed energy
// stands in it, and what it comes from.
func TestEveryRowHasACalculation(t *testing.T) {
	for _, name := range samples.Names() {
		s := sampleSolved(t, name)
		for i, c := range s.Circuits {
			for d := audit.WholeYear; d < len(s.File.Duties); d++ {
				for _, row := range s.EnergyRows(i, d) {
					u := audit.CycleUnit(units.Metric)
					if d == audit.WholeYear {
						u = audit.YearUnit()
					}
					calc := s.RowCalculation(i, d, row, units.Metric)
					if energy := units.Format(row.Energy.Total(), u, 4); !strings.Contains(calc.Numbers, energy) {
						t.Errorf("%s, %s, duty %d, %s: %q lacks %s", name, c.Circuit.Name, d, row.Name, calc.Numbers, energy)
					}
					if year := units.Format(row.Year, audit.YearUnit(), 4); !strings.Contains(calc.Numbers, year) {
						t.Errorf("%s, %s, duty %d, %s: %q lacks %s a year", name, c.Circuit.Name, d, row.Name, calc.Numbers, year)
					}
					if calc.Formula == "" || calc.Source == "" {
						t.Errorf("%s, %s, duty %d, %s: no formula or no source: %+v", name, c.Circuit.Name, d, row.Name, calc)
					}
				}
			}
		}
	}
}

// One relief valve between a flow that is given and a tank. By hand:
// 60 L/min = 1e-3 m³/s, less the slip of the ideal pump (0): Δp = 100 bar + 10 bar
// per 100 L/min · 60 L/min = 106 bar; P = 106e5 · 1e-3 = 10.6 kW; 10 s: 106 kJ; in
// 100 h 36 000 cycles: 106 kW·h · 10 = 1060 kWh; at 0.2 EUR: 212 EUR.
const spilling = `format: barlitre/1
oil: {temperature: 50 C, density: 870 kg/m3, viscosity: 40 mPa s}
energy: {price: 0.2 EUR/kWh}
axes: {ram: linear}
duties:
- name: spill
  hours: 100 h
  points: {t: [0 s, 10 s], ram.speed: [0 m/s, 0 m/s], ram.load: [0 N, 0 N]}
circuits:
- name: Bench
  pump_at_rest: keep
  blocks:
    T1: {kind: tank}
    M1: {kind: electric_motor, rated_power: 22 kW, speed: 1500 rpm, efficiency: 92 %}
    P1: {kind: pump, displacement: 40 cm3/rev, slip: 0, friction: 0, viscous: 0, drag: 0 N m}
    RV1: {kind: relief, crack: {value: 100 bar, origin: name plate, low: 95, high: 105}, override: 10 bar per 100 L/min}
    V1: {kind: valve, follows: ram, nominal_flow: 60 L/min}
    C1: {kind: cylinder, axis: ram, bore: 50 mm, rod: 30 mm, hold: valve}
  lines:
  - M1.shaft - P1.shaft
  - T1.T - P1.S - RV1.T - V1.T
  - P1.P - RV1.P - V1.P
  - V1.A - C1.A
  - V1.B - C1.B
`

func TestReliefByHand(t *testing.T) {
	s := solved(t, parsed(t, spilling))
	calc := s.LossCalculation(0, 0, "RV1", "relief spill", units.Metric)
	for _, want := range []string{
		"pc = 100 bar (name plate, 95.00\u202fbar to 105.0\u202fbar)", "R = 10 bar per 100 L/min (not stated)",
		"highest at 0\u202fs: P = 10.6\u202fkW", "pressure at P = 106\u202fbar", "flow into P = 60.0\u202fL/min",
		"E = 106.0\u202fkJ over 10.00\u202fs", "106.0\u202fkJ × 36\u202f000 cycles (100.0\u202fh / 10.00\u202fs) = 1060\u202fkWh",
		"1060\u202fkWh × 0.2\u202fEUR/kWh = 212.0\u202fEUR a year",
	} {
		if !strings.Contains(calc.Numbers, want) {
			t.Errorf("numbers lack %q:\n%s", want, calc.Numbers)
		}
	}
	if !strings.Contains(calc.Formula, "P = (pP − pT)·q") || !strings.Contains(calc.Formula, "Δp = pc + R·q") {
		t.Errorf("formula %q", calc.Formula)
	}
	if !strings.Contains(calc.Source, "linear override") {
		t.Errorf("source %q", calc.Source)
	}
	if strings.Contains(calc.Numbers, "pv") || strings.Contains(calc.Numbers, "qs =") && !strings.Contains(calc.Formula, "qs") {
		t.Errorf("values that are in no formula: %s", calc.Numbers)
	}
	year := s.LossCalculation(0, audit.WholeYear, "RV1", "relief spill", units.Metric)
	if want := "spill: 106.0\u202fkJ × 36\u202f000 = 1060\u202fkWh"; !strings.Contains(year.Numbers, want) {
		t.Errorf("year lacks %q: %s", want, year.Numbers)
	}
}

func TestNoCalculation(t *testing.T) {
	s := solved(t, parsed(t, spilling))
	none := audit.Calculation{}
	for name, got := range map[string]audit.Calculation{
		"block":   s.LossCalculation(0, 0, "RV9", "relief spill", units.Metric),
		"loss":    s.LossCalculation(0, 0, "RV1", "friction", units.Metric),
		"circuit": s.LossCalculation(3, 0, "RV1", "relief spill", units.Metric),
		"duty":    s.LossCalculation(0, 7, "RV1", "relief spill", units.Metric),
	} {
		if got != none {
			t.Errorf("unknown %s: %+v", name, got)
		}
	}
}
