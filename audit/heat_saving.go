package audit

import (
	"fmt"
	"math"

	"barlitre/machines/units"
)

// oilShare is the share of the saving by which it may change with the oil as warm as it gets before that stands against the
// verdict (our choice).
const oilShare = 0.05

// OilSaving is what a proposal saves with the oil of both circuits as warm as it gets, the cooling included.
type OilSaving struct {
	Saved  float64 // J a year
	Change float64 // J a year, Saved less the saving at the oil temperature of the energy balance
	Share  float64 // Change as a share of the saving at the oil temperature of the energy balance; NaN where that saves nothing
}

// oilSaving is known where both circuits were studied and compared.
func (s *Solution) oilSaving(c *Comparison) (o OilSaving, ok bool) {
	if c.Missing != "" || c.Base.Warmth == nil || c.Proposal.Warmth == nil {
		return o, false
	}
	b, atB := c.Base.Warmth.AtFound(s.Oil)
	p, atP := c.Proposal.Warmth.AtFound(s.Oil)
	o.Change = (b - atB) - (p - atP)
	o.Saved = c.SavedDrawn + o.Change
	o.Share = math.NaN()
	if c.SavedDrawn > 0 {
		o.Share = o.Change / c.SavedDrawn
	}
	return o, known(o.Change)
}

// oilText says in a sentence what the oil temperature does to the saving; "" where it is not known. stands reports whether the
// saving is so much smaller that this stands against the verdict.
func (s *Solution) oilText(p printer, c *Comparison) (text string, stands bool) {
	o, ok := s.oilSaving(c)
	if !ok {
		return "", false
	}
	b, a := c.Base, c.Proposal
	if b.Warmth.beyondOil() || a.Warmth.beyondOil() {
		return fmt.Sprintf("Both circuits are compared with oil at %s. What a warmer oil would do to the saving is not worked out: with the cooling described it would get hotter than any oil stands; see the heat study.", p.degrees(s.Oil)), false
	}
	text = fmt.Sprintf("Both circuits are compared with oil at %s. As warm as it gets in the mean (%s %s, %s %s)", p.degrees(s.Oil),
		b.Circuit.Name, p.degrees(b.Warmth.Week.Ran), a.Circuit.Name, p.degrees(a.Warmth.Week.Ran))
	word := "more"
	if o.Change < 0 {
		word = "less"
	}
	switch {
	case !known(o.Share):
		text += fmt.Sprintf(", %s would draw %s a year less than %s.", a.Circuit.Name, p.kWh(o.Saved), b.Circuit.Name)
	case math.Abs(o.Share) < 0.001:
		return text + ", the saving stays the same to a part in a thousand.", false
	default:
		text += fmt.Sprintf(", the saving is %s a year: %s %s, %s of it.", p.kWh(o.Saved), p.kWh(math.Abs(o.Change)), word, units.Format(math.Abs(o.Share), units.Percent, 2))
	}
	if a.Warmth.Week.Ran < s.Oil-overcooled && o.Change < 0 {
		text += " " + a.Circuit.Name + " makes less heat, so its oil runs colder and thicker with the cooler as it is: a thermostat, a bypass or a smaller cooler wins that back."
	}
	return text, known(o.Share) && o.Share < -oilShare
}
