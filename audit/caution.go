package audit

import (
	"fmt"
	"slices"
	"strings"
	"unicode"
	"unicode/utf8"

	"barlitre/circuit"
	"barlitre/circuit/duty"
	"barlitre/machines/units"
)

// CautionText is a caution of the report: about harm to people or machines, or
// about what the audit must not be used for. It defers to local rules and to those
// licensed to act on them; it never replaces them.
type CautionText struct {
	Circuit, Block string // "" when it holds for the whole audit
	Topic, Text    string
}

// limits hold for every audit.
var limits = []CautionText{
	{Topic: "Limits of use", Text: "Use these pages to judge whether an energy measure is worth working out. " +
		"They are no basis for building, adjusting or approving a machine: whether loads are held, pressures limited, parts strong enough, " +
		"motions stable and the law met was not examined."},
	{Topic: "Rules and licences", Text: "The rules in force where the machine stands, on machinery, pressure equipment, electrical work, " +
		"lifting and safety at work, come before anything printed here. What they reserve to licensed or qualified persons " +
		"is for those persons to plan, carry out and sign for."},
	{Topic: "Pressures shown", Text: "Pressures are those of a steady balance at each time step. Shocks, decompression and oscillation are not in them. " +
		"Choose no rating and no setting from a pressure printed here."},
	{Topic: "Stored energy", Text: "A machine that is switched off still holds energy: raised loads, trapped oil, springs, charged capacitors. " +
		"Before a fitting is opened, lock the supply off, lower or prop the load, relieve every trapped volume and see zero on a gauge; " +
		"the lock-out procedure of the site says how. ISO 14118 deals with unexpected start-up."},
	{Topic: "Oil under pressure", Text: "A fine jet of oil goes through gloves and skin well below working pressure. Never search for a leak by hand. " +
		"Any such injury, however small it looks, needs a surgeon at once; tell them it is oil injected under pressure."},
	{Topic: "Measuring", Text: "Gauges, hoses and couplings must be rated above the highest pressure their point can see. " +
		"Guards stay closed while a recording runs. Measuring at live terminals is for qualified electricians."},
	{Topic: "Changing the drive", Text: "A new drive is a change of design. The risk assessment and the proof of the safety functions must be done again, " +
		"and whoever makes the change may take on the duties of the machine's maker under local law."},
}

// Cautions returns the cautions of an audit: the limits of use, then what the
// circuits contain.
func (s *Solution) Cautions() []CautionText {
	out := append([]CautionText(nil), limits...)
	if burns := units.ZeroCelsius + 55; s.Oil >= burns { // below about 55 °C short contact with bare metal does not burn; from memory of ISO 13732-1
		out = append(out, CautionText{Topic: "Hot surfaces", Text: fmt.Sprintf("Oil at %s and the metal around it burn the skin. "+
			"ISO 13732-1 gives burn thresholds by time of contact.", units.Format(s.Oil, units.Preferred(units.Temperature, units.Metric), 3))})
	}
	for _, c := range s.Circuits {
		own := circuitCautions(c)
		for _, f := range c.Findings {
			if f.Level == circuit.Caution && !slices.Contains(own, f) {
				out = append(out, CautionText{Circuit: f.Circuit, Block: f.Block, Topic: "As drawn", Text: sentence(f)})
			}
		}
		out = append(out, c.cautions()...)
	}
	return out
}

// sentence writes a finding as a caution does: without the block, which stands before
// the topic already, with the duties that it shows in, a capital and a full stop.
func sentence(f circuit.Finding) string {
	text := strings.TrimSpace(strings.TrimPrefix(f.Text, f.Block+": "))
	if text == "" {
		return ""
	}
	if f.Duty != "" {
		text = "in " + f.Duties() + ": " + text
	}
	first, n := utf8.DecodeRuneInString(text)
	text = string(unicode.ToUpper(first)) + text[n:]
	if strings.ContainsAny(text[len(text)-1:], ".!?") {
		return text
	}
	return text + "."
}

// circuitCautions turns a circuit's cautions into findings.
func circuitCautions(c *CircuitRun) []circuit.Finding {
	var out []circuit.Finding
	for _, t := range c.cautions() {
		out = append(out, circuit.Finding{Level: circuit.Caution, Circuit: t.Circuit, Block: t.Block, Text: t.Topic + ": " + t.Text})
	}
	return out
}

// cautions chooses by what the circuit contains and by what the run showed.
func (c *CircuitRun) cautions() []CautionText {
	var out []CautionText
	say := func(block, topic, format string, args ...any) {
		out = append(out, CautionText{Circuit: c.Circuit.Name, Block: block, Topic: topic, Text: fmt.Sprintf(format, args...)})
	}
	c.loadCautions(say)
	c.pressureCautions(say)
	c.supplyCautions(say)
	return out
}

type sayCaution func(block, topic, format string, args ...any)

// loadCautions are about loads that hang, press or drive.
func (c *CircuitRun) loadCautions(say sayCaution) {
	for i := range c.Circuit.Blocks {
		b := &c.Circuit.Blocks[i]
		axis := b.Word("axis")
		if axis == "" || !c.mayFall(axis) {
			continue
		}
		text := "A load stands on or drives axis %s. This audit takes for granted that %s holds it and does not show that it does. " +
			"Keep, test and prove the holding device at the actuator by the rules for the machine, before and after any change."
		if b.Word("hold") == "pump" {
			text += " Torque at standstill heats the motor, and ends with the power."
		}
		say(b.ID, "Suspended load", text, axis, holder(b.Word("hold")))
	}
}

// mayFall reports whether a load drives an axis in a duty that was run, or stands on it. Where the duty does not give
// its load, it may stand on any axis while the machine holds.
func (c *CircuitRun) mayFall(axis string) bool {
	return slices.ContainsFunc(c.Duties, func(d *DutyRun) bool {
		switch {
		case d.Balance == nil:
			return false
		case d.Balance.axis(axis).Negative.Total() < 0:
			return true
		case d.Duty.Track(axis, duty.Load) == nil:
			return d.Balance.Seconds.Holding > 0
		}
		return d.Duty.StandsUnder(duty.Axis{Name: axis}, 0.01) // as the check of circuits: what is left of a ramp is no load
	})
}

// holder names what holds an axis.
func holder(hold string) string {
	if hold == "" {
		return "the circuit"
	}
	return "the " + hold
}

// pressureCautions are about what limits pressure, and what raises it.
func (c *CircuitRun) pressureCautions(say sayCaution) {
	if ids := c.blocksOf("relief"); len(ids) > 0 {
		say(ids[0], "Relief valves", "Relief valves (%s) keep people and machine from harm. No saving is a reason to raise, block or leave out a relief valve. "+
			"Only the machine's maker, or a qualified person by the maker's instructions, changes a setting. "+
			"Every volume that can be shut off needs a limit of its own, against heating and loads from outside as well.", strings.Join(ids, ", "))
	}
	if ids := append(c.blocksOf("counterbalance"), c.blocksOf("pilot_check")...); len(ids) > 0 {
		say(ids[0], "Load-holding valves", "Settings of %s decide whether a load stays up and comes down steadily. They follow from the machine maker's instructions, not from the least loss found here.",
			strings.Join(ids, ", "))
	}
	for i := range c.Circuit.Blocks {
		b := &c.Circuit.Blocks[i]
		bore, rod := b.Values["bore"].SI, b.Values["rod"].SI
		if b.Kind == "cylinder" && rod > 0 && rod < bore {
			ratio := bore * bore / (bore*bore - rod*rod)
			say(b.ID, "Pressure raised by area", "When oil is shut in on the rod side of %s, its pressure rises to %s times that on the bore side, load or no load. "+
				"The rod side needs a pressure limit that no shut valve can cut off.", b.ID, units.Number(ratio, 3))
		}
	}
}

// supplyCautions are about what drives the circuit.
func (c *CircuitRun) supplyCautions(say sayCaution) {
	for _, id := range c.blocksOf("pressure_source") {
		say(id, "Low-pressure source", "%s stands for a supply that is not drawn. What fills it, limits its pressure and keeps it from running empty is not part of this audit. "+
			"Where it is a vessel with gas, it is pressure equipment, and the rules for inspection, shut-off and discharge apply.", id)
	}
	for _, id := range c.blocksOf("converter") {
		say(id, "Frequency converter", "Capacitors of %s stay charged after switching off: wait as long as its maker says and measure. "+
			"A trip or a safe torque off takes away any torque that holds a load. Where a load drives, what comes back must find a resistor or a mains unit of sufficient size.", id)
	}
	if c.Circuit.PumpAtRest == circuit.Stop && len(c.blocksOf("electric_motor")) > 0 {
		say("", "Motor that starts by itself", "%s stops its motor in pauses, so the motor starts again without anybody near. Guards, signs and lock-out must allow for that, "+
			"and the motor for the number of starts.", c.Circuit.Name)
	}
}

// blocksOf lists the ids of the blocks of a kind.
func (c *CircuitRun) blocksOf(kind string) []string {
	var ids []string
	for _, b := range c.Circuit.Blocks {
		if b.Kind == kind {
			ids = append(ids, b.ID)
		}
	}
	return ids
}
