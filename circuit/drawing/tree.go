package drawing

import "sort"

// terminal is a grid node where ports of a net are; dir is the direction a
// line leaves by, -1 for any (several ports in one place, or none given).
type terminal struct{ node, dir int }

// tree is the set of grid edges that joins the ports of a net.
type tree struct {
	edges []int
	nodes []int
	has   map[int]bool // edges
	on    map[int]bool // nodes
	ports map[int]terminal
	stiff bool // shaft or rod: lines should go round it
	bent  int  // how many nodes, the first ones, belong to what was laid by hand
}

func (f *field) terminals(n Net) []terminal {
	var list []terminal
	place := map[int]int{}
	for _, p := range n.Ports {
		node := f.node(p.At)
		if i, known := place[node]; known {
			list[i].dir = -1
			continue
		}
		place[node] = len(list)
		list = append(list, terminal{node, dirOf(p.Dir)})
	}
	return list
}

// grow joins the ports of a net, each by the cheapest way to what is there,
// nearest first. What was laid by hand is there from the beginning.
func (f *field) grow(n Net) tree {
	f.markPorts(n, -1) // a net does not avoid its own ports
	defer f.markPorts(n, +1)
	t := tree{has: map[int]bool{}, on: map[int]bool{}, ports: map[int]terminal{}, stiff: n.Type == Shaft || n.Type == Rod}
	open := f.terminals(n)
	for _, p := range open {
		t.ports[p.node] = p
	}
	f.layRuns(&t, n.Runs)
	for _, p := range open {
		f.own[p.node] = int8(1 + p.dir)
		if p.dir < 0 {
			f.own[p.node] = openAny
		}
		if t.on[p.node] {
			f.own[p.node] = joined
		}
		defer func() { f.own[p.node] = 0 }()
	}
	if len(open) > 0 && t.bent == 0 {
		f.join(&t, open[0].node)
	}
	for open = t.unreached(open); len(open) > 0; open = t.unreached(open) {
		way := f.path(&t, open)
		if way == nil {
			break // not met: the grid is in one piece and has room before every port
		}
		f.addWay(&t, way)
	}
	if t.bent > 0 {
		f.prune(&t)
	} else {
		f.relay(&t)
	}
	return t
}

// starts are the nodes that a further line may begin at: of a net that was bent by hand
// only those laid by hand, or ports would be joined past them.
func (t *tree) starts() []int {
	if t.bent > 0 {
		return t.nodes[:t.bent]
	}
	return t.nodes
}

func (t *tree) unreached(open []terminal) []terminal {
	var rest []terminal
	for _, p := range open {
		if !t.on[p.node] {
			rest = append(rest, p)
		}
	}
	return rest
}

func (f *field) join(t *tree, node int) {
	if t.on[node] {
		return
	}
	t.on[node] = true
	t.nodes = append(t.nodes, node)
	if f.own[node] != 0 {
		f.own[node] = joined
	}
}

// addWay adds a path from where it leaves the tree for the last time, so
// that no loop can arise.
func (f *field) addWay(t *tree, way []int) {
	first := 0
	for i, node := range way {
		if t.on[node] {
			first = i
		}
	}
	for i := first + 1; i < len(way); i++ {
		f.lay(t, 2*min(way[i-1], way[i])+f.axis(way[i-1], way[i]))
	}
}

// lay adds an edge with its nodes.
func (f *field) lay(t *tree, e int) {
	if t.has[e] {
		return
	}
	t.has[e] = true
	t.edges = append(t.edges, e)
	f.join(t, e/2)
	f.join(t, e/2+f.delta[e&1])
}

// axis is 0 for neighbours in x, 1 for neighbours in y.
func (f *field) axis(a, b int) int {
	if d := a - b; d == 1 || d == -1 {
		return 0
	}
	return 1
}

// lines tells in which of the four directions lines of the tree leave node.
func (t *tree) lines(f *field, node int) (out [4]bool, degree int) {
	for d := range out {
		if t.has[f.edge(node, d)] {
			out[d] = true
			degree++
		}
	}
	return out, degree
}

// isKnot: everything but a straight run through the node.
func (t *tree) isKnot(f *field, node int) bool {
	out, degree := t.lines(f, node)
	return degree != 2 || out[right] != out[left]
}

// route turns a finished tree into segments and dots.
func (f *field) route(i int, n Net, t tree) Route {
	r := Route{Net: i}
	edges := append([]int(nil), t.edges...)
	sort.Ints(edges)
	for _, e := range edges {
		if f.block[e] >= costInside || f.used[e] > 1 {
			r.Through = true
		}
		d, node := e&1, e/2
		if t.has[f.edge(node, opposite(d))] && !t.breaksAt(f, node) {
			continue // in the middle of a run
		}
		end := node + f.delta[d]
		for !t.breaksAt(f, end) {
			end += f.delta[d]
		}
		r.Segments = append(r.Segments, [2]Pt{f.at(node), f.at(end)})
	}
	count := map[int]int{}
	for _, p := range n.Ports {
		node := f.node(p.At)
		count[node]++
		// A port off the grid gets two short legs to its node.
		corner := Pt{f.at(node).X, p.At.Y}
		r.Segments = appendLeg(r.Segments, p.At, corner)
		r.Segments = appendLeg(r.Segments, corner, f.at(node))
	}
	nodes := append([]int(nil), t.nodes...)
	sort.Ints(nodes)
	for _, node := range nodes {
		if _, degree := t.lines(f, node); degree+count[node] >= 3 {
			r.Dots = append(r.Dots, f.at(node))
		}
	}
	return r
}

// breaksAt tells whether a segment ends at node: at corners, dots and ports.
func (t *tree) breaksAt(f *field, node int) bool {
	_, isPort := t.ports[node]
	return isPort || t.isKnot(f, node)
}
