package audit

import (
	"fmt"
	"math"

	"barlitre/circuit"
	"barlitre/machines/units"
)

// mode is what a machine does at a time step.
type mode int

const (
	working mode = iota // some axis moves
	holding             // every axis stands, at least one under a load
	idle                // every axis stands, none under a load
)

// Split is an energy [J], or a time [s], by what the machine does meanwhile.
// Working, Holding, Idle and Off add up to the total; Driving is that part of the
// total which was booked while the load drove an axis. Only a year with a calendar has
// something Off.
type Split struct{ Working, Holding, Idle, Driving, Off float64 }

// Total returns the sum of the states.
func (s Split) Total() float64 { return s.Working + s.Holding + s.Idle + s.Off }

// Times returns s scaled by k.
func (s Split) Times(k float64) Split {
	return Split{k * s.Working, k * s.Holding, k * s.Idle, k * s.Driving, k * s.Off}
}

// Plus returns the sum of two splits.
func (s Split) Plus(o Split) Split {
	return Split{s.Working + o.Working, s.Holding + o.Holding, s.Idle + o.Idle, s.Driving + o.Driving, s.Off + o.Off}
}

// Ledger books the energy of one run: a circuit.Receiver. A power is integrated by
// the trapezoid rule; written with weights, time step k counts
//
//	w_k = (t_k+1 − t_k−1)/2
//
// seconds, half an interval on either side, so that what is booked by state adds
// up to the whole. Two steps at one time (before and after a jump) have no
// interval between them: each side keeps its own state.
//
// Supply is summed over all prime movers at each time step and only then split
// by sign: two motors on one mains exchange power there before the meter. Work is
// split by sign axis by axis.
type Ledger struct {
	channels []circuit.Channel
	sides    []float64 // 1 for a channel that supplies, −1 for any other
	supplies []int     // channels of the prime movers
	fuels    []int     // those of them that burn fuel
	works    []int     // channels of work
	axes     []string  // of the work channels
	axisOf   []int     // by place in works
	shafts   []int     // signals that make up the shaft power of the prime movers

	sums          [situations][]float64 // J booked in each situation, by item
	now, last     []float64             // W, by item: channels, then seconds, supply in, returned, fuel, work + and − by axis
	lastSituation situation
	weight        float64 // s that the last step counts so far
	begun         bool    // there is a step before the next
	steps         int
	from, at      float64 // s, first and last time step

	mean   *meanMeter // of the mains; nil in a part, which keeps its course
	course []powerAt  // s, W
	shaft  peak
	drawn  peak
	gap    peak // W, largest |supply − work − stored − losses| of a time step
}

// situation is a mode, with whileDriven added while the load drives an axis.
type situation int

const (
	whileDriven = situation(idle) + 1
	situations  = 2 * whileDriven
)

// peak is the largest value met, and when.
type peak struct{ value, at float64 }

func (p *peak) meet(v, t float64, first bool) {
	if first || v > p.value {
		p.value, p.at = v, t
	}
}

// Places of the items after the channels.
const (
	itemSeconds = iota
	itemSupplyIn
	itemReturned
	itemFuel // part of supply in
	itemWork // positive and negative, by axis
)

// NewLedger makes a ledger for the channels and signals of a compiled circuit.
// shafts are the signals whose sum is the shaft power of the prime movers
// (ShaftSignals finds them); steps is the number of time steps to come: up to
// that many are booked without an allocation.
func NewLedger(channels []circuit.Channel, shafts []int, steps int) *Ledger {
	l := newLedger(channels, shafts)
	l.mean = newMeanMeter(DemandWindow, steps)
	return l
}

func newLedger(channels []circuit.Channel, shafts []int) *Ledger {
	l := &Ledger{channels: channels, shafts: shafts}
	axis := map[string]int{}
	for i, c := range channels {
		side := -1.0
		switch c.Role {
		case circuit.Supply:
			side = 1
			l.supplies = append(l.supplies, i)
			if isFuel(c) {
				l.fuels = append(l.fuels, i)
			}
		case circuit.Work:
			a, ok := axis[c.Kind]
			if !ok {
				a = len(l.axes)
				axis[c.Kind] = a
				l.axes = append(l.axes, c.Kind)
			}
			l.works, l.axisOf = append(l.works, i), append(l.axisOf, a)
		}
		l.sides = append(l.sides, side)
	}
	n := len(channels) + itemWork + 2*len(l.axes)
	for i := range l.sums {
		l.sums[i] = make([]float64, n)
	}
	l.now, l.last = make([]float64, n), make([]float64, n)
	return l
}

// Sample books one time step. It refuses a power that is not a number and a time
// that runs backwards: a balance of such samples would mean nothing.
func (l *Ledger) Sample(s *circuit.Sample) error {
	if len(s.Power) != len(l.channels) {
		return fmt.Errorf("energy balance: %d powers at %g s, expected %d", len(s.Power), s.T, len(l.channels))
	}
	net, mains, gap, err := l.powers(s)
	if err != nil {
		return err
	}
	first := l.steps == 0
	if first {
		l.from = s.T
	}
	if l.begun {
		dt := s.T - l.at
		if !(dt >= 0) {
			return fmt.Errorf("energy balance: time runs backwards from %g s to %g s", l.at, s.T)
		}
		l.weight += dt / 2
		l.bookLast()
		l.weight = dt / 2
	}
	l.pulses(s)
	l.last, l.now = l.now, l.last
	l.lastSituation, l.at = situationOf(s), s.T
	l.begun = true
	l.steps++
	if l.mean != nil {
		l.mean.take(powerAt{s.T, mains})
	} else {
		l.course = append(l.course, powerAt{s.T, mains})
	}
	l.drawn.meet(net, s.T, first)
	l.gap.meet(gap, s.T, first)
	shaft := 0.0
	for _, i := range l.shafts {
		shaft += s.Signals[i]
	}
	l.shaft.meet(shaft, s.T, first)
	return nil
}

// isFuel reports whether a supply is the fuel of an engine, not the mains.
func isFuel(c circuit.Channel) bool { return c.Role == circuit.Supply && c.Kind == "fuel" }

// pulses books what a time step draws and loses at once, such as the start of a motor.
func (l *Ledger) pulses(s *circuit.Sample) {
	if !s.Pulsed {
		return
	}
	base, sums := len(l.channels), l.sums[situationOf(s)]
	for i, e := range s.Pulse {
		if e == 0 {
			continue
		}
		sums[i] += e
		if l.channels[i].Role == circuit.Supply {
			sums[base+itemSupplyIn] += e
		}
		if isFuel(l.channels[i]) {
			sums[base+itemFuel] += e
		}
	}
}

// bookLast books what the last time step counts so far.
func (l *Ledger) bookLast() {
	if l.weight > 0 {
		sums := l.sums[l.lastSituation]
		for i, p := range l.last[:len(sums)] {
			sums[i] += p * l.weight
		}
	}
	l.weight = 0
}

// item is the energy booked under an item.
func (l *Ledger) item(i int) Split {
	of := func(m mode, driving situation) float64 { return l.sums[situation(m)+driving][i] }
	all := func(m mode) float64 { return of(m, 0) + of(m, whileDriven) }
	return Split{Working: all(working), Holding: all(holding), Idle: all(idle),
		Driving: of(working, whileDriven) + of(holding, whileDriven) + of(idle, whileDriven)}
}

// powers fills now with the power of every item, and returns the supply, that part of it which is
// from the mains, and what the powers lack to balance [W].
func (l *Ledger) powers(s *circuit.Sample) (net, mains, gap float64, err error) {
	base := copy(l.now, s.Power)
	for i, p := range s.Power {
		gap += l.sides[i] * p
	}
	if gap-gap != 0 { // one of them is not finite
		for i, p := range s.Power {
			if math.IsNaN(p) || math.IsInf(p, 0) {
				return 0, 0, 0, fmt.Errorf("energy balance: %s of %s is not a number at %g s", l.channels[i].Kind, l.channels[i].Block, s.T)
			}
		}
	}
	for _, i := range l.supplies {
		net += s.Power[i]
	}
	fuel := 0.0
	for _, i := range l.fuels {
		fuel += s.Power[i]
	}
	mains = net - fuel
	l.now[base+itemSeconds] = 1
	l.now[base+itemSupplyIn], l.now[base+itemReturned], l.now[base+itemFuel] = max(mains, 0)+fuel, max(-mains, 0), fuel
	work := l.now[base+itemWork:]
	clear(work)
	for k, i := range l.works {
		work[2*l.axisOf[k]] += s.Power[i]
	}
	for a := range l.axes {
		p := work[2*a]
		work[2*a], work[2*a+1] = max(p, 0), min(p, 0)
	}
	return net, mains, math.Abs(gap), nil
}

// Part books the time steps after before, and the time from it to the first of them.
func (l *Ledger) Part(from, to int, before *circuit.Sample) circuit.Receiver {
	p := newLedger(l.channels, l.shafts)
	p.course = make([]powerAt, 0, to-from+1)
	if before != nil && p.Sample(before) == nil { // what is wrong with it the part before says
		p.steps, p.course = 0, p.course[:0]
		for _, sums := range p.sums {
			clear(sums) // what it drew at once is of the part before
		}
	}
	return p
}

// Join adds what a part has booked.
func (l *Ledger) Join(part circuit.Receiver) error {
	p := part.(*Ledger)
	p.bookLast()
	for k := range l.sums {
		for i, j := range p.sums[k] {
			l.sums[k][i] += j
		}
	}
	for _, x := range p.course {
		l.mean.take(x)
	}
	first := l.steps == 0
	if first {
		l.from = p.from
	}
	l.at, l.steps = p.at, l.steps+p.steps
	l.drawn.meet(p.drawn.value, p.drawn.at, first)
	l.gap.meet(p.gap.value, p.gap.at, first)
	l.shaft.meet(p.shaft.value, p.shaft.at, first)
	return nil
}

func situationOf(s *circuit.Sample) situation {
	if s.Driving {
		return situation(modeOf(s)) + whileDriven
	}
	return situation(modeOf(s))
}

func modeOf(s *circuit.Sample) mode {
	switch {
	case s.Holding:
		return holding
	case s.Standing:
		return idle
	}
	return working
}

// ShaftSignals finds the signals whose sum is the shaft power of the prime movers:
// those of the electric motors and engines, or, where none reports one, of all pumps.
func ShaftSignals(c *circuit.Circuit, signals []circuit.Signal) []int {
	of := func(p circuit.Passage) (out []int) {
		for i, s := range signals {
			if b := c.Block(s.Block); s.What == "shaft" && s.Dim == units.Power && b != nil && b.Passes() == p {
				out = append(out, i)
			}
		}
		return out
	}
	if m := of(circuit.PrimeMover); len(m) > 0 {
		return m
	}
	return of(circuit.PumpShaft)
}
