package circuit

import (
	"math"

	"barlitre/machines/units"
)

// breakWatch compares what a hydraulic motor gives at standstill with what its axis asks for when it starts to move.
type breakWatch struct {
	b        *Block
	axis     int
	perLoad  float64    // motor torque by load, gear loss included
	gives    [2]float64 // N·m at standstill with the highest pressure there is, by side A and B; +Inf when nothing limits it
	limit    [2]float64 // Pa, that pressure
	short    float64    // N·m, the most that is missing
	needs, t float64
	side     int
	stood    bool
}

// breakaway watches a motor that drives an axis alone.
func (w *Watch) breakaway(b *Block, nets map[PortRef]*net) {
	axis := b.Word("axis")
	if axis == "" || nets[PortRef{b.ID, "shaft"}] != nil {
		return
	}
	m := breakWatch{b: b, axis: -1, perLoad: 1 / (w.value(b, "gear") * w.value(b, "gear_efficiency"))}
	for i, a := range w.c.axes {
		if a.Name == axis {
			m.axis = i
		}
	}
	supply := w.supplyLimit(nets)
	for i, port := range []string{"A", "B"} {
		m.limit[i] = math.Min(supply, w.reliefAt(nets, PortRef{b.ID, port}))
		m.gives[i] = w.value(b, "starting_torque") * w.value(b, "displacement") * m.limit[i]
	}
	w.breaks = append(w.breaks, m)
}

// reliefAt is the lowest opening pressure of the relief valves that a port cannot be closed off from, +Inf without one.
func (w *Watch) reliefAt(of map[PortRef]*net, port PortRef) float64 {
	start := of[port]
	if start == nil {
		return math.Inf(1)
	}
	c := w.c.circuit
	low := math.Inf(1)
	flood(c, of, start, func(b *Block, port string) []string { return free[b.Kind][port] }, func(n *net, _ int) bool {
		for _, p := range n.ports {
			b := c.Block(p.Block)
			if b.Kind != kindRelief || p.Port != "P" {
				continue
			}
			if _, set := b.Values["set"]; set {
				low = math.Min(low, w.value(b, "set"))
			} else {
				low = math.Min(low, w.value(b, "crack"))
			}
		}
		return false
	})
	return low
}

// supplyLimit is the highest pressure that any pump of the circuit can reach, +Inf where nothing limits one.
func (w *Watch) supplyLimit(of map[PortRef]*net) float64 {
	top := 0.0
	for i := range w.c.circuit.Blocks {
		b := &w.c.circuit.Blocks[i]
		switch b.Kind {
		case kindPump:
			at := w.reliefAt(of, PortRef{b.ID, "P"})
			if KindNamed(b.Kind).WordOf(b, "both_directions") == "yes" {
				at = math.Max(at, w.reliefAt(of, PortRef{b.ID, "S"}))
			}
			if v, ok := b.Values["set_pressure"]; ok {
				at = math.Min(at, v.SI)
			}
			top = math.Max(top, at)
		case kindAccumulator:
			return math.Inf(1) // it may hold more than a pump gives now
		}
	}
	if top == 0 {
		return math.Inf(1)
	}
	return top
}

func (m *breakWatch) take(s *Sample) {
	a := s.Axes[m.axis]
	starts := m.stood && !a.Standing && a.Load*a.Demand > 0
	m.stood = a.Standing
	if !starts {
		return
	}
	side := 0
	if a.Demand < 0 {
		side = 1
	}
	needs := math.Abs(a.Load) * m.perLoad
	if short := needs - m.gives[side]; short > m.short {
		m.short, m.needs, m.t, m.side = short, needs, s.T, side
	}
}

// breakaways says which motors stay where they are.
func (w *Watch) breakaways(f *findings) {
	for _, m := range w.breaks {
		if m.short <= 0 {
			continue
		}
		f.add(Warns, m.b, "starting_torque", m.t, "cannot break away at %s: the load needs %s at its shaft, and at standstill it gives %s, %s of its ideal torque at the %s where the supply ends. Take a larger motor or gear, or one that starts better",
			clock(m.t), show(m.needs, units.Torque), show(m.gives[m.side], units.Torque), units.Format(w.value(m.b, "starting_torque"), units.Percent, 2), show(m.limit[m.side], units.Pressure))
	}
}
