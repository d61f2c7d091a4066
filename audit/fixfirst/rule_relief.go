package fixfirst

import (
	"fmt"
	"math"

	"barlitre/audit/look"
	"barlitre/circuit"
	"barlitre/machines/units"
)

const settingCaution = "A relief valve protects people and machine. It is set and sealed by the machine's maker or a qualified person, and never raised to save energy."

// hotOutlet warns of the outlet of a valve that spills.
const hotOutlet = " Do not touch the outlet: it and the oil in it burn where the valve spills."

// reliefAbove is how far a relief valve cracks above a compensator: 10 % is the least that trade literature asks
// (10 to 15 %); at 3 % and less the two work at once.
const (
	reliefAbove = 1.15
	reliefClose = 1.03
)

// reliefAtCompensator finds a relief valve that opens before the pressure compensator strokes the pump back.
func reliefAtCompensator(p *plant) []*Finding {
	var out []*Finding
	for _, pump := range p.Blocks("pump") {
		if c := look.Word(pump, "control"); c != "pressure" && c != "pq" || math.IsNaN(look.Value(pump, "set_pressure")) {
			continue
		}
		ps := look.Value(pump, "set_pressure")
		for _, rv := range p.ReliefsOf(pump) {
			pc := cracks(rv)
			if pc > reliefClose*ps {
				continue
			}
			f := p.found(rv, "relief at or below compensator", Settings, NoCost)
			f.Param = "crack"
			spill := p.Lost("relief spill", rv.ID)
			flow := p.Highest(rv.ID+".P.q", look.Always)
			f.Duty, f.Time = flow.Duty, flow.T
			f.Text = fmt.Sprintf("%s opens at %s, the compensator of %s is set to %s: the pump feeds the relief valve instead of stroking back, and works as a fixed pump.",
				rv.ID, p.bar(pc), pump.ID, p.bar(ps))
			f.Evidence = []Quantity{
				{rv.ID + " opens at", p.bar(pc), "at least 10 % above the compensator, " + p.bar(1.1*ps)},
				{"flow over " + rv.ID, p.Shown(flow.V, units.Flow), "none in normal running"},
				{"spilled while nothing moves", kilowattHours(spill.Idle + spill.Holding), "nothing"},
				{"spilled a year in all", kilowattHours(spill.Total()), "nothing"},
			}
			f.Do = fmt.Sprintf("Dead-head the pump with nothing moving and read its pressure, with a gauge to at least "+p.bar(1.5*math.Max(ps, pc))+"; measure the outlet of %s with a contactless thermometer. Find out from the name plate which of the two settings is wrong. If it is the compensator, turn it down until it stands 10 to 15 %% below the relief valve; if it is the relief valve, have the maker or a qualified person put it right.", rv.ID)
			f.Caution = settingCaution + hotOutlet
			f.Basis = "relief 10 to 15 % above compensator: trade literature on heat detection; 3 % as \"at\": common practice, no source"
			f.Cures = p.pressures(lower, pump, "set_pressure", pc/reliefAbove, pc/1.1, pc/1.06) // where none of these does the work, the valve is what is wrong
			f.Cures = append(f.Cures, p.shut(rv, 1.15*ps)...)
			f.because = []string{(&Finding{Rule: ruleReliefOpen, Block: rv.ID}).key()}
			out = append(out, f)
		}
	}
	return out
}

// shut is a relief valve that stays shut, for the price alone.
func (p *plant) shut(rv *circuit.Block, at float64) []Cure {
	key := "crack"
	if _, ok := rv.Values["set"]; ok {
		key, at = "set", at+look.Value(rv, "set_flow")*look.Value(rv, "override")
	}
	return []Cure{{{set, p.target(rv, key), barText(at)}}}
}

const ruleReliefOpen = "relief open in normal work"

// reliefInWork finds relief valves that open in normal work where the circuit has another way to limit its flow. Over the
// relief valve of a fixed pump a throttled circuit always sends its surplus: that is the architecture, no fault.
func reliefInWork(p *plant) []*Finding {
	surplus := p.surplusReliefs()
	var out []*Finding
	for _, rv := range p.Blocks("relief") {
		spill := p.Lost("relief spill", rv.ID)
		part := spill.Total() / p.Drawn()
		if surplus[rv.ID] || part < 0.005 || spill.Total()-spill.Driving < 0.5*spill.Total() {
			continue // what a driving load spills is braking, chosen so
		}
		top := p.Highest(rv.ID+".P.q", look.Always)
		p0 := p.Highest(rv.ID+".P.p", look.Always)
		f := p.found(rv, ruleReliefOpen, Settings, NoCost)
		f.Param, f.Duty, f.Time = "crack", top.Duty, top.T
		f.Text = fmt.Sprintf("%s opens at %s in normal work and spills %s of all energy drawn.", rv.ID, p.bar(cracks(rv)), percent(part))
		f.Evidence = []Quantity{
			{rv.ID + " opens at", p.bar(cracks(rv)), "above what the work needs"},
			{"highest flow over " + rv.ID, p.Shown(top.V, units.Flow), "none in normal work"},
			{"highest pressure there", p.bar(p0.V), ""},
			{"spilled a year", kilowattHours(spill.Total()), "below 0.5 % of energy drawn"},
		}
		f.Do = fmt.Sprintf("Measure the outlet of %s at work with a contactless thermometer: it should be no warmer than the tank. Compare its setting with the name plate and the drawing; look for a worn seat, a weak spring, dirt under the cone. Restore what the drawing says, or take load off.", rv.ID)
		f.Caution = settingCaution + hotOutlet + " The price below takes the valve as shut for the calculation alone; it is no setting."
		f.Basis = "no flow over a relief valve in normal work: trade literature; 0.5 % of energy drawn: common practice, no source"
		f.Cures = p.shut(rv, 1.15*math.Max(p0.V, cracks(rv)))
		for _, k := range []float64{1.5, 2} { // where a spilling valve hides how much pressure the work needs
			f.Cures = append(f.Cures, p.shut(rv, k*math.Max(p0.V, cracks(rv)))...)
		}
		out = append(out, f)
	}
	return out
}

// surplusReliefs are the relief valves on supplies that cannot stroke back, and those of fixed pumps behind dividers.
func (p *plant) surplusReliefs() map[string]bool {
	out := map[string]bool{}
	for _, pump := range p.Blocks("pump", "charge_pump") {
		if !fixed(pump) {
			continue
		}
		for _, rv := range p.ReliefsOf(pump) {
			out[rv.ID] = true
		}
	}
	for _, d := range p.Blocks("flow_divider") {
		for _, port := range circuit.KindNamed(d.Kind).Ports {
			for _, rv := range p.At(circuit.PortRef{Block: d.ID, Port: port.Name}, "relief", "P") {
				out[rv.ID] = true
			}
		}
	}
	return out
}

// fixed reports whether a pump gives what its speed says.
func fixed(b *circuit.Block) bool {
	return b.Kind == "charge_pump" || b.Kind == "pump" && look.Word(b, "control") == "fixed" && b.Word("follows") == ""
}
