package figures

import (
	"math"
	"slices"

	"barlitre/circuit"
	"barlitre/circuit/drawing"
)

// OnLine returns the point of a line nearest to a place, on the grid, both in the circuit's
// own coordinates [M]; ok is false for a line that is not there.
func (s *Sheet) OnLine(net int, x, y float64) (at [2]float64, ok bool) {
	p, ok := s.PieceAt(net, x, y)
	if !ok {
		return at, false
	}
	a, b := s.ends(p)
	clamp := func(v, u, w float64) float64 {
		return math.Max(math.Min(u, w), math.Min(math.Max(u, w), math.Round(v)))
	}
	return [2]float64{clamp(x, a.X, b.X), clamp(y, a.Y, b.Y)}, true
}

// manyLines is from how many lines on a way is looked for that keeps out of the blocks alone.
const manyLines = 150

// Pull returns pieces of a line by which a branch to a port that stands on no line begins
// at a point of the line, and by which the line stays as it is, ready for audit.File.Bend
// once the port is on the line: no more of them than that takes. ok is false where no
// branch can begin there: at a port, or where blocks are in the way.
func (s *Sheet) Pull(net int, at [2]float64, to circuit.PortRef) (runs [][2][2]float64, ok bool) {
	end, known := s.endNamed(to)
	p, on := s.PieceAt(net, at[0], at[1])
	from := drawing.Pt{X: at[0], Y: at[1]}
	if !known || !on || s.parts[end.part].isTank() || s.portsOf(net)[from] != nil {
		return nil, false
	}
	boxes, nets := s.routeInput()
	n := nets[net]
	q, dir := s.endAt(end)
	port := drawing.PlacedPort{Block: end.part, Name: end.port, At: q, Dir: dir}
	whole := s.nets[net].route.Segments
	was := moduleSteps(whole)
	holds := [][][2]drawing.Pt{whole}
	if len(n.Ports) == 2 && len(n.Runs) == 0 { // else all is held, or other branches begin here too
		holds = [][][2]drawing.Pt{s.around(p, from), whole}
	}
	n.Ports = append(slices.Clone(n.Ports), port)
	others := slices.Delete(nets, net, net+1)
	if len(others) >= manyLines {
		others = nil
	}
	beside := slices.Clone(boxes) // the way must not lead through the line itself: it would join it there
	for _, g := range whole {
		beside = append(beside, grown(segmentBox(g[0], g[1]), 0.4))
	}
	for _, side := range s.sides(p, from, q) {
		branch := drawing.Net{Type: n.Type, Ports: []drawing.PlacedPort{{Block: -1, At: from, Dir: side}, port}}
		way := drawing.RouteAll(beside, append(slices.Clone(others), branch))[len(others)].From(from)
		for _, held := range holds {
			for k := range way {
				n.Runs = append(slices.Clone(held), way[:k+1]...)
				r := drawing.RouteAll(boxes, []drawing.Net{n})[0]
				if slices.Contains(r.Dots, from) && within(was, moduleSteps(r.Segments)) {
					return runsAs(n.Runs), true
				}
			}
		}
	}
	return nil, false
}

// Rest returns the pieces laid by hand that a line needs to lie as it does once ports are off
// it, ready for audit.File.Bend: none of those that only the way to these ports needed.
func (s *Sheet) Rest(net int, off []circuit.PortRef) [][2][2]float64 {
	if !s.Bent(net) {
		return nil
	}
	boxes, nets := s.routeInput()
	n, was := nets[net], moduleSteps(s.nets[net].route.Segments)
	gone := func(k int) bool {
		line := &s.nets[net]
		if k < len(line.ends) {
			e := line.ends[k]
			return slices.Contains(off, circuit.PortRef{Block: s.parts[e.part].id, Port: e.port})
		}
		return slices.Contains(off, circuit.PortRef{Block: s.parts[line.junctions[k-len(line.ends)]].id})
	}
	var ports []drawing.PlacedPort
	for k, p := range n.Ports {
		if !gone(k) {
			ports = append(ports, p)
		}
	}
	n.Ports = ports
	lies := func(runs [][2]drawing.Pt) bool {
		n.Runs = runs
		return within(moduleSteps(drawing.RouteAll(boxes, []drawing.Net{n})[0].Segments), was)
	}
	if lies(nil) {
		return nil
	}
	runs := s.runsOf(&s.nets[net])
	for k := len(runs) - 1; k >= 0; k-- {
		if without := slices.Delete(slices.Clone(runs), k, k+1); lies(without) {
			runs = without
		}
	}
	return runsAs(runs)
}

// endNamed finds the end that a port is.
func (s *Sheet) endNamed(p circuit.PortRef) (end, bool) {
	for i := range s.parts {
		if _, ok := s.parts[i].symbol.Port(p.Port); ok && s.parts[i].id == p.Block && !s.parts[i].copied {
			return end{part: i, port: p.Port}, true
		}
	}
	return end{}, false
}

// around is a piece of a line one module to both sides of a point on it, as far as it goes.
func (s *Sheet) around(p SheetPiece, at drawing.Pt) [][2]drawing.Pt {
	a, b := s.ends(p)
	l := distance(a, b)
	if l == 0 {
		return nil
	}
	u := drawing.Pt{X: (b.X - a.X) / l, Y: (b.Y - a.Y) / l}
	back, on := math.Min(1, distance(a, at)), math.Min(1, distance(at, b))
	return [][2]drawing.Pt{{{X: at.X - back*u.X, Y: at.Y - back*u.Y}, {X: at.X + on*u.X, Y: at.Y + on*u.Y}}}
}

// sides are the two directions square to a piece of a line, that towards a point first.
func (s *Sheet) sides(p SheetPiece, at, to drawing.Pt) [2]drawing.Pt {
	a, b := s.ends(p)
	aside, way := to.Y-at.Y, drawing.Pt{Y: 1}
	if a.X == b.X {
		aside, way = to.X-at.X, drawing.Pt{X: 1}
	}
	back := drawing.Pt{X: -way.X, Y: -way.Y}
	if aside < 0 {
		way, back = back, way
	}
	return [2]drawing.Pt{way, back}
}

// moduleSteps cuts segments into pieces of a module.
func moduleSteps(segments [][2]drawing.Pt) map[[2]drawing.Pt]bool {
	out := map[[2]drawing.Pt]bool{}
	for _, g := range segments {
		l := distance(g[0], g[1])
		for k := 0.0; k+1 <= l; k++ {
			on := func(k float64) drawing.Pt {
				return drawing.Pt{X: g[0].X + (g[1].X-g[0].X)*k/l, Y: g[0].Y + (g[1].Y-g[0].Y)*k/l}
			}
			a, b := on(k), on(k+1)
			if b.X < a.X || b.Y < a.Y {
				a, b = b, a
			}
			out[[2]drawing.Pt{a, b}] = true
		}
	}
	return out
}

// within tells whether all of one set is in another.
func within(a, b map[[2]drawing.Pt]bool) bool {
	for k := range a {
		if !b[k] {
			return false
		}
	}
	return true
}

func runsAs(runs [][2]drawing.Pt) [][2][2]float64 {
	var out [][2][2]float64
	for _, r := range runs {
		a, b := [2]float64{math.Round(r[0].X), math.Round(r[0].Y)}, [2]float64{math.Round(r[1].X), math.Round(r[1].Y)}
		if a != b {
			out = append(out, [2][2]float64{a, b})
		}
	}
	return out
}
