package circuit

import (
	"math"

	"barlitre/machines/units"
)

// Gate sets what a run asks of a block against what it stands: passed or not, with the
// number and the reason.
type Gate struct {
	Block     string
	Parameter string // that its limit hangs on
	Name      string
	Value     float64
	Limit     float64 // NaN where none is known; the value then only informs
	Unit      units.Unit
	T         float64 // s, when; 0 of a mean
	Passed    bool
	Reason    string // how value and limit come about
	missed    string // what to say when it is not passed
	level     Level  // of that
}

// gateOf makes a gate that is passed while the value does not exceed the limit.
func gateOf(b *Block, parameter, name string, value, limit float64, d units.Dim, t float64, reason string) Gate {
	return Gate{Block: b.ID, Parameter: parameter, Name: name, Value: value, Limit: limit, Unit: units.Preferred(d, units.Metric), T: t,
		Passed: !(value > limit*(1+1e-4)), Reason: reason, level: Warns}
}

// or says what is told when the gate is missed.
func (g Gate) or(level Level, text string) Gate {
	g.level, g.missed = level, text
	return g
}

// Gates lists what the run asked of drives, motors and held axes against what they stand.
func (w *Watch) Gates() []Gate {
	var out []Gate
	for i := range w.motors {
		out = append(out, w.motors[i].gates(w)...)
	}
	for i := range w.drives {
		out = append(out, w.drives[i].gates()...)
	}
	for i := range w.links {
		out = append(out, w.links[i].gates(w.span)...)
	}
	for i := range w.sets {
		out = append(out, w.sets[i].gates()...)
	}
	for i := range w.axes {
		out = append(out, w.creepGates(i)...)
	}
	return out
}

// gatesMissed tells of the gates that were not passed.
func (w *Watch) gatesMissed(f *findings) {
	for _, g := range w.Gates() {
		if !g.Passed && g.missed != "" {
			f.add(g.level, w.c.circuit.Block(g.Block), g.Parameter, g.T, "%s", g.missed)
		}
	}
}

// channelOf finds the channel of a loss, −1 if there is none.
func (w *Watch) channelOf(b *Block, kind string) int {
	for i, c := range w.c.channels {
		if c.Role == Loss && c.Block == b.ID && c.Kind == kind {
			return i
		}
	}
	return -1
}

// linkWatch follows the brake resistor of a converter.
type linkWatch struct {
	b            *Block
	resistor     int // channel
	energy, last float64
	peak, tPeak  float64
}

func (l *linkWatch) take(s *Sample, dt float64) {
	P := s.Power[l.resistor]
	l.energy += dt * (P + l.last) / 2
	if P > l.peak {
		l.peak, l.tPeak = P, s.T
	}
	l.last = P
}

func (l *linkWatch) gates(span float64) []Gate {
	if l.peak <= 0 || span <= 0 {
		return nil
	}
	limit := math.NaN()
	if v, ok := l.b.Values["resistor_power"]; ok {
		limit = v.SI
	}
	mean := l.energy / span
	g := gateOf(l.b, "resistor_power", "mean power of the brake resistor", mean, limit, units.Power, 0,
		"what comes back and no neighbour on the link takes, mean of the cycle; at most "+show(l.peak, units.Power)+" at "+clock(l.tPeak))
	return []Gate{g.or(Warns, "its brake resistor takes "+show(mean, units.Power)+" on average, more than the "+show(limit, units.Power)+" it stands; choose a larger one, or return the power to the mains")}
}
