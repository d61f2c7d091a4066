package figures

import (
	"math"
	"slices"
	"sort"

	"barlitre/circuit/drawing"
)

// stretch is a piece of a line without a branch: the same flow passes all of it.
type stretch struct {
	net    int
	pts    []drawing.Pt
	share  []float64 // by end of the net: flow along pts = sum of share · flow into that end
	style  drawing.Style
	pilot  bool // leads to pilot ports only: no flow
	length float64
}

// stub is the piece of a symbol that carries on a line to the body of the block.
type stub struct {
	part, prim int
	net, end   int
	pts        []drawing.Pt // from the port inwards
	style      drawing.Style
	pilot      bool
}

// routing is what lines were laid for, and how.
type routing struct {
	boxes  []drawing.Box
	nets   []drawing.Net
	routes []drawing.Route
}

// same tells whether lines are to be laid for the same places again.
func (r *routing) same(boxes []drawing.Box, nets []drawing.Net) bool {
	return r != nil && slices.Equal(r.boxes, boxes) && slices.EqualFunc(r.nets, nets, func(a, b drawing.Net) bool {
		return a.Type == b.Type && slices.Equal(a.Ports, b.Ports) && slices.Equal(a.Runs, b.Runs)
	})
}

// route lays the lines of all nets and cuts them into stretches.
func (s *Sheet) route(before *Sheet) {
	s.splitShafts()
	boxes, nets := s.routeInput()
	if before != nil && before.laid.same(boxes, nets) {
		s.laid = before.laid
	} else {
		s.laid = &routing{boxes, nets, drawing.RouteAll(boxes, nets)}
	}
	routes := s.laid.routes
	for i := range routes {
		s.nets[i].route = routes[i]
	}
	s.stretches, s.fixture = nil, &fixture{}
	for i := range s.nets {
		s.stretches = append(s.stretches, s.cut(i, nets[i])...)
	}
	s.crossings = drawing.Crossings(routes)
}

// routeInput gives the boxes to keep out of and the ports to join.
func (s *Sheet) routeInput() ([]drawing.Box, []drawing.Net) {
	boxes := make([]drawing.Box, 0, len(s.parts))
	for i := range s.parts {
		p := &s.parts[i]
		if p.isJunction() { // a dot, which lines may pass
			boxes = append(boxes, drawing.Box{Min: p.at, Max: p.at})
			continue
		}
		boxes = append(boxes, p.blocks...)
	}
	for i := range s.parts {
		boxes = append(boxes, s.parts[i].reach...)
	}
	nets := make([]drawing.Net, len(s.nets))
	for i, n := range s.nets {
		nets[i].Type = n.kind
		for _, e := range n.ends {
			at, dir := s.endAt(e)
			nets[i].Ports = append(nets[i].Ports, drawing.PlacedPort{Block: e.part, Name: e.port, At: at, Dir: dir})
		}
		for _, j := range n.junctions {
			nets[i].Ports = append(nets[i].Ports, drawing.PlacedPort{Block: -1, At: s.parts[j].at})
		}
		nets[i].Runs = s.runsOf(&n)
	}
	return boxes, nets
}

// endAt is the place of an end on the sheet and the direction a line leaves it in.
func (s *Sheet) endAt(e end) (at, dir drawing.Pt) {
	p := &s.parts[e.part]
	q, _ := p.symbol.Port(e.port)
	if e.opposite {
		return drawing.Pt{X: 2*p.at.X - q.At.X, Y: 2*p.at.Y - q.At.Y}, drawing.Pt{X: -q.Dir.X, Y: -q.Dir.Y}
	}
	return q.At, q.Dir
}

func (s *Sheet) endPoint(e end) drawing.Pt {
	at, _ := s.endAt(e)
	return at
}

// splitShafts makes a chain of couplings out of a shaft with three machines or more:
// the ones in the middle are passed through instead of gone round.
func (s *Sheet) splitShafts() {
	var out []lineNet
	for _, n := range s.nets {
		if n.kind != drawing.Shaft || len(n.ends) < 3 || len(n.junctions) > 0 {
			out = append(out, n)
			continue
		}
		ends := append([]end(nil), n.ends...)
		sort.SliceStable(ends, func(a, b int) bool { return s.parts[ends[a].part].at.X < s.parts[ends[b].part].at.X })
		passable := true
		for _, e := range ends[1 : len(ends)-1] {
			passable = passable && s.passable(e)
		}
		if !passable {
			out = append(out, n)
			continue
		}
		for _, e := range ends[1 : len(ends)-1] {
			s.parts[e.part].passThrough()
		}
		for i := 1; i < len(ends); i++ {
			a, b := ends[i-1], ends[i]
			_, da := s.endAt(a)
			_, db := s.endAt(b)
			a.opposite = i > 1 && da.X < 0
			b.opposite = i < len(ends)-1 && db.X > 0
			for _, e := range []end{a, b} {
				if e.opposite {
					at, dir := s.endAt(e)
					s.parts[e.part].addOpposite(drawing.Port{At: at, Dir: dir})
				}
			}
			out = append(out, lineNet{ends: []end{a, b}, kind: n.kind, tank: -1})
		}
	}
	s.nets = out
}

// passable tells whether a shaft can leave the machine on its other side too.
func (s *Sheet) passable(e end) bool {
	p := &s.parts[e.part]
	q, ok := p.symbol.Port(e.port)
	if !ok || q.Dir.X == 0 || q.At.Y != p.at.Y || p.base.Name == "charge_pump" {
		return false
	}
	other, _ := s.endAt(end{part: e.part, port: e.port, opposite: true})
	for _, r := range p.symbol.Ports {
		if math.Abs(r.At.X-other.X)+math.Abs(r.At.Y-other.Y) < 1 {
			return false
		}
	}
	return !s.coversOthers(e.part)
}

// passThrough takes the symbol that has its setting device above the shaft, where there is one.
func (p *part) passThrough() {
	if sym, ok := drawing.Lookup(p.base.Name + "_through"); ok {
		p.base = sym.Keep(func(port string) bool { _, used := p.base.Port(port); return used })
		p.stand()
	}
}

// coversOthers tells whether a part with its setting device above the shaft would lie over
// more of the other symbols than it does now.
func (s *Sheet) coversOthers(i int) bool {
	now, then := s.parts[i], s.parts[i]
	then.passThrough()
	for k := range s.parts {
		if o := &s.parts[k]; k != i && then.covers(o) > now.covers(o) {
			return true
		}
	}
	return false
}

// covers is how much of what is drawn of two parts lies in the same place [M²].
func (p *part) covers(o *part) float64 {
	area := 0.0
	for _, a := range p.blocks {
		for _, b := range o.blocks {
			area += shared(a, b)
		}
	}
	return area
}

// addOpposite draws a second stub of the shaft, to the other side of the machine.
func (p *part) addOpposite(to drawing.Port) {
	for _, q := range p.symbol.Prims {
		if q.Part != "shaft" {
			continue
		}
		turned := q
		turned.Pts = nil
		for _, r := range q.Pts {
			turned.Pts = append(turned.Pts, drawing.Pt{X: 2*p.at.X - r.X, Y: 2*p.at.Y - r.Y})
		}
		p.symbol.Prims = append(p.symbol.Prims, turned)
		box := union(p.symbol.Box(), primBox(turned))
		p.symbol.Min, p.symbol.Max = box.Min, box.Max
		p.solid = append(p.solid, primBox(turned))
		p.blocks = append(p.blocks, endAt(primBox(turned), to))
	}
}

// cut makes the stretches of a routed net.
func (s *Sheet) cut(i int, n drawing.Net) []stretch {
	r := s.nets[i].route
	shares := make([][]float64, len(s.nets[i].ends)) // by end, by segment
	for k := range shares {
		into := make([]float64, len(n.Ports))
		into[k] = 1
		shares[k] = r.Flows(n, into)
	}
	ends := map[drawing.Pt][]int{}
	stop := map[drawing.Pt]bool{}
	for k, g := range r.Segments {
		ends[g[0]] = append(ends[g[0]], k)
		ends[g[1]] = append(ends[g[1]], k)
	}
	for _, p := range n.Ports {
		stop[p.At] = true
	}
	for at, at2 := range ends {
		stop[at] = stop[at] || len(at2) != 2
	}
	done := make([]bool, len(r.Segments))
	var out []stretch
	follow := func(k int, from drawing.Pt) {
		st := stretch{net: i, pts: []drawing.Pt{from}}
		for first := true; ; first = false {
			g := r.Segments[k]
			to, sign := g[1], 1.0
			if to == from {
				to, sign = g[0], -1
			}
			if first {
				for _, sh := range shares {
					st.share = append(st.share, sign*sh[k])
				}
			}
			done[k] = true
			st.pts = append(st.pts, to)
			st.length += math.Abs(to.X-from.X) + math.Abs(to.Y-from.Y)
			next := -1
			for _, m := range ends[to] {
				if !done[m] && !stop[to] {
					next = m
				}
			}
			if next < 0 {
				break
			}
			k, from = next, to
		}
		st.style, st.pilot = s.styleOf(i, st.share)
		out = append(out, st)
	}
	for k, g := range r.Segments {
		for _, from := range g {
			if !done[k] && stop[from] {
				follow(k, from)
			}
		}
	}
	for k, g := range r.Segments { // a ring without ports; the router makes none
		if !done[k] {
			follow(k, g[0])
		}
	}
	return out
}

// styleOf tells what a stretch is by the ports on its two sides: if all on one side
// are pilot ports it carries no flow, if all are drains it is a drain.
func (s *Sheet) styleOf(net int, share []float64) (style drawing.Style, pilot bool) {
	n := &s.nets[net]
	if !n.kind.Fluid() {
		return drawing.Solid, false
	}
	var count [2]int
	all := [2]map[drawing.PortType]int{{}, {}}
	for k, e := range n.ends {
		side := 0
		if share[k] != 0 {
			side = 1
		}
		p, _ := s.parts[e.part].symbol.Port(e.port)
		count[side]++
		all[side][p.Type]++
	}
	for side := range count {
		if count[side] > 0 && all[side][drawing.PilotLine] == count[side] {
			return drawing.Pilot, true
		}
	}
	for side := range count {
		if count[side] > 0 && all[side][drawing.DrainLine] == count[side] {
			return drawing.Drain, false
		}
	}
	return drawing.Solid, false
}

// stubs finds the pieces of the symbols that carry on a line.
func (s *Sheet) stubs() []stub {
	var out []stub
	for i, n := range s.nets {
		if !n.kind.Fluid() {
			continue
		}
		for k, e := range n.ends {
			p := &s.parts[e.part]
			port, _ := p.symbol.Port(e.port)
			for m, q := range p.symbol.Prims {
				if pts := stubFrom(q, p.symbol, port); pts != nil {
					out = append(out, stub{e.part, m, i, k, pts, q.Style, port.Type == drawing.PilotLine})
				}
			}
		}
	}
	return out
}

// stubFrom gives the points of a piece of a symbol from a port inwards, nil if the
// piece does not begin there. A piece from port to port gives its first half.
func stubFrom(q drawing.Prim, sym drawing.Symbol, port drawing.Port) []drawing.Pt {
	if q.Kind != drawing.Line || !isStub(q.Part) || q.Part == "shaft" || q.Part == "turning" || len(q.Pts) < 2 {
		return nil
	}
	pts := append([]drawing.Pt(nil), q.Pts...)
	if pts[len(pts)-1] == port.At {
		for i, j := 0, len(pts)-1; i < j; i, j = i+1, j-1 {
			pts[i], pts[j] = pts[j], pts[i]
		}
	}
	if pts[0] != port.At {
		return nil
	}
	far := pts[len(pts)-1]
	for _, o := range sym.Ports {
		if o.At == far && len(pts) == 2 {
			return []drawing.Pt{pts[0], {X: (pts[0].X + far.X) / 2, Y: (pts[0].Y + far.Y) / 2}}
		}
	}
	return pts
}
