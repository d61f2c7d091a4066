package audit

import (
	"slices"
	"strings"

	"barlitre/circuit"
)

// group names kinds of block whose losses are told together.
type group struct {
	name  string
	kinds []string
}

// Names of the groups that explanations speak of.
const (
	reliefGroup   = "relief valves"
	meteringGroup = "valves: metering, compensators, load holding"
	aroundGroup   = "unloading and flushing"
)

// groups lists them in the order of the way from the mains to the load.
var groups = []group{
	{"electric motors and converters", []string{"electric_motor", "converter"}},
	{"combustion engines", []string{"engine"}},
	{"pumps and hydraulic motors", []string{"pump", "switched_machine", "charge_pump", "motor", "flow_divider", "gearbox"}},
	{reliefGroup, []string{"relief"}},
	{"accumulators", []string{"accumulator"}},
	{aroundGroup, []string{"unloading", "unloading_pilot", "flushing"}},
	{meteringGroup, []string{"valve", "section_6_3", "compensator", "flow_sharing", "orifice", "throttle_check",
		"flow_control", "flow_control_3", "reducing", "sequence", "counterbalance"}},
	{"lines, filters and check valves", []string{"line", "filter", "cooler", "flow_point", "check", "pilot_check", "shuttle", "shuttle_flow", "junction"}},
	{"cylinder friction", []string{"cylinder", "double_rod", "plunger"}},
	{"accumulators", []string{"accumulator"}},
	{coolingGroup, nil},
}

const (
	otherGroup   = "other blocks"
	coolingGroup = "cooler fan and pumps"
)

// groupOf names the group that a loss belongs to. The relief valve inside a charge
// pump counts as a relief valve; what goes round through a vented one, or the centre of a valve, unloads a pump.
func groupOf(c *circuit.Circuit, l LossRow) string {
	if l.Kind == "unloaded circulation" {
		return aroundGroup
	}
	if strings.Contains(l.Kind, "relief") || strings.Contains(l.Kind, "relieving") {
		return reliefGroup
	}
	if l.Block == coolingBlock {
		return coolingGroup
	}
	if b := c.Block(l.Block); b != nil {
		for _, g := range groups {
			if slices.Contains(g.kinds, b.Kind) {
				return g.name
			}
		}
	}
	return otherGroup
}

// groupEnergy returns the losses of a year by group [J].
func (c *CircuitRun) groupEnergy() map[string]Split {
	out := map[string]Split{}
	for _, l := range c.Year.Losses {
		g := groupOf(c.Circuit, l)
		out[g] = out[g].Plus(l.Energy)
	}
	return out
}

// groupRows tells where the energy goes in both circuits. The rows add up to the
// energy drawn, as far as both balances close.
func groupRows(base, proposal *CircuitRun) []GroupRow {
	b, p := base.groupEnergy(), proposal.groupEnergy()
	var out []GroupRow
	add := func(name string, before, after float64) {
		before, after = nothing(before, base.Year.Drawn.Total()), nothing(after, proposal.Year.Drawn.Total())
		if before != 0 || after != 0 {
			out = append(out, GroupRow{name, before, after})
		}
	}
	for _, g := range groups {
		add(g.name, b[g.name].Total(), p[g.name].Total())
	}
	add(otherGroup, b[otherGroup].Total(), p[otherGroup].Total())
	add("work against loads", base.Year.WorkPositive().Total(), proposal.Year.WorkPositive().Total())
	add("work taken from driving loads", base.Year.WorkNegative().Total(), proposal.Year.WorkNegative().Total())
	add("put into store", base.Year.Stored.Total(), proposal.Year.Stored.Total())
	add("returned to the supply", base.Year.Returned.Total(), proposal.Year.Returned.Total())
	return out
}
