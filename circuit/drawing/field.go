package drawing

import "math"

// The four directions a route may take, as indices.
const (
	right = iota
	down
	left
	up
)

var (
	stepOf = [4]Pt{right: {1, 0}, down: {0, 1}, left: {-1, 0}, up: {0, -1}}
	stepX  = [4]int{right: 1, left: -1}
	stepY  = [4]int{down: 1, up: -1}
)

func opposite(d int) int { return d ^ 2 }

// dirOf is the index of the main direction of d, -1 for a zero vector.
func dirOf(d Pt) int {
	best, most := -1, 0.0
	for i, s := range stepOf {
		if v := s.dot(d); v > most {
			best, most = i, v
		}
	}
	return best
}

// field is the sheet as a grid of whole modules. An edge is numbered by its
// left or upper node and its axis, 2*node + 0 (to the right) or + 1 (down). No line
// comes to the rim of the grid, so that every node on a line has four neighbours.
type field struct {
	x0, y0, w, h int
	delta        [4]int  // change of node index for a step
	block        []int32 // per edge: standing cost of blocks
	used         []int16 // per edge: count of nets on it
	knots        []int16 // per node: corners, dots and ports
	exits        []int16 // per node: what makes it a bad place to cross, in units of costExit
	own          []int8  // per node: ports of the net being routed, see openAny
	ports        []int16 // per node: ports, those of the net being routed left out
	window       span    // where a way is looked for
	scratch      search
}

// Values of field.own beside 0 (no port) and 1 + direction (a port that is
// still to be joined and faces that way).
const (
	openAny = 5 // still to be joined, from any side
	joined  = 6
)

// newField lays out the grid. It is not ok for sheets that are too large or
// have places that are not numbers.
func newField(blocks []Box, nets []Net) (*field, bool) {
	all := Box{Pt{math.Inf(1), math.Inf(1)}, Pt{math.Inf(-1), math.Inf(-1)}}
	for _, b := range blocks {
		all = all.with(b.Min).with(b.Max)
	}
	for _, n := range nets {
		for _, p := range n.Ports {
			all = all.with(p.At)
		}
		for _, r := range n.Runs {
			all = all.with(r[0]).with(r[1])
		}
	}
	width, height := all.Max.X-all.Min.X+2*margin+2, all.Max.Y-all.Min.Y+2*margin+2
	if !(width > 0 && height > 0 && width*height <= maxNodes) {
		return nil, false
	}
	f := &field{
		x0: int(math.Floor(all.Min.X)) - margin, y0: int(math.Floor(all.Min.Y)) - margin,
		w: int(width) + 1, h: int(height) + 1,
	}
	f.delta = [4]int{right: 1, down: f.w, left: -1, up: -f.w}
	n := f.w * f.h
	f.block, f.used = make([]int32, 2*n), make([]int16, 2*n)
	f.knots, f.exits = make([]int16, n), make([]int16, n)
	f.own, f.ports = make([]int8, n), make([]int16, n)
	f.scratch.states = make([]reached, 4*n)
	for _, b := range blocks {
		f.put(b)
	}
	for _, net := range nets {
		f.markPorts(net, +1)
	}
	return f, true
}

func (f *field) node(p Pt) int {
	return (int(math.Round(p.Y))-f.y0)*f.w + int(math.Round(p.X)) - f.x0
}

func (f *field) at(node int) Pt {
	return Pt{float64(node%f.w + f.x0), float64(node/f.w + f.y0)}
}

// inside is the part of an upright or level line that lies inside the rim; ok is false if none does.
func (f *field) inside(g [2]Pt) (out [2]Pt, ok bool) {
	left, top := float64(f.x0+1), float64(f.y0+1)
	right, foot := float64(f.x0+f.w-2), float64(f.y0+f.h-2)
	for i, p := range g {
		out[i] = Pt{min(max(p.X, left), right), min(max(p.Y, top), foot)}
	}
	beside := g[0].X == g[1].X && out[0].X != g[0].X || g[0].Y == g[1].Y && out[0].Y != g[0].Y
	return out, !beside
}

// edge is the number of the edge that leaves node in direction d.
func (f *field) edge(node, d int) int {
	if d == left || d == up {
		node += f.delta[d]
	}
	return 2*node + d&1
}

// put adds a block's standing costs to the edges in and near it.
func (f *field) put(b Box) {
	g := b.grown(1.5)
	for y := int(math.Ceil(g.Min.Y)) - f.y0 - 1; y <= int(g.Max.Y)-f.y0+1; y++ {
		for x := int(math.Ceil(g.Min.X)) - f.x0 - 1; x <= int(g.Max.X)-f.x0+1; x++ {
			if x < 0 || y < 0 || x >= f.w || y >= f.h {
				continue
			}
			p := Pt{float64(x + f.x0), float64(y + f.y0)}
			for axis, d := range [2]int{right, down} {
				e := 2*(y*f.w+x) + axis
				f.block[e] = max(f.block[e], blockCost(b, p, p.add(stepOf[d])))
			}
		}
	}
}

// blockCost is what the block b adds to the cost of the step p-q.
func blockCost(b Box, p, q Pt) int32 {
	const near = 0.99 // a line a whole module away is not near
	s := Box{p, p}.with(q)
	hits := func(m float64) bool { // the step meets the inside of b grown by m
		return s.Min.X < b.Max.X+m && s.Max.X > b.Min.X-m && s.Min.Y < b.Max.Y+m && s.Max.Y > b.Min.Y-m
	}
	switch {
	case hits(0):
		return costInside
	case hits(0.01):
		return costTouch
	case hits(near):
		return costNear
	}
	return 0
}

// markPorts enters the ports of a net as places that other nets avoid.
func (f *field) markPorts(n Net, by int16) {
	for _, p := range n.Ports {
		node := f.node(p.At)
		f.knots[node] += by
		f.ports[node] += by
		if d := dirOf(p.Dir); d >= 0 {
			f.exits[node+f.delta[d]] += by
		}
	}
}

// mark enters a net's lines as occupied, or takes them out (by = -1).
func (f *field) mark(t tree, by int16) {
	for _, e := range t.edges {
		f.used[e] += by
	}
	for _, node := range t.nodes {
		if t.isKnot(f, node) {
			f.knots[node] += by
		}
		if t.stiff {
			f.exits[node] += 4 * by
		}
	}
}

// meets tells whether a net that is laid crosses another, or lies on one.
func (f *field) meets(t tree) bool {
	for _, e := range t.edges {
		if f.used[e] > 1 {
			return true
		}
	}
	for _, node := range t.nodes {
		out, degree := t.lines(f, node)
		if across := degree == 2 && out[right] == out[left]; !across && f.knots[node] > 1 || across && (f.knots[node] > 0 || f.occupied(node, boolAxis(out[right]))) {
			return true
		}
	}
	return false
}

// boolAxis is the axis across a line that runs level, or upright.
func boolAxis(level bool) int {
	if level {
		return 1
	}
	return 0
}

// occupied tells whether a line lies on node along the axis, 0 = x, 1 = y.
func (f *field) occupied(node int, axis int) bool {
	return f.used[2*node+axis] > 0 || f.used[2*(node-f.delta[axis])+axis] > 0
}

// stepCost is the price of the step from node in direction d to next.
func (f *field) stepCost(node, d, next int) int32 {
	e := f.edge(node, d)
	cost := costStep + f.block[e]
	if f.used[e] > 0 {
		cost += costShare
	}
	axis := d & 1
	if f.occupied(next, 1-axis) {
		cost += costCrossing
	}
	if f.knots[next] > 0 {
		cost += costKnot
	}
	cost += costExit * int32(f.exits[next])
	aside := 2 * f.delta[1-axis]
	if f.used[e+aside] > 0 {
		cost += costNear
	}
	if f.used[e-aside] > 0 {
		cost += costNear
	}
	return cost
}

// turnCost is the price of a corner or dot at node.
func (f *field) turnCost(node int) int32 {
	if f.occupied(node, 0) || f.occupied(node, 1) {
		return costKnot
	}
	return 0
}
