package audit

import (
	"fmt"
	"math"

	"barlitre/machines/units"
)

// decision lays out one proposal against the circuit as found.
func (s *Solution) decision(p printer, c *Comparison) Decision {
	d := Decision{Base: c.Base.Circuit.Name, Proposal: c.Proposal.Circuit.Name, Published: c.Published,
		Verdict: s.verdict(p, c), Warnings: warnings(c), Shortfalls: shortfallTable(p, c)}
	if c.Missing != "" {
		return d
	}
	var stands bool
	if d.Oil, stands = s.oilText(p, c); stands {
		d.Warnings = append(d.Warnings, fmt.Sprintf("the saving is more than %s smaller with the oil as warm as it gets: see the sentence on oil temperature", units.Format(oilShare, units.Percent, 2)))
	}
	d.Cooler = s.coolerText(p, c)
	d.Source = groupTable(p, c)
	d.Rows = s.decisionRows(p, c)
	d.Outcome = s.outcome(p, c)
	return d
}

// verdict says the comparison in one sentence.
func (s *Solution) verdict(p printer, c *Comparison) string {
	b, a := c.Base, c.Proposal
	if c.Missing != "" {
		return "No comparison over the year: " + c.Missing + "."
	}
	less := "less"
	if c.SavedDrawn < 0 {
		less = "more"
	}
	text := lacksMotion(c) + fmt.Sprintf("%s draws %s a year where %s draws %s: %s %s", a.Circuit.Name, p.kWh(a.Year.Drawn.Total()),
		b.Circuit.Name, p.kWh(b.Year.Drawn.Total()), p.kWh(math.Abs(c.SavedDrawn)), less)
	if known(c.SavedShare) {
		text += " (" + p.share(math.Abs(c.SavedShare)) + ")"
	}
	if known(c.MoneySaved) {
		text += fmt.Sprintf(", %s a year; %s", p.money(c.MoneySaved), paybackText(c.Payback))
	}
	return text + "."
}

// lacksMotion says that the circuit as found does not do the work that the other does, "" where it does.
func lacksMotion(c *Comparison) string {
	worst := ShortfallPair{}
	for _, x := range c.Shortfalls {
		if x.Base.Seconds-x.Proposal.Seconds > worst.Base.Seconds-worst.Proposal.Seconds {
			worst = x
		}
	}
	if worst.Base.Seconds-worst.Proposal.Seconds < leastLack {
		return ""
	}
	return fmt.Sprintf("Motion is missing in %s: in %s axis %s lacks %s a cycle, so the two do not do the same work and their energies cannot be compared as they stand. ",
		c.Base.Circuit.Name, worst.Duty, worst.Axis, seconds(worst.Base.Seconds))
}

// leastLack [s] of motion a cycle missing makes two years no longer those of the same work.
const leastLack = 1e-2

func paybackText(p Payback) string {
	if p.None != "" {
		return p.None
	}
	if p.ranges() {
		return "simple payback " + p.String() + ", the range by its cost alone"
	}
	return "simple payback " + p.String()
}

// warnings lists what stands against a verdict.
func warnings(c *Comparison) []string {
	out := append([]string(nil), c.Differences...)
	for _, r := range []*CircuitRun{c.Base, c.Proposal} {
		for _, d := range r.Duties {
			if n := d.Certificate.Unbalanced; n > 0 && d.Balance != nil {
				out = append(out, fmt.Sprintf("%s: %d of %d time steps of %s could not be balanced", r.Circuit.Name, n, d.Balance.Steps, d.Duty.Name))
			}
			if d.Balance != nil && d.Balance.Closure() > ClosureLimit {
				out = append(out, fmt.Sprintf("%s: the energy balance of %s does not close (%s)", r.Circuit.Name, d.Duty.Name,
					units.Format(d.Balance.Closure(), units.Percent, 2)))
			}
		}
	}
	for _, x := range c.Shortfalls {
		if x.Proposal.Seconds > x.Base.Seconds {
			out = append(out, fmt.Sprintf("%s is slower: in %s axis %s lacks speed for %s a cycle, %s for %s", c.Proposal.Circuit.Name,
				x.Duty, x.Axis, seconds(x.Proposal.Seconds), c.Base.Circuit.Name, seconds(x.Base.Seconds)))
		}
	}
	return out
}

// figureNamed finds a figure; the zero Figure with value NaN when there is none.
func figureNamed(fs []Figure, name string) Figure {
	for _, f := range fs {
		if f.Name == name {
			return f
		}
	}
	return Figure{Name: name, Value: math.NaN(), Text: "n/a"}
}

// decisionRows sets the figures of both circuits side by side.
func (s *Solution) decisionRows(p printer, c *Comparison) []DecisionRow {
	var rows []DecisionRow
	yb, ya := s.yearFigures(p, c.Base), s.yearFigures(p, c.Proposal)
	hb, ha := s.heatFigures(p, c.Base), s.heatFigures(p, c.Proposal)
	add := func(name string, before, after Figure, text func(float64) string) {
		row := DecisionRow{Name: name, Before: before, After: after}
		if text != nil && known(before.Value) && known(after.Value) {
			v := before.Value - after.Value
			row.Change = Figure{"less", v, text(v), Calculation{"before − after", before.Text + " − " + after.Text, "the two circuits"}}
		}
		rows = append(rows, row)
	}
	add("energy drawn a year", figureNamed(yb, "drawn a year"), figureNamed(ya, "drawn a year"), p.kWh)
	add("energy returned a year", figureNamed(yb, "returned a year"), figureNamed(ya, "returned a year"), nil)
	add("mean power drawn", meanFigure(p, c.Base), meanFigure(p, c.Proposal), p.power)
	if before, after := demandFigure(p, c.Base), demandFigure(p, c.Proposal); known(before.Value) || known(after.Value) {
		add("largest 15-minute mean of power drawn", before, after, p.power)
	}
	add("mean heat to the oil", figureNamed(hb, "mean heat to the oil, all running hours"), figureNamed(ha, "mean heat to the oil, all running hours"), p.power)
	add("cooler for it", figureNamed(hb, "cooler for it, all running hours"), figureNamed(ha, "cooler for it, all running hours"), p.cooler)
	add("cooler for the hottest duty", hottestCooler(p, c.Base, hb), hottestCooler(p, c.Proposal, ha), p.cooler)
	if known(s.unitPrice(c.Base)) || known(s.unitPrice(c.Proposal)) {
		add("cost of energy a year", figureNamed(yb, "cost of energy a year"), figureNamed(ya, "cost of energy a year"), p.money)
	}
	if known(c.Base.Money.CO2) || known(c.Proposal.Money.CO2) {
		add("CO2 a year", figureNamed(yb, "CO2 a year"), figureNamed(ya, "CO2 a year"), p.mass)
	}
	return rows
}

func meanFigure(p printer, c *CircuitRun) Figure {
	v := c.Year.MeanPower(c.Year.Drawn)
	return Figure{"mean power drawn", v, p.power(v), Calculation{"P = E_drawn / hours",
		p.kWh(c.Year.Drawn.Total()) + " / " + p.hours(c.Year.Hours), "over the running hours of the year"}}
}

// demandFigure is the largest 15-minute mean among the duties that run in the year and draw from the mains.
func demandFigure(p printer, c *CircuitRun) Figure {
	best := Figure{Name: "15-minute mean", Value: math.NaN(), Text: "n/a"}
	for _, d := range c.Duties {
		if d.Balance == nil || d.Duty.Hours <= 0 || d.Balance.offMains() {
			continue
		}
		if m := d.Balance.Demand; !known(best.Value) || m.Mean > best.Value {
			best = Figure{"15-minute mean", m.Mean, p.power(m.Mean), Calculation{"max over t of E(t, t + 15 min) / 15 min",
				"in " + d.Duty.Name + ", from " + p.seconds(m.From), string(m.Basis)}}
		}
	}
	return best
}

func hottestCooler(p printer, c *CircuitRun, heat []Figure) Figure {
	row, ok := c.Heat.Largest()
	if !ok || !known(row.Cooler) {
		return Figure{Name: "cooler", Value: math.NaN(), Text: "n/a"}
	}
	return figureNamed(heat, "cooler for it, "+row.Duty)
}

// outcome lists what the proposal brings.
func (s *Solution) outcome(p printer, c *Comparison) []Figure {
	var out []Figure
	add := func(name string, v float64, text string, calc Calculation) {
		out = append(out, Figure{name, v, text, calc})
	}
	before, after := c.Base.Year.Drawn.Total(), c.Proposal.Year.Drawn.Total()
	oil, _ := s.oilText(p, c)
	add("saved a year", c.SavedDrawn, p.kWh(c.SavedDrawn), Calculation{"ΔE = E_before − E_after", p.kWh(before) + " − " + p.kWh(after),
		joined([]string{"energy drawn, same duty, same oil temperature", oil})})
	if known(c.SavedShare) {
		add("saved share", c.SavedShare, p.share(c.SavedShare), Calculation{"ΔE / E_before", p.kWh(c.SavedDrawn) + " / " + p.kWh(before), joined([]string{"energy drawn", oil})})
	}
	if known(c.MoneyDrawn) {
		add("money saved on energy drawn a year", c.MoneyDrawn, p.money(c.MoneyDrawn), c.saving("K", "price",
			p.kWh(c.SavedDrawn)+" × "+p.price(s.Tariff.Price), p.money(c.Base.Money.Drawn)+" − "+p.money(c.Proposal.Money.Drawn), "marginal price, from "+fromFile))
		if s.Tariff.CreditReturned {
			add("paid for returned energy a year, more than before", c.MoneyCredit, p.money(c.MoneyCredit), Calculation{"(R_after − R_before) · price",
				fmt.Sprintf("(%s − %s) × %s", p.kWh(c.Proposal.Year.Returned.Total()), p.kWh(c.Base.Year.Returned.Total()), p.price(s.Tariff.Price)), "credited because the file says so"})
		}
	}
	cost := c.Proposal.Cost
	calc := Calculation{"n = cost / money saved a year", "", "without interest, price changes or upkeep; cost typed by the user"}
	if cost.Given {
		calc.Numbers = units.Around(p.money(cost.Likely), "", p.money(cost.Low), p.money(cost.High)) + " / " + p.money(c.MoneySaved)
		if cost.Note != "" {
			calc.Source += " (" + cost.Note + ")"
		}
	}
	add("simple payback", c.Payback.Likely, c.Payback.String(), calc)
	if known(c.CO2Saved) {
		add("CO2 saved a year", c.CO2Saved, p.mass(c.CO2Saved), c.saving("m", "f", p.kWh(c.SavedDrawn)+" × "+s.Tariff.co2Text(), p.mass(c.Base.Money.CO2)+" − "+p.mass(c.Proposal.Money.CO2),
			"factor from "+fromFile+"; held for every year, though factors of mains fall"))
	}
	return out
}
