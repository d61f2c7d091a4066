package figures

import (
	"math"
	"slices"

	"barlitre/circuit"
	"barlitre/circuit/drawing"
)

// SheetPiece is a piece of a line that can be chosen: Branch is a part of the line
// without a branching, Segment a straight piece of that.
type SheetPiece struct{ Net, Branch, Segment int }

// Pieces lists the straight pieces of a line, branch after branch.
func (s *Sheet) Pieces(net int) []SheetPiece {
	var out []SheetPiece
	for i, st := range s.stretches {
		for k := 1; st.net == net && k < len(st.pts); k++ {
			out = append(out, SheetPiece{net, i, k - 1})
		}
	}
	return out
}

// PieceAt finds the piece of a line at a point of the circuit's own coordinates [M].
func (s *Sheet) PieceAt(net int, x, y float64) (p SheetPiece, ok bool) {
	least := math.Inf(1)
	for _, q := range s.Pieces(net) {
		a, b := s.ends(q)
		box := drawing.Box{Min: a, Max: a}
		box = union(box, drawing.Box{Min: b, Max: b})
		if d := apart(box, drawing.Box{Min: drawing.Pt{X: x, Y: y}, Max: drawing.Pt{X: x, Y: y}}); d < least {
			least, p, ok = d, q, true
		}
	}
	return p, ok
}

// has tells whether a piece is one of the sheet.
func (s *Sheet) has(p SheetPiece) bool {
	return p.Branch >= 0 && p.Branch < len(s.stretches) && s.stretches[p.Branch].net == p.Net && p.Segment >= 0 && p.Segment+1 < len(s.stretches[p.Branch].pts)
}

func (s *Sheet) ends(p SheetPiece) (a, b drawing.Pt) {
	pts := s.stretches[p.Branch].pts
	return pts[p.Segment], pts[p.Segment+1]
}

// PieceEnds are the two ends of a straight piece in the circuit's own coordinates [M].
func (s *Sheet) PieceEnds(p SheetPiece) (a, b [2]float64, ok bool) {
	if !s.has(p) {
		return a, b, false
	}
	from, to := s.ends(p)
	return [2]float64{from.X, from.Y}, [2]float64{to.X, to.Y}, true
}

// piece is the branch that a piece is of, nil for none.
func (s *Sheet) piece(p *SheetPiece) *stretch {
	if p == nil || !s.has(*p) {
		return nil
	}
	return &s.stretches[p.Branch]
}

// Beyond lists the ports on one side of a branch: those that leave the line when the
// branch is taken out. Of the two sides it is the smaller one. Ports of a junction are
// told by its id alone.
func (s *Sheet) Beyond(p SheetPiece) []circuit.PortRef {
	st := s.piece(&p)
	if st == nil {
		return nil
	}
	n := &s.nets[p.Net]
	var sides [2][]circuit.PortRef
	put := func(share float64, port circuit.PortRef) {
		side := boolInt(math.Abs(share) > 0.5)
		sides[side] = append(sides[side], port)
	}
	for k, e := range n.ends {
		put(st.share[k], circuit.PortRef{Block: s.parts[e.part].id, Port: e.port})
	}
	for k, j := range n.junctions {
		put(s.shareOf(p, len(n.ends)+k), circuit.PortRef{Block: s.parts[j].id})
	}
	if len(sides[0]) > 0 && (len(sides[1]) == 0 || len(sides[0]) < len(sides[1])) {
		return sides[0]
	}
	return sides[1]
}

// shareOf is the flow along a branch of one that leaves at port i of its line.
func (s *Sheet) shareOf(p SheetPiece, i int) float64 {
	_, nets := s.routeInput()
	into := make([]float64, len(nets[p.Net].Ports))
	into[i] = 1
	a, b := s.stretches[p.Branch].pts[0], s.stretches[p.Branch].pts[1]
	for k, f := range s.nets[p.Net].route.Flows(nets[p.Net], into) {
		if g := s.nets[p.Net].route.Segments[k]; g[0] == a && g[1] == b || g[0] == b && g[1] == a {
			return f
		}
	}
	return 0
}

// Leaf tells the port that a branch alone leads to, ok is false for a branch between two
// parts of the line with more.
func (s *Sheet) Leaf(p SheetPiece) (port circuit.PortRef, ok bool) {
	if side := s.Beyond(p); len(side) == 1 {
		return side[0], true
	}
	return circuit.PortRef{}, false
}

// runsOf are the pieces of a line that were laid by hand.
func (s *Sheet) runsOf(n *lineNet) [][2]drawing.Pt {
	var out [][2]drawing.Pt
	for _, b := range s.circuit.Bends {
		if !slices.ContainsFunc(n.ends, func(e end) bool { return s.parts[e.part].id == b.Port.Block && e.port == b.Port.Port }) &&
			!slices.ContainsFunc(n.junctions, func(j int) bool { return s.parts[j].id == b.Port.Block }) {
			continue
		}
		for _, r := range b.Runs {
			out = append(out, [2]drawing.Pt{{X: r[0][0], Y: r[0][1]}, {X: r[1][0], Y: r[1][1]}})
		}
	}
	return out
}

// Bent tells whether a line was laid by hand.
func (s *Sheet) Bent(net int) bool {
	return net >= 0 && net < len(s.nets) && len(s.runsOf(&s.nets[net])) > 0
}

// jog is how far a line goes out of a port before it turns off to a bend [M].
const jog = 2

// Bend returns the pieces of a line when the straight run that piece p is part of is
// shifted sideways by whole modules [M], ready for audit.File.Bend. All that hangs on the
// run goes along; ports stay.
func (s *Sheet) Bend(p SheetPiece, by float64) [][2][2]float64 {
	if !s.has(p) {
		return nil
	}
	by = math.Round(by)
	segments := s.nets[p.Net].route.Segments
	run := s.runAlong(p)
	a, _ := s.ends(p)
	level := a.Y == s.lastOf(p).Y
	shifted := func(q drawing.Pt) drawing.Pt {
		if level {
			return drawing.Pt{X: q.X, Y: q.Y + by}
		}
		return drawing.Pt{X: q.X + by, Y: q.Y}
	}
	ports := s.portsOf(p.Net)
	var out [][2][2]float64
	add := func(a, b drawing.Pt) {
		a, b = drawing.Pt{X: math.Round(a.X), Y: math.Round(a.Y)}, drawing.Pt{X: math.Round(b.X), Y: math.Round(b.Y)}
		if a != b {
			out = append(out, [2][2]float64{{a.X, a.Y}, {b.X, b.Y}})
		}
	}
	on := map[drawing.Pt]bool{}
	for k := range run {
		on[segments[k][0]], on[segments[k][1]] = true, true
	}
	for k, g := range segments {
		if !run[k] {
			if on[g[0]] && ports[g[0]] == nil {
				g[0] = shifted(g[0])
			}
			if on[g[1]] && ports[g[1]] == nil {
				g[1] = shifted(g[1])
			}
			add(g[0], g[1])
			continue
		}
		for i, q := range g {
			dir := ports[q]
			switch {
			case dir == nil:
			case dir.X == 0 && dir.Y == 0 || (dir.Y == 0) != level: // straight away
				add(q, shifted(q))
			default:
				out1 := math.Min(jog, math.Max(1, math.Floor(distance(g[0], g[1])/2)))
				elbow := drawing.Pt{X: q.X + dir.X*out1, Y: q.Y + dir.Y*out1}
				add(q, elbow)
				add(elbow, shifted(elbow))
				g[i] = elbow
			}
		}
		add(shifted(g[0]), shifted(g[1]))
	}
	return out
}

func (s *Sheet) lastOf(p SheetPiece) drawing.Pt {
	_, b := s.ends(p)
	return b
}

// portsOf gives the directions of the ports of a line by their places, zero for junctions.
func (s *Sheet) portsOf(net int) map[drawing.Pt]*drawing.Pt {
	out := map[drawing.Pt]*drawing.Pt{}
	for _, e := range s.nets[net].ends {
		at, dir := s.endAt(e)
		out[at] = &dir
	}
	for _, j := range s.nets[net].junctions {
		out[s.parts[j].at] = &drawing.Pt{}
	}
	return out
}

// runAlong lists the segments of the route that lie in one straight run with a piece, up
// to ports.
func (s *Sheet) runAlong(p SheetPiece) map[int]bool {
	a, b := s.ends(p)
	segments, ports := s.nets[p.Net].route.Segments, s.portsOf(p.Net)
	level := a.Y == b.Y
	along := func(g [2]drawing.Pt) bool { return (g[0].Y == g[1].Y) == level }
	out := map[int]bool{}
	reached := map[drawing.Pt]bool{}
	for k, g := range segments {
		if g[0] == a && g[1] == b || g[0] == b && g[1] == a {
			out[k] = true
			reached[a], reached[b] = true, true
		}
	}
	for grown := true; grown; {
		grown = false
		for k, g := range segments {
			if out[k] || !along(g) {
				continue
			}
			if reached[g[0]] && ports[g[0]] == nil || reached[g[1]] && ports[g[1]] == nil {
				out[k], reached[g[0]], reached[g[1]], grown = true, true, true, true
			}
		}
	}
	return out
}

// WithBend returns the sheet with one line laid by hand, all others as they are: quick
// enough to follow the pointer.
func (s *Sheet) WithBend(net int, runs [][2][2]float64) *Sheet {
	if net < 0 || net >= len(s.nets) {
		return s
	}
	out := *s
	boxes, nets := s.routeInput()
	n := nets[net]
	n.Runs = nil
	for _, r := range runs {
		n.Runs = append(n.Runs, [2]drawing.Pt{{X: r[0][0], Y: r[0][1]}, {X: r[1][0], Y: r[1][1]}})
	}
	out.nets = append([]lineNet(nil), s.nets...)
	out.nets[net].route = drawing.RouteAll(boxes, []drawing.Net{n})[0]
	out.nets[net].route.Net = net
	out.relay(map[int]bool{net: true}, nets)
	out.carryLabels(s, nil, map[int]bool{net: true}, 0, 0)
	return &out
}
