package audit

import (
	"cmp"
	"math"
	"slices"

	"barlitre/circuit"
	"barlitre/machines/units"
)

// Operating is a state that a displacement machine was in, and how much passed its shaft there.
type Operating struct {
	W, E, DP float64 // rad/s, setting, Pa (outlet minus inlet)
	Seconds  float64
	Energy   float64 // J, |shaft power| over that time
}

// operation is the circuit.Receiver that sums up the states of the machines of a circuit, those alike together.
type operation struct {
	interval
	machines []operated
}

type operated struct {
	block             string
	w, e, p, s, shaft int // signals
	last              Operating
	lastKey           stateKey // of last
	power             float64
	states            map[stateKey]*Operating
	key               stateKey   // of the state booked last
	booked            *Operating // that state: most time steps are alike the one before, and a lookup costs more than all else here
}

// stateKey is alike for states alike: speed, setting and pressure in steps.
type stateKey [3]int

// Steps of states that count as alike.
const (
	alikeSpeed    = 20 * units.RPM
	alikeSetting  = 0.02
	alikePressure = 2 * units.Bar
)

func newOperation(c *circuit.Circuit, signals []circuit.Signal) *operation {
	at := map[string]int{}
	for i, s := range signals {
		at[s.Name] = i
	}
	o := &operation{}
	for i := range c.Blocks {
		b := &c.Blocks[i]
		p, s, ok := circuit.MachinePorts(b)
		w, turns := at[b.ID+".w"]
		if !ok || !turns {
			continue
		}
		find := func(name string) int { // a port that is on no line has no pressure
			if i, ok := at[b.ID+"."+name]; ok {
				return i
			}
			return -1
		}
		o.machines = append(o.machines, operated{block: b.ID, w: w, e: find("e"), p: find(p + ".p"), s: find(s + ".p"), shaft: find("shaft"), states: map[stateKey]*Operating{}})
	}
	return o
}

// Sample books half an interval to the state before and half to this one.
func (o *operation) Sample(s *circuit.Sample) error {
	half := o.to(s.T) / 2
	for i := range o.machines {
		m := &o.machines[i]
		get := func(k int) float64 {
			if k < 0 {
				return 0
			}
			return s.Signals[k]
		}
		now := Operating{W: get(m.w), E: get(m.e), DP: get(m.p) - get(m.s)}
		power := math.Abs(get(m.shaft))
		key := keyOf(&now)
		if half > 0 {
			m.book(m.last, m.lastKey, m.power, half)
			m.book(now, key, power, half)
		}
		m.last, m.lastKey, m.power = now, key, power
	}
	return nil
}

// Part sums up the time steps after before, and the time from it to the first of them.
func (o *operation) Part(_, _ int, before *circuit.Sample) circuit.Receiver {
	p := &operation{}
	for i := range o.machines { // not their sums, which Join changes meanwhile
		m := &o.machines[i]
		p.machines = append(p.machines, operated{block: m.block, w: m.w, e: m.e, p: m.p, s: m.s, shaft: m.shaft, states: map[stateKey]*Operating{}})
	}
	if before != nil {
		_ = p.Sample(before) // never fails, and books nothing yet
	}
	return p
}

// Join adds the states of a part.
func (o *operation) Join(part circuit.Receiver) error {
	for i, m := range part.(*operation).machines {
		for key, s := range m.states {
			o.machines[i].add(key, *s)
		}
	}
	return nil
}

// keyOf is the key of a state.
func keyOf(x *Operating) stateKey {
	return stateKey{int(math.Round(x.W / alikeSpeed)), int(math.Round(x.E / alikeSetting)), int(math.Round(x.DP / alikePressure))}
}

// book adds to the states alike, those of a key; their mean is weighted by energy.
func (m *operated) book(x Operating, key stateKey, power, dt float64) {
	x.Seconds, x.Energy = dt, power*dt
	m.add(key, x)
}

func (m *operated) add(key stateKey, x Operating) {
	at := m.booked
	if at == nil || key != m.key {
		if at = m.states[key]; at == nil {
			at = &Operating{W: x.W, E: x.E, DP: x.DP}
			m.states[key] = at
		}
		m.key, m.booked = key, at
	}
	if sum := at.Energy + x.Energy; sum > 0 {
		k := x.Energy / sum
		at.W, at.E, at.DP = at.W+k*(x.W-at.W), at.E+k*(x.E-at.E), at.DP+k*(x.DP-at.DP)
	}
	at.Seconds += x.Seconds
	at.Energy += x.Energy
}

// all lists the states by machine, those with most energy first.
func (o *operation) all() map[string][]Operating {
	out := map[string][]Operating{}
	for _, m := range o.machines {
		var list []Operating
		for _, s := range m.states {
			list = append(list, *s)
		}
		slices.SortFunc(list, func(a, b Operating) int {
			return cmp.Or(cmp.Compare(b.Energy, a.Energy), cmp.Compare(a.W, b.W), cmp.Compare(a.DP, b.DP), cmp.Compare(a.E, b.E))
		})
		out[m.block] = list
	}
	return out
}
