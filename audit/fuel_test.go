package audit

import (
	"bytes"
	"context"
	"encoding/json"
	"fmt"
	"math"
	"strings"
	"testing"
)

// engineAudit is a pump on an engine against an orifice, one hour a year; drive and energy are put in.
func engineAudit(energy, drive, rest string) string {
	return fmt.Sprintf(`format: barlitre/1
oil: {temperature: 50 C, density: 870 kg/m3, viscosity: 40 mPa s}
energy: {%s}
axes: {ram: linear}
duties:
- {name: work, hours: 1000 h, points: {t: [0 s, 5 s, 5 s, 10 s], ram.speed: [0.1 m/s, 0.1 m/s, -0.1 m/s, -0.1 m/s], ram.load: [5 kN, 5 kN, 5 kN, 5 kN]}}
- {name: with rests, hours: 100 h, points: {t: [0 s, 2 s, 2 s, 6 s, 6 s, 8 s, 8 s, 600 s], ram.speed: [0.1 m/s, 0.1 m/s, 0 m/s, 0 m/s, -0.1 m/s, -0.1 m/s, 0 m/s, 0 m/s], ram.load: [5 kN, 5 kN, 5 kN, 5 kN, 5 kN, 5 kN, 5 kN, 5 kN]}}
circuits:
- name: As found
  pump_at_rest: %s
  blocks:
    T1: {kind: tank}
    M1: {%s}
    P1: {kind: pump, displacement: 45 cm3/rev}
    RV1: {kind: relief, crack: 160 bar}
    V1: {kind: valve, follows: ram, nominal_flow: 60 L/min, centre: closed}
    C1: {kind: cylinder, axis: ram, hold: valve, bore: 80 mm, rod: 56 mm}
  lines: [M1.shaft - P1.shaft, P1.S - T1.T - RV1.T - V1.T, P1.P - RV1.P - V1.P, V1.A - C1.A, V1.B - C1.B]
`, energy, rest, drive)
}

const engineDrive = "kind: engine, rated_power: 30 kW, speed: 1480 rpm, droop: 0"

func solvedText(t *testing.T, text string) *Solution {
	t.Helper()
	f, found := Parse([]byte(text), nil, "")
	if len(found) > 0 {
		t.Fatal(found)
	}
	s, err := Solve(context.Background(), f, Options{})
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// Diesel of 830.565 kg/m³ and 43.027 MJ/kg holds 35.737 MJ = 9.927 kWh a litre and gives 2.66155 kg CO2e (UK government
// conversion factors 2025). 1.60 EUR/L are 0.16118 EUR/kWh; 1.926 EUR/kg the same within its digits. By hand.
func TestFuelIsPricedAsFuel(t *testing.T) {
	s := solvedText(t, engineAudit("price: 0.30 EUR/kWh, co2: 0.1 kg/kWh, fuel_price: 1.60 EUR/L", engineDrive, "keep"))
	c := s.Circuits[0]
	burnt := c.Year.Fuel.Total()
	if burnt <= 0 || math.Abs(burnt-c.Year.Drawn.Total()) > 1e-9*burnt {
		t.Fatalf("%g J of fuel of %g J drawn", burnt, c.Year.Drawn.Total())
	}
	litres := burnt / (830.565 * 43.027e6) * 1e3
	within := func(what string, got, want, share float64) {
		t.Helper()
		if !(math.Abs(got-want) <= share*want) {
			t.Errorf("%s is %g, want %g", what, got, want)
		}
	}
	within("cost", c.Money.Drawn, litres*1.60, 1e-9)
	within("CO2", c.Money.CO2, litres*2.66155, 1e-9)
	within("a kWh of fuel", s.unitPrice(c)*3.6e6, 0.16118, 1e-4)
	kilos := solvedText(t, engineAudit("fuel_price: 1.926 EUR/kg", engineDrive, "keep"))
	within("by the kilogram", kilos.Circuits[0].Money.Drawn, c.Money.Drawn, 5e-4)
	if kilos.Tariff.Currency != "EUR" {
		t.Errorf("currency %q", kilos.Tariff.Currency)
	}
	own := solvedText(t, engineAudit("fuel_price: 1.60 EUR/L, fuel_co2: 2.5 kg/L, fuel_density: 0.80 kg/L, fuel_heating_value: 44 MJ/kg", engineDrive, "keep"))
	within("of a fuel of one's own", own.Circuits[0].Money.CO2, burnt/(800*44e6)*1e3*2.5, 1e-9)

	var out bytes.Buffer
	if err := s.Result().Write(&out); err != nil {
		t.Fatal(err)
	}
	var r Result
	if err := json.Unmarshal(out.Bytes(), &r); err != nil {
		t.Fatal(err)
	}
	within("litres in the result", r.Circuits[0].Year.FuelLitres, litres, 1e-9)
	text := fmt.Sprint(s.Report(0))
	for _, want := range []string{"fuel a year", "E_fuel / (ρ · H)", "What engines burn is counted as fuel", "E_fuel · price of fuel"} {
		if !strings.Contains(text, want) {
			t.Errorf("the report lacks %q", want)
		}
	}
}

// Without a price of its fuel an engine has no bill, and is told so: it is not priced like electricity.
func TestFuelWithoutPrice(t *testing.T) {
	s := solvedText(t, engineAudit("price: 0.30 EUR/kWh", engineDrive, "keep"))
	if m := s.Circuits[0].Money.Drawn; !math.IsNaN(m) {
		t.Errorf("costs %g", m)
	}
	if text := fmt.Sprint(s.Circuits[0].Findings); !strings.Contains(text, "fuel_price") {
		t.Errorf("findings: %s", text)
	}
	e := solvedText(t, engineAudit("price: 0.30 EUR/kWh", "kind: electric_motor, rated_power: 22 kW, efficiency_class: IE3", "keep"))
	c := e.Circuits[0]
	if c.Year.Fuel.Total() != 0 || math.Abs(c.Money.Drawn-c.Year.Drawn.Total()/3.6e6*0.30) > 1e-9*c.Money.Drawn {
		t.Errorf("electric: %g EUR, %g J of fuel", c.Money.Drawn, c.Year.Fuel.Total())
	}
}

func TestFuelWrong(t *testing.T) {
	for energy, want := range map[string]string{
		"fuel_price: 1.6 EUR/kWh": "fuel_price", "fuel_price: 1.6 USD/L, price: 0.2 EUR/kWh": "in USD", "fuel_co2: -1 kg/L": "above 0", "fuel_cost: 2 EUR/L": "fuel_c",
	} {
		_, found := Parse([]byte(engineAudit(energy, engineDrive, "keep")), nil, "")
		if !strings.Contains(fmt.Sprint(found), want) {
			t.Errorf("%s: %v", energy, found)
		}
	}
}

// Stopping between cycles: two starts in ten minutes, each (1 + 2)·½·J·ω² (J = 0.5 kg m², 1480 rpm: 36.03 kJ), are
// drawn, lost to the air and counted in the year; the balance closes, and the file's edit of the fuel price is kept.
func TestStartsAreBooked(t *testing.T) {
	drive := "kind: electric_motor, rated_power: 22 kW, efficiency_class: IE3, inertia: 0.5 kg m2"
	s := solvedText(t, engineAudit("price: 0.30 EUR/kWh", drive, "stop"))
	b := s.Circuits[0].Duties[1].Balance
	w := 1480 * 2 * math.Pi / 60
	want := 2 * 3 * 0.5 * w * w / 2
	got := 0.0
	for _, l := range b.Losses {
		if l.Kind == "starting" {
			got += l.Energy.Total()
		}
	}
	if math.Abs(got-want) > 1e-9*want {
		t.Errorf("starts lose %g J, want %g J", got, want)
	}
	if x := b.Closure(); !(x < 1e-9) {
		t.Errorf("closure %g", x)
	}
	found := false
	for _, g := range s.Result().Circuits[0].Duties[1].Gates {
		found = found || g.Name == "starts an hour" && math.Abs(float64(g.Value)-12) < 1e-9 && !g.Passed
	}
	if !found {
		t.Errorf("no gate of the starts in %+v", s.Result().Circuits[0].Duties[1].Gates)
	}
	if page := s.Report(0).Circuits[0].Duties[1]; !strings.Contains(fmt.Sprint(page.Gates), "starts an hour") {
		t.Errorf("gates in the report: %v", page.Gates)
	}
	f, _ := Parse([]byte(engineAudit("fuel_price: 1.60 EUR/L", engineDrive, "keep")), nil, "")
	if err := f.Set("energy.fuel_price", "1.75 EUR/L"); err != nil || f.FuelPrice.SI != 1750 {
		t.Errorf("%v, %g", err, f.FuelPrice.SI)
	}
}

// The report of a circuit that burns fuel denies no money that it names, and averages nothing that no meter sees.
func TestFuelReportAgreesWithItself(t *testing.T) {
	s := solvedText(t, engineAudit("fuel_price: 1.60 EUR/L", engineDrive, "keep"))
	text := fmt.Sprint(s.Report(0))
	if strings.Contains(text, "no money is shown") || !strings.Contains(text, "cost of energy a year") {
		t.Errorf("money named and denied: %s", text)
	}
	c := s.Circuits[0]
	mean := figureNamed(peakFigures(printer{}, c.Duties[0]), "15-minute mean of power drawn")
	if mean.Text != "n/a" || known(demandFigure(printer{}, c).Value) {
		t.Errorf("the mains are not used, and their mean is %s", mean.Text)
	}
	pair := &Comparison{Base: c, Proposal: c}
	if got := pair.saving("K", "price", "one", "difference", ""); got.Formula != "ΔK = K_before − K_after" || got.Numbers != "difference" {
		t.Errorf("saving of fuel: %+v", got)
	}
	e := solvedText(t, engineAudit("co2: 0.1 kg/kWh", "kind: electric_motor, rated_power: 22 kW, efficiency_class: IE3", "keep"))
	if text := fmt.Sprint(e.Report(0)); !strings.Contains(text, "so no money is shown") {
		t.Error("an electric circuit without a price does not say so")
	}
	pair = &Comparison{Base: e.Circuits[0], Proposal: e.Circuits[0]}
	if got := pair.saving("K", "price", "one", "difference", ""); got.Formula != "ΔK = ΔE · price" || got.Numbers != "one" {
		t.Errorf("saving of electricity: %+v", got)
	}
	if m := demandFigure(printer{}, e.Circuits[0]); !(m.Value > 0) {
		t.Errorf("mean of an electric circuit: %v", m.Value)
	}
}
