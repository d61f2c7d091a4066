package audit

import (
	"fmt"
	"slices"
	"strings"

	"barlitre/audit/thermal"
	"barlitre/circuit"
	"barlitre/circuit/duty"
	"barlitre/machines/units"
)

// assumptions lists what the figures rest on.
func (s *Solution) assumptions(p printer) []string {
	c := s.Conditions
	out := []string{
		fmt.Sprintf("Same oil in all circuits: %s, density %s, dynamic viscosity %s, the same at every place and time. A circuit that puts less heat in may run cooler, "+
			"its oil thicker and its losses other than shown.", p.degrees(s.Oil), p.in(c.Density, units.Density, 3), p.in(c.Viscosity, units.DynamicViscosity, 3)),
		"All circuits are asked to do the same duty, axis by axis, at the load. What one cannot do is listed as a shortfall.",
		fmt.Sprintf("Two works count as the same within %s.", units.Format(SameWork, units.Percent, 2)),
		"Every time step is a steady balance of flows, torques and forces: compression of oil and opening times are left out.",
		fmt.Sprintf("An axis stands when it is slower than %s of its highest speed, unless the duty says another speed.", units.Format(duty.StandstillShare, units.Percent, 2)),
		"A machine holds when every axis stands and one carries more than a tenth of the largest load of the duty; below that it idles.",
	}
	out = append(out, s.dutyAssumptions(p)...)
	for _, r := range s.Circuits {
		out = append(out, restAssumption(r.Circuit), defaultsAssumption(r.Circuit))
	}
	return append(out, s.moneyAssumptions(p)...)
}

func (s *Solution) dutyAssumptions(p printer) []string {
	out := s.File.calendarLines(p)
	for i, d := range s.File.Duties {
		out = append(out, s.recordingLines(p, i)...)
		for _, a := range s.File.Axes {
			if v, ok := d.Standstill[a.Name]; ok {
				dim := units.Velocity
				if a.Kind == duty.Rotary {
					dim = units.AngularSpeed
				}
				out = append(out, fmt.Sprintf("Duty %s: axis %s stands when it is slower than %s.", d.Name, a.Name, p.in(v, dim, 3)))
			}
		}
		switch {
		case d.Hours <= 0:
			out = append(out, fmt.Sprintf("Duty %s has no hours a year and is left out of the year.", d.Name))
		case d.Repeats:
			out = append(out, fmt.Sprintf("Duty %s repeats without pause for %s a year, %s cycles of %s.", d.Name, p.hours(d.Hours),
				p.count(ratio(d.Hours, d.Cycle())), p.seconds(d.Cycle())))
		default:
			out = append(out, fmt.Sprintf("Duty %s is one recording of %s; its mean powers are taken for %s a year.", d.Name, p.seconds(d.Cycle()), p.hours(d.Hours)))
		}
	}
	return out
}

var atRest = map[circuit.AtRest]string{
	circuit.Keep:   "keep turning with their settings",
	circuit.Unload: "keep turning, with relief valves that can be vented vented",
	circuit.Stop:   "are switched off",
}

func restAssumption(c *circuit.Circuit) string {
	text := c.Name + ": at rest the prime movers " + atRest[c.PumpAtRest]
	if atRest[c.PumpAtRest] == "" {
		text = c.Name + ": what the prime movers do at rest is not stated"
	}
	told := map[string]bool{} // several cylinders may move one axis
	for i := range c.Blocks {
		b := &c.Blocks[i]
		if h := b.Word("hold"); h != "" && !told[b.Word("axis")] {
			told[b.Word("axis")] = true
			text += fmt.Sprintf("; axis %s is held by the %s", b.Word("axis"), h)
		}
	}
	return text + "."
}

// defaultsAssumption counts the values that nobody typed.
func defaultsAssumption(c *circuit.Circuit) string {
	rows := parameters(c)
	defaults, assumed, numbers := 0, 0, 0
	for _, r := range rows {
		if r.Origin == "chosen" || r.Origin == "default" {
			continue // choices
		}
		numbers++
		if r.Default {
			defaults++
		} else if r.Origin == string(circuit.Assumed) || r.Origin == "not stated" {
			assumed++
		}
	}
	return fmt.Sprintf("%s: of %d numbers %d are defaults that nobody typed, and %d typed ones are assumed or of no stated origin; all are listed with the circuit.",
		c.Name, numbers, defaults, assumed)
}

func (s *Solution) moneyAssumptions(p printer) []string {
	var out []string
	t := s.Tariff
	if known(t.Price) {
		text := fmt.Sprintf("Energy costs %s, taken as the price of the next unit (marginal), at all times of day.", p.price(t.Price))
		if n := s.File.Price.Note; n != "" {
			text += " Note in the file: " + n + "."
		}
		out = append(out, text)
	} else if !s.File.Burns() {
		out = append(out, "No price of energy is given, so no money is shown.")
	} else if slices.ContainsFunc(s.Circuits, func(c *CircuitRun) bool { return !burns(c.Circuit) }) {
		out = append(out, "No price of energy from the mains is given, so no money is shown for what is drawn from them.")
	}
	if t.CreditReturned {
		out = append(out, "Energy returned to the mains is credited at the same price, because the file says so.")
	} else {
		out = append(out, "Energy returned to the mains earns nothing.")
	}
	if known(t.CO2) {
		out = append(out, "CO2 follows energy drawn at "+t.co2Text()+".")
	}
	if s.File.Burns() {
		out = append(out, s.fuelAssumption(p))
	}
	out = append(out, s.coolerAssumption(p))
	return out
}

// coolerAssumption says what a cooler is named for, and what walls would take.
func (s *Solution) coolerAssumption(p printer) string {
	if _, err := CoolerRate(0, s.Oil, s.Air); err != nil {
		return "Cooler: " + err.Error() + "."
	}
	h := thermal.OrdinaryAir
	return fmt.Sprintf("Coolers are named for oil entering at %s and air at %s, by the mean heat of a cycle. Walls of tank and pipes are not credited: "+
		"a square metre of free tank wall would take about %s (at %s W/(m²·K), trade literature).",
		p.degrees(s.Oil), p.degrees(s.Air), p.power(WallHeat(h, 1, s.Oil-s.Air)), units.Number(h, 2))
}

// exclusions lists what is outside the audit.
func exclusions() []string {
	return []string{
		"Fans and water of the cooler where the section heat does not say what they draw, pumps that only filter or circulate, control cabinets and their cooling.",
		"Demand charges, reactive energy, taxes and rebates: the 15-minute mean is shown so that they can be worked out with the tariff at hand.",
		"Interest, price changes, upkeep, spare parts, downtime of the change: the payback is a simple one.",
		"Moved masses, gears and stores that are not drawn.",
		"Pressure shocks, decompression, oscillation and speed of control.",
		"Warm-up, cold starts and changes of oil temperature over the day, in the figures of energy and money; how warm the oil gets is told beside them.",
		"Wear and faults that are not typed as values of a block.",
		"Everything listed under limits of use.",
	}
}

// Law is an equation of the method section.
type Law struct{ Of, Text, Source string }

// method lists the equations used: the balance, the energy balance and what follows
// from it, then the laws of the kinds of block that the circuits contain.
func (s *Solution) method() []Law {
	out := []Law{
		{"balance", "Σ q = 0 at every node, Σ T = 0 at every shaft, Σ F = 0 at every actuator, at every time step", "continuity and statics"},
		{"energy balance", "in − returned = work + stored + Σ losses, each integrated for itself", "conservation of energy"},
		{"integration", trapezoid, "trapezoid rule; a step has two values at one time"},
		{"closure", "|in − returned − work − stored − losses| / (in + |work from driving loads| + |stored|)", "check of the balance"},
		{"year", yearFormula, "arithmetic"},
		{"15-minute mean", "max over t of E(t, t + 15 min) / 15 min, of power drawn from the mains", "exact for powers linear between time steps; length common practice"},
		{"heat", "P = Σ losses with sink oil / time", "all hydraulic losses and friction of pumps, motors and cylinders warm the oil"},
		{"cooler", "K = P / (T_oil − T_air)", "difference of entering temperatures, common practice of cooler makers"},
		{"oil temperature", "C·dT/dt = P(T) − UA·(T − Ta) − Q", "one or two heat capacities; P from the duty solved at several oil temperatures, monotone cubic curves between them (Fritsch and Butland); marched by Dormand and Prince's method"},
		{"cooler over time", "Q = s·K(q)·(T_in − Ta), K(q) = ρc·q·(1 − exp(−UA/(ρc·q)))", "effectiveness and number of transfer units, capacity ratio 0; oil enters at the tank's temperature and what it took up on its way, H/(ρc·q)"},
		{"money", "K = E_mains · price + E_fuel · price of fuel; n = cost / saving", "arithmetic"},
		{"starts", "E = (1 + ks)·J·(ω² − ω0²)/2 a start, at the instant of the start", "see electric motor; of an engine the fuel of some idling"},
	}
	for _, k := range circuit.Catalog() {
		if !s.uses(k.Name) {
			continue
		}
		for _, e := range k.Equations {
			out = append(out, Law{k.Title, e.Text, e.Source})
		}
		for _, l := range k.Losses {
			out = append(out, Law{k.Title, "loss, " + l.Name + " (to " + string(l.Sink) + "): " + strings.TrimSuffix(l.Text, "."), "follows from the equations of the block"})
		}
	}
	return out
}

func (s *Solution) uses(kind string) bool {
	for _, c := range s.Circuits {
		if len(c.blocksOf(kind)) > 0 {
			return true
		}
	}
	return false
}
