package fixfirst

import (
	"fmt"
	"math"

	"barlitre/audit/look"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// circulating is the pressure above which unloaded circulation costs more than it should: 20 bar, and what lines, filter
// and the override of a vented valve take besides.
const circulating = 35 * units.Bar

// unloadsAtPressure finds a fixed pump that circulates against pressure while nothing moves.
func unloadsAtPressure(p *plant) []*Finding {
	var out []*Finding
	for _, pump := range p.Blocks("pump") {
		if !fixed(pump) || p.fillsAccumulator(pump) {
			continue
		}
		mean, share := p.Mean(pump.ID+".P.p", look.Standing)
		if share < 0.02 || !(mean > circulating) {
			continue
		}
		f := p.found(pump, "unloading at pressure", Settings, NoCost)
		at := p.Highest(pump.ID+".P.p", look.Standing)
		f.Duty, f.Time = at.Duty, at.T
		spill := 0.0
		for _, rv := range p.ReliefsOf(pump) {
			l := p.Lost("", rv.ID) // spilled, or let round while vented
			spill += l.Idle + l.Holding
		}
		f.Evidence = []Quantity{
			{"mean pressure at " + pump.ID + " while nothing moves", p.bar(mean), "2 to 20 bar"},
			{"share of the time", percent(share), ""},
			{"drawn meanwhile a year", kilowattHours(p.Run.Year.Drawn.Idle+p.Run.Year.Drawn.Holding) + ", " + percent((p.Run.Year.Drawn.Idle+p.Run.Year.Drawn.Holding)/p.Drawn()) + " of all", ""},
			{"of it over relief valves", kilowattHours(spill), "nothing"},
		}
		f.Basis = "unloaded circulation 2 to 20 bar: common practice, no source"
		f.Caution = "What unloads a pump may also hold pressure for clamps, brakes or pilots: find out before it is changed. " + settingCaution
		p.howUnloaded(f, pump, mean)
		out = append(out, f)
	}
	return out
}

// howUnloaded says what keeps the pressure up, and its cure.
func (p *plant) howUnloaded(f *Finding, pump *circuit.Block, mean float64) {
	for _, rv := range p.ReliefsOf(pump) {
		if _, ok := rv.Values["vented"]; ok && p.C.PumpAtRest == circuit.Unload {
			f.Block, f.Param, f.Class, f.Effort = rv.ID, "vented", Repair, LowCost
			f.Text = fmt.Sprintf("%s is vented at rest, and still stands at %s.", rv.ID, p.bar(mean))
			f.Do = "Look at the vent line and its solenoid valve: a stuck spool, a blocked orifice or a long thin line keeps the pressure up."
			f.Cures = p.pressures(lower, rv, "vented", 5e5)
			return
		}
	}
	for _, v := range p.centres(pump) {
		f.Block, f.Param, f.Class, f.Effort = v.ID, "flow_centre", Repair, Invest
		f.Text = fmt.Sprintf("The oil of %s goes round through the centre of %s against %s.", pump.ID, v.ID, p.bar(mean))
		f.Do = "See that the spool comes to its centre (springs, dirt, a pilot that stays on). If it does, the path is too narrow for this pump: unload ahead of the valve, or fit a spool with a wider centre."
		key := "flow_centre"
		if v.Kind == "section_6_3" {
			key = "flow_bypass"
		}
		q := look.Value(pump, "displacement") * p.speed(pump)
		f.Cures = []Cure{{{set, p.target(v, key), fmt.Sprintf("%.4g L/min", math.Ceil(q/units.LitrePerMinute))}}}
		return
	}
	f.Text = fmt.Sprintf("Nothing unloads %s: while the machine stands its whole flow leaves at %s over the relief valve.", pump.ID, p.bar(mean))
	f.Class, f.Effort = Repair, LowCost
	f.Do = "Have the pump unloaded at rest: vent the relief valve by a solenoid valve, or fit a valve that joins the pump to tank in its centre. Stop the motor in long breaks."
	if rvs := p.ReliefsOf(pump); len(rvs) > 0 {
		f.Param = "vented"
		f.Block = rvs[0].ID
		f.Cures = []Cure{{{set, p.target(rvs[0], "vented"), "5 bar"}, {set, p.C.Name + "/pump_at_rest", "unload"}}}
	}
}

// centres are the valves through whose centre the oil of a pump goes round.
func (p *plant) centres(pump *circuit.Block) []*circuit.Block {
	var out []*circuit.Block
	for _, r := range p.Supply(pump) {
		b := p.C.Block(r.Block)
		if b == nil {
			continue
		}
		tandem := b.Kind == "valve" && r.Port == "P" && (look.Word(b, "centre") == "tandem" || look.Word(b, "centre") == "open")
		if tandem || b.Kind == "section_6_3" && r.Port == "C1" {
			out = append(out, b)
		}
	}
	return out
}

// speed is the highest speed of a machine [rad/s].
func (p *plant) speed(b *circuit.Block) float64 {
	return math.Abs(p.Highest(b.ID+".w", look.Always).V)
}

// fillsAccumulator reports whether a pump has an unloading valve or an accumulator on its line.
func (p *plant) fillsAccumulator(pump *circuit.Block) bool {
	for _, r := range p.Supply(pump) {
		if b := p.C.Block(r.Block); b != nil && (b.Kind == "accumulator" || b.Kind == "unloading") {
			return true
		}
	}
	return false
}

// unloaderHigh finds unloading valves set too high (high-low pumps) or that do not let the pressure down.
func unloaderHigh(p *plant) []*Finding {
	var out []*Finding
	for _, b := range p.Blocks("unloading_pilot") {
		ps := look.Value(b, "setting")
		if ps <= 72*units.Bar {
			continue
		}
		f := p.found(b, "unloading valve set too high", Settings, NoCost)
		top := p.Highest(b.ID+".P.p", look.Moving)
		f.Param, f.Duty, f.Time = "setting", top.Duty, top.T
		f.Text = fmt.Sprintf("%s unloads the large pump only above %s: it goes on working against pressure that the small one should give.", b.ID, p.bar(ps))
		f.Evidence = []Quantity{{b.ID + " unloads at", p.bar(ps), "30 to 70 bar"}, {"highest pressure at the large pump", p.bar(top.V), ""},
			{"lost at " + b.ID + " a year", kilowattHours(p.Lost("", b.ID).Total()), ""}}
		f.Do = "Watch the pressure of the large pump during the force stroke: it must fall to a few bar as soon as the fast way is over. Turn the unloading valve down to just above the pressure of the fast way."
		f.Caution = "Set it with the guard closed and the tool empty. The high-pressure relief valve is not touched."
		f.Basis = "unloading at 30 to 70 bar: common practice, no source"
		f.Cures = p.pressures(lower, b, "setting", 50e5, 60e5, 70e5)
		out = append(out, f)
	}
	for _, b := range p.Blocks("unloading", "unloading_pilot") {
		key := map[string]string{"unloading": "unloaded_drop", "unloading_pilot": "nominal_drop"}[b.Kind]
		if look.Value(b, key) <= 21*units.Bar {
			continue
		}
		f := p.found(b, "unloading at pressure", Repair, LowCost)
		f.Param = key
		l := p.Lost("unloaded circulation", b.ID)
		top := p.Highest(b.ID+".P.p", look.Always)
		f.Duty, f.Time = top.Duty, top.T
		f.Text = fmt.Sprintf("While it unloads, %s still holds %s at its nominal flow.", b.ID, p.bar(look.Value(b, key)))
		f.Evidence = []Quantity{{"drop while unloaded", p.bar(look.Value(b, key)), "2 to 20 bar"}, {"lost so a year", kilowattHours(l.Total()), ""}}
		f.Do = "Clean or exchange its pilot stage; see that the return line from it is free."
		f.Caution = "An accumulator stays charged when the pump stops. Shut it off, discharge it and see zero on its gauge before the valve is opened."
		f.Basis = "unloaded circulation 2 to 20 bar: common practice, no source"
		f.Cures = p.pressures(lower, b, key, 5e5)
		out = append(out, f)
	}
	return out
}

// preChargeOff finds an accumulator whose pre-charge is lost or out of limits.
func preChargeOff(p *plant) []*Finding {
	var out []*Finding
	for _, b := range p.Blocks("accumulator") {
		const atm = units.AtmosphericPressure
		low, high := p.Lowest(b.ID+".P.p", look.Always), p.Highest(b.ID+".P.p", look.Always)
		p1 := low.V
		for _, r := range p.C.Joined(circuit.PortRef{Block: b.ID, Port: "P"}) {
			if uv := p.C.Block(r.Block); uv != nil && uv.Kind == "unloading" && r.Port == "A" {
				p1 = math.Max(p1, look.Value(uv, "loads")) // a lost pre-charge may let the pressure fall below it
			}
		}
		cold := look.Value(b, "precharge")
		hot := (cold+atm)*look.Value(b, "gas_temperature")/293.15 - atm
		if !low.OK || hot >= 0.58*p1 && hot <= 0.97*p1 && high.V+atm <= 4.05*(hot+atm) {
			continue
		}
		f := p.found(b, "pre-charge lost or out of limits", Repair, LowCost)
		f.Param, f.Duty, f.Time = "precharge", high.Duty, high.T
		f.Text = fmt.Sprintf("%s is filled to %s (%s hot) against a lowest working pressure of %s: it gives hardly any oil between the two switching pressures.", b.ID, p.bar(cold), p.bar(hot), p.bar(p1))
		if hot > 0.97*p1 {
			f.Text = fmt.Sprintf("%s is filled to %s (%s hot), as much as the lowest working pressure of %s: it runs empty and its bladder strikes the valve.", b.ID, p.bar(cold), p.bar(hot), p.bar(p1))
		}
		f.Evidence = []Quantity{
			{"pre-charge hot over lowest pressure", percent(hot / p1), "60 to 95 %, usual 90 %"},
			{"highest pressure over pre-charge, absolute", units.Number((high.V+atm)/(hot+atm), 3), "at most 4 for a bladder"},
			{"loads", p.loadings(b), ""},
		}
		f.Do = "Drain the oil side, read the nitrogen with the filling set at a known temperature, fill to 0.9 of the lowest working pressure hot, and read it again after a week. If it falls again the bladder or the valve leaks."
		f.Caution = "A pressure vessel: shut off, discharge, prove zero. Dry nitrogen only, never oxygen or air. For trained persons with the maker's filling set; periodic inspection by the rules of the place."
		f.Basis = "p0 <= p1/1.1 and p2/p0 <= 4 (bladder): trade literature; 0.6 as the lower end: common practice, no source"
		to := ((0.9*p1 + atm) * 293.15 / look.Value(b, "gas_temperature")) - atm
		f.Cures = p.pressures(set, b, "precharge", to)
		out = append(out, f)
	}
	return out
}

// loadings counts how often the pump loads an accumulator, from the rises of its pressure.
func (p *plant) loadings(b *circuit.Block) string {
	for _, d := range p.Run.Duties {
		k := look.Track(d, b.ID+".P.p")
		if k == nil || len(k.T) < 3 || d.Balance == nil || d.Balance.Seconds.Working == 0 {
			continue
		}
		lo, hi := math.Inf(1), math.Inf(-1)
		for _, v := range k.V {
			lo, hi = math.Min(lo, v), math.Max(hi, v)
		}
		n, low := 0, true
		for _, v := range k.V {
			if low && v > lo+0.9*(hi-lo) {
				n, low = n+1, false
			}
			if v < lo+0.1*(hi-lo) {
				low = true
			}
		}
		span := k.T[len(k.T)-1] - k.T[0]
		return fmt.Sprintf("about %s times an hour in %s", units.Number(float64(n)*3600/span, 2), d.Duty.Name)
	}
	return "n/a"
}
