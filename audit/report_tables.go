package audit

import (
	"math"

	"barlitre/circuit"
	"barlitre/machines/units"
)

// ParameterRow is one value of a block as it went into the balance.
type ParameterRow struct {
	Block, Kind, Name, Symbol string
	Value                     string // with its unit
	Origin                    string // "measured", "default: assumed", "fitted: measured", "not stated" …
	Low, High                 string // "" when not given
	Note                      string
	Default                   bool // nobody typed it
}

// parameters lists every value of a circuit, block by block, in the order of the catalog.
func parameters(c *circuit.Circuit) []ParameterRow {
	var out []ParameterRow
	for i := range c.Blocks {
		b := &c.Blocks[i]
		k := circuit.KindNamed(b.Kind)
		if k == nil {
			continue
		}
		for j := range k.Params {
			if row, ok := parameter(k, b, &k.Params[j]); ok {
				out = append(out, row)
			}
		}
	}
	return out
}

func parameter(k *circuit.Kind, b *circuit.Block, p *circuit.Param) (ParameterRow, bool) {
	row := ParameterRow{Block: b.ID, Kind: k.Title, Name: p.Title, Symbol: p.Symbol}
	if p.Type != circuit.Number {
		row.Value = p.NameOf(k.WordOf(b, p.Key))
		row.Default = b.Word(p.Key) == ""
		row.Origin = "chosen"
		if row.Default {
			row.Origin = "default"
		}
		return row, row.Value != ""
	}
	v, isDefault, ok := k.Value(b, p.Key)
	if !ok {
		return row, false
	}
	row.Value, row.Default, row.Note = valueText(v, p.Dim), isDefault, v.Note
	row.Origin = string(v.Origin)
	if row.Origin == "" {
		row.Origin = "not stated"
	}
	switch {
	case isDefault && v.Origin == circuit.Measured:
		row.Origin = "fitted: measured"
	case isDefault:
		row.Origin = "default: " + row.Origin
	}
	if !math.IsNaN(v.Low) {
		row.Low = units.Format(v.Low, unitOf(v, p.Dim), 4)
	}
	if !math.IsNaN(v.High) {
		row.High = units.Format(v.High, unitOf(v, p.Dim), 4)
	}
	return row, true
}

// valueText shows a value in the unit and with the digits it was typed with.
func valueText(v circuit.Value, d units.Dim) string {
	if v.Text != "" {
		return v.Text
	}
	return units.Format(v.SI, unitOf(v, d), 5)
}

func unitOf(v circuit.Value, d units.Dim) units.Unit {
	if v.Unit.Factor == 0 {
		return units.Preferred(d, units.Metric)
	}
	return v.Unit
}

// lossTable lists where the energy of a cycle goes; the rows add up to what is drawn.
func lossTable(p printer, b *Balance) Table {
	t := Table{Title: "Where the energy of one cycle goes",
		Head: []string{"", "to", "a cycle", "share of drawn", "of which while the load drives", "while holding", "while idle"}}
	whole := b.SupplyIn.Total()
	energy := func(e float64) string { return p.energy(nothing(e, whole)) }
	row := func(sum bool, name, to string, e Split) {
		t.add(sum, name, to, energy(e.Total()), shareText(p, e.Total(), whole), energy(e.Driving), energy(e.Holding), energy(e.Idle))
	}
	for _, l := range shown(b.Losses, whole) {
		row(false, l.Block+": "+l.Kind, string(l.Sink), l.Energy)
	}
	row(false, "work against loads", "load", b.WorkPositive())
	row(false, "work taken from driving loads", "", b.WorkNegative())
	row(false, "put into store", "", b.StoredEnergy())
	row(false, "returned to the supply", "mains", b.Returned)
	row(true, "drawn from the supply", "", b.SupplyIn)
	t.Note = "Rows are integrated each for itself; they miss the sum by " + units.Format(b.Closure(), units.Percent, 2) + " of what came in."
	return t
}

// workTable splits the work of a cycle by axis, where there are several.
func workTable(p printer, b *Balance) Table {
	t := Table{Title: "Work by axis", Head: []string{"a cycle", "against its load", "taken from its driving load"}}
	if len(b.Work) < 2 {
		return t
	}
	whole := b.SupplyIn.Total()
	row := func(sum bool, name string, positive, negative Split) {
		t.add(sum, name, p.energy(nothing(positive.Total(), whole)), p.energy(nothing(negative.Total(), whole)))
	}
	for _, w := range b.Work {
		row(false, w.Axis, w.Positive, w.Negative)
	}
	row(true, "all axes", b.WorkPositive(), b.WorkNegative())
	return t
}

// shown drops losses too small to print: below a billionth of what is drawn. A
// result file holds them all.
func shown(rows []LossRow, drawn float64) []LossRow {
	var out []LossRow
	for _, r := range rows {
		if e := r.Energy.Total(); e != 0 && math.Abs(e) >= 1e-9*drawn {
			out = append(out, r)
		}
	}
	return out
}

// shareText writes part of whole, "n/a" when there is no whole.
func shareText(p printer, part, whole float64) string {
	if whole == 0 {
		return "n/a"
	}
	return p.share(nothing(part/whole, 1))
}

// yearLossTable prices every loss, so that the list is a list of what to mend.
func (s *Solution) yearLossTable(p printer, c *CircuitRun) Table {
	y := c.Year
	t := Table{Title: "Where the energy of a year goes", Head: []string{"", "to", "a year", "share of drawn"}}
	price := s.unitPrice(c)
	priced := known(price)
	if priced {
		t.Head = append(t.Head, "money a year")
	}
	row := func(sum bool, name, to string, e float64) {
		e = nothing(e, y.Drawn.Total())
		cells := []string{name, to, p.kWh(e), shareText(p, e, y.Drawn.Total())}
		if priced {
			cells = append(cells, p.money(e*price))
		}
		t.add(sum, cells...)
	}
	for _, l := range shown(y.Losses, y.Drawn.Total()) {
		row(false, l.Block+": "+l.Kind, string(l.Sink), l.Energy.Total())
	}
	row(false, "work against loads", "load", y.WorkPositive().Total())
	row(false, "work taken from driving loads", "", y.WorkNegative().Total())
	row(false, "put into store", "", y.Stored.Total())
	row(false, "returned to the supply", "mains", y.Returned.Total())
	row(true, "drawn from the supply", "", y.Drawn.Total())
	for _, r := range s.stateRows(c) {
		row(false, r.Name, "", r.Year)
	}
	if priced {
		t.Note = "Money is energy times the price of energy; a loss that is avoided may change others."
		if y.Fuel.Total() > 0 {
			t.Note = "Money is energy times what a kilowatt-hour drawn costs here, fuel at its heating value; a loss that is avoided may change others."
		}
	}
	return t
}

// stateTable splits the year by what the machine does.
func stateTable(p printer, y *Year) Table {
	t := Table{Title: "What the machine does meanwhile", Head: []string{"", "time a year", "drawn a year", "mean power drawn", "share of drawn"}}
	row := func(sum bool, name string, seconds, e float64) {
		t.add(sum, name, p.hours(seconds), p.kWh(e), p.power(ratio(e, seconds)), shareText(p, e, y.Drawn.Total()))
	}
	row(false, "working: an axis moves", y.Seconds.Working, y.Drawn.Working)
	row(false, "holding: all axes stand, one under a load", y.Seconds.Holding, y.Drawn.Holding)
	row(false, "idle: all axes stand without load", y.Seconds.Idle, y.Drawn.Idle)
	if y.Seconds.Off > 0 {
		row(false, "off", y.Seconds.Off, y.Drawn.Off)
	}
	row(true, "all", y.Seconds.Total(), y.Drawn.Total())
	row(false, "of which while the load drives an axis", y.Seconds.Driving, y.Drawn.Driving)
	return t
}

// groupTable tells where a saving comes from.
func groupTable(p printer, c *Comparison) Table {
	t := Table{Title: "Where the saving comes from", Head: []string{"a year", c.Base.Circuit.Name, c.Proposal.Circuit.Name, "less"}}
	before, after := c.Base.Year.Drawn.Total(), c.Proposal.Year.Drawn.Total()
	whole := math.Max(before, after)
	for _, g := range c.Groups {
		t.add(false, g.Name, p.kWh(nothing(g.Before, whole)), p.kWh(nothing(g.After, whole)), p.kWh(nothing(g.Before-g.After, whole)))
	}
	t.add(true, "drawn from the supply", p.kWh(before), p.kWh(after), p.kWh(before-after))
	return t
}

// shortfallTable sets what axes lack side by side.
func shortfallTable(p printer, c *Comparison) Table {
	t := Table{Title: "Motion that was asked for and not delivered, a cycle",
		Head: []string{"", c.Base.Circuit.Name, "", c.Proposal.Circuit.Name, ""}}
	for _, x := range c.Shortfalls {
		t.add(false, x.Duty+", axis "+x.Axis, p.seconds(x.Base.Seconds), lost(x.Base), p.seconds(x.Proposal.Seconds), lost(x.Proposal))
	}
	if len(c.Shortfalls) == 0 {
		t.Note = "Both circuits deliver every motion of every duty."
	} else {
		t.Note = "Time slower than asked, and stroke lost in it (m; rad for an axis that turns)."
	}
	return t
}

func lost(s circuit.Shortfall) string { return units.Number(s.LostStroke, 3) }

// gateTable sets what a cycle asks of drives, motors and held axes against what they stand.
func gateTable(gates []circuit.Gate) Table {
	t := Table{Title: "What the cycle asks and what there is", Head: []string{"", "asked", "limit", "", "why"}}
	for _, g := range gates {
		asked, limit, passed := GateText(g)
		t.add(false, g.Block+": "+g.Name, asked, limit, passed, g.Reason)
	}
	return t
}

// GateText writes what is asked, its limit, and whether it is passed, "" where no limit is given.
func GateText(g circuit.Gate) (asked, limit, passed string) {
	value := g.Value
	if math.Abs(value) < 1e-6*math.Abs(g.Limit) { // what rounding leaves
		value = 0
	}
	asked, limit = units.Format(value, g.Unit, 3), "not given"
	if known(g.Limit) {
		limit = units.Format(g.Limit, g.Unit, 3)
		passed = map[bool]string{true: "passed", false: "not passed"}[g.Passed]
	}
	return asked, limit, passed
}
