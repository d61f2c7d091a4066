package audit

import (
	"barlitre/audit/calendar"
	"barlitre/circuit"
)

// YearDuty is what one duty adds to the year.
type YearDuty struct {
	Duty    string
	State   calendar.State // that it stands for; "" for hours of its own
	Hours   float64        // s a year in which it runs
	Cycles  float64        // a year
	Repeats bool           // false: a single recording, taken for the mean of its hours
	Drawn   float64        // J a year
	By      Split          // Drawn by what the axes do
}

// Year is the energy balance of a circuit over a year: each duty's balance times
// its cycles a year,
//
//	cycles = hours / length of the cycle
//
// For a duty that does not repeat this is its mean power times its hours. With a calendar the
// hours off are there too, with what the electric supply draws in them.
type Year struct {
	Duties   []YearDuty
	Complete bool     // every duty with hours was solved
	Missing  []string // names of the duties that were not

	Hours    float64 // s
	Seconds  Split   // s, by state
	Drawn    Split   // J
	Returned Split   // J
	Fuel     Split   // J, part of Drawn that engines burn
	Work     []WorkRow
	Stored   Split
	Losses   []LossRow
	Standby  float64 // W, drawn while the machine is off
}

// year adds up the duties of a circuit, which draws standby [W] while it is off. A duty without a balance is named in Missing.
func year(runs []*DutyRun, cal *Calendar, standby float64) *Year {
	y := &Year{Complete: true, Standby: standby}
	for _, r := range runs {
		if r.Duty.Hours <= 0 {
			continue
		}
		if r.Balance == nil || r.Balance.Cycle <= 0 {
			y.Complete = false
			y.Missing = append(y.Missing, r.Duty.Name)
			continue
		}
		y.add(r, cal)
	}
	if cal != nil && cal.Hours != nil && len(y.Duties) > 0 {
		y.off(cal, runs)
	}
	return y
}

// Names of what the electric supply draws while the machine is off.
const (
	supplyBlock = "Electric supply"
	standbyKind = "standby while off"
)

// off adds the hours in which the machine is off. A machine that does not draw from the mains draws nothing in them.
func (y *Year) off(cal *Calendar, runs []*DutyRun) {
	y.Seconds.Off = cal.Hours.Off
	for _, r := range runs {
		if r.Balance != nil && r.Balance.offMains() {
			return
		}
	}
	if e := (Split{Off: y.Standby * cal.Hours.Off}); e.Off > 0 {
		y.Drawn = y.Drawn.Plus(e)
		y.Losses = append(y.Losses, LossRow{Block: supplyBlock, Kind: standbyKind, Sink: circuit.ToAir, Energy: e})
	}
}

func (y *Year) add(r *DutyRun, cal *Calendar) {
	b := r.Balance
	n := r.Duty.Hours / b.Cycle
	d := YearDuty{Duty: r.Duty.Name, Hours: r.Duty.Hours, Cycles: n, Repeats: r.Duty.Repeats, Drawn: n * b.SupplyIn.Total(), By: b.SupplyIn.Times(n)}
	if cal != nil {
		d.State = cal.StateOf(r.Duty.Name)
	}
	y.Duties = append(y.Duties, d)
	y.Hours += r.Duty.Hours
	y.Seconds = y.Seconds.Plus(b.Seconds.Times(n))
	y.Drawn = y.Drawn.Plus(b.SupplyIn.Times(n))
	y.Fuel = y.Fuel.Plus(b.Fuel.Times(n))
	y.Returned = y.Returned.Plus(b.Returned.Times(n))
	y.Stored = y.Stored.Plus(b.StoredEnergy().Times(n))
	for _, l := range b.Losses {
		row := y.loss(l)
		row.Energy = row.Energy.Plus(l.Energy.Times(n))
	}
	for _, w := range b.Work {
		row := y.work(w.Axis)
		row.Positive = row.Positive.Plus(w.Positive.Times(n))
		row.Negative = row.Negative.Plus(w.Negative.Times(n))
	}
}

func (y *Year) loss(l LossRow) *LossRow {
	for i := range y.Losses {
		r := &y.Losses[i]
		if r.Block == l.Block && r.Kind == l.Kind && r.Sink == l.Sink {
			return r
		}
	}
	y.Losses = append(y.Losses, LossRow{Block: l.Block, Kind: l.Kind, Sink: l.Sink})
	return &y.Losses[len(y.Losses)-1]
}

func (y *Year) work(axis string) *WorkRow {
	for i := range y.Work {
		if y.Work[i].Axis == axis {
			return &y.Work[i]
		}
	}
	y.Work = append(y.Work, WorkRow{Axis: axis})
	return &y.Work[len(y.Work)-1]
}

// WorkPositive returns the work given to loads that resist [J a year], >= 0.
func (y *Year) WorkPositive() Split {
	var s Split
	for _, w := range y.Work {
		s = s.Plus(w.Positive)
	}
	return s
}

// WorkNegative returns the work taken from loads that drive [J a year], <= 0.
func (y *Year) WorkNegative() Split {
	var s Split
	for _, w := range y.Work {
		s = s.Plus(w.Negative)
	}
	return s
}

// HeatToOil returns the energy that warms the oil [J a year].
func (y *Year) HeatToOil() Split { return sumRows(y.Losses, toOil) }

// LossTo returns the energy lost to a sink [J a year].
func (y *Year) LossTo(s circuit.Sink) Split {
	return sumRows(y.Losses, func(r LossRow) bool { return r.Sink == s })
}

// MeanPower returns the mean power [W] of an energy booked over a year during the
// running hours; 0 when there are none.
func (y *Year) MeanPower(e Split) float64 { return ratio(e.Total()-e.Off, y.Hours) }

// ratio is a/b, or 0 when b is 0: for shares and means of something that did not happen.
func ratio(a, b float64) float64 {
	if b == 0 {
		return 0
	}
	return a / b
}
