package circuit

import "sort"

// net is a set of ports joined by lines and junctions: a node of oil, a pilot
// signal, a shaft, or an electric feed.
type net struct {
	id    int
	typ   PortType
	ports []PortRef
	lines []int // file lines
	tank  string
	src   string // pressure source on it
	acc   string // accumulator on it
}

// name is what a person may call the net: its first port in reading order.
func (n *net) name() string {
	if len(n.ports) == 0 {
		return "a line without ports"
	}
	return n.ports[0].String()
}

// netsOf joins lines that share a port or meet in a junction. Ports that do not
// exist are left out (Check names them). The order of nets follows the names of
// their ports, so that it does not depend on the order in the file.
func netsOf(c *Circuit) (nets []*net, of map[PortRef]*net) {
	parent := map[PortRef]PortRef{}
	var find func(p PortRef) PortRef
	find = func(p PortRef) PortRef {
		q, ok := parent[p]
		if !ok {
			parent[p] = p
			return p
		}
		if q == p {
			return p
		}
		r := find(q)
		parent[p] = r
		return r
	}
	exists := func(p PortRef) bool {
		b := c.Block(p.Block)
		if b == nil {
			return false
		}
		k := KindNamed(b.Kind)
		return k != nil && k.Port(p.Port) != nil
	}
	lines := map[PortRef]int{}
	for _, l := range c.Lines {
		var first PortRef
		for _, p := range l.Ports {
			if !exists(p) {
				continue
			}
			find(p)
			lines[p] = l.Line
			if first == (PortRef{}) {
				first = p
			} else {
				parent[find(p)] = find(first)
			}
		}
	}
	for _, b := range c.Blocks {
		if b.Kind != kindJunction {
			continue
		}
		for _, p := range KindNamed(b.Kind).Ports[1:] {
			a, z := PortRef{b.ID, KindNamed(b.Kind).Ports[0].Name}, PortRef{b.ID, p.Name}
			parent[find(z)] = find(a)
		}
	}
	groups := map[PortRef][]PortRef{}
	for p := range parent {
		groups[find(p)] = append(groups[find(p)], p)
	}
	of = map[PortRef]*net{}
	for _, ports := range groups {
		sort.Slice(ports, func(i, j int) bool { return ports[i].String() < ports[j].String() })
		n := &net{ports: ports}
		nets = append(nets, n)
	}
	sort.Slice(nets, func(i, j int) bool { return nets[i].name() < nets[j].name() })
	for i, n := range nets {
		n.id = i
		n.typ = Pilot
		bare := true // nothing but junctions on it
		for _, p := range n.ports {
			of[p] = n
			b := c.Block(p.Block)
			if l, ok := lines[p]; ok {
				n.lines = append(n.lines, l)
			}
			switch b.Kind {
			case kindTank:
				n.tank = b.ID
			case kindPressureSource:
				n.src = b.ID
			case kindAccumulator:
				n.acc = b.ID
			}
			if b.Kind == kindJunction {
				continue
			}
			bare = false
			if t := KindNamed(b.Kind).Port(p.Port).Type; t != Pilot {
				n.typ = t
			}
		}
		if bare {
			n.typ = Oil
		}
	}
	return nets, of
}

// flood follows oil from a node to all it gets to, where ways gives the ports that
// it leaves a block by, for the port it enters. found is asked of each node, with the
// number of blocks on the way; true ends the search.
func flood(c *Circuit, of map[PortRef]*net, start *net, ways func(b *Block, port string) []string, found func(n *net, blocks int) bool) bool {
	dist := map[*net]int{start: 0}
	for queue := []*net{start}; len(queue) > 0; queue = queue[1:] {
		n := queue[0]
		if found(n, dist[n]) {
			return true
		}
		for _, p := range n.ports {
			b := c.Block(p.Block)
			for _, o := range ways(b, p.Port) {
				m := of[PortRef{b.ID, o}]
				if _, seen := dist[m]; m != nil && !seen {
					dist[m] = dist[n] + 1
					queue = append(queue, m)
				}
			}
		}
	}
	return false
}
