package circuit

import "barlitre/machines/units"

// ShaftGroup is the machines on shafts that turn together, two or more.
type ShaftGroup struct {
	Name    string   // of the shaft: its first port in reading order
	Blocks  []string // pumps, services and hydraulic motors on it, by id
	Signals []int    // their shaft powers, > 0 taken from the shaft
}

// ShaftGroups lists the shafts over which machines may pass power to one another.
func (c *Compiled) ShaftGroups() []ShaftGroup {
	power := map[string]int{}
	for i, s := range c.signals {
		if s.What == "shaft" && s.Dim == units.Power {
			power[s.Block] = i
		}
	}
	nets, of := netsOf(c.circuit)
	var out []ShaftGroup
	for _, n := range nets {
		if n.typ != Shaft {
			continue
		}
		g, first := ShaftGroup{Name: n.name()}, true
		turning, _, _ := train(c.circuit, of, n)
		for _, m := range turning {
			first = first && m.id >= n.id
			for _, p := range m.ports {
				b := c.circuit.Block(p.Block)
				if i, ok := power[b.ID]; ok && onShaft(b) {
					g.Blocks, g.Signals = append(g.Blocks, b.ID), append(g.Signals, i)
				}
			}
		}
		if first && len(g.Signals) > 1 {
			out = append(out, g)
		}
	}
	return out
}
