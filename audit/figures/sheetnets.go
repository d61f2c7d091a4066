package figures

import (
	"sort"

	"barlitre/circuit"
	"barlitre/circuit/drawing"
)

// end is a port of a part; opposite is set for a shaft that leaves a machine on the
// side where it has no shaft of its own.
type end struct {
	part     int
	port     string
	opposite bool
}

// lineNet is what is drawn as one line: ports that are joined, with the junctions
// between them. Tanks do not join lines here: each line has a tank symbol of its own.
type lineNet struct {
	ends      []end
	junctions []int // parts
	kind      drawing.PortType
	tank      int // index of the end that is a tank, -1 for none
	route     drawing.Route
}

// connect finds the nets and leaves unused stubs out of the symbols. A tank that
// stands in several nets gets a symbol for each.
func (s *Sheet) connect() {
	index := map[string]int{}
	for i := range s.parts {
		if _, twice := index[s.parts[i].id]; !twice {
			index[s.parts[i].id] = i
		}
	}
	groups := groupLines(s.circuit, func(p circuit.PortRef) (tank, ok bool) {
		i, known := index[p.Block]
		if !known {
			return false, false
		}
		_, ok = s.parts[i].base.Port(p.Port)
		return s.parts[i].isTank(), ok
	}, func(id string) bool { return s.parts[index[id]].isJunction() })
	tankUsed := map[int]bool{}
	for _, ports := range groups {
		n := lineNet{tank: -1}
		seen := map[int]bool{}
		for _, p := range ports {
			i := index[p.Block]
			switch {
			case s.parts[i].isJunction():
				if !seen[i] {
					n.junctions = append(n.junctions, i)
				}
				seen[i] = true
				continue
			case s.parts[i].isTank() && tankUsed[i]:
				i = s.copyTank(i)
				n.tank = len(n.ends)
			case s.parts[i].isTank():
				tankUsed[i] = true
				n.tank = len(n.ends)
			}
			n.ends = append(n.ends, end{part: i, port: p.Port})
		}
		s.addNet(n)
	}
	s.trim()
}

func (s *Sheet) copyTank(i int) int {
	p := s.parts[i]
	p.copied, p.fixed = true, false
	s.parts = append(s.parts, p)
	return len(s.parts) - 1
}

// addNet adds a net with its kind: that of its ports, working lines before others.
func (s *Sheet) addNet(n lineNet) {
	if len(n.ends)+len(n.junctions) < 2 {
		return
	}
	rank := map[drawing.PortType]int{drawing.PilotLine: 0, drawing.DrainLine: 1, drawing.Oil: 2, drawing.Electric: 3, drawing.Rod: 4, drawing.Shaft: 5}
	n.kind = drawing.Oil
	most := -1
	for _, e := range n.ends {
		if p, ok := s.parts[e.part].base.Port(e.port); ok && rank[p.Type] > most {
			most, n.kind = rank[p.Type], p.Type
		}
	}
	s.nets = append(s.nets, n)
}

// trim leaves the stubs of unused ports out of the symbols.
func (s *Sheet) trim() {
	used := map[int]map[string]bool{}
	for _, n := range s.nets {
		for _, e := range n.ends {
			if used[e.part] == nil {
				used[e.part] = map[string]bool{}
			}
			used[e.part][e.port] = true
		}
	}
	for i := range s.parts {
		s.parts[i].base = s.parts[i].base.Keep(func(port string) bool { return used[i][port] })
	}
}

// groupLines joins lines that share a port or meet in a junction. known tells whether
// a port exists and is a tank's; each line gives a tank's port at most once. The
// groups follow the order of the lines.
func groupLines(c *circuit.Circuit, known func(circuit.PortRef) (tank, ok bool), junction func(string) bool) [][]circuit.PortRef {
	parent := make([]int, len(c.Lines))
	var root func(int) int
	root = func(i int) int {
		for parent[i] != i {
			i = parent[i]
		}
		return i
	}
	owner := map[circuit.PortRef]int{}
	for i, l := range c.Lines {
		parent[i] = i
		for _, p := range l.Ports {
			tank, ok := known(p)
			if !ok || tank {
				continue
			}
			if junction(p.Block) {
				p.Port = ""
			}
			if o, taken := owner[p]; taken {
				a, b := root(o), root(i)
				parent[max(a, b)] = min(a, b)
			} else {
				owner[p] = i
			}
		}
	}
	ports := map[int][]circuit.PortRef{}
	for i, l := range c.Lines {
		r := root(i)
		for _, p := range l.Ports {
			if _, ok := known(p); ok && !hasPort(ports[r], p) {
				ports[r] = append(ports[r], p)
			}
		}
	}
	var order []int
	for r := range ports {
		order = append(order, r)
	}
	sort.Ints(order)
	out := make([][]circuit.PortRef, len(order))
	for k, r := range order {
		out[k] = ports[r]
	}
	return out
}

func hasPort(list []circuit.PortRef, p circuit.PortRef) bool {
	for _, q := range list {
		if q == p {
			return true
		}
	}
	return false
}

// Nets returns the number of lines that are drawn; regions and Hit number them from 0.
func (s *Sheet) Nets() int { return len(s.nets) }

// Net returns the ports that line i joins, and nil for a number out of range.
// Junctions in it are left out.
func (s *Sheet) Net(i int) []circuit.PortRef {
	if i < 0 || i >= len(s.nets) {
		return nil
	}
	var out []circuit.PortRef
	for _, e := range s.nets[i].ends {
		out = append(out, circuit.PortRef{Block: s.parts[e.part].id, Port: e.port})
	}
	return out
}
