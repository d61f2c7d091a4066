package audit

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"barlitre/audit/thermal"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// HeatKey is one thing that an audit file may say of tank, cooler and air in its section heat.
type HeatKey struct {
	Key, Title string
	Group      string // under which a window lists it
	Dim        units.Dim
	Choices    []string // of a word; then Dim means nothing
	IsText     bool     // a table in one line
	Default    string   // "" = none, or it follows from other values
	Source     string   // of the default
	Positive   bool     // 0 and less are refused
	Zero       bool     // less than 0 is refused
	Text       string   // what it is for
}

// Words of the section.
const (
	noCooler, airCooler, waterCooler                     = "none", "air", "water"
	placeReturn, placeDrain, placeFlushing, placeOffLine = "return", "case drain", "flushing", "off-line"
	fanWithMachine, fanByThermostat                      = "with the machine", "by thermostat"
	airStill, airOrdinary, airForced                     = "still", "ordinary", "forced"
)

// HeatKeys lists what the section heat may say, in the order of the format.
var HeatKeys = []HeatKey{
	{Key: "tank_volume", Title: "Oil in the tank", Group: "Tank and machine", Dim: units.Volume, Positive: true, Text: "all oil that circulates, as filled"},
	{Key: "tank_area", Title: "Tank walls", Group: "Tank and machine", Dim: units.Area, Positive: true, Source: "walls of a cube without its base, 5·V^(2/3)", Text: "area that the air sweeps, without the base"},
	{Key: "air_movement", Title: "Air around the tank", Group: "Tank and machine", Choices: []string{airStill, airOrdinary, airForced}, Default: airOrdinary, Source: "common practice", Text: "sets the wall coefficient"},
	{Key: "wall_coefficient", Title: "Wall coefficient", Group: "Tank and machine", Dim: units.HeatTransfer, Positive: true, Source: "trade literature: 6 still, 12 ordinary, 24 forced air, W/(m² K)", Text: "heat given off by a square metre of wall and a kelvin"},
	{Key: "steel_mass", Title: "Steel", Group: "Tank and machine", Dim: units.Mass, Zero: true, Source: "a quarter of the heat capacity of the oil, common practice, no source", Text: "of tank, pipes and machine that gets as warm as the oil"},
	{Key: "steel_coupling", Title: "Coupling of the steel", Group: "Tank and machine", Dim: units.HeatCapacityRate, Positive: true, Source: "none: the steel is as warm as the oil", Text: "heat that passes from oil to steel at one kelvin; makes the steel a body of its own that lags behind"},
	{Key: "steel_area", Title: "Other warm surfaces", Group: "Tank and machine", Dim: units.Area, Zero: true, Default: "0 m2", Source: "a reserve", Text: "of pipes and machine that give heat to the air as the tank does"},

	{Key: "cooler", Title: "Cooler", Group: "Cooler", Choices: []string{noCooler, airCooler, waterCooler}, Default: noCooler, Text: "what takes the heat: air or water"},
	{Key: "cooler_place", Title: "Place", Group: "Cooler", Choices: []string{placeReturn, placeDrain, placeFlushing, placeOffLine}, Default: placeReturn, Source: "where a cooler is drawn in the circuit, else the usual place", Text: "the line whose oil passes it"},
	{Key: "cooler_rate", Title: "Capacity", Group: "Cooler", Dim: units.HeatCapacityRate, Positive: true, Text: "heat for each kelvin between entering oil and entering air or water"},
	{Key: "cooler_flow", Title: "At an oil flow of", Group: "Cooler", Dim: units.Flow, Positive: true, Source: "none: the capacity holds with plenty of oil", Text: "at which the capacity is stated"},
	{Key: "cooler_points", Title: "Capacity by flow", Group: "Cooler", IsText: true, Text: `in place of capacity: "20 L/min 0.15 kW/K, 60 L/min 0.3 kW/K"`},
	{Key: "water_temperature", Title: "Water enters at", Group: "Cooler", Dim: units.Temperature, Positive: true, Text: "of a water cooler"},
	{Key: "thermostat_opens", Title: "Thermostat opens at", Group: "Cooler", Dim: units.Temperature, Positive: true, Source: "none: all oil passes the cooler", Text: "below it the oil goes round the cooler"},
	{Key: "thermostat_full", Title: "Fully open at", Group: "Cooler", Dim: units.Temperature, Positive: true, Source: "5 K above opening, common practice", Text: "from there on all oil passes the cooler"},
	{Key: "fan_power", Title: "Fan or water pump draws", Group: "Cooler", Dim: units.Power, Zero: true, Source: "of an air cooler 1 kW for each kW/K, common practice, from memory (0.75 to 1.5); of a water cooler nothing", Text: "electricity for the cooling; booked with what the machine draws"},
	{Key: "fan", Title: "Fan runs", Group: "Cooler", Choices: []string{fanWithMachine, fanByThermostat}, Default: fanWithMachine, Source: "common practice", Text: "as long as the machine, or as far as the thermostat is open"},
	{Key: "fans", Title: "Number of fans", Group: "Cooler", Dim: units.Count, Positive: true, Default: "1", Source: "one fan", Text: "for the check with one of them off"},
	{Key: "loop_flow", Title: "Off-line loop: flow", Group: "Cooler", Dim: units.Flow, Positive: true, Text: "of the loop's own pump, while the machine runs"},
	{Key: "loop_power", Title: "Off-line loop: pump draws", Group: "Cooler", Dim: units.Power, Zero: true, Default: "0.5 kW", Source: "common practice, from memory (0.2 to 1 kW)", Text: "electricity of the loop's pump; all of it warms the oil"},

	{Key: "air_swing", Title: "Day and night", Group: "Air and times", Dim: units.TemperatureDifference, Zero: true, Default: "4 K", Source: "a hall in summer, common practice, no source", Text: "half of the difference between the warmest and the coldest hour; warmest at 15:00"},
	{Key: "hot_day", Title: "Hot day, mean", Group: "Air and times", Dim: units.Temperature, Positive: true, Default: "35 C", Source: "hall at 35 to 40 °C, common practice", Text: "mean air temperature of the hottest day, where the cooler draws its air"},
	{Key: "winter_start", Title: "Winter start", Group: "Air and times", Dim: units.Temperature, Positive: true, Default: "5 C", Source: "unheated hall, assumed", Text: "of oil, steel and air on the coldest morning"},
	{Key: "shift_start", Title: "Shift begins", Group: "Air and times", Dim: units.Time, Zero: true, Default: "6 h", Source: "assumed", Text: "hours after midnight"},
	{Key: "shift_hours", Title: "Hours a day", Group: "Air and times", Dim: units.Time, Positive: true, Default: "16 h", Source: "two shifts, assumed", Text: "in which the machine runs, with its duties in the mix of the year"},
	{Key: "shift_days", Title: "Days a week", Group: "Air and times", Dim: units.Count, Positive: true, Default: "5", Source: "assumed", Text: "from Monday on, 1 to 7"},

	{Key: "wanted", Title: "Oil wanted at most", Group: "Limits", Dim: units.Temperature, Positive: true, Default: "55 C", Source: "industrial hydraulics 50 to 60 °C, common practice", Text: "in the tank; the cooler is sized for it"},
	{Key: "alarm", Title: "Alarm", Group: "Limits", Dim: units.Temperature, Positive: true, Default: "65 C", Source: "common practice, no source", Text: "oil temperature at which the machine warns or stops"},
	{Key: "work_viscosity", Title: "Ready to work below", Group: "Limits", Dim: units.KinematicViscosity, Positive: true, Default: "100 mm2/s", Source: "common practice, no source; ask the maker of the pump", Text: "viscosity from which on the machine works as it should"},
	{Key: "fouling", Title: "Fouling factor", Group: "Limits", Dim: units.Ratio, Positive: true, Default: "1.2", Source: "common practice 1.1 to 1.25", Text: "by which a dirty cooler takes less"},
	{Key: "altitude", Title: "Altitude", Group: "Limits", Dim: units.Length, Zero: true, Default: "0 m", Source: "sea level", Text: "thin air cools less: 10 % for each 1000 m, common practice"},
}

// HeatKeyNamed returns a key, or nil.
func HeatKeyNamed(key string) *HeatKey {
	for i := range HeatKeys {
		if HeatKeys[i].Key == key {
			return &HeatKeys[i]
		}
	}
	return nil
}

func heatKeyNames() []string {
	var out []string
	for _, k := range HeatKeys {
		out = append(out, k.Key)
	}
	return out
}

// HeatSection is what a file says of tank, cooler and air: of all circuits, or of one beyond that.
type HeatSection struct {
	Given  bool
	Values map[string]circuit.Value
	Words  map[string]string
	Points []thermal.RatePoint
	Drawn  DrawnCooler // in the circuit that the section is of; empty where the section names the place itself
}

// over returns the section with what another says in its place. A cooler that is stated anew in one way is not stated in the other.
func (h HeatSection) over(o HeatSection) HeatSection {
	out := HeatSection{Given: h.Given || o.Given, Values: map[string]circuit.Value{}, Words: map[string]string{}, Points: h.Points}
	for _, s := range []HeatSection{h, o} {
		for k, v := range s.Values {
			out.Values[k] = v
		}
		for k, v := range s.Words {
			out.Words[k] = v
		}
	}
	if len(o.Points) > 0 {
		out.Points = o.Points
		delete(out.Values, "cooler_rate")
	} else if _, anew := o.Values["cooler_rate"]; anew {
		out.Points = nil
		delete(out.Words, "cooler_points")
	}
	return out
}

// HeatOf returns what holds for a circuit; Given is false when the file says nothing of tank and cooler.
func (f *File) HeatOf(c *CircuitEntry) HeatSection {
	h := f.Heat.over(c.Heat)
	if h.Words["cooler_place"] == "" {
		h.Drawn = drawnCooler(c.Circuit)
	}
	return h
}

// Word returns a word, or its default.
func (h HeatSection) Word(key string) string {
	if w := h.Words[key]; w != "" {
		return w
	}
	if key == "cooler_place" && h.Drawn.Block != "" {
		return h.Drawn.Place
	}
	return HeatKeyNamed(key).Default
}

// Value returns a quantity, or its default with where that comes from; ok is false where there is neither.
func (h HeatSection) Value(key string, oil *circuit.Conditions) (v circuit.Value, given, ok bool) {
	if v, ok := h.Values[key]; ok {
		return v, true, true
	}
	k := HeatKeyNamed(key)
	if k.Default != "" {
		si, u, err := units.Parse(k.Default, k.Dim)
		return circuit.Value{SI: si, Unit: u, Origin: circuit.Assumed, Note: k.Source, Low: math.NaN(), High: math.NaN()}, false, err == nil
	}
	si, ok := h.derived(key, oil)
	v = circuit.Given(si)
	v.Origin, v.Note = circuit.Assumed, k.Source
	return v, false, ok
}

// number returns the number of a value, NaN where there is none.
func (h HeatSection) number(key string, oil *circuit.Conditions) float64 {
	v, _, ok := h.Value(key, oil)
	if !ok {
		return math.NaN()
	}
	return v.SI
}

// derived returns a default that follows from other values.
func (h HeatSection) derived(key string, oil *circuit.Conditions) (float64, bool) {
	switch key {
	case "tank_area":
		v, has := h.Values["tank_volume"]
		return thermal.TankArea(v.SI), has
	case "wall_coefficient":
		return map[string]float64{airStill: thermal.StillAir, airOrdinary: thermal.OrdinaryAir, airForced: thermal.ForcedAir}[h.Word("air_movement")], true
	case "steel_mass":
		v, has := h.Values["tank_volume"]
		if !has || oil == nil {
			return 0, false
		}
		return 0.25 * v.SI * rhoC(oil) / thermal.SteelHeat, true
	case "thermostat_full":
		v, has := h.Values["thermostat_opens"]
		return v.SI + 5, has
	case "fan_power":
		switch h.Word("cooler") {
		case airCooler:
			return h.stated(), true
		case waterCooler:
			return 0, true
		}
	}
	return 0, false
}

// stated is the capacity of the cooler [W/K] as it is stated, 0 where it is not.
func (h HeatSection) stated() float64 {
	if n := len(h.Points); n > 0 {
		return h.Points[n-1].Rate
	}
	return h.Values["cooler_rate"].SI
}

// rhoC returns the heat capacity of a volume of the oil [J/(m³·K)] at its working temperature; that of a plain mineral oil
// where the file tells no more.
func rhoC(c *circuit.Conditions) float64 {
	o := c.Oil
	if o.SpecificHeat == 0 {
		o = plainOil()
	}
	return c.Density * o.Heat(c.Temperature)
}

// parseRatePoints reads "20 L/min 0.15 kW/K, 60 L/min 0.3 kW/K".
func parseRatePoints(text string) ([]thermal.RatePoint, error) {
	var out []thermal.RatePoint
	const form = `write points such as "20 L/min 0.15 kW/K, 60 L/min 0.3 kW/K", by rising flow`
	for _, part := range strings.Split(text, ",") {
		words := strings.Fields(part)
		if len(words) < 4 {
			return nil, fmt.Errorf("%q: %s", strings.TrimSpace(part), form)
		}
		n := slices.IndexFunc(words[1:], func(w string) bool { return w[0] >= '0' && w[0] <= '9' }) + 1
		if n < 1 {
			return nil, fmt.Errorf("%q: %s", strings.TrimSpace(part), form)
		}
		q, _, err := units.Parse(strings.Join(words[:n], " "), units.Flow)
		if err != nil {
			return nil, err
		}
		k, _, err := units.Parse(strings.Join(words[n:], " "), units.HeatCapacityRate)
		if err != nil {
			return nil, err
		}
		if before := len(out) - 1; q <= 0 || k <= 0 || before >= 0 && q <= out[before].Flow {
			return nil, fmt.Errorf("%q: flows must rise and capacities be above 0; %s", strings.TrimSpace(part), form)
		}
		out = append(out, thermal.RatePoint{Flow: q, Rate: k})
	}
	return out, nil
}
