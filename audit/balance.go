package audit

import (
	"math"

	"barlitre/circuit"
)

// LossRow is the energy of one channel of a run: a loss, or what a store took.
type LossRow struct {
	Block, Kind string
	Sink        circuit.Sink // of a loss
	Energy      Split        // J
}

// WorkRow is the work given to the load of an axis: Positive >= 0 where the load
// resists, Negative <= 0 where it drives.
type WorkRow struct {
	Axis               string
	Positive, Negative Split // J
}

// Balance is the energy balance of one cycle,
//
//	SupplyIn − Returned = work + stored + sum of losses        (1)
//
// Every row is integrated for itself; none is found as a difference, so that what
// the two sides of (1) lack is a check (Closure).
type Balance struct {
	Cycle    float64 // s
	Steps    int     // time steps
	Seconds  Split   // s
	SupplyIn Split   // J, >= 0
	Returned Split   // J, >= 0
	Fuel     Split   // J, part of SupplyIn that engines burn
	Work     []WorkRow
	Stored   []LossRow // end minus start, either sign
	Losses   []LossRow
	Demand   Demand

	PeakSupply, PeakSupplyAt float64 // W, s
	PeakShaft, PeakShaftAt   float64 // W, s; largest sum over the prime movers
	WorstGap, WorstGapAt     float64 // W, s; largest imbalance of powers at one time step
}

// Balance closes the ledger. repeats says whether the cycle repeats without pause.
func (l *Ledger) Balance(repeats bool) *Balance {
	l.bookLast()
	base := len(l.channels)
	b := &Balance{
		Steps:    l.steps,
		Cycle:    l.at - l.from,
		Seconds:  l.item(base + itemSeconds),
		SupplyIn: l.item(base + itemSupplyIn),
		Returned: l.item(base + itemReturned),
		Fuel:     l.item(base + itemFuel),
		Demand:   l.mean.demand(repeats),

		PeakSupply: l.drawn.value, PeakSupplyAt: l.drawn.at,
		PeakShaft: l.shaft.value, PeakShaftAt: l.shaft.at,
		WorstGap: l.gap.value, WorstGapAt: l.gap.at,
	}
	for i, c := range l.channels {
		row := LossRow{Block: c.Block, Kind: c.Kind, Sink: c.Sink, Energy: l.item(i)}
		switch c.Role {
		case circuit.Loss:
			b.Losses = append(b.Losses, row)
		case circuit.Stored:
			b.Stored = append(b.Stored, row)
		}
	}
	for a, name := range l.axes {
		at := base + itemWork + 2*a
		b.Work = append(b.Work, WorkRow{Axis: name, Positive: l.item(at), Negative: l.item(at + 1)})
	}
	return b
}

// average turns a balance over n cycles into that of one: the mean of each figure.
func (b *Balance) average(n int) *Balance {
	if n <= 1 {
		return b
	}
	k := 1 / float64(n)
	b.Cycle *= k
	b.Seconds, b.SupplyIn, b.Returned, b.Fuel = b.Seconds.Times(k), b.SupplyIn.Times(k), b.Returned.Times(k), b.Fuel.Times(k)
	for i := range b.Work {
		b.Work[i].Positive, b.Work[i].Negative = b.Work[i].Positive.Times(k), b.Work[i].Negative.Times(k)
	}
	for i := range b.Stored {
		b.Stored[i].Energy = b.Stored[i].Energy.Times(k)
	}
	for i := range b.Losses {
		b.Losses[i].Energy = b.Losses[i].Energy.Times(k)
	}
	return b
}

// WorkPositive returns the work given to loads that resist [J], >= 0.
func (b *Balance) WorkPositive() Split {
	var s Split
	for _, w := range b.Work {
		s = s.Plus(w.Positive)
	}
	return s
}

// offMains reports whether all that is drawn is the fuel of engines.
func (b *Balance) offMains() bool {
	return b.Fuel.Total() > 0 && b.SupplyIn.Total()-b.Fuel.Total() <= 1e-9*b.Fuel.Total() && b.Returned.Total() == 0
}

// WorkNegative returns the work taken from loads that drive [J], <= 0.
func (b *Balance) WorkNegative() Split {
	var s Split
	for _, w := range b.Work {
		s = s.Plus(w.Negative)
	}
	return s
}

// StoredEnergy returns what all stores hold more at the end than at the start [J].
func (b *Balance) StoredEnergy() Split { return sumRows(b.Stored, nil) }

// LossEnergy returns the sum of all losses [J].
func (b *Balance) LossEnergy() Split { return sumRows(b.Losses, nil) }

// HeatToOil returns the sum of the losses that warm the oil [J].
func (b *Balance) HeatToOil() Split { return sumRows(b.Losses, toOil) }

func toOil(r LossRow) bool { return r.Sink == circuit.ToOil }

func sumRows(rows []LossRow, want func(LossRow) bool) Split {
	var s Split
	for _, r := range rows {
		if want == nil || want(r) {
			s = s.Plus(r.Energy)
		}
	}
	return s
}

// Gap returns what equation (1) lacks [J]: 0 when the balance closes.
func (b *Balance) Gap() float64 {
	return b.SupplyIn.Total() - b.Returned.Total() - b.WorkPositive().Total() - b.WorkNegative().Total() -
		b.StoredEnergy().Total() - b.LossEnergy().Total()
}

// Closure returns |Gap| over all energy that came in: from the supply, from loads
// that drive, and |stored|. It is 0 when nothing came in and nothing lacks.
func (b *Balance) Closure() float64 {
	gap := math.Abs(b.Gap())
	if gap == 0 {
		return 0
	}
	return gap / (b.SupplyIn.Total() - b.WorkNegative().Total() + math.Abs(b.StoredEnergy().Total()))
}

// ClosureLimit is the closure above which a balance is reported as faulty: a time
// step is balanced to parts in 1e9 of its flows, and the rows are sums of up to
// some 1e5 steps; what passes 1e-6 is an error of a model, not of arithmetic.
const ClosureLimit = 1e-6
