package circuit

import "sort"

// meeting is what comes together in one node.
type meeting struct {
	types   map[PortType][]string // ports by type, without junctions
	signals []string              // ports that give a pressure to a pilot line
	sources []string              // blocks that hold a pressure
	tanks   []string
}

// meets lists what comes together where these ports are joined.
func (c *Circuit) meets(ports []PortRef) meeting {
	m := meeting{types: map[PortType][]string{}}
	seen := map[string]bool{}
	for _, p := range ports {
		b := c.Block(p.Block)
		if b.Kind == kindJunction {
			continue
		}
		port := KindNamed(b.Kind).Port(p.Port)
		m.types[port.Type] = append(m.types[port.Type], p.String())
		if port.Source {
			m.signals = append(m.signals, p.String())
		}
		switch {
		case seen[b.ID]:
		case b.Kind == kindPressureSource:
			m.sources = append(m.sources, b.ID)
		case b.Kind == kindTank:
			m.tanks = append(m.tanks, b.ID)
		}
		seen[b.ID] = true
	}
	return m
}

// clash says why what meets cannot be joined, or "".
func (m meeting) clash() string {
	_, oil := m.types[Oil]
	var kinds []string
	for t, ports := range m.types {
		if t != Pilot || len(m.types) == 1 {
			kinds = append(kinds, string(t)+" ("+ports[0]+")")
		}
	}
	if pilot := m.types[Pilot]; len(pilot) > 0 && len(kinds) == 1 && !oil && len(m.types) > 1 {
		kinds = append(kinds, string(Pilot)+" ("+pilot[0]+")")
	}
	sort.Strings(kinds)
	switch {
	case len(kinds) > 1:
		return "a line joins different things: " + join(kinds, "and") + "; they cannot be connected"
	case oil && len(m.signals) > 0:
		return "signal outlet " + m.signals[0] + " stands on an oil line; lead it to pilot ports only"
	case len(m.signals) > 1:
		return "two signals meet at " + join(m.signals, "and") + "; put a shuttle valve between them"
	}
	return ""
}

// needsSignal reports whether there are only pilot ports that read a pressure.
func (m meeting) needsSignal() bool {
	_, oil := m.types[Oil]
	return len(m.types[Pilot]) > 0 && !oil && len(m.signals) == 0
}

// heldTwice says which blocks hold one node at pressures of their own, or "".
func (m meeting) heldTwice() string {
	if held := append(append([]string{}, m.sources...), m.tanks...); len(m.sources) > 0 && len(held) > 1 {
		sort.Strings(held)
		return join(held, "and") + " hold one line at pressures of their own; separate them by a valve or remove one"
	}
	return ""
}
