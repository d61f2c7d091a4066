package pdf

import (
	"fmt"
	"math"

	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// parameters prints every value with its origin: those of the audit, then those of
// each circuit, block by block.
func (l *layout) parameters() {
	l.para("Shaded rows are defaults that nobody typed. Values stand in the unit they were typed in.", l.small())
	l.table(l.inputs())
	for i := range l.r.Circuits {
		c := &l.r.Circuits[i]
		if len(c.Parameters) == 0 {
			continue
		}
		l.heading(2, c.Name, 32)
		l.table(blocks(c.Parameters))
	}
}

func valueColumns() []column {
	return []column{{"", false}, {"value", true}, {"low", true}, {"high", true}, {"origin", false}, {"note", false}}
}

// blocks groups the values of a circuit by block.
func blocks(rows []audit.ParameterRow) table {
	t := table{cols: valueColumns()}
	last := ""
	for _, p := range rows {
		if p.Block != last {
			t.rows = append(t.rows, row{cells: []string{p.Block + " · " + p.Kind}, group: true})
			last = p.Block
		}
		name := p.Name
		if p.Symbol != "" {
			name += ", " + p.Symbol
		}
		t.rows = append(t.rows, row{cells: []string{name, p.Value, p.Low, p.High, p.Origin, p.Note}, tint: p.Default})
	}
	return t
}

// inputs lists what the audit file says of oil, air, energy and duties.
func (l *layout) inputs() table {
	f := l.s.File
	t := table{cols: valueColumns()}
	value := func(name string, has bool, v circuit.Value) {
		if has {
			t.rows = append(t.rows, row{cells: []string{name, valueText(v), limit(v, v.Low), limit(v, v.High), origin(v), v.Note}})
		}
	}
	word := func(name, text, note string) {
		if text != "" {
			t.rows = append(t.rows, row{cells: []string{name, text, "", "", "", note}})
		}
	}
	group := func(name string) { t.rows = append(t.rows, row{cells: []string{name}, group: true}) }
	group("Oil and air")
	word("grade of the oil", f.Oil.Grade, "")
	value("oil temperature", f.Oil.HasTemperature, f.Oil.Temperature)
	value("density of the oil", f.Oil.HasDensity, f.Oil.Density)
	value("dynamic viscosity", f.Oil.HasViscosity, f.Oil.Viscosity)
	value("kinematic viscosity at 40\u202f°C", f.Oil.HasViscosity40, f.Oil.Viscosity40)
	value("kinematic viscosity at 100\u202f°C", f.Oil.HasViscosity100, f.Oil.Viscosity100)
	value("viscosity index", f.Oil.HasVI, f.Oil.VI)
	c := l.s.Conditions
	derived := "as it went into the balance"
	word("density in use", units.Format(c.Density, units.Preferred(units.Density, l.r.System), 4), derived)
	word("dynamic viscosity in use", units.Format(c.Viscosity, units.Preferred(units.DynamicViscosity, l.r.System), 4), derived)
	value("air temperature", f.HasAir, f.Air)
	if f.HasPrice || f.HasCO2 || f.HasFuelPrice || f.HasFuelCO2 {
		group("Energy")
		value("price of energy", f.HasPrice, f.Price)
		value("CO2 of energy drawn", f.HasCO2, f.CO2)
		value("price of fuel", f.HasFuelPrice, f.FuelPrice)
		value("CO2 of fuel", f.HasFuelCO2, f.FuelCO2)
		value("density of fuel", f.HasFuelDensity, f.FuelDensity)
		value("heating value of fuel", f.HasFuelHeating, f.FuelHeating)
	}
	if len(f.Duties) > 0 {
		group("Duties")
	}
	for i, d := range f.Duties {
		from := "typed in the audit file"
		if i < len(f.Sources) && f.Sources[i].File != "" {
			from = f.Sources[i].File
		}
		word(d.Name, units.Number(d.Hours/units.Hour, 4)+"\u202fh a year", fmt.Sprintf("%d rows, %s", len(d.Time), from))
	}
	return t
}

// valueText shows a value as it was typed, else in the unit it was typed in.
func valueText(v circuit.Value) string {
	if v.Text != "" {
		return v.Text
	}
	return units.Format(v.SI, v.Unit, 5)
}

func limit(v circuit.Value, si float64) string {
	if math.IsNaN(si) {
		return ""
	}
	u := v.Unit
	if u.Factor == 0 {
		u.Factor = 1
	}
	return units.Format(si, u, 4)
}

func origin(v circuit.Value) string {
	if v.Origin == circuit.NotStated {
		return "not stated"
	}
	return string(v.Origin)
}
