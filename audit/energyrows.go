package audit

import (
	"math"
	"slices"

	"barlitre/circuit"
	"barlitre/machines/units"
)

// WholeYear stands for all duties with their hours where a function takes the index
// of a duty.
const WholeYear = -1

// EnergyRow is one row of where the energy of a circuit goes: a loss, or with Block
// "" one of the other terms of the balance, which Name then tells as the report does.
type EnergyRow struct {
	Name, To    string  // "RV1: relief spill", "oil"
	Block, Kind string  // of a loss
	Sum         bool    // what the rows add up to
	Part        bool    // a part of that sum, by the state of the machine
	Energy      Split   // J, of one cycle or of the year
	Share       float64 // of what is drawn; NaN when nothing is drawn
	Year        float64 // J a year; NaN when the duty has no hours
	Money       float64 // a year, at the price of energy; NaN without one or without hours
}

// EnergyRows lists where the energy of a circuit goes over one cycle of a duty, or
// over the year with WholeYear. Losses come in the order from the supply to the load;
// the rows up to the sum add up to it. nil when it was not solved, or has no hours.
func (s *Solution) EnergyRows(circuit, duty int) []EnergyRow {
	c := s.Circuits[circuit]
	if duty == WholeYear {
		y := c.Year
		if y == nil || y.Hours <= 0 {
			return nil
		}
		rows := s.energyRows(c, y.Losses, 1, y.WorkPositive(), y.WorkNegative(), y.Stored, y.Returned, y.Drawn)
		return append(rows, s.stateRows(c)...)
	}
	if duty < 0 || duty >= len(c.Duties) || c.Duties[duty].Balance == nil {
		return nil
	}
	b := c.Duties[duty].Balance
	return s.energyRows(c, b.Losses, c.Duties[duty].cycles(), b.WorkPositive(), b.WorkNegative(), b.StoredEnergy(), b.Returned, b.SupplyIn)
}

// cycles returns how often a year the duty runs, NaN when it has no hours.
func (d *DutyRun) cycles() float64 {
	if d.Balance == nil || d.Balance.Cycle <= 0 || d.Duty.Hours <= 0 {
		return math.NaN()
	}
	return d.Duty.Hours / d.Balance.Cycle
}

func (s *Solution) energyRows(c *CircuitRun, losses []LossRow, cycles float64, against, taken, stored, returned, drawn Split) []EnergyRow {
	whole, price := drawn.Total(), s.unitPrice(c)
	var out []EnergyRow
	add := func(name, to string, e Split) *EnergyRow {
		e = Split{nothing(e.Working, whole), nothing(e.Holding, whole), nothing(e.Idle, whole), nothing(e.Driving, whole), nothing(e.Off, whole)}
		row := EnergyRow{Name: name, To: to, Energy: e, Share: math.NaN(), Year: e.Total() * cycles, Money: e.Total() * cycles * price}
		if whole != 0 {
			row.Share = e.Total() / whole
		}
		out = append(out, row)
		return &out[len(out)-1]
	}
	for _, l := range FromSupply(c.Circuit, shown(losses, whole)) {
		r := add(l.Block+": "+l.Kind, string(l.Sink), l.Energy)
		r.Block, r.Kind = l.Block, l.Kind
	}
	add(workAgainst, "load", against)
	add(workTaken, "", taken)
	add(putIntoStore, "", stored)
	add(returnedRow, "mains", returned)
	add(drawnRow, "", drawn).Sum = true
	return out
}

// stateRows says how much of what is drawn in a year is drawn in each state: those of the calendar, or without one as the
// ledger tells them apart. They are parts of the sum above them.
func (s *Solution) stateRows(c *CircuitRun) []EnergyRow {
	price, whole := s.unitPrice(c), c.Year.Drawn.Total()
	var out []EnergyRow
	for _, st := range c.Year.states(s.File.Calendar) {
		e := nothing(st.Drawn.Total(), whole)
		out = append(out, EnergyRow{Name: ofWhich + st.Name, Energy: st.Drawn, Share: math.NaN(), Year: e, Money: e * price, Part: true})
		if whole != 0 {
			out[len(out)-1].Share = e / whole
		}
	}
	return out
}

// ofWhich begins the name of a row that is a part of the sum above it.
const ofWhich = "of which "

// Names of the terms of the balance besides losses, as tables and figures show them.
const (
	workAgainst  = "work against loads"
	workTaken    = "work taken from driving loads"
	putIntoStore = "put into store"
	returnedRow  = "returned to the supply"
	drawnRow     = "drawn from the supply"
)

// FromSupply orders losses on the way from the supply to the load, as the catalog
// orders the kinds of block; those of blocks it does not find come last.
func FromSupply(c *circuit.Circuit, rows []LossRow) []LossRow {
	place := map[string]int{}
	for i, k := range circuit.Catalog() {
		place[k.Name] = i
	}
	at := func(r LossRow) int {
		if b := c.Block(r.Block); b != nil {
			return place[b.Kind]
		}
		return len(place)
	}
	out := slices.Clone(rows)
	slices.SortStableFunc(out, func(a, b LossRow) int { return at(a) - at(b) })
	return out
}

// CycleUnit is the unit of the energy of a cycle in a family of units, as reports print it.
func CycleUnit(system units.System) units.Unit {
	if system == units.SI {
		return units.Preferred(units.Energy, units.SI)
	}
	return units.Preferred(units.Energy, units.Metric)
}

// YearUnit is the unit of the energy of a year: that of the bill.
func YearUnit() units.Unit {
	u, _ := units.ParseUnit("kWh", units.Energy)
	return u
}
