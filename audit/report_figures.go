package audit

import (
	"fmt"
	"math"
	"strings"

	"barlitre/circuit"
	"barlitre/machines/units"
)

// Formulas that several figures share.
const (
	trapezoid   = "E = Σ ½·(P₁ + P₂)·(t₂ − t₁) over the time steps"
	fromBalance = "powers of the balance at every time step, trapezoid rule"
	fromFile    = "the audit file"
)

func dutyPage(p printer, d *DutyRun) DutyPage {
	b := d.Balance
	page := DutyPage{Name: d.Duty.Name, Losses: lossTable(p, b), Work: workTable(p, b), Gates: gateTable(d.Gates), Measured: measuredTable(p, d.Measured)}
	add := func(name string, v float64, text string, c Calculation) {
		page.Figures = append(page.Figures, Figure{name, v, text, c})
	}
	whole := b.SupplyIn.Total() + math.Abs(b.WorkNegative().Total()) + math.Abs(b.StoredEnergy().Total())
	energy := func(name string, e float64, formula string) {
		e = nothing(e, whole)
		add(name, e, p.energy(e), Calculation{formula, fmt.Sprintf("%s over %s in %d time steps", p.energy(e), p.seconds(b.Cycle), b.Steps), fromBalance})
	}
	add("cycle", b.Cycle, p.seconds(b.Cycle), Calculation{"t_last − t_first", p.seconds(b.Cycle), "rows of the duty"})
	energy("drawn from the supply", b.SupplyIn.Total(), trapezoid+", P = max(Σ supply, 0)")
	energy("returned to the supply", b.Returned.Total(), trapezoid+", P = max(−Σ supply, 0)")
	energy("work against loads", b.WorkPositive().Total(), trapezoid+", P = max(F·v, 0) or max(T·ω, 0) by axis")
	energy("work taken from driving loads", b.WorkNegative().Total(), trapezoid+", P = min(F·v, 0) or min(T·ω, 0) by axis")
	energy("put into store", b.StoredEnergy().Total(), trapezoid+", P into stores")
	for _, e := range d.Exchanges {
		energy("passed between "+circuit.Names(e.Blocks)+" through their shaft", e.Energy, trapezoid+", P = min(Σ max(P_i, 0), Σ max(−P_i, 0)) over the machines on the shaft; it stays in the circuit and stands on no side of the balance")
	}
	energy("lost in all", b.LossEnergy().Total(), "Σ of all losses")
	if x := b.CoolingDrawn().Total(); x > 0 {
		energy("of that, fan and pumps of the cooling", x, "Σ of losses of the cooling; what the blocks of the circuit lose is the rest")
	}
	energy("heat to the oil", b.HeatToOil().Total(), "Σ of losses with sink oil")
	add("closure", b.Closure(), units.Format(b.Closure(), units.Percent, 2), Calculation{
		"|in − returned − work − stored − losses| / (in + |work from driving loads| + |stored|)",
		fmt.Sprintf("|%s − %s − (%s) − (%s) − %s| / %s", p.energy(b.SupplyIn.Total()), p.energy(b.Returned.Total()),
			p.energy(b.WorkPositive().Total()+b.WorkNegative().Total()), p.energy(b.StoredEnergy().Total()), p.energy(b.LossEnergy().Total()),
			p.energy(b.SupplyIn.Total()-b.WorkNegative().Total()+math.Abs(b.StoredEnergy().Total()))),
		"no row is found as a difference, so this is a check"})
	page.Figures = append(page.Figures, peakFigures(p, d)...)
	return page
}

func peakFigures(p printer, d *DutyRun) []Figure {
	b := d.Balance
	pressure := p.in(nothing(d.Peak.Value, 100*units.Bar), units.Pressure, 3)
	if d.Peak.UpperEstimate {
		pressure = "≤ " + pressure
	}
	at := func(t float64) string { return "at " + p.seconds(t) }
	work := ratio(b.WorkPositive().Total(), b.SupplyIn.Total())
	workText, workCalc := p.share(work), fmt.Sprintf("%s / %s", p.energy(b.WorkPositive().Total()), p.energy(b.SupplyIn.Total()))
	if net := b.WorkPositive().Total() + b.WorkNegative().Total(); b.SupplyIn.Total() == 0 || math.Abs(net) <= 1e-3*b.WorkPositive().Total() {
		work, workText, workCalc = math.NaN(), "n/a", "the cycle does no net work, or draws nothing"
	}
	mean := Figure{"15-minute mean of power drawn", b.Demand.Mean, p.power(b.Demand.Mean),
		Calculation{"max over t of E(t, t + 15 min) / 15 min", "from " + p.seconds(b.Demand.From), string(b.Demand.Basis)}}
	if b.offMains() {
		mean.Value, mean.Text, mean.Calculation.Numbers = math.NaN(), "n/a", "nothing is drawn from the mains"
	}
	return []Figure{
		{"work against loads, of energy drawn", work, workText, Calculation{"work⁺ / in", workCalc, fromBalance}},
		{"highest pressure (≤: upper estimate)", d.Peak.Value, pressure, Calculation{"max p", d.Peak.At + " " + at(d.Peak.T), "steady balance at each time step; shocks are not in it, and in fast ramps the oil has no time to follow"}},
		{"highest shaft power", b.PeakShaft, p.power(b.PeakShaft), Calculation{"max Σ T·ω over the prime movers", at(b.PeakShaftAt), fromBalance}},
		{"highest power drawn", b.PeakSupply, p.power(b.PeakSupply), Calculation{"max Σ supply", at(b.PeakSupplyAt), fromBalance}},
		mean,
	}
}

// sum writes how a year is made of duties: "Σ duty: per cycle × cycles".
func (c *CircuitRun) sum(p printer, of func(*Balance) float64) string {
	var parts []string
	for _, d := range c.Duties {
		if d.Balance != nil && d.Duty.Hours > 0 && d.Balance.Cycle > 0 {
			parts = append(parts, fmt.Sprintf("%s: %s × %s", d.Duty.Name, p.energy(nothing(of(d.Balance), d.Balance.SupplyIn.Total())), p.count(d.Duty.Hours/d.Balance.Cycle)))
		}
	}
	return strings.Join(parts, " + ")
}

const yearFormula = "E_year = Σ E_cycle · hours / cycle"

func (s *Solution) yearFigures(p printer, c *CircuitRun) []Figure {
	y := c.Year
	kWhFigure := func(name string, e float64, of func(*Balance) float64) Figure {
		return Figure{name, e, p.kWh(e), Calculation{yearFormula, c.sum(p, of) + " = " + p.kWh(e), "balance of each duty; hours from " + fromFile}}
	}
	out := []Figure{
		{"running hours", y.Hours, p.hours(y.Hours), Calculation{"Σ hours of the duties", p.hours(y.Hours), fromFile}},
		s.offToo(p, y, kWhFigure("drawn a year", y.Drawn.Total(), func(b *Balance) float64 { return b.SupplyIn.Total() })),
		kWhFigure("returned a year", y.Returned.Total(), func(b *Balance) float64 { return b.Returned.Total() }),
		kWhFigure("work against loads a year", y.WorkPositive().Total(), func(b *Balance) float64 { return b.WorkPositive().Total() }),
		kWhFigure("heat to the oil a year", y.HeatToOil().Total(), func(b *Balance) float64 { return b.HeatToOil().Total() }),
	}
	if y.Fuel.Total() > 0 {
		out = append(out, s.fuelFigure(p, c))
	}
	if known(s.unitPrice(c)) {
		out = append(out, s.costFigure(p, c))
	}
	if known(c.Money.CO2) {
		out = append(out, Figure{"CO2 a year", c.Money.CO2, p.mass(c.Money.CO2), Calculation{"m = E_drawn · f", s.co2Numbers(p, c), "factor from " + fromFile}})
	}
	return out
}

func (s *Solution) costFigure(p printer, c *CircuitRun) Figure {
	y, m := c.Year, c.Money
	calc := Calculation{"K = E_drawn · price", fmt.Sprintf("%s × %s = %s", p.kWh(y.Drawn.Total()), p.price(s.Tariff.Price), p.money(m.Drawn)),
		"marginal price, from " + fromFile}
	if y.Fuel.Total() > 0 {
		calc = s.fuelCost(p, c)
	}
	if m.Credited {
		calc.Formula = "K = (E_drawn − E_returned) · price"
		calc.Numbers = fmt.Sprintf("%s − %s for %s returned = %s", p.money(m.Drawn), p.money(m.Credit), p.kWh(y.Returned.Total()), p.money(m.Net()))
	} else if y.Returned.Total() > 0 {
		calc.Numbers += fmt.Sprintf("; %s returned earn nothing, as the file says", p.kWh(y.Returned.Total()))
	}
	return Figure{"cost of energy a year", m.Net(), p.money(m.Net()), calc}
}

// co2Text names a factor with its year and basis.
func (t Tariff) co2Text() string {
	text := units.Number(t.CO2*units.KilowattHour, 3) + "\u202fkg/kWh"
	var tags []string
	if t.CO2Year != "" {
		tags = append(tags, t.CO2Year)
	}
	if t.CO2Basis != "" {
		tags = append(tags, t.CO2Basis+"-based")
	}
	if len(tags) == 0 {
		return text + " (year and basis not stated)"
	}
	return text + " (" + strings.Join(tags, ", ") + ")"
}

func (s *Solution) heatFigures(p printer, c *CircuitRun) []Figure {
	var out []Figure
	add := func(name string, h HeatRow, how string) {
		out = append(out, Figure{"mean heat to the oil, " + name, h.Mean, p.power(h.Mean), Calculation{"P = Σ losses with sink oil / time", how, fromBalance}})
		if known(h.Cooler) {
			out = append(out, Figure{"cooler for it, " + name, h.Cooler, p.cooler(h.Cooler), Calculation{"K = P / (T_oil − T_air)",
				fmt.Sprintf("%s / (%s − %s)", p.power(h.Mean), p.degrees(s.Oil), p.degrees(s.Air)),
				"difference of the entering temperatures; tank and pipe walls not credited"}})
		}
	}
	for _, h := range c.Heat.Duties {
		for _, d := range c.Duties {
			if d.Duty.Name == h.Duty && d.Balance != nil {
				add(h.Duty, h, p.energy(nothing(d.Balance.HeatToOil().Total(), d.Balance.SupplyIn.Total()))+" / "+p.seconds(d.Balance.Cycle))
			}
		}
	}
	if known(c.Heat.Year.Mean) {
		add("all running hours", c.Heat.Year, p.kWh(c.Year.LossTo(circuit.ToOil).Total())+" / "+p.hours(c.Year.Hours))
	}
	return out
}
