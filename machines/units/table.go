package units

import "sync"

// Unit is one unit of one quantity: SI value = x·Factor + Offset.
type Unit struct {
	Symbol         string // as written in files, ASCII: "cm3/rev"
	Dim            Dim
	Factor, Offset float64 // Offset is non-zero for temperatures only
	System         System
}

// entry is a unit in the table: aliases are other spellings that are read but never written.
type entry struct {
	symbol  string
	factor  float64
	system  System
	aliases []string
}

// quantity declares a Dim: its units in the order messages list them, the preferred
// symbols (Metric, US, SI) and, for quotients, the two quantities it is made of.
type quantity struct {
	name      string
	preferred [3]string
	num, den  Dim // quotient when den is not Ratio
	units     []entry
}

func al(names ...string) []string { return names }

var quantities = [dimCount]quantity{
	Ratio: {name: "ratio", units: []entry{{"", 1, SI, nil}, {"%", 0.01, Metric, al("percent")}}},
	Count: {name: "count", units: []entry{{"", 1, SI, nil}}},
	Pressure: {name: "pressure", preferred: [3]string{"bar", "psi", "Pa"}, units: []entry{
		{"bar", Bar, Metric, al("bar(g)", "barg")}, {"Pa", 1, SI, nil}, {"kPa", Kilopascal, Metric, nil},
		{"MPa", Megapascal, Metric, nil}, {"psi", PSI, US, al("psi(g)", "psig", "PSI", "lbf/in2")},
		{"mbar", 100, Metric, nil}, {"hPa", 100, Metric, nil}, {"GPa", 1e9, Metric, nil}, {"N/mm2", 1e6, Metric, nil},
		{"kp/cm2", Technical, Metric, al("at", "kgf/cm2")}}},
	Flow: {name: "flow", preferred: [3]string{"L/min", "gpm", "m3/s"}, units: []entry{
		{"L/min", LitrePerMinute, Metric, al("l/min", "lpm", "LPM", "dm3/min")}, {"cm3/s", 1e-6, Metric, al("mL/s", "ml/s", "cc/s")},
		{"m3/h", 1.0 / 3600, Metric, nil}, {"m3/s", 1, SI, nil}, {"gpm", GallonPerMin, US, al("GPM", "gal/min", "US gpm")},
		{"cm3/min", 1e-6 / 60, Metric, al("mL/min", "ml/min", "cc/min")}, {"L/s", 1e-3, Metric, al("l/s", "dm3/s")},
		{"L/h", 1e-3 / 3600, Metric, al("l/h")}, {"cis", CubicInch, US, al("in3/s")}, {"cim", CubicInch / 60, US, al("in3/min")}}},
	DisplacementPerRev: {name: "displacement", preferred: [3]string{"cm3/rev", "in3/rev", "m3/rad"}, units: []entry{
		{"cm3/rev", CubicCentimetrePerRev, Metric, al("cc/rev", "mL/rev", "ml/rev", "cm3/r", "ccm/rev")},
		{"L/rev", 1e-3 / Revolution, Metric, al("l/rev", "dm3/rev")}, {"in3/rev", CubicInchPerRev, US, al("cir", "in3/r")},
		{"cm3/rad", 1e-6, Metric, al("cc/rad")}, {"m3/rad", 1, SI, nil}}},
	Velocity: {name: "velocity", preferred: [3]string{"m/s", "in/s", "m/s"}, units: []entry{
		{"m/s", 1, SI, nil}, {"mm/s", 1e-3, Metric, nil}, {"in/s", Inch, US, nil}, {"ft/s", Foot, US, nil},
		{"cm/s", 1e-2, Metric, nil}, {"m/min", 1.0 / 60, Metric, nil}, {"ft/min", Foot / 60, US, nil}, {"km/h", 1 / 3.6, Metric, nil}}},
	Acceleration: {name: "acceleration", preferred: [3]string{"m/s2", "ft/s2", "m/s2"}, units: []entry{
		{"m/s2", 1, SI, nil}, {"mm/s2", 1e-3, Metric, nil}, {"ft/s2", Foot, US, nil}, {"in/s2", Inch, US, nil}}},
	AngularSpeed: {name: "speed of rotation", preferred: [3]string{"rpm", "rpm", "rad/s"}, units: []entry{
		{"rpm", RPM, Metric, al("RPM", "r/min", "rev/min", "U/min")}, {"1/min", RPM, Metric, al("/min", "min-1")},
		{"rad/s", 1, SI, nil}, {"rev/s", Revolution, Metric, al("1/s", "/s", "s-1", "r/s")}, {"deg/s", Degree, Metric, al("°/s")}}},
	Force: {name: "force", preferred: [3]string{"kN", "lbf", "N"}, units: []entry{
		{"N", 1, SI, nil}, {"kN", 1e3, Metric, nil}, {"MN", 1e6, Metric, nil}, {"lbf", LbForce, US, nil},
		{"daN", 10, Metric, nil}, {"kp", 9.80665, Metric, al("kgf")}}},
	Torque: {name: "torque", preferred: [3]string{"N m", "lbf ft", "N m"}, units: []entry{
		{"N m", 1, SI, al("Nm")}, {"kN m", 1e3, Metric, al("kNm")}, {"lbf ft", Foot * LbForce, US, al("ft lbf", "lb ft", "ft lb")},
		{"lbf in", Inch * LbForce, US, al("in lbf", "lb in", "in lb")}, {"kp m", 9.80665, Metric, al("kpm", "kgf m")}}},
	Length: {name: "length", preferred: [3]string{"mm", "in", "m"}, units: []entry{
		{"mm", 1e-3, Metric, nil}, {"cm", 1e-2, Metric, nil}, {"m", 1, SI, nil}, {"in", Inch, US, al("\"")}, {"ft", Foot, US, nil},
		{"um", 1e-6, Metric, al("µm", "μm")}, {"km", 1e3, Metric, nil}}},
	Area: {name: "area", preferred: [3]string{"cm2", "in2", "m2"}, units: []entry{
		{"mm2", 1e-6, Metric, nil}, {"cm2", SquareCM, Metric, nil}, {"m2", 1, SI, nil}, {"in2", sqIn, US, nil}, {"ft2", Foot * Foot, US, nil}}},
	Volume: {name: "volume", preferred: [3]string{"L", "gal", "m3"}, units: []entry{
		{"L", Litre, Metric, al("l", "dm3")}, {"cm3", 1e-6, Metric, al("mL", "ml", "cc")}, {"m3", 1, SI, nil},
		{"gal", Gallon, US, al("US gal")}, {"in3", CubicInch, US, nil}, {"mm3", 1e-9, Metric, nil}, {"ft3", Foot * Foot * Foot, US, nil}}},
	Angle: {name: "angle", preferred: [3]string{"deg", "deg", "rad"}, units: []entry{
		{"deg", Degree, Metric, al("°")}, {"rad", 1, SI, nil}, {"rev", Revolution, Metric, al("r")}}},
	Time: {name: "time", preferred: [3]string{"s", "s", "s"}, units: []entry{
		{"s", 1, SI, al("sec")}, {"ms", 1e-3, Metric, nil}, {"min", Minute, Metric, nil}, {"h", Hour, Metric, al("hr", "hours")},
		{"d", Day, Metric, al("day", "days")}, {"a", Year, Metric, al("year", "years", "yr")}}},
	Mass: {name: "mass", preferred: [3]string{"kg", "lb", "kg"}, units: []entry{
		{"kg", 1, SI, nil}, {"g", 1e-3, Metric, nil}, {"t", 1e3, Metric, nil}, {"lb", Pound, US, al("lbm")}}},
	Inertia: {name: "moment of inertia", preferred: [3]string{"kg m2", "lb ft2", "kg m2"}, units: []entry{
		{"kg m2", 1, SI, al("kgm2")}, {"g m2", 1e-3, Metric, nil}, {"kg cm2", 1e-4, Metric, nil}, {"lb ft2", Pound * Foot * Foot, US, nil}}},
	Power: {name: "power", preferred: [3]string{"kW", "hp", "W"}, units: []entry{
		{"kW", Kilowatt, Metric, nil}, {"W", 1, SI, nil}, {"MW", 1e6, Metric, nil}, {"hp", Horsepower, US, al("HP")},
		{"PS", MetricHP, Metric, al("ch", "cv")}, {"Btu/h", Btu / Hour, US, al("BTU/h")}, {"Btu/min", Btu / 60, US, al("BTU/min")},
		{"kcal/h", 4186.8 / Hour, Metric, nil}, {"mW", 1e-3, Metric, nil}}},
	Energy: {name: "energy", preferred: [3]string{"kJ", "kWh", "J"}, units: []entry{
		{"kJ", Kilojoule, Metric, nil}, {"J", 1, SI, nil}, {"MJ", 1e6, Metric, nil}, {"kWh", KilowattHour, Metric, nil},
		{"MWh", 3.6e9, Metric, nil}, {"Wh", 3600, Metric, nil}, {"GJ", 1e9, Metric, nil}, {"Btu", Btu, US, al("BTU")}}},
	Temperature: {name: "temperature", preferred: [3]string{"C", "F", "K"}, units: []entry{
		{"C", 1, Metric, al("°C", "℃", "degC")}, {"K", 1, SI, nil}, {"F", 5.0 / 9, US, al("°F", "℉", "degF")}}},
	TemperatureDifference: {name: "temperature difference", preferred: [3]string{"K", "F", "K"}, units: []entry{
		{"K", 1, SI, al("C", "°C", "℃", "degC")}, {"F", 5.0 / 9, US, al("°F", "℉", "degF")}}},
	Density: {name: "density", preferred: [3]string{"kg/m3", "lb/ft3", "kg/m3"}, num: Mass, den: Volume, units: []entry{
		{"kg/m3", 1, SI, nil}, {"g/cm3", 1e3, Metric, al("kg/L", "kg/l", "kg/dm3", "g/mL", "g/ml")},
		{"lb/ft3", Pound / (Foot * Foot * Foot), US, nil}, {"lb/gal", Pound / Gallon, US, nil}}},
	DynamicViscosity: {name: "dynamic viscosity", preferred: [3]string{"mPa s", "cP", "Pa s"}, units: []entry{
		{"mPa s", MilliPascalSec, Metric, al("mPas")}, {"Pa s", 1, SI, al("Pas")}, {"cP", MilliPascalSec, US, nil}}},
	KinematicViscosity: {name: "kinematic viscosity", preferred: [3]string{"mm2/s", "cSt", "m2/s"}, units: []entry{
		{"mm2/s", SquareMMPerSec, Metric, nil}, {"cSt", SquareMMPerSec, US, al("cst")}, {"m2/s", 1, SI, nil}, {"in2/s", sqIn, US, nil}}},
	SpecificHeat: {name: "specific heat", preferred: [3]string{"kJ/(kg K)", "Btu/(lb F)", "J/(kg K)"}, units: []entry{
		{"J/(kg K)", 1, SI, al("J/kg K", "J/kgK", "J/(kgK)", "J/kg/K")},
		{"kJ/(kg K)", 1e3, Metric, al("kJ/kg K", "kJ/kgK", "kJ/(kgK)", "kJ/kg/K")},
		{"Btu/(lb F)", 4186.8, US, al("Btu/lb F", "BTU/(lb F)")}}},
	ThermalExpansion: {name: "thermal expansion", preferred: [3]string{"1/K", "1/F", "1/K"}, units: []entry{
		{"1/K", 1, SI, al("/K", "K-1", "1/C")}, {"1/F", 1.8, US, al("/F")}}},
	FlowResistance: {name: "flow resistance", preferred: [3]string{"bar per 100 L/min", "psi/gpm", "Pa s/m3"}, num: Pressure, den: Flow,
		units: []entry{{"bar/(L/min)", Bar / LitrePerMinute, Metric, nil}, {"bar per 100 L/min", Bar / (100 * LitrePerMinute), Metric, nil},
			{"psi/gpm", PSI / GallonPerMin, US, nil}, {"Pa s/m3", 1, SI, al("Pa/(m3/s)")}}},
	FlowConductance: {name: "leakage coefficient (flow per pressure)", preferred: [3]string{"L/min per 100 bar", "gpm per 1000 psi", "m3/(s Pa)"},
		num: Flow, den: Pressure,
		units: []entry{{"L/min per 100 bar", LitrePerMinute / (100 * Bar), Metric, nil}, {"L/min/bar", LitrePerMinute / Bar, Metric, nil},
			{"gpm per 1000 psi", GallonPerMin / (1000 * PSI), US, nil}, {"m3/(s Pa)", 1, SI, al("m3/s/Pa")}}},
	ViscousFriction: {name: "viscous friction", preferred: [3]string{"N s/m", "lbf s/in", "N s/m"}, num: Force, den: Velocity, units: []entry{
		{"N s/m", 1, SI, al("Ns/m")}, {"kN s/m", 1e3, Metric, al("kNs/m")}, {"lbf s/in", LbForce / Inch, US, nil}}},
	RotaryFriction: {name: "rotary friction", preferred: [3]string{"N m s/rad", "lbf ft s/rad", "N m s/rad"}, num: Torque, den: AngularSpeed,
		units: []entry{{"N m s/rad", 1, SI, al("Nms/rad", "N m s", "Nms")}, {"N m/rpm", 1 / RPM, Metric, nil},
			{"lbf ft s/rad", Foot * LbForce, US, nil}}},
	HeatCapacityRate: {name: "heat capacity rate", preferred: [3]string{"kW/K", "Btu/h/F", "W/K"}, num: Power, den: TemperatureDifference,
		units: []entry{{"kW/K", 1e3, Metric, nil}, {"W/K", 1, SI, nil}, {"Btu/h/F", Btu / Hour * 1.8, US, al("Btu/(h F)")}}},
	HeatCapacity: {name: "heat capacity", preferred: [3]string{"kJ/K", "Btu/F", "J/K"}, num: Energy, den: TemperatureDifference,
		units: []entry{{"kJ/K", 1e3, Metric, nil}, {"J/K", 1, SI, nil}, {"MJ/K", 1e6, Metric, nil}, {"Btu/F", Btu * 1.8, US, nil}}},
	HeatTransfer: {name: "heat transfer coefficient", preferred: [3]string{"W/(m2 K)", "Btu/(h ft2 F)", "W/(m2 K)"}, units: []entry{
		{"W/(m2 K)", 1, SI, al("W/m2K", "W/m2 K", "W/m2/K")},
		{"Btu/(h ft2 F)", Btu / Hour / (Foot * Foot) * 1.8, US, al("Btu/h ft2 F")}}},
	Money:       {name: "money", preferred: [3]string{"EUR", "USD", "EUR"}},
	EnergyPrice: {name: "energy price", preferred: [3]string{"EUR/kWh", "USD/kWh", "EUR/J"}, num: Money, den: Energy},
	PowerPrice:  {name: "power price", preferred: [3]string{"EUR/kW", "USD/kW", "EUR/W"}, num: Money, den: Power},
	VolumePrice: {name: "price by volume", preferred: [3]string{"EUR/L", "USD/gal", "EUR/m3"}, num: Money, den: Volume},
	CO2Factor: {name: "CO2 factor", preferred: [3]string{"kg/kWh", "kg/kWh", "kg/J"}, num: Mass, den: Energy, units: []entry{
		{"kg/kWh", 1 / KilowattHour, Metric, nil}, {"g/kWh", 1e-3 / KilowattHour, Metric, nil}, {"kg/MWh", 1e-3 / KilowattHour, Metric, al("t/GWh")},
		{"kg/MJ", 1e-6, Metric, nil}, {"kg/J", 1, SI, nil}}},
	MassPrice: {name: "price by mass", preferred: [3]string{"EUR/kg", "USD/lb", "EUR/kg"}, num: Money, den: Mass},
	Voltage:   {name: "voltage", preferred: [3]string{"V", "V", "V"}, units: []entry{{"V", 1, SI, nil}, {"kV", 1e3, Metric, nil}}},
	Current:   {name: "current", preferred: [3]string{"A", "A", "A"}, units: []entry{{"A", 1, SI, nil}, {"mA", 1e-3, Metric, nil}, {"kA", 1e3, Metric, nil}}},
	TorqueConstant: {name: "torque constant", preferred: [3]string{"N m/A", "lbf ft/A", "N m/A"}, num: Torque, den: Current,
		units: []entry{{"N m/A", 1, SI, al("Nm/A")}, {"lbf ft/A", Foot * LbForce, US, nil}}},
	ElectricResistance: {name: "electric resistance", preferred: [3]string{"ohm", "ohm", "ohm"}, units: []entry{
		{"ohm", 1, SI, al("Ω", "Ohm")}, {"mohm", 1e-3, Metric, al("mΩ")}}},
	Frequency: {name: "frequency", preferred: [3]string{"Hz", "Hz", "Hz"}, units: []entry{{"Hz", 1, SI, nil}}},
	SpecificEnergy: {name: "heating value", preferred: [3]string{"MJ/kg", "Btu/lb", "J/kg"}, num: Energy, den: Mass, units: []entry{
		{"MJ/kg", 1e6, Metric, nil}, {"kWh/kg", KilowattHour, Metric, nil}, {"Btu/lb", Btu / Pound, US, nil}, {"J/kg", 1, SI, nil}}},
}

func (e entry) unit(d Dim) Unit {
	u := Unit{Symbol: e.symbol, Dim: d, Factor: e.factor, System: e.system}
	if d == Temperature {
		switch e.symbol {
		case "C":
			u.Offset = ZeroCelsius
		case "F":
			u.Offset = ZeroCelsius - 32*e.factor
		}
	}
	return u
}

// ToSI converts x in this unit to SI.
func (u Unit) ToSI(x float64) float64 { return x*u.Factor + u.Offset }

// FromSI converts an SI value to this unit.
func (u Unit) FromSI(si float64) float64 { return (si - u.Offset) / u.Factor }

// Percent is the unit to show ratios in that readers know as percentages (settings,
// openings, efficiencies).
var Percent = Unit{Symbol: "%", Dim: Ratio, Factor: 0.01, System: Metric}

// Units lists the units of a quantity, the most usual first; the slice is the caller's. Money and
// prices have no list: any currency code of three capital letters is one.
func Units(d Dim) []Unit {
	if d < 0 || d >= dimCount {
		return nil
	}
	list := make([]Unit, 0, len(quantities[d].units))
	for _, e := range quantities[d].units {
		list = append(list, e.unit(d))
	}
	return list
}

// Preferred returns the unit a quantity is shown in. Ratios are plain numbers: use Percent
// where a percentage reads better. Money and prices come in EUR or USD as a stand-in; use the
// unit that was parsed, since no rate of exchange is known.
func Preferred(d Dim, s System) Unit {
	if d < 0 || d >= dimCount || s < Metric || s > SI {
		return Unit{Dim: d, Factor: 1, System: SI}
	}
	return preferred()[d][s]
}

// preferred is worked out once: pictures that move ask for it for every number in them.
var preferred = sync.OnceValue(func() *[dimCount][SI + 1]Unit {
	var list [dimCount][SI + 1]Unit
	for d := range list {
		for s := range list[d] {
			u, err := ParseUnit(quantities[d].preferred[s], Dim(d))
			if err != nil { // excluded by a test over all quantities and systems
				u = Unit{Dim: Dim(d), Factor: 1, System: SI}
			}
			list[d][s] = u
		}
	}
	return &list
})
