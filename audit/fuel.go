package audit

import (
	"fmt"
	"math"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/circuit"
	"barlitre/machines/units"
)

// Fuel is what an engine burns, as the audit file states it.
type Fuel struct {
	Price        float64 // money/J of heating value; NaN when not given
	CO2          float64 // kg/J
	Density      float64 // kg/m³
	HeatingValue float64 // J/kg, lower
}

// Diesel as the UK government's conversion factors of 2025 state it (100 % mineral diesel: 830.565 kg/m³, 43.027 GJ/t,
// 2.66155 kg CO2e a litre), read in print.
const (
	dieselDensity = 830.565  // kg/m³
	dieselHeating = 43.027e6 // J/kg
	dieselCO2     = 2661.55  // kg/m³
	dieselSource  = "100 % mineral diesel, UK government conversion factors 2025"
)

// Volume returns the volume [m³] that holds energy e [J].
func (f Fuel) Volume(e float64) float64 { return e / (f.Density * f.HeatingValue) }

// fuel takes from the file what a fuel costs and emits; what is not given is that of mineral diesel, but for the price.
func (f *File) fuel() Fuel {
	or := func(v circuit.Value, has bool, usual float64) float64 {
		if has {
			return v.SI
		}
		return usual
	}
	out := Fuel{Price: math.NaN(), Density: or(f.FuelDensity, f.HasFuelDensity, dieselDensity), HeatingValue: or(f.FuelHeating, f.HasFuelHeating, dieselHeating)}
	out.CO2 = or(f.FuelCO2, f.HasFuelCO2, dieselCO2) / (out.Density * out.HeatingValue)
	if f.HasFuelPrice {
		out.Price = f.FuelPrice.SI / out.HeatingValue
		if f.FuelPrice.Unit.Dim == units.VolumePrice {
			out.Price /= out.Density
		}
	}
	return out
}

// fuelPriceDim tells whether a price of fuel is by mass or by volume.
func fuelPriceDim(text string) units.Dim {
	_, per, _ := strings.Cut(text, "/")
	if _, err := units.ParseUnit(strings.TrimSpace(per), units.Mass); err == nil {
		return units.MassPrice
	}
	return units.VolumePrice
}

// fuelKeys reads what the section energy says of fuel.
func (r *reader) fuelKeys(s scope, f map[string]entry) {
	a := r.file
	if e, ok := f["fuel_price"]; ok {
		if a.FuelPrice, a.HasFuelPrice = r.value(s, e.value, "fuel_price", fuelPriceDim(priceText(e.value))); a.HasFuelPrice {
			r.money(s, e.value, "fuel_price", a.FuelPrice)
		}
	}
	a.FuelCO2, a.HasFuelCO2 = r.positive(s, f, "fuel_co2", units.Density)
	a.FuelDensity, a.HasFuelDensity = r.positive(s, f, "fuel_density", units.Density)
	a.FuelHeating, a.HasFuelHeating = r.positive(s, f, "fuel_heating_value", units.SpecificEnergy)
}

// priceText is the text of a quantity, plain or in a mapping.
func priceText(n *yaml.Node) string {
	if v := child(n, "value"); v != nil {
		n = v
	}
	if n == nil {
		return ""
	}
	return n.Value
}

// Burns reports whether a circuit of the file has an engine.
func (f *File) Burns() bool {
	for i := range f.Circuits {
		if burns(f.Circuits[i].Circuit) {
			return true
		}
	}
	return false
}

func burns(c *circuit.Circuit) bool {
	for i := range c.Blocks {
		if c.Blocks[i].Kind == "engine" {
			return true
		}
	}
	return false
}

// unitPrice is what a joule drawn by a circuit costs on average: the price of energy, or where engines
// burn fuel, what the year costs over what it draws.
func (s *Solution) unitPrice(c *CircuitRun) float64 {
	switch {
	case !burns(c.Circuit):
		return s.Tariff.Price
	case c.Year == nil || c.Year.Drawn.Total() == 0:
		return s.Tariff.Fuel.Price
	}
	return c.Money.Drawn / c.Year.Drawn.Total()
}

// fuelRemarks asks for what an engine's fuel costs.
func (s *Solution) fuelRemarks(c *CircuitRun) []circuit.Finding {
	if burns(c.Circuit) && known(s.Tariff.Price) && !known(s.Tariff.Fuel.Price) {
		return []circuit.Finding{{Level: circuit.Note, Circuit: c.Circuit.Name,
			Text: "an engine burns fuel, whose price is not given: no money is named for this circuit. Give its price (energy: {fuel_price: ...}), by the litre or kilogram"}}
	}
	return nil
}

// fuelFigure is what engines burn in a year.
func (s *Solution) fuelFigure(p printer, c *CircuitRun) Figure {
	f, e := s.Tariff.Fuel, c.Year.Fuel.Total()
	v := f.Volume(e)
	return Figure{"fuel a year", v, p.in(v, units.Volume, 4), Calculation{"V = E_fuel / (ρ · H)",
		fmt.Sprintf("%s / (%s × %s)", p.kWh(e), p.in(f.Density, units.Density, 4), p.in(f.HeatingValue, units.SpecificEnergy, 4)),
		"Willans line of the engine; density and heating value from " + fromFile + ", else " + dieselSource}}
}

// fuelCost opens the cost of a year with fuel in it.
func (s *Solution) fuelCost(p printer, c *CircuitRun) Calculation {
	f, burnt := s.Tariff.Fuel, c.Year.Fuel.Total()
	text := fmt.Sprintf("%s × %s", p.kWh(burnt), p.price(f.Price))
	if rest := c.Year.Drawn.Total() - burnt; rest > 1e-9*burnt {
		text += fmt.Sprintf(" + %s × %s", p.kWh(rest), p.price(s.Tariff.Price))
	}
	return Calculation{"K = E_fuel · price of fuel + E_mains · price", text + " = " + p.money(c.Money.Drawn),
		fmt.Sprintf("marginal prices from %s; a litre of fuel holds %s", fromFile, p.kWh(f.Density*f.HeatingValue*units.Litre))}
}

// co2Numbers are the numbers behind the emissions of a year.
func (s *Solution) co2Numbers(p printer, c *CircuitRun) string {
	burnt := c.Year.Fuel.Total()
	if burnt == 0 {
		return p.kWh(c.Year.Drawn.Total()) + " × " + s.Tariff.co2Text()
	}
	text := p.kWh(burnt) + " × " + units.Number(s.Tariff.Fuel.CO2*units.KilowattHour, 3) + "\u202fkg/kWh of fuel"
	if rest := c.Year.Drawn.Total() - burnt; rest > 1e-9*burnt {
		text += " + " + p.kWh(rest) + " × " + s.Tariff.co2Text()
	}
	return text
}

// fuelAssumption says what fuel is taken to be.
func (s *Solution) fuelAssumption(p printer) string {
	f := s.Tariff.Fuel
	text := fmt.Sprintf("What engines burn is counted as fuel of %s and a heating value of %s, with %s of CO2 a litre (not given: %s).",
		p.in(f.Density, units.Density, 4), p.in(f.HeatingValue, units.SpecificEnergy, 4), p.mass(f.CO2*f.Density*f.HeatingValue*units.Litre), dieselSource)
	if known(f.Price) {
		return text + fmt.Sprintf(" Its energy costs %s.", p.price(f.Price))
	}
	return text + " Its price is not given."
}

// saving opens a saving: a factor times the energy saved, or where fuel is burnt, which has a factor of its own, the
// difference of both years.
func (c *Comparison) saving(symbol, factor, one, difference, source string) Calculation {
	if burns(c.Base.Circuit) || burns(c.Proposal.Circuit) {
		return Calculation{"Δ" + symbol + " = " + symbol + "_before − " + symbol + "_after", difference, source}
	}
	return Calculation{"Δ" + symbol + " = ΔE · " + factor, one, source}
}
