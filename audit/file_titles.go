package audit

import "barlitre/circuit"

// titles are what the window calls what stands under the keys of a section, by section. The oil, the section heat and the
// kinds of block have tables of their own; a key that no table has is called as it is written.
var titles = map[string]map[string]string{
	"":       {"report": "Title block", "site_check": "Site check"},
	"site":   {"name": "Site"},
	"report": {"owner": "Legal owner", "approved": "Approved by"},
	"air":    {"temperature": "Air temperature"},
	"energy": energyTitles,
	"oil": {"viscosity_40": "Viscosity at 40 °C", "viscosity_100": "Viscosity at 100 °C", "specific_heat": "Specific heat",
		"bulk_modulus": "Bulk modulus"},
	"duty":     {"hours": "Hours a year", "repeats": "Repeats without pause", "step": "Time step", "file": "Recording", "instants": "Instants of standstill"},
	"circuit":  {"pump_at_rest": "Pumps while every axis stands", "standby": "Drawn while off", "retrofit_cost": "Cost of the retrofit"},
	"calendar": {"weeks": "Weeks a year", "stops": "Planned stops", "in_breaks": "In breaks", "idle_time": "Idle within shifts", "hold_time": "Hold within shifts", "standby": "Drawn while off"},
	"block":    {"kind": "Kind of block", "at": "Place on the sheet", "turn": "Quarter turns", "mirror": "Mirrored"},
}

var energyTitles = map[string]string{
	"price": "Price of energy", "co2": "CO2 factor", "co2_year": "Year of the CO2 factor", "co2_basis": "Basis of the CO2 factor",
	"credit_returned": "Returned energy is paid for", "fuel_price": "Price of fuel", "fuel_co2": "CO2 of fuel",
	"fuel_density": "Density of fuel", "fuel_heating_value": "Heating value of fuel",
}

// titled returns the scope with what its keys are called.
func (s scope) titled(section string) scope {
	s.title = func(key string) string { return titles[section][key] }
	return s
}

// ofKind returns the scope with what the parameters of a kind of block are called.
func (s scope) ofKind(kind *circuit.Kind) scope {
	s.title = func(key string) string { return titleOf(kind, key) }
	return s
}

func titleOf(kind *circuit.Kind, key string) string {
	if p := kind.Param(key); p != nil {
		return p.Title
	}
	return titles["block"][key]
}

func oilTitle(key string) string {
	for _, v := range (&File{}).OilValues() {
		if v.Key == key {
			return v.Title
		}
	}
	return titles["oil"][key]
}

func heatTitle(key string) string {
	if k := HeatKeyNamed(key); k != nil {
		return k.Title
	}
	return ""
}

// guess is guess for the keys of the scope.
func (s scope) guess(key string, known []string) string {
	if s.title == nil {
		return guess(key, known)
	}
	return guessOf(key, known, s.title)
}

// named names a key in a text: its title, with the key in brackets.
func (s scope) named(key string) string {
	if s.title == nil {
		return key
	}
	title := s.title(key)
	if title == "" {
		return key
	}
	return circuit.WithWord(title, key)
}
