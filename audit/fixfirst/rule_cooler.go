package fixfirst

import (
	"fmt"
	"math"
	"slices"

	"barlitre/audit"
	"barlitre/machines/units"
)

// Working temperatures of oil [K] beyond which the cooler is looked at.
const (
	tooCold          = units.ZeroCelsius + 33
	tooHotStationary = units.ZeroCelsius + 66
	tooHotMobile     = units.ZeroCelsius + 86
	aimed            = units.ZeroCelsius + 45 // of a thermostat
	// leastCooled is the share of the heat that a cooler must take before cold oil is laid at its door (our choice).
	leastCooled = 0.25
)

func (p *plant) tooHot() (theta float64, kind string) {
	if len(p.Blocks("engine")) > 0 {
		return tooHotMobile, "a mobile machine"
	}
	return tooHotStationary, "a stationary machine"
}

// cooled judges the cooler by the oil temperature in the file, which stands for what is read at the machine, and by the one that
// the tank, the cooler and the air of the file lead to.
func cooled(p *plant, h *audit.HeatStudy) []*Finding {
	top, kind := p.tooHot()
	read, ran, installed := p.S.Oil, h.Week.Ran, h.Rate()
	takes := installed > 0 && h.Week.Cooled > leastCooled*h.Week.Heat
	f := p.found(nil, coolerSmall, Repair, LowCost)
	f.Caution, f.Basis = coolerCaution, coolerBasis+"; the temperature found is that of tank, cooler and air in the section heat"
	shown := func(theta float64) string { return p.Shown(theta, units.Temperature) }
	switch {
	case read > top && ran <= top && installed > 0:
		f.Rule = "cooler off or dirty"
		f.Text = fmt.Sprintf("The file has the oil at %s, but with the cooler at its %s it would run at %s: it does not do its work, or does not get its oil, air or water.",
			shown(read), p.Shown(installed, units.HeatCapacityRate), shown(ran))
		f.Do = coolerDo
		f.Cures = []Cure{{{set, "oil.temperature", fmt.Sprintf("%.0f C", ran-units.ZeroCelsius)}}, {{set, "oil.temperature", "55 C"}}}
	case ran > top:
		f.Text = fmt.Sprintf("With the cooler in the file the oil comes to %s in the mean, too warm for %s.", shown(ran), kind)
		if installed == 0 {
			f.Text = fmt.Sprintf("Without a cooler the oil comes to %s in the mean, too warm for %s.", shown(ran), kind)
		}
		f.Do = "First cure what makes the heat, in this list; then have a cooler offered with the cooler request sheet. " + coolerDo
		f.Effort = Invest
		f.Cures = p.largerCooler(h)
	case read < tooCold:
		f = p.overcooled(f, fmt.Sprintf("The file has the oil at %s; with tank, cooler and thermostat as described it would run at %s.", shown(read), shown(ran)))
		f.Cures = []Cure{{{set, "oil.temperature", "45 C"}}}
	case ran < tooCold && takes:
		f = p.overcooled(f, fmt.Sprintf("With the cooler in the file the oil runs at %s: it takes %s of the heat, and the oil stays thick.", shown(ran), percent(h.Week.Cooled/h.Week.Heat)))
		f.Cures = p.thermostat(h)
	default:
		return nil
	}
	f.Evidence = p.coolerEvidence(h)
	return []*Finding{f}
}

func (p *plant) overcooled(f *Finding, text string) *Finding {
	f.Rule, f.Class, f.Effort = "oil overcooled", Settings, NoCost
	f.Text = text
	f.Do = "Let a thermostat switch the fan or the water, or open the bypass, so that the oil comes to 40 to 50 °C; see that a thermostat that is there does not stick."
	return f
}

// put is an edit of the section heat of the circuit.
func (p *plant) put(key, value string) Edit { return Edit{heat, p.C.Name + "/heat." + key, value} }

// largerCooler is a cooler that is enough for the heaviest duty in the hottest hour, else for the mix.
func (p *plant) largerCooler(h *audit.HeatStudy) (out []Cure) {
	for _, n := range slices.Backward(h.Needs) {
		if n.Fault != "" || math.IsInf(n.Rate, 1) || n.Rate <= h.Rate() {
			continue
		}
		c := Cure{}
		if h.Section.Word("cooler") == "none" {
			c = append(c, p.put("cooler", "air"))
		}
		out = append(out, append(c, p.put("cooler_rate", fmt.Sprintf("%.3g kW/K", n.Rate/1e3))))
	}
	return out
}

// thermostat keeps the cooler off until the oil is warm, and its fan with it.
func (p *plant) thermostat(h *audit.HeatStudy) []Cure {
	c := Cure{p.put("thermostat_opens", "45 C"), p.put("fan", "by thermostat")}
	if _, given := h.Section.Values["thermostat_full"]; given {
		c = append(c, p.put("thermostat_full", "50 C"))
	}
	return []Cure{c}
}

// coolerEvidence sets what the cooler can against what it must.
func (p *plant) coolerEvidence(h *audit.HeatStudy) []Quantity {
	out := []Quantity{
		{"oil temperature in the file", p.Shown(p.S.Oil, units.Temperature), oilLimits},
		{"oil temperature that tank, cooler and air lead to", p.Shown(h.Week.Ran, units.Temperature), oilLimits},
	}
	installed := "none"
	if k := h.Rate(); k > 0 {
		installed = p.Shown(k, units.HeatCapacityRate)
	}
	for _, n := range h.Needs {
		need := "no cooler there is enough"
		if n.Fault == "" && !math.IsInf(n.Rate, 1) {
			need = p.Shown(n.Rate, units.HeatCapacityRate)
		}
		out = append(out, Quantity{"cooler installed; " + n.Case + ", for oil at " + p.Shown(h.Wanted, units.Temperature), installed, need})
	}
	out = append(out, Quantity{"mean heat to the oil", p.Shown(p.Run.Heat.Year.Mean, units.Power), ""})
	best := math.Min(math.Max(h.Week.Ran, aimed), h.Wanted)
	at, err := h.Loads[audit.Mix].DrawnAt(h.Week.Ran)
	then, err2 := h.Loads[audit.Mix].DrawnAt(best)
	if d := (at - then) * h.Hours; err == nil && err2 == nil && d > 0.001*at*h.Hours {
		out = append(out, Quantity{"drawn a year more than with the oil at " + p.Shown(best, units.Temperature), kilowattHours(d), ""})
	}
	return out
}

const (
	coolerSmall   = "cooler off or too small"
	oilLimits     = "40 to 60 °C stationary, up to 80 °C mobile"
	coolerDo      = "See that the fan turns the right way and the water runs; clean the fins; read oil and air at inlet and outlet; check thermostat and bypass."
	coolerCaution = "Oil and metal above some 55 °C burn; fans start by themselves. Lock off before a guard is opened."
	coolerBasis   = "working temperature of oil 40 to 60 °C stationary, up to 80 °C mobile: trade literature"
)
