package audit

import (
	"encoding/csv"
	"fmt"
	"io"
	"math"
	"strings"

	"barlitre/audit/thermal"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// Request is the sheet with which a cooler is asked for.
type Request struct {
	Circuit  string
	Groups   []RequestGroup
	Cautions []string
	Missing  string // why there is no sheet, or ""
}

// RequestGroup is a part of the sheet.
type RequestGroup struct {
	Title string
	Rows  []RequestRow
}

// RequestRow is one line: a value from the audit with where it comes from, or a blank for someone to fill in.
type RequestRow struct {
	Name, Value, Note string
	Blank             bool // Note says who knows it
}

// Requests returns a sheet for each circuit.
func (s *Solution) Requests(system units.System) []Request {
	p := printer{system: system, currency: s.Tariff.Currency}
	var out []Request
	for _, c := range s.Circuits {
		r := Request{Circuit: c.Circuit.Name}
		switch h := c.Warmth; {
		case h == nil && s.Pending:
			r.Missing = "The oil temperature is still being worked out."
		case h == nil:
			r.Missing = "The file says nothing of tank and cooler; give the section heat, at least the oil in the tank."
		case h.Week == nil:
			r.Missing = h.Fault
		case h.needless():
			r.Missing = h.needlessText(p)
		default:
			r.Groups = []RequestGroup{requestLoad(p, c), requestOil(p, h), requestFlow(p, h), requestCoolant(p, h), requestFitting(p, h), requestAsker()}
			r.Cautions = requestCautions
		}
		out = append(out, r)
	}
	return out
}

// needless reports whether the walls alone keep the oil at the temperature wanted, whatever duty goes on in the hottest hour.
func (h *HeatStudy) needless() bool {
	design := h.Needs[len(h.Needs)-1]
	return design.Fault == "" && design.Heat <= 0
}

func (h *HeatStudy) needlessText(p printer) string {
	design := h.Needs[len(h.Needs)-1]
	text := fmt.Sprintf("No cooler is needed: with %s going on in the hottest hour, air at %s, the walls of tank and machine give off the %s put in before the oil comes to %s.",
		h.Loads[design.Load].Name, p.degrees(design.Air), p.power(design.Put), p.degrees(h.Wanted))
	return text + " If a relief valve took all the power of " + p.power(h.Peak) + ": " + h.alarmText() + "; a switch that stops the machine there is the better protection."
}

var requestCautions = []string{
	"The figures come from a model of the circuit; the maker's own check decides. Compare the heat with a measured one before ordering: " +
		"oil flow times its temperature drop, or the rise of the tank with the cooler off.",
	"A cooler is weak against pressure: surges, and a cylinder whose bore side empties fast, can burst it. Give it a bypass and a line whose highest pressure is known.",
	"In a case drain it must not raise the case pressure above what the shaft seal stands. Hot oil and surfaces burn. Pressure equipment and electrical work: " +
		"local rules and licensed persons come before anything printed here.",
}

func capacityNote(n *CoolerNeed) string {
	if n.Asked() > n.Heat/(n.Entering-n.Coolant)*(1+1e-6) {
		return "more than heat over the entering difference: the oil comes in parts, each with its own flow and temperature"
	}
	return "heat over the entering difference"
}

func blank(name, who string) RequestRow { return RequestRow{Name: name, Note: who, Blank: true} }

func requestLoad(p printer, c *CircuitRun) RequestGroup {
	h := c.Warmth
	g := RequestGroup{Title: "Heat and capacity"}
	add := func(name, value, note string) {
		g.Rows = append(g.Rows, RequestRow{Name: name, Value: value, Note: note})
	}
	design := h.Needs[len(h.Needs)-1]
	duty := h.Loads[design.Load].Name
	add("Heat to be taken, mean", p.power(design.Heat), fmt.Sprintf("%s going on, %s put in less %s by the walls", duty, p.power(design.Put), p.power(design.Put-design.Heat)))
	add("In the mix of the year", p.power(h.Needs[0].Heat), "ordinary day")
	add("Highest for a short time", p.power(h.Peak), "a relief valve takes all the power; "+h.alarmText())
	add("Oil in the tank wanted", p.degrees(h.Wanted), originNote(h.Section, "wanted"))
	add("Oil entering the cooler", p.degrees(design.Entering), "mean by flow; with the tank at the temperature wanted")
	add("Air or water entering", p.degrees(design.Coolant), "hottest hour")
	switch {
	case design.Fault != "":
		add("Capacity, clean", "none does", design.Fault)
	default:
		add("Capacity, clean", p.cooler(design.Asked()), capacityNote(&design))
		factor, note := h.reserve()
		add("Capacity asked for", p.cooler(factor*design.Asked()), note+"; no other reserve is in it")
	}
	g.Rows = append(g.Rows, blank("Reserve in the maker's figures", "maker"))
	return g
}

// reserve is what a clean capacity is multiplied by, and for what.
func (h *HeatStudy) reserve() (factor float64, note string) {
	factor, note = h.Fouling, "× "+units.Number(h.Fouling, 3)+" for fouling"
	if alt := h.Section.number("altitude", &h.Oil); alt > 0 && h.Section.Word("cooler") != waterCooler {
		thin := math.Max(0.1, 1-0.1*alt/1000)
		factor /= thin
		note += ", / " + units.Number(thin, 3) + " for " + units.Number(alt, 3) + "\u202fm of altitude"
	}
	return factor, note
}

// asked says what cooler the request sheet asks for, "" where there is no sheet.
func (h *HeatStudy) asked(p printer) string {
	if h == nil || h.Week == nil {
		return ""
	}
	design := h.Needs[len(h.Needs)-1]
	factor, _ := h.reserve()
	switch {
	case h.needless():
		return "none"
	case design.Fault != "":
		return "none does"
	}
	return p.cooler(factor * design.Asked())
}

// coolerText says for what the cooler beside two circuits is, and what the request sheet asks for in its place.
func (s *Solution) coolerText(p printer, c *Comparison) string {
	if !known(s.Oil) || !known(s.Air) {
		return ""
	}
	text := fmt.Sprintf("The cooler for it takes the whole heat, oil entering at %s, air at %s, to compare by.", p.degrees(s.Oil), p.degrees(s.Air))
	var asked []string
	for _, run := range []*CircuitRun{c.Base, c.Proposal} {
		if x := run.Warmth.asked(p); x != "" {
			asked = append(asked, run.Circuit.Name+" "+x)
		}
	}
	if len(asked) > 0 {
		text += " To order: see the cooler request sheet (hottest hour, less what the walls take): " + strings.Join(asked, "; ") + "."
	}
	return text
}

// alarmText is how long the relief valve may blow.
func (h *HeatStudy) alarmText() string {
	for _, k := range h.Checks {
		if k.Fault && !math.IsNaN(k.Time) && k.Case == "relief valve takes all the power" {
			return "alarm at " + units.Format(h.Alarm, units.Preferred(units.Temperature, units.Metric), 3) + " after " + Duration(k.Time)
		}
	}
	return "no alarm within a day"
}

// originNote says where a value of the section comes from.
func originNote(sec HeatSection, key string) string {
	v, given, ok := sec.Value(key, nil)
	switch {
	case !ok:
		return ""
	case !given:
		return "default: " + v.Note
	case v.Origin == "":
		return "origin not stated"
	case v.Note != "":
		return string(v.Origin) + ": " + v.Note
	}
	return string(v.Origin)
}

func requestOil(p printer, h *HeatStudy) RequestGroup {
	g := RequestGroup{Title: "Oil"}
	add := func(name, value, note string) {
		g.Rows = append(g.Rows, RequestRow{Name: name, Value: value, Note: note})
	}
	o := h.Oil
	if h.Grade != "" {
		add("Grade", h.Grade, "ISO 3448; taken as mineral oil")
	} else {
		g.Rows = append(g.Rows, blank("Grade", "user"))
	}
	add("Density, specific heat", p.in(o.Density, units.Density, 3)+", "+p.in(rhoC(&o)/o.Density, units.SpecificHeat, 3), "at "+p.degrees(o.Temperature))
	add("Viscosity at work", p.in(h.Viscosity(h.Wanted), units.KinematicViscosity, 3), "at "+p.degrees(h.Wanted))
	if o.Oil.Nu40 > 0 {
		add("Viscosity at a winter start", p.in(h.Viscosity(h.WinterStart), units.KinematicViscosity, 2), "at "+p.degrees(h.WinterStart))
	} else {
		g.Rows = append(g.Rows, blank("Viscosity at a winter start", "maker of the oil"))
	}
	g.Rows = append(g.Rows, blank("Fluid, if not mineral oil", "user"))
	return g
}

func requestFlow(p printer, h *HeatStudy) RequestGroup {
	place := h.Section.Word("cooler_place")
	g := RequestGroup{Title: "Oil flow and pressure"}
	add := func(name, value, note string) {
		g.Rows = append(g.Rows, RequestRow{Name: name, Value: value, Note: note})
	}
	where := map[string]string{placeReturn: "return line", placeDrain: "case drain", placeFlushing: "flushing line of the closed circuit", placeOffLine: "off-line loop, tank to tank"}[place]
	note := ""
	if b := h.Section.Drawn.Block; b != "" {
		note = "as " + b + " is drawn"
	}
	add("Position", where, note)
	least, mean, most, stands := h.flows()
	add("Oil flow, least / mean / most", p.in(least, units.Flow, 2)+" / "+p.in(mean, units.Flow, 3)+" / "+p.in(most, units.Flow, 3), "while oil flows; means over parts of the cycle, peaks of milliseconds are not in it")
	if stands > 0.005 {
		add("Time without flow", p.share(stands), "of the running time: nothing is cooled then")
	}
	if dry := h.Dry(); len(dry) > 0 {
		add("No flow at all in", circuit.Names(dry), "consider an off-line loop, or the case drain")
	}
	g.Rows = append(g.Rows, blank("Pulsation, surge at valve switching", "measure, or user"), blank("Highest static pressure of the line", "user"),
		blank("Pressure drop allowed, warm", "user; common practice 0.5 to 2 bar"), blank("Pressure drop allowed, cold", "user; bypass opens at 2 to 5 bar, common practice"))
	return g
}

// flows are those of the place of the cooler, and the share of the time without.
func (h *HeatStudy) flows() (least, mean, most, stands float64) {
	if q := h.Plant.Cooler.LoopFlow; h.Plant.Cooler.Place == thermal.OffLine {
		return q, q, q, 0
	}
	l := &h.Loads[Mix]
	at := l.At[0]
	for _, x := range l.At { // as solved nearest to the temperature wanted
		if math.Abs(x.Theta-h.Wanted) < math.Abs(at.Theta-h.Wanted) {
			at = x
		}
	}
	least, stands = math.Inf(1), 1
	for _, b := range at.Lines[h.Plant.Cooler.Place] {
		least, most = math.Min(least, b.Flow), math.Max(most, b.Flow)
		stands -= b.Share
	}
	mean, _ = at.Lines[h.Plant.Cooler.Place].Mean()
	if math.IsInf(least, 1) {
		least = 0
	}
	return least, mean, most, math.Max(0, stands)
}

func requestCoolant(p printer, h *HeatStudy) RequestGroup {
	if h.Section.Word("cooler") == waterCooler {
		g := RequestGroup{Title: "Cooling water"}
		g.Rows = append(g.Rows, RequestRow{Name: "Water entering", Value: p.degrees(h.Plant.Cooler.Water), Note: originNote(h.Section, "water_temperature")},
			blank("Flow at hand, highest return temperature", "user"), blank("Quality: hardness, chloride, sea or river water", "user"),
			blank("Pressure, drop allowed", "user"), blank("Danger of frost", "user"))
		return g
	}
	g := RequestGroup{Title: "Air and site"}
	g.Rows = append(g.Rows,
		RequestRow{Name: "Air, coldest / ordinary / hottest hour", Value: p.degrees(h.WinterStart) + " / " + p.degrees(h.Plant.Air.Mean) + " / " + p.degrees(h.HotDay+h.Plant.Air.Swing), Note: "where the cooler draws it: mind warm air that comes round again"},
		RequestRow{Name: "Altitude", Value: units.Number(h.Section.number("altitude", &h.Oil), 3) + "\u202fm", Note: originNote(h.Section, "altitude")},
		blank("Dust, fibres, salt, humidity, hazardous area", "user"), blank("Space, direction of the air, free distance", "user"), blank("Noise limit and distance", "user"))
	return g
}

func requestFitting(p printer, h *HeatStudy) RequestGroup {
	g := RequestGroup{Title: "Drive and fittings"}
	fan := "fan"
	if h.Section.Word("cooler") == waterCooler {
		fan = "water pump"
	}
	opens := h.Section.number("thermostat_opens", &h.Oil)
	switched := "no thermostat planned; the oil is cooled from the first minute"
	if !math.IsNaN(opens) {
		switched = "opens at " + p.degrees(opens) + ", open at " + p.degrees(h.Section.number("thermostat_full", &h.Oil))
	}
	g.Rows = append(g.Rows, RequestRow{Name: "Thermostat and bypass", Value: switched, Note: "bypass valve beside the core: ask for it"},
		blank("Drive of the "+fan+", power, supply, degree of protection", "user and maker"), blank("Temperature and level switches", "user"),
		blank("Cleaning access, filters before the core", "maker"), blank("Rules to be met: pressure equipment, machinery, food, ships", "user"),
		blank("Pressure drop offered warm and cold; sound power; mass; delivery", "maker"))
	return g
}

// requestAsker is who asks, to be filled in.
func requestAsker() RequestGroup {
	return RequestGroup{Title: "Asked by", Rows: []RequestRow{blank("Name, company, address", "user"), blank("Quantity, date wanted", "user")}}
}

// WriteRequestCSV writes the sheets as a table, one line a row.
func WriteRequestCSV(w io.Writer, sheets []Request) error {
	c := csv.NewWriter(w)
	_ = c.Write([]string{"circuit", "group", "item", "value", "note"})
	for _, s := range sheets {
		if s.Missing != "" {
			_ = c.Write([]string{s.Circuit, "", "", "", s.Missing})
		}
		for _, g := range s.Groups {
			for _, r := range g.Rows {
				_ = c.Write([]string{s.Circuit, g.Title, r.Name, r.Value, r.Note})
			}
		}
		for _, t := range s.Cautions {
			_ = c.Write([]string{s.Circuit, "Cautions", "", "", t})
		}
	}
	c.Flush()
	return c.Error()
}
