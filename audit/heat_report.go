package audit

import (
	"fmt"
	"math"

	"barlitre/circuit"
	"barlitre/machines/units"
)

// overcooled is how much colder [K] than assumed oil must run to be remarked on: its viscosity has then changed by a quarter or so.
const overcooled = 5.0

// AtFound returns the energy drawn a year [J] by the machine, without its cooling, with the oil as warm as it gets, and with the
// oil at the temperature of the energy balance.
func (h *HeatStudy) AtFound(oil float64) (found, stated float64) {
	if h.Week == nil || h.Week.On <= 0 {
		return math.NaN(), math.NaN()
	}
	at, err := h.Loads[Mix].DrawnAt(oil)
	if err != nil {
		return math.NaN(), math.NaN()
	}
	return h.Week.Drawn / h.Week.On * h.Hours, at * h.Hours
}

// warmthRemarks are the findings of how warm the oil gets.
func (s *Solution) warmthRemarks(c *CircuitRun) []circuit.Finding {
	h := c.Warmth
	if h == nil {
		return nil
	}
	var out []circuit.Finding
	say := func(level circuit.Level, format string, args ...any) {
		out = append(out, circuit.Finding{Level: level, Circuit: c.Circuit.Name, Text: fmt.Sprintf(format, args...)})
	}
	if h.Fault != "" {
		say(circuit.Warns, "%s", h.Fault)
		return out
	}
	p := printer{system: units.Metric}
	if h.beyondOil() {
		say(circuit.Warns, "with the cooling described here the oil would get %s in the mean while the machine runs, and no oil stands more than %s: something cools it that is not described, or it needs a cooler. Say so in the section heat; until then its temperatures, and what they do to energy and saving, mean nothing",
			degreesOrMore(p, h.Week.Ran), p.degrees(mostOil))
		return out
	}
	found, stated := h.AtFound(s.Oil)
	more := ""
	if d := found - stated; known(d) && math.Abs(d) > 1e-3*stated {
		word := "more"
		if d < 0 {
			word = "less"
		}
		more = fmt.Sprintf("; with the oil so it would draw %s %s a year", p.kWh(math.Abs(d)), word)
	}
	switch {
	case s.Oil-h.Week.Ran > overcooled:
		cure := "a thermostat or a bypass keeps it warm"
		if h.Plant.Cooler.None() {
			cure = "check the assumed temperature"
		}
		say(circuit.Note, "the oil runs at %s in the mean, colder than the %s of the energy balance, and is thicker, %s%s: %s",
			p.degrees(h.Week.Ran), p.degrees(s.Oil), p.in(h.Viscosity(h.Week.Ran), units.KinematicViscosity, 3), more, cure)
	case h.Week.Ran-s.Oil > overcooled:
		say(circuit.Note, "the oil runs at %s in the mean, warmer than the %s of the energy balance, and is thinner, %s%s",
			p.degrees(h.Week.Ran), p.degrees(s.Oil), p.in(h.Viscosity(h.Week.Ran), units.KinematicViscosity, 3), more)
	}
	switch d := h.Section.Drawn; {
	case d.Block == "":
	case h.Plant.Cooler.None():
		say(circuit.Note, "%s is drawn, but nothing says what a cooler takes; give cooler and capacity (cooler, cooler_rate of heat), or nothing is cooled here", d.Block)
	default:
		say(circuit.Note, "the cooler stands where %s is drawn (%s); its place among the heat values (cooler_place of heat) would say otherwise", d.Block, d.Place)
	}
	if dry := h.Dry(); len(dry) > 0 {
		say(circuit.Note, "no oil passes the cooler (%s) in %s: nothing is cooled while that goes on", h.Section.Word("cooler_place"), circuit.Names(dry))
	}
	if k := h.worstCheck(); k != nil {
		level, more := circuit.Note, ""
		if k.AboveAlarm {
			level, more = h.alarmLevel(), " of "+p.degrees(h.Alarm)
		}
		say(level, "oil at %s, %s: %s%s", degreesOrMore(p, k.Highest), k.Case, k.Text, more)
	}
	if h.Few != "" {
		say(circuit.Note, "heat by oil temperature: %s", h.Few)
	}
	return out
}

// mostOil is a temperature [K] that no hydraulic oil is run at: 120 °C, far above the 80 °C or so
// that machine builders allow (common practice, no source).
const mostOil = 273.15 + 120

// farHot is a temperature [K] beyond which a number says nothing any more.
const farHot = 273.15 + 200

// beyondOil reports whether the cooling described leaves the oil hotter than any oil stands.
func (h *HeatStudy) beyondOil() bool { return h.Fault == "" && h.Week != nil && h.Week.Ran > mostOil }

// degreesOrMore writes a temperature; "" for none, and without end for one that has none.
func degreesOrMore(p printer, theta float64) string {
	switch {
	case math.IsInf(theta, 1):
		return "without end"
	case theta > farHot:
		return "above " + p.degrees(farHot)
	case math.IsNaN(theta):
		return "–"
	}
	return p.degrees(theta)
}

// Duration writes a time as people say it: "25 min", "5.6 h".
func Duration(seconds float64) string {
	switch {
	case math.IsNaN(seconds) || math.IsInf(seconds, 0):
		return "–"
	case seconds < 2*units.Minute:
		return units.Number(seconds, 2) + "\u202fs"
	case seconds < 2*units.Hour:
		return units.Number(seconds/units.Minute, 2) + "\u202fmin"
	}
	return units.Number(seconds/units.Hour, 2) + "\u202fh"
}

// heatTables set the oil temperatures of all circuits side by side; none where no circuit was studied.
func (s *Solution) heatTables(p printer) []Table {
	var runs []*CircuitRun
	for _, c := range s.Circuits {
		if c.Warmth != nil && c.Warmth.Week != nil {
			runs = append(runs, c)
		}
	}
	if len(runs) == 0 {
		return nil
	}
	out := []Table{s.temperatureTable(p, runs), needTable(p, runs), checkTable(p, runs), tankTable(p, runs)}
	for i := range out {
		for _, c := range runs {
			out[i].Head = append(out[i].Head, c.Circuit.Name)
		}
	}
	return out
}

// across adds a row with a cell of each circuit.
func across(t *Table, runs []*CircuitRun, name string, of func(c *CircuitRun, h *HeatStudy) string) {
	cells := []string{name}
	for _, c := range runs {
		cells = append(cells, of(c, c.Warmth))
	}
	t.add(false, cells...)
}

func (s *Solution) temperatureTable(p printer, runs []*CircuitRun) Table {
	t := Table{Title: "How warm the oil gets", Formula: "C·dT/dt = P(T) − UA·(T − Ta) − s·K·(T_in − Ta)", Head: []string{""}}
	row := func(name string, of func(c *CircuitRun, h *HeatStudy) string) { across(&t, runs, name, of) }
	row("oil while it runs, mean of the week", func(_ *CircuitRun, h *HeatStudy) string { return p.degrees(h.Week.Ran) })
	row("viscosity there", func(_ *CircuitRun, h *HeatStudy) string {
		return p.in(h.Viscosity(h.Week.Ran), units.KinematicViscosity, 3)
	})
	row("warmest, ordinary day", func(_ *CircuitRun, h *HeatStudy) string { v, _ := h.Week.Highest(); return p.degrees(v) })
	row("warmest, hot day", func(_ *CircuitRun, h *HeatStudy) string { v, _ := h.Hot.Highest(); return p.degrees(v) })
	row("heat put in while it runs, mean", func(_ *CircuitRun, h *HeatStudy) string { return p.power(ratio(h.Week.Heat, h.Week.On)) })
	row("of that, taken by the cooler", func(_ *CircuitRun, h *HeatStudy) string { return p.power(ratio(h.Week.Cooled, h.Week.On)) })
	row("time constant without cooler", func(_ *CircuitRun, h *HeatStudy) string { return Duration(h.Plant.Body.TimeConstant(0)) })
	row("time constant with it", func(_ *CircuitRun, h *HeatStudy) string { return Duration(h.Plant.Body.TimeConstant(h.takes())) })
	row("drawn for cooling a year", func(c *CircuitRun, _ *HeatStudy) string { return p.kWh(c.coolingDrawn()) })
	row("drawn a year with the oil so warm", func(_ *CircuitRun, h *HeatStudy) string {
		found, _ := h.AtFound(s.Oil)
		return p.kWh(found)
	})
	row("drawn a year at "+p.degrees(s.Oil), func(_ *CircuitRun, h *HeatStudy) string {
		_, stated := h.AtFound(s.Oil)
		return p.kWh(stated)
	})
	longest := runs[0].Warmth.Cycles
	for i, x := range longest {
		row("within a cycle of "+x.Duty, func(_ *CircuitRun, h *HeatStudy) string {
			if i >= len(h.Cycles) {
				return "–"
			}
			return "±\u202f" + p.in((h.Cycles[i].High-h.Cycles[i].Low)/2, units.TemperatureDifference, 2)
		})
	}
	h := runs[0].Warmth
	t.Note = fmt.Sprintf("Oil, tank and steel as one heat capacity of %s, walls at %s; each circuit %s, monotone curves between them%s. "+
		"What is drawn a year is without cooling here; the figures of energy and money hold for oil at %s, and a circuit that runs warmer or colder draws as the row above says.",
		p.in(h.Plant.Body.Capacity(), units.HeatCapacity, 3), p.in(h.Plant.Body.Walls, units.HeatCapacityRate, 3), h.describe(), missedText(h.Missed), p.degrees(s.Oil))
	for _, c := range runs {
		for _, x := range c.Warmth.Cycles {
			if !x.MeanIsEnough {
				t.Note += fmt.Sprintf(" %s: a cycle of %s lasts %s, not short beside the time constant of %s, so its mean heat is not enough: its oil is up to %s warmer than in the mean.",
					c.Circuit.Name, x.Duty, Duration(x.Cycle), Duration(x.Tau), p.in(x.High, units.TemperatureDifference, 2))
			}
		}
	}
	return t
}

// coolingDrawn is what fan and pumps of the cooling draw a year [J].
func (c *CircuitRun) coolingDrawn() float64 { return c.Year.CoolingDrawn().Total() }

// missedText says by how much the table of heat missed; nothing where that rounds to 0.
func missedText(share float64) string {
	if share < 5e-5 {
		return ""
	}
	return ", missed by at most " + units.Format(share, units.Percent, 2) + " where they led to"
}

// placeText names the place of the cooler, and where that comes from.
func (h *HeatStudy) placeText() string {
	place := h.Section.Word("cooler_place")
	if b := h.Section.Drawn.Block; b != "" {
		place += ", as " + b + " is drawn"
	}
	return place
}

func needTable(p printer, runs []*CircuitRun) Table {
	t := Table{Title: "Cooler needed for oil at " + p.degrees(runs[0].Warmth.Wanted), Formula: "K = (P − UA·(T − Ta)) / (T_in − Ta)", Head: []string{""}}
	for i, n := range runs[0].Warmth.Needs {
		of := func(what func(n CoolerNeed) string) func(*CircuitRun, *HeatStudy) string {
			return func(_ *CircuitRun, h *HeatStudy) string { return what(h.Needs[i]) }
		}
		across(&t, runs, "heat to take: "+n.Case, of(func(n CoolerNeed) string { return p.power(n.Heat) }))
		across(&t, runs, "capacity, cooling at "+p.degrees(n.Coolant), of(func(n CoolerNeed) string {
			switch {
			case n.Fault != "":
				return "none does"
			case n.Heat <= 0:
				return "none needed"
			}
			return p.cooler(n.Asked())
		}))
		across(&t, runs, "oil entering the cooler", of(func(n CoolerNeed) string { return ifCooled(n, p.degrees(n.Entering)) }))
		across(&t, runs, "oil flow there, mean", of(func(n CoolerNeed) string { return ifCooled(n, p.in(n.Flow, units.Flow, 3)) }))
	}
	across(&t, runs, "cooler in the file", func(_ *CircuitRun, h *HeatStudy) string {
		if k := h.Section.stated(); k > 0 && h.Section.Word("cooler") != noCooler {
			return p.cooler(k)
		}
		return "none"
	})
	t.Note = "Heat over the difference of the entering temperatures, at the mean flow of its place (" + runs[0].Warmth.placeText() +
		"); where the oil comes in parts, warmer in some, and the march asks for more, that stands. Walls are credited here; fouling, altitude and reserve are not in it: the request sheet lists them."
	for _, c := range runs {
		for _, n := range c.Warmth.Needs {
			if n.Fault != "" {
				t.Note += " " + c.Circuit.Name + ", " + n.Case + ": " + n.Fault + "."
				break
			}
		}
	}
	return t
}

// ifCooled leaves out what only a cooler has.
func ifCooled(n CoolerNeed, text string) string {
	if n.Heat <= 0 {
		return "–"
	}
	return text
}

func checkTable(p printer, runs []*CircuitRun) Table {
	t := Table{Title: "Check matrix", Formula: "the march with one thing changed", Head: []string{""}}
	for i := range runs[0].Warmth.Checks {
		across(&t, runs, runs[0].Warmth.Checks[i].Case, func(_ *CircuitRun, h *HeatStudy) string { return h.Checks[i].Cell(p.system) })
	}
	h := runs[0].Warmth
	t.Note = fmt.Sprintf("✓ at or below %s, for faults no alarm within a day; ● above it and below the alarm, ▲ above the alarm; for faults the time to the alarm at %s, from the warmest moment of a hot day on. Hot day: air at %s in the mean.",
		p.degrees(h.Wanted), p.degrees(h.Alarm), p.degrees(h.HotDay))
	return t
}

// Cell writes how a case ends: "✓ 48 °C", "▲ alarm in 25 min".
func (c HeatCheck) Cell(system units.System) string {
	p := printer{system: system}
	sign := "✓ "
	switch {
	case !c.Passed && !c.Fault && !c.AboveAlarm && !math.IsNaN(c.Highest):
		sign = "● "
	case !c.Passed:
		sign = "▲ "
	}
	switch {
	case c.Fault && c.Time == 0:
		return sign + "alarm before"
	case c.Fault && !math.IsNaN(c.Time):
		return sign + "alarm in " + Duration(c.Time)
	case c.Fault && math.IsNaN(c.Highest):
		return c.Text
	case math.IsNaN(c.Highest) && c.Passed:
		return sign + Duration(c.Time)
	case math.IsNaN(c.Highest):
		return sign + "not reached"
	}
	return sign + degreesOrMore(p, c.Highest)
}

func tankTable(p printer, runs []*CircuitRun) Table {
	t := Table{Title: "Another tank", Formula: "the march with k times the oil and k^(2/3) times the walls", Head: []string{""}}
	for i := range runs[0].Warmth.Tanks {
		volume := p.in(runs[0].Warmth.Tanks[i].Volume, units.Volume, 3)
		across(&t, runs, volume+": warmest, hot day", func(_ *CircuitRun, h *HeatStudy) string { return p.degrees(h.Tanks[i].Highest) })
		across(&t, runs, volume+": swing over the week", func(_ *CircuitRun, h *HeatStudy) string {
			return p.in(h.Tanks[i].Swing, units.TemperatureDifference, 2)
		})
	}
	t.Note = "The walls grow with the surface of a tank of the same shape. A bigger tank delays the warmth and cuts its peaks; what it takes away for good is its walls alone."
	return t
}
