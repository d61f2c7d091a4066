package audit

import (
	"fmt"

	"barlitre/circuit"
	"barlitre/machines/units"
)

// Published sets a saving beside what others found for the same kind of change. It
// is a check on the reader's behalf, never an input.
type Published struct {
	Known       bool   // there are published figures for this kind of change
	Outside     bool   // the saving lies outside all of them
	Text        string // the published figures, and where the saving lies
	Explanation string // from the numbers of this audit, when outside
}

// Savings found where throttle control was replaced by pump control, as shares of
// the energy drawn. Cranes: Hagen, Padovani, Choux, Actuators 2019, 8(4), 78 (62 %,
// measured) and a second measured crane study (60 to 64 %). Presses and moulding
// machines: 30 to 50 %, claims of the trade without a checked source. One excavator
// with individually valve-switched pumps: 13 %, before and after.
const (
	publishedLow  = 0.30
	publishedHigh = 0.64
	publishedText = "Published savings where throttle control gave way to pump control: 60 to 64 % measured on crane cylinders " +
		"(62 % in Actuators 2019, 8(4), 78), 30 to 50 % claimed by the trade for presses and moulding machines, 13 % on one excavator."
)

// published judges the saving of a comparison.
func published(c *Comparison) Published {
	if !known(c.SavedShare) || !throttled(c.Base.Circuit) || !pumpControlled(c.Proposal.Circuit) {
		return Published{Text: "No published range is at hand for this kind of change."}
	}
	p := Published{Known: true}
	share := units.Format(c.SavedShare, units.Percent, 3)
	switch {
	case c.SavedShare > publishedHigh:
		p.Outside = true
		p.Text = fmt.Sprintf("%s The saving of %s lies above all of them.", publishedText, share)
		p.Explanation = whyAbove(c)
	case c.SavedShare < publishedLow:
		p.Outside = true
		p.Text = fmt.Sprintf("%s The saving of %s lies below what most of them found.", publishedText, share)
		p.Explanation = whyBelow(c)
	default:
		p.Text = fmt.Sprintf("%s The saving of %s lies among them.", publishedText, share)
	}
	return p
}

// whyAbove explains a large saving by where the circuit as found spends its energy.
func whyAbove(c *Comparison) string {
	of := shareOf(c.Base.Year.Drawn.Total())
	d, g := c.Base.Year.Drawn, c.Base.groupEnergy()
	return fmt.Sprintf("Of the energy drawn as found, %s is drawn while nothing moves (%s holding a load, %s without load), "+
		"%s goes over relief valves at any time and %s into throttling valves; work against loads takes %s. "+
		"The more of it is drawn at standstill or spilled, the more there is to save than on machines that move most of the time.",
		of(d.Holding+d.Idle), of(d.Holding), of(d.Idle),
		of(g[reliefGroup].Total()), of(g[meteringGroup].Total()), of(c.Base.Year.WorkPositive().Total()))
}

// whyBelow explains a small saving by how little there is to save, and by what the
// proposal itself loses.
func whyBelow(c *Comparison) string {
	of := shareOf(c.Base.Year.Drawn.Total())
	g := c.Base.groupEnergy()
	machines := func(r *CircuitRun) string {
		e := r.groupEnergy()
		return of(e[groups[0].name].Total() + e[groups[1].name].Total())
	}
	return fmt.Sprintf("Of the energy drawn as found, %s goes over relief valves and %s into throttling valves: a change of control "+
		"cannot save more than these. Electric motors, converters, pumps and hydraulic motors take %s as found and %s in the proposal "+
		"(both of the energy drawn as found).",
		of(g[reliefGroup].Total()), of(g[meteringGroup].Total()), machines(c.Base), machines(c.Proposal))
}

func shareOf(whole float64) func(part float64) string {
	return func(part float64) string { return percent(ratio(part, whole)) }
}

// percent writes a share to two digits, 100 % and more to three.
func percent(share float64) string {
	digits := 2
	if share >= 0.995 {
		digits = 3
	}
	return units.Format(share, units.Percent, digits)
}

// throttled reports whether a valve controls an axis.
func throttled(c *circuit.Circuit) bool { return hasFollower(c, true) }

// pumpControlled reports whether axes are controlled, and none by a valve.
func pumpControlled(c *circuit.Circuit) bool { return hasFollower(c, false) && !hasFollower(c, true) }

func hasFollower(c *circuit.Circuit, valve bool) bool {
	for i := range c.Blocks {
		b := &c.Blocks[i]
		if b.Word("follows") != "" && (b.Kind == "valve") == valve {
			return true
		}
	}
	return false
}
