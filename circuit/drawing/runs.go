package drawing

import "math"

// layRuns begins a tree with the pieces of line that were laid by hand, and joins them
// where they do not meet.
func (f *field) layRuns(t *tree, runs [][2]Pt) {
	pieces := f.pieces(f.runEdges(t, runs))
	for i, p := range pieces {
		if i > 0 {
			f.reach(t, p)
		}
		f.layPiece(t, p)
		t.bent = len(t.nodes)
	}
}

// layPiece adds edges that hang together, from where they meet the tree on, without those
// that would close a ring.
func (f *field) layPiece(t *tree, edges []int) {
	if len(t.edges) == 0 {
		f.lay(t, edges[0])
	}
	for grown := true; grown; {
		grown = false
		for _, e := range edges {
			if t.on[e/2] != t.on[e/2+f.delta[e&1]] {
				f.lay(t, e)
				grown = true
			}
		}
	}
}

// runEdges lists the edges under runs that a line may pass: not inside a block, not at a
// port of another net, and at a port of its own only the way it faces.
func (f *field) runEdges(t *tree, runs [][2]Pt) []int {
	var out []int
	seen := map[int]bool{}
	for _, r := range runs {
		a, b := f.node(r[0]), f.node(r[1])
		d := dirOf(f.at(b).sub(f.at(a)))
		if d < 0 || math.Abs(r[0].X-r[1].X) > 0.5 && math.Abs(r[0].Y-r[1].Y) > 0.5 {
			continue
		}
		for node := a; node != b; node += f.delta[d] {
			e, next := f.edge(node, d), node+f.delta[d]
			if !seen[e] && f.block[e] < costInside && f.ports[node] == 0 && f.ports[next] == 0 && t.faces(node, d) && t.faces(next, opposite(d)) {
				out = append(out, e)
			}
			seen[e] = true
		}
	}
	return out
}

// faces tells whether a line may leave a node that way: at a port only as it faces.
func (t *tree) faces(node, d int) bool {
	p, isPort := t.ports[node]
	return !isPort || p.dir < 0 || p.dir == d
}

// pieces sorts edges into what hangs together, in the order of the edges.
func (f *field) pieces(edges []int) [][]int {
	at := map[int][]int{} // edges by node
	for _, e := range edges {
		at[e/2] = append(at[e/2], e)
		at[e/2+f.delta[e&1]] = append(at[e/2+f.delta[e&1]], e)
	}
	var out [][]int
	seen := map[int]bool{}
	for _, first := range edges {
		if seen[first] {
			continue
		}
		seen[first] = true
		piece := []int{first}
		for k := 0; k < len(piece); k++ {
			for _, node := range [2]int{piece[k] / 2, piece[k]/2 + f.delta[piece[k]&1]} {
				for _, e := range at[node] {
					if !seen[e] {
						seen[e] = true
						piece = append(piece, e)
					}
				}
			}
		}
		out = append(out, piece)
	}
	return out
}

// reach leads a line from the tree to a piece.
func (f *field) reach(t *tree, piece []int) {
	var open []terminal
	was := map[int]int8{}
	for _, e := range piece {
		for _, node := range [2]int{e / 2, e/2 + f.delta[e&1]} {
			if _, known := was[node]; !known {
				was[node] = f.own[node]
				f.own[node] = openAny
				open = append(open, terminal{node, -1})
			}
		}
	}
	way := f.path(t, open)
	for node, o := range was {
		f.own[node] = o
	}
	if way != nil {
		f.addWay(t, way)
	}
}

// prune takes off what leads to no port.
func (f *field) prune(t *tree) {
	degree := map[int]int{}
	for _, e := range t.edges {
		degree[e/2]++
		degree[e/2+f.delta[e&1]]++
	}
	for gone := true; gone; {
		gone = false
		var left []int
		for _, e := range t.edges {
			a, b := e/2, e/2+f.delta[e&1]
			_, portA := t.ports[a]
			_, portB := t.ports[b]
			if degree[a] == 1 && !portA || degree[b] == 1 && !portB {
				delete(t.has, e)
				degree[a]--
				degree[b]--
				gone = true
				continue
			}
			left = append(left, e)
		}
		t.edges = left
	}
	var nodes []int
	for _, node := range t.nodes {
		if degree[node] > 0 || t.isPort(node) {
			nodes = append(nodes, node)
		} else {
			delete(t.on, node)
		}
	}
	t.nodes, t.bent = nodes, 0
}

func (t *tree) isPort(node int) bool {
	_, ok := t.ports[node]
	return ok
}
