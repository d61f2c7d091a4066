package audit

import (
	"math"
	"strings"
	"testing"

	"barlitre/audit/thermal"
	"barlitre/circuit"
	"barlitre/circuit/duty"
	"barlitre/machines/units"
)

// steady makes a run of one duty with constant powers over 10 s.
func steady(t *testing.T, hours float64, repeats bool, channels []circuit.Channel, power []float64) *DutyRun {
	t.Helper()
	l := NewLedger(channels, nil, 2)
	feed(t, l, []circuit.Sample{{T: 0, Power: power}, {T: 10, Power: power}})
	return &DutyRun{Duty: &duty.Duty{Name: "steady", Hours: hours * units.Hour, Repeats: repeats}, Balance: l.Balance(repeats)}
}

// Published energy-cost example: 1000 rpm, 120 N·m, motor 85 %, pump 83.5 %, 12 h on 250
// days, 0.11 $/kWh: 4884 $/yr of which 1419 $/yr is lost, from rounded steps; recomputed
// 4878.7 and 1416.1. Source: A. Esposito, Fluid Power with Applications, example 5.10, p. 203. Tolerance 0.3 %.
func TestPublishedEnergyCost(t *testing.T) {
	shaft := 120 * 1000 * units.RPM
	electric := shaft / 0.85
	hydraulic := shaft * 0.835
	ch := []circuit.Channel{
		{Role: circuit.Supply, Block: "M1", Kind: "supply"}, {Role: circuit.Work, Block: "X", Kind: "axis"},
		{Role: circuit.Loss, Block: "M1", Kind: "electric motor", Sink: circuit.ToAir},
		{Role: circuit.Loss, Block: "P1", Kind: "slip", Sink: circuit.ToOil}}
	run := steady(t, 12*250, true, ch, []float64{electric, hydraulic, electric - shaft, shaft - hydraulic})
	y := year([]*DutyRun{run}, nil, 0)
	tariff := Tariff{Price: 0.11 / units.KilowattHour, CO2: math.NaN()}
	cost := tariff.YearCost(y)
	wants(t, "kWh", y.Drawn.Total()/units.KilowattHour, 44352, 3e-4)
	wants(t, "cost, recomputed", cost.Drawn, 4878.7, 1e-4)
	wants(t, "cost, published", cost.Drawn, 4884, 3e-3)
	lost := sumRows(y.Losses, nil).Total() * tariff.Price
	wants(t, "loss, recomputed", lost, 1416.1, 1e-4)
	wants(t, "loss, published", lost, 1419, 3e-3)
	if !math.IsNaN(cost.CO2) {
		t.Error("CO2 without a factor")
	}
}

// Published cooler size: pump 0.00126 m³/s at 70 bar, overall 85 %, half the flow over the
// relief valve, line loss a tenth of that: 6.41 kW, recomputed 6.4075. Source: A. Esposito,
// Fluid Power with Applications, example 11.5, p. 426. Tolerance 0.1 %.
func TestPublishedCoolerHeat(t *testing.T) {
	hyd := 0.00126 * 70 * units.Bar
	ch := []circuit.Channel{
		{Role: circuit.Supply, Block: "M1", Kind: "supply"}, {Role: circuit.Work, Block: "X", Kind: "axis"},
		{Role: circuit.Loss, Block: "M1", Kind: "electric motor", Sink: circuit.ToAir}, // must not count
		{Role: circuit.Loss, Block: "P1", Kind: "friction", Sink: circuit.ToOil},
		{Role: circuit.Loss, Block: "RV1", Kind: "relief", Sink: circuit.ToOil},
		{Role: circuit.Loss, Block: "L1", Kind: "line", Sink: circuit.ToOil}}
	pump, relief := hyd*(1/0.85-1), hyd/2
	line := relief / 10
	run := steady(t, 100, true, ch, []float64{hyd/0.85 + 900, hyd - relief - line, 900, pump, relief, line})
	y := year([]*DutyRun{run}, nil, 0)
	h := heatOf([]*DutyRun{run}, y, units.ZeroCelsius+60, units.ZeroCelsius+35)
	row, ok := h.Largest()
	if !ok {
		t.Fatal("no heat")
	}
	wants(t, "heat, recomputed", row.Mean, 6407.5, 1e-4)
	wants(t, "heat, published", row.Mean, 6410, 1e-3)
	wants(t, "cooler", row.Cooler, 6407.5/25, 1e-4)
	wants(t, "year mean", h.Year.Mean, row.Mean, 1e-12)
}

// A 200 L tank with 1.7 m² of wall, 50 K above the air, h = 12 W/(m²·K): 1.02 kW. Trade
// article on tanks; the arithmetic is what is checked.
func TestTankWalls(t *testing.T) {
	wants(t, "wall", WallHeat(thermal.OrdinaryAir, 1.7, 50), 1020, 1e-12)
}

func TestCoolerRateRefuses(t *testing.T) {
	for _, c := range [][2]float64{{300, 300}, {290, 300}, {math.NaN(), 300}, {320, math.NaN()}} {
		if k, err := CoolerRate(1000, c[0], c[1]); err == nil || !math.IsNaN(k) {
			t.Errorf("oil %g, air %g: %g, %v", c[0], c[1], k, err)
		}
	}
	if k, err := CoolerRate(1000, 330, 310); err != nil || math.Abs(k-50) > 1e-12 {
		t.Errorf("%g, %v", k, err)
	}
}

// Two duties: heat is weighted by running hours, a duty without hours is left out, one that
// was not solved makes the year incomplete.
func TestYearOfSeveralDuties(t *testing.T) {
	ch := []circuit.Channel{{Role: circuit.Supply, Block: "M1", Kind: "supply"}, {Role: circuit.Loss, Block: "P1", Kind: "slip", Sink: circuit.ToOil}}
	a, b := steady(t, 3000, true, ch, []float64{4000, 4000}), steady(t, 1000, false, ch, []float64{1000, 1000})
	off := steady(t, 0, true, ch, []float64{9000, 9000})
	y := year([]*DutyRun{a, b, off}, nil, 0)
	wants(t, "kWh", y.Drawn.Total()/units.KilowattHour, 12000+1000, 1e-12)
	wants(t, "cycles", y.Duties[0].Cycles, 3000*360, 1e-12)
	wants(t, "hours", y.Hours/units.Hour, 4000, 1e-12)
	h := heatOf([]*DutyRun{a, b, off}, y, 330, 300)
	wants(t, "mean heat", h.Year.Mean, 13000.0/4000*1000, 1e-12)
	wants(t, "hottest", h.Duties[h.Hottest].Mean, 9000, 1e-12)
	if !y.Complete || len(y.Losses) != 1 {
		t.Errorf("complete %v, losses %v", y.Complete, y.Losses)
	}
	lost := &DutyRun{Duty: &duty.Duty{Name: "night", Hours: 3600}}
	if y := year([]*DutyRun{a, lost}, nil, 0); y.Complete || len(y.Missing) != 1 || y.Missing[0] != "night" {
		t.Errorf("a duty without a balance: %+v", y)
	}
}

func TestCreditOnlyIfStated(t *testing.T) {
	ch := []circuit.Channel{{Role: circuit.Supply, Block: "M1", Kind: "supply"}}
	l := NewLedger(ch, nil, 4)
	feed(t, l, []circuit.Sample{{T: 0, Power: []float64{2000}}, {T: 5, Power: []float64{2000}}, {T: 5, Power: []float64{-1000}}, {T: 10, Power: []float64{-1000}}})
	run := &DutyRun{Duty: &duty.Duty{Name: "d", Hours: 1000 * units.Hour, Repeats: true}, Balance: l.Balance(true)}
	y := year([]*DutyRun{run}, nil, 0)
	price := 0.2 / units.KilowattHour
	plain := Tariff{Price: price, CO2: 0.5 / units.KilowattHour}.YearCost(y)
	wants(t, "drawn", plain.Drawn, 200, 1e-12)
	wants(t, "credit", plain.Credit, 0, 0)
	wants(t, "CO2", plain.CO2, 500, 1e-12)
	paid := Tariff{Price: price, CreditReturned: true, CO2: math.NaN()}.YearCost(y)
	wants(t, "credit", paid.Credit, 100, 1e-12)
	wants(t, "net", paid.Net(), 100, 1e-12)
}

func TestPaybackEdges(t *testing.T) {
	cost := CostRange{Low: 20000, Likely: 26000, High: 35000, Given: true}
	p := SimplePayback(cost, 10000)
	wants(t, "likely", p.Likely, 2.6, 1e-12)
	if p.String() != "2.6 years (2.0 to 3.5)" {
		t.Errorf("%q", p)
	}
	for name, p := range map[string]Payback{
		"no saving": SimplePayback(cost, 0), "a loss": SimplePayback(cost, -5),
		"no cost": SimplePayback(CostRange{}, 100), "no price": SimplePayback(cost, math.NaN()),
	} {
		if p.None == "" || !math.IsNaN(p.Low) || !math.IsNaN(p.Likely) || !math.IsNaN(p.High) {
			t.Errorf("%s: %+v", name, p)
		}
	}
	nan := math.NaN()
	for cost, want := range map[CostRange]string{
		{Low: 99.9, Likely: 100, High: 100.2, Given: true}: "2.0 years",
		{Low: 100, Likely: 100, High: 110, Given: true}:    "2.0 years (2.0 to 2.2)",
	} {
		p := SimplePayback(cost, 50)
		if s, told := p.String(), paybackText(p); s != want || strings.Contains(told, "range") != strings.Contains(want, " to ") {
			t.Errorf("a cost of %v pays back in %q, told as %q", cost, s, told)
		}
	}
	if s := SimplePayback(CostRange{Low: nan, Likely: 100, High: nan, Given: true}, 50).String(); s != "2.0 years" {
		t.Errorf("likely alone: %q", s)
	}
	if s := SimplePayback(CostRange{Low: 100, Likely: nan, High: 150, Given: true}, 50).String(); s != "2.0 to 3.0 years" {
		t.Errorf("low and high: %q", s)
	}
}
