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
// Working, Holding and Idle add up to the total; Driving is that part of the
// total which was booked while the load drove an axis.
type Split struct{ Working, Holding, Idle, Driving float64 }

// Total returns the sum of the three states.
func (s Split) Total() float64 { return s.Working + s.Holding + s.Idle }

// Times returns s scaled by k.
func (s Split) Times(k float64) Split {
	return Split{k * s.Working, k * s.Holding, k * s.Idle, k * s.Driving}
}

// Plus returns the sum of two splits.
func (s Split) Plus(o Split) Split {
	return Split{s.Working + o.Working, s.Holding + o.Holding, s.Idle + o.Idle, s.Driving + o.Driving}
}

// book adds x to the part of mode m.
func (s *Split) book(x float64, m mode, driving bool) {
	switch m {
	case working:
		s.Working += x
	case holding:
		s.Holding += x
	default:
		s.Idle += x
	}
	if driving {
		s.Driving += x
	}
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
	axes     []string // of the work channels
	axisOf   []int    // by channel; −1 when it is not work
	shafts   []int    // signals that make up the shaft power of the prime movers

	items     []Split   // booked: channels, then seconds, supply in, returned, work + and − by axis
	now, last []float64 // W, by item
	lastMode  mode
	lastDrive bool

	t, supply []float64 // s, W, by time step: the 15-minute mean needs the course
	shaft     peak
	drawn     peak
	gap       peak // W, largest |supply − work − stored − losses| of a time step
}

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
	itemWork // positive and negative, by axis
)

// NewLedger makes a ledger for the channels and signals of a compiled circuit.
// shafts are the signals whose sum is the shaft power of the prime movers
// (ShaftSignals finds them); steps is the number of time steps to come: up to
// that many are booked without an allocation.
func NewLedger(channels []circuit.Channel, shafts []int, steps int) *Ledger {
	l := &Ledger{channels: channels, shafts: shafts, axisOf: make([]int, len(channels))}
	axis := map[string]int{}
	for i, c := range channels {
		l.axisOf[i] = -1
		if c.Role == circuit.Work {
			a, ok := axis[c.Kind]
			if !ok {
				a = len(l.axes)
				axis[c.Kind] = a
				l.axes = append(l.axes, c.Kind)
			}
			l.axisOf[i] = a
		}
	}
	n := len(channels) + itemWork + 2*len(l.axes)
	l.items = make([]Split, n)
	l.now, l.last = make([]float64, n), make([]float64, n)
	l.t, l.supply = make([]float64, 0, steps), make([]float64, 0, steps)
	return l
}

// Sample books one time step. It refuses a power that is not a number and a time
// that runs backwards: a balance of such samples would mean nothing.
func (l *Ledger) Sample(s *circuit.Sample) error {
	if len(s.Power) != len(l.channels) {
		return fmt.Errorf("energy balance: %d powers at %g s, expected %d", len(s.Power), s.T, len(l.channels))
	}
	first := len(l.t) == 0
	dt := 0.0
	if !first {
		if dt = s.T - l.t[len(l.t)-1]; !(dt >= 0) {
			return fmt.Errorf("energy balance: time runs backwards from %g s to %g s", l.t[len(l.t)-1], s.T)
		}
	}
	net, gap, err := l.powers(s)
	if err != nil {
		return err
	}
	m := modeOf(s)
	if dt > 0 {
		for i := range l.items {
			l.items[i].book(l.last[i]*dt/2, l.lastMode, l.lastDrive)
			l.items[i].book(l.now[i]*dt/2, m, s.Driving)
		}
	}
	l.last, l.now = l.now, l.last
	l.lastMode, l.lastDrive = m, s.Driving
	l.t, l.supply = append(l.t, s.T), append(l.supply, net)
	l.drawn.meet(net, s.T, first)
	l.gap.meet(gap, s.T, first)
	shaft := 0.0
	for _, i := range l.shafts {
		shaft += s.Signals[i]
	}
	l.shaft.meet(shaft, s.T, first)
	return nil
}

// powers fills now with the power of every item, and returns the supply and what
// the powers lack to balance [W].
func (l *Ledger) powers(s *circuit.Sample) (net, gap float64, err error) {
	base := len(l.channels)
	for i := base; i < len(l.now); i++ {
		l.now[i] = 0
	}
	l.now[base+itemSeconds] = 1
	work := l.now[base+itemWork:]
	for i, p := range s.Power {
		c := l.channels[i]
		if math.IsNaN(p) || math.IsInf(p, 0) {
			return 0, 0, fmt.Errorf("energy balance: %s of %s is not a number at %g s", c.Kind, c.Block, s.T)
		}
		l.now[i] = p
		switch c.Role {
		case circuit.Supply:
			net += p
			gap += p
		case circuit.Work:
			work[2*l.axisOf[i]] += p
			gap -= p
		default:
			gap -= p
		}
	}
	l.now[base+itemSupplyIn], l.now[base+itemReturned] = math.Max(net, 0), math.Max(-net, 0)
	for a := range l.axes {
		p := work[2*a]
		work[2*a], work[2*a+1] = math.Max(p, 0), math.Min(p, 0)
	}
	return net, math.Abs(gap), nil
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
	of := func(kinds ...string) (out []int) {
		for i, s := range signals {
			b := c.Block(s.Block)
			if s.What != "shaft" || s.Dim != units.Power || b == nil {
				continue
			}
			for _, k := range kinds {
				if b.Kind == k {
					out = append(out, i)
				}
			}
		}
		return out
	}
	if m := of("electric_motor", "engine"); len(m) > 0 {
		return m
	}
	return of("pump", "switched_machine", "charge_pump")
}
