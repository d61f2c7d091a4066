package drawing

import (
	"math"
	"sort"
)

// PlacedPort is a port of a block that stands on the sheet.
type PlacedPort struct {
	Block   int // index of its box in the call, -1 for none
	Name    string
	At, Dir Pt // Dir away from the block; zero if any direction will do
}

// Net is a set of ports that are to be joined. Runs are pieces of line that were laid by
// hand, each upright or level: the net passes along them as far as its ports need it.
type Net struct {
	Name  string
	Type  PortType
	Ports []PlacedPort
	Runs  [][2]Pt
}

// Route is the drawn connection of one net.
type Route struct {
	Net      int     // index in the call
	Segments [][2]Pt // each horizontal or vertical, cut at corners and dots
	Dots     []Pt    // where three or more lines of the net meet
	Through  bool    // passes through a block or along another net, for want of a way round
}

// From lists the segments of a route without branches in their order from one of its ends
// on, each in that direction; nil if the route does not begin there.
func (r Route) From(at Pt) [][2]Pt {
	var out [][2]Pt
	used := make([]bool, len(r.Segments))
	for on := true; on; {
		on = false
		for i, g := range r.Segments {
			if used[i] || g[0] != at && g[1] != at {
				continue
			}
			if g[0] != at {
				g[0], g[1] = g[1], g[0]
			}
			used[i], on, at = true, true, g[1]
			out = append(out, g)
		}
	}
	return out
}

// Costs of a route, in half modules of line length. A bend is dearer than a
// small detour, a crossing about as dear as a bend; whatever makes a drawing
// ambiguous (a corner on another net, two nets on one line) is far dearer, and
// a way through a block is the last resort.
const (
	costStep     = 2
	costNear     = 2   // for each step within 1M of a block, or beside another net
	costBend     = 12  // 6M of line
	costTee      = 8   // starting at a line of the own net instead of at a port
	costCrossing = 10  //
	costExit     = 12  // passing right before a port of another net; four times for a shaft or rod
	costTouch    = 60  // each step along the edge of a block
	costKnot     = 400 // meeting a corner, dot or port of another net
	costShare    = 500 // each step on a line of another net
	costInside   = 9000
)

const (
	margin   = 9       // room for routes round the outermost blocks, and the rim [M]
	maxNodes = 400_000 // larger sheets get plain elbows, to bound time and memory
)

// RouteAll joins the ports of each net by horizontal and vertical lines on
// the module grid. Lines leave a port in its direction, keep out of the blocks
// and avoid each other; the answer has one Route per net, in the order of nets,
// and is the same for the same input. It does not fail: where there is no
// free way the route is marked Through. Runs laid by hand are kept where they meet
// neither the inside of a block nor a port of another net.
func RouteAll(blocks []Box, nets []Net) []Route {
	routes := make([]Route, len(nets))
	f, ok := newField(blocks, nets)
	if !ok {
		for i, n := range nets {
			routes[i] = elbows(i, n)
		}
		return routes
	}
	trees := make([]tree, len(nets))
	order := routingOrder(nets)
	// The second round lets the nets laid first make way for the later ones, where they meet.
	for round := 0; round < 2; round++ {
		for _, i := range order {
			if round > 0 && !f.meets(trees[i]) {
				continue
			}
			f.mark(trees[i], -1)
			trees[i] = f.grow(nets[i])
			f.mark(trees[i], +1)
		}
	}
	for i := range nets {
		routes[i] = f.route(i, nets[i], trees[i])
	}
	return routes
}

// RouteSome is RouteAll for the nets that are told alone: the others stay as they are laid,
// and are avoided. It is as quick as the nets are few, and no net makes way for another.
func RouteSome(blocks []Box, nets []Net, laid []Route, lay map[int]bool) []Route {
	routes := append([]Route(nil), laid...)
	f, ok := newField(blocks, nets)
	for i, n := range nets {
		switch {
		case !ok && lay[i]:
			routes[i] = elbows(i, n)
		case ok && !lay[i]:
			f.mark(f.treeOf(n, laid[i]), +1)
		}
	}
	if !ok {
		return routes
	}
	for _, i := range routingOrder(nets) {
		if lay[i] {
			t := f.grow(nets[i])
			f.mark(t, +1)
			routes[i] = f.route(i, nets[i], t)
		}
	}
	return routes
}

// treeOf is the tree that a route was made of.
func (f *field) treeOf(n Net, r Route) tree {
	t := tree{has: map[int]bool{}, on: map[int]bool{}, ports: map[int]terminal{}, stiff: n.Type == Shaft || n.Type == Rod}
	for _, g := range r.Segments {
		g, ok := f.inside(g)
		if !ok {
			continue // beyond all that is there now
		}
		a, b := f.node(g[0]), f.node(g[1])
		d := dirOf(f.at(b).sub(f.at(a)))
		for node := a; node != b && d >= 0 && f.at(node).on(f.at(a), f.at(b)); node += f.delta[d] {
			f.lay(&t, f.edge(node, d))
		}
	}
	return t
}

// on tells whether a point lies on the upright or level line between two others.
func (p Pt) on(a, b Pt) bool {
	return p.X >= math.Min(a.X, b.X) && p.X <= math.Max(a.X, b.X) && p.Y >= math.Min(a.Y, b.Y) && p.Y <= math.Max(a.Y, b.Y)
}

// routingOrder: what was laid by hand first, so that the others make way; then mechanical
// and electric links, since they should be straight, then oil, pilot and drain lines;
// short nets before long ones.
func routingOrder(nets []Net) []int {
	rank := map[PortType]int{Shaft: 0, Rod: 0, Electric: 0, Oil: 1, PilotLine: 2, DrainLine: 3}
	order := make([]int, len(nets))
	size := make([]float64, len(nets))
	for i, n := range nets {
		order[i] = i
		b := portsBox(n.Ports)
		size[i] = b.Max.X - b.Min.X + b.Max.Y - b.Min.Y
	}
	sort.SliceStable(order, func(a, b int) bool {
		i, j := order[a], order[b]
		if bent := len(nets[i].Runs) > 0; bent != (len(nets[j].Runs) > 0) {
			return bent
		}
		if rank[nets[i].Type] != rank[nets[j].Type] {
			return rank[nets[i].Type] < rank[nets[j].Type]
		}
		return size[i] < size[j]
	})
	return order
}

func portsBox(ports []PlacedPort) Box {
	if len(ports) == 0 {
		return Box{}
	}
	b := Box{ports[0].At, ports[0].At}
	for _, p := range ports {
		b = b.with(p.At)
	}
	return b
}

func (b Box) with(p Pt) Box {
	return Box{
		Pt{math.Min(b.Min.X, p.X), math.Min(b.Min.Y, p.Y)},
		Pt{math.Max(b.Max.X, p.X), math.Max(b.Max.Y, p.Y)},
	}
}

// elbows joins every port to the first by one corner at most.
func elbows(i int, n Net) Route {
	r := Route{Net: i, Through: true}
	for k := 1; k < len(n.Ports); k++ {
		a, b := n.Ports[0].At, n.Ports[k].At
		r.Segments = appendLeg(r.Segments, a, Pt{b.X, a.Y})
		r.Segments = appendLeg(r.Segments, Pt{b.X, a.Y}, b)
	}
	if len(n.Ports) > 2 {
		r.Dots = []Pt{n.Ports[0].At}
	}
	return r
}

func appendLeg(s [][2]Pt, a, b Pt) [][2]Pt {
	if a == b {
		return s
	}
	return append(s, [2]Pt{a, b})
}
