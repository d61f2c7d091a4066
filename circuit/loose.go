package circuit

import (
	"math"
	"slices"
)

// loosely is the response of a pressure to a flow, both scaled, from which on leakage
// alone holds it: a ten-millionth of the largest machine's flow moves it by 100 bar. Of
// nodes that hang on restLeak it is about 1e9, on leak 1e11; what any part of a circuit
// leaks by its own numbers is far below.
const loosely = 1e7

// looseWatch finds the nodes that leakage alone gives a pressure while axes stand.
type looseWatch struct {
	looked   []uint64 // sets of standing axes that were looked at
	last     uint64
	nodes    []int // unknowns of the nodes
	response []float64
}

// lookLoose notes what is shut in at a point just balanced, once for each set of axes that stand.
func (r *run) lookLoose() {
	stand := uint64(0)
	for i := range r.step.axes {
		if r.step.axes[i].standing {
			stand |= 1 << (uint(i) & 63)
		}
	}
	l := &r.loose
	if stand == l.last {
		return
	}
	l.last = stand
	if stand == 0 || slices.Contains(l.looked, stand) {
		return
	}
	l.looked = append(l.looked, stand)
	if l.nodes == nil {
		for _, n := range r.found {
			l.nodes = append(l.nodes, int(n.slot))
		}
		l.response = make([]float64, len(l.nodes))
	}
	r.solver.Response(r, r.step.x, l.nodes, l.response)
	for i, z := range l.response {
		if math.Abs(z) > loosely {
			r.cert.Loose = with(r.cert.Loose, r.nodes[r.found[i].node].name)
		}
	}
}

// with adds a name to a list in order, once.
func with(list []string, name string) []string {
	i, had := slices.BinarySearch(list, name)
	if had {
		return list
	}
	return slices.Insert(list, i, name)
}

// Pocket is oil shut in: nodes that leakage alone gives a pressure, and what shuts them in.
type Pocket struct{ Nodes, By []string }

// Pockets says what shuts the nodes of a Certificate in: the blocks, but machines and
// cylinders, that part them from nodes whose pressure is determined. Nodes between which
// nothing can close are one pocket, and so are those that the same blocks shut in.
func (c *Circuit) Pockets(loose []string) []Pocket {
	var out []Pocket
	nets, of := netsOf(c)
	shut, had := map[*net]bool{}, map[*net]bool{}
	for _, n := range nets {
		shut[n] = slices.Contains(loose, n.name())
	}
	for _, start := range nets {
		if !shut[start] || had[start] {
			continue
		}
		var p Pocket
		flood(c, of, start, alwaysOpen, func(n *net, _ int) bool {
			had[n] = true
			p.Nodes = with(p.Nodes, n.name())
			for _, at := range n.ports {
				if b := c.Block(at.Block); shutsIn(b, of, shut) {
					p.By = with(p.By, b.ID)
				}
			}
			return false
		})
		if k := slices.IndexFunc(out, func(o Pocket) bool { return slices.Equal(o.By, p.By) }); k >= 0 {
			out[k].Nodes = append(out[k].Nodes, p.Nodes...)
		} else {
			out = append(out, p)
		}
	}
	return out
}

// alwaysOpen lists the ways through a block that nothing closes in either direction.
func alwaysOpen(b *Block, port string) (ways []string) {
	for _, out := range free[b.Kind][port] {
		if slices.Contains(free[b.Kind][out], port) {
			ways = append(ways, out)
		}
	}
	return ways
}

// shutsIn reports whether a block lies between what is shut in and a determined pressure.
func shutsIn(b *Block, of map[PortRef]*net, shut map[*net]bool) bool {
	if displaces(b) || movesAlong(b.Kind) {
		return false
	}
	for _, p := range KindNamed(b.Kind).Ports {
		if n := of[PortRef{b.ID, p.Name}]; p.Type == Oil && n != nil && !shut[n] {
			return true
		}
	}
	return false
}
