package audit

import (
	"fmt"
	"math"
	"strings"

	"barlitre/circuit"
	"barlitre/machines/units"
)

// LossCalculation opens one loss of a block over one cycle of a duty, or over the
// year with WholeYear: its law and the equations of the block; the values in them
// with their origin, the instant of its highest power, the energy, and what it comes
// to in a year; where the equations come from. The zero Calculation for a loss that
// the circuit does not have, or that was not solved.
func (s *Solution) LossCalculation(circuit, duty int, block, kind string, sys units.System) Calculation {
	if circuit < 0 || circuit >= len(s.Circuits) {
		return Calculation{}
	}
	p := printer{system: sys, currency: s.Tariff.Currency}
	c := s.Circuits[circuit]
	if block == coolingBlock {
		return s.coolingCalculation(p, c, duty, kind)
	}
	if block == supplyBlock && duty == WholeYear {
		return s.standbyCalculation(p, c)
	}
	law := lawOf(c.Circuit, block, kind)
	if law == nil {
		return Calculation{}
	}
	formula, peak, energy := law.formula(), "", ""
	if duty == WholeYear {
		formula = joined([]string{formula, yearFormula})
		energy = s.lossOfYear(p, c, block, kind)
	} else if duty >= 0 && duty < len(c.Duties) {
		peak, energy = c.highest(p, duty, block, kind), s.lossOfCycle(p, c, duty, block, kind)
	}
	if energy == "" {
		return Calculation{}
	}
	lines := []string{law.values(s, p), peak, energy}
	return Calculation{formula, joined(lines), law.source()}
}

// joined sets lines that are not empty one below the other.
func joined(lines []string) string {
	var out []string
	for _, l := range lines {
		if l != "" {
			out = append(out, l)
		}
	}
	return strings.Join(out, "\n")
}

// highest tells of the instant at which the loss is largest, with what the block
// itself reports then. A long run keeps its peaks, but other quantities only near them.
func (c *CircuitRun) highest(p printer, duty int, block, kind string) string {
	plot := c.Duties[duty].Plot
	if plot == nil {
		return ""
	}
	for i, ch := range plot.Channels {
		if ch.Role != circuit.Loss || ch.Block != block || ch.Kind != kind {
			continue
		}
		k := &plot.Powers[i]
		at := 0
		for n := range k.V {
			if k.V[n] > k.V[at] {
				at = n
			}
		}
		if len(k.V) == 0 || k.V[at] <= 0 {
			return ""
		}
		text := fmt.Sprintf("highest at %s: P = %s", p.seconds(k.T[at]), p.power(k.V[at]))
		return text + plot.meanwhile(p, block, k.T, at)
	}
	return ""
}

// meanwhile lists the signals of a block at one time step.
func (k *Plot) meanwhile(p printer, block string, times []float64, at int) string {
	text := ""
	for i := range k.Signals {
		t := &k.Signals[i]
		if !strings.HasPrefix(t.Name, block+".") {
			continue
		}
		v, sign := t.At(times[at]), " = "
		if k.Thinned {
			sign = " ≈ "
		} else if at < len(t.V) {
			v = t.V[at] // at a step this side of it
		}
		v = nothing(v, largest(t.V))
		d := units.Format(v, units.Preferred(t.Dim, p.system), 3)
		if t.Dim == units.Ratio {
			d = units.Format(v, units.Percent, 3)
		}
		text += ", " + t.Title + sign + d
	}
	return text
}

// largest returns the largest magnitude.
func largest(v []float64) float64 {
	most := 0.0
	for _, x := range v {
		most = math.Max(most, math.Abs(x))
	}
	return most
}

func lossIn(rows []LossRow, block, kind string) (float64, bool) {
	sum, found := 0.0, false
	for _, r := range rows {
		if r.Block == block && r.Kind == kind {
			sum += r.Energy.Total()
			found = true
		}
	}
	return sum, found
}

// lossOfCycle goes from a cycle to the year, "" when the circuit does not have the loss.
func (s *Solution) lossOfCycle(p printer, c *CircuitRun, duty int, block, kind string) string {
	d := c.Duties[duty]
	if d.Balance == nil {
		return ""
	}
	b := d.Balance
	e, ok := lossIn(b.Losses, block, kind)
	if !ok {
		return ""
	}
	e = nothing(e, b.SupplyIn.Total())
	return joined([]string{"E = " + overCycle(p, b, e), s.ofYear(p, c, d, e)})
}

func overCycle(p printer, b *Balance, e float64) string {
	return fmt.Sprintf("%s over %s in %d time steps", p.energy(e), p.seconds(b.Cycle), b.Steps)
}

// ofYear carries the energy of a cycle over to the hours of its duty.
func (s *Solution) ofYear(p printer, c *CircuitRun, d *DutyRun, e float64) string {
	n := d.cycles()
	if !known(n) {
		return "no hours a year are given, so the duty is left out of the year"
	}
	text := fmt.Sprintf("a year: %s × %s cycles (%s / %s) = %s", p.energy(e), p.count(n), p.hours(d.Duty.Hours), p.seconds(d.Balance.Cycle), p.kWh(e*n))
	return joined([]string{text, s.inMoney(p, c, e*n)})
}

func (s *Solution) inMoney(p printer, c *CircuitRun, e float64) string {
	price := s.unitPrice(c)
	if !known(price) {
		return ""
	}
	return fmt.Sprintf("%s × %s = %s a year", p.kWh(e), p.price(price), p.money(e*price))
}

func (s *Solution) lossOfYear(p printer, c *CircuitRun, block, kind string) string {
	if c.Year == nil {
		return ""
	}
	e, ok := lossIn(c.Year.Losses, block, kind)
	if !ok {
		return ""
	}
	e = nothing(e, c.Year.Drawn.Total())
	text := c.sum(p, func(b *Balance) float64 {
		e, _ := lossIn(b.Losses, block, kind)
		return e
	})
	return joined([]string{text + " = " + p.kWh(e), s.inMoney(p, c, e)})
}

// RowCalculation opens a row of EnergyRows. Terms that the report has as figures are
// opened as there.
func (s *Solution) RowCalculation(circuit, duty int, row EnergyRow, sys units.System) Calculation {
	if row.Block != "" {
		return s.LossCalculation(circuit, duty, row.Block, row.Kind, sys)
	}
	p := printer{system: sys, currency: s.Tariff.Currency}
	c := s.Circuits[circuit]
	if duty == WholeYear {
		return s.termOfYear(p, c, row)
	}
	for _, f := range dutyPage(p, c.Duties[duty]).Figures {
		if f.Name == row.Name {
			calc := f.Calculation
			calc.Numbers = joined([]string{calc.Numbers, s.ofYear(p, c, c.Duties[duty], row.Energy.Total())})
			return calc
		}
	}
	return Calculation{}
}

var ofBalance = map[string]func(*Balance) Split{
	workAgainst:  (*Balance).WorkPositive,
	workTaken:    (*Balance).WorkNegative,
	putIntoStore: (*Balance).StoredEnergy,
	returnedRow:  func(b *Balance) Split { return b.Returned },
	drawnRow:     func(b *Balance) Split { return b.SupplyIn },
}

func (s *Solution) termOfYear(p printer, c *CircuitRun, row EnergyRow) Calculation {
	if row.Part {
		return s.stateCalculation(p, c, row)
	}
	of := ofBalance[row.Name]
	if of == nil || c.Year == nil {
		return Calculation{}
	}
	text := c.sum(p, func(b *Balance) float64 { return of(b).Total() })
	if row.Name == drawnRow {
		text += s.standby(p, c.Year)
	}
	return Calculation{yearFormula, joined([]string{text + " = " + p.kWh(row.Energy.Total()), s.inMoney(p, c, row.Energy.Total())}),
		"balance of each duty; hours and price from " + fromFile}
}
