package figures

import (
	"math"

	"barlitre/circuit/drawing"
)

// Drag is a quick Move for the time the mouse is down: lines of the moved blocks become
// plain elbows, everything else stays as it is. It moves by any fraction of a module.
// Size and Origin stay those of s, so that nothing jumps; what is dragged beyond them is
// drawn there all the same.
func (s *Sheet) Drag(blocks []string, dx, dy float64, notes ...int) *Sheet {
	out := *s
	if !finite(dx) || !finite(dy) {
		return &out
	}
	moves := map[int]bool{}
	for _, id := range blocks {
		for i := range s.parts {
			if s.parts[i].id == id && !s.parts[i].copied {
				moves[i] = true
			}
		}
	}
	out.parts = append([]part(nil), s.parts...)
	for i := range moves {
		out.parts[i].shift(dx, dy)
	}
	stale := map[int]bool{}
	out.nets = append([]lineNet(nil), s.nets...)
	for i := range out.nets {
		n := &out.nets[i]
		for _, e := range n.ends {
			stale[i] = stale[i] || moves[e.part]
		}
		for _, j := range n.junctions {
			stale[i] = stale[i] || moves[j]
		}
	}
	out.notes = append([]sheetNote(nil), s.notes...)
	for _, i := range notes {
		if i >= 0 && i < len(out.notes) {
			out.notes[i].box = movedBox(out.notes[i].box, drawing.Pt{X: dx, Y: dy})
		}
	}
	out.redraw(stale)
	out.carryLabels(s, moves, stale, dx, dy)
	return &out
}

// shift moves a part with all its boxes.
func (p *part) shift(dx, dy float64) {
	p.at = drawing.Pt{X: p.at.X + dx, Y: p.at.Y + dy}
	by := drawing.Pt{X: dx, Y: dy}
	sym := p.symbol
	sym.Prims = make([]drawing.Prim, len(p.symbol.Prims))
	for i, q := range p.symbol.Prims {
		q = movedPrim(q, by)
		q.C = drawing.Pt{X: q.C.X + dx, Y: q.C.Y + dy}
		sym.Prims[i] = q
	}
	sym.Ports = append([]drawing.Port(nil), p.symbol.Ports...)
	for i := range sym.Ports {
		at := &sym.Ports[i].At
		*at = drawing.Pt{X: at.X + dx, Y: at.Y + dy}
	}
	box := movedBox(sym.Box(), by)
	sym.Min, sym.Max = box.Min, box.Max
	p.symbol = sym
	p.body = movedBox(p.body, by)
	blocks := make([]drawing.Box, len(p.blocks))
	for i, b := range p.blocks {
		blocks[i] = movedBox(b, by)
	}
	p.blocks = blocks
	p.centre = drawing.Pt{X: p.centre.X + dx, Y: p.centre.Y + dy}
}

func movedBox(b drawing.Box, by drawing.Pt) drawing.Box {
	return drawing.Box{Min: drawing.Pt{X: b.Min.X + by.X, Y: b.Min.Y + by.Y}, Max: drawing.Pt{X: b.Max.X + by.X, Y: b.Max.Y + by.Y}}
}

// redraw replaces the lines of stale nets by elbows from their first port to each other.
func (s *Sheet) redraw(stale map[int]bool) {
	_, nets := s.routeInput()
	for i := range s.nets {
		if stale[i] {
			s.nets[i].route = star(i, nets[i])
		}
	}
	s.relay(stale, nets)
}

// relay cuts the stale nets, which have new routes, into stretches.
func (s *Sheet) relay(stale map[int]bool, nets []drawing.Net) {
	stretches := make([]stretch, 0, len(s.stretches))
	for _, st := range s.stretches {
		if !stale[st.net] {
			stretches = append(stretches, st)
		}
	}
	for i := range s.nets {
		if stale[i] {
			stretches = append(stretches, s.cut(i, nets[i])...)
		}
	}
	s.stretches, s.fixture = stretches, &fixture{}
	var crossings []drawing.Crossing
	for _, c := range s.crossings {
		if !stale[c.Over] && !stale[c.Under] {
			crossings = append(crossings, c)
		}
	}
	s.crossings = crossings
}

// star joins every port to the first by at most one corner. Lines that lie on each
// other on their way out are no matter while the mouse is down.
func star(i int, n drawing.Net) drawing.Route {
	r := drawing.Route{Net: i}
	for k := 1; k < len(n.Ports); k++ {
		a, b := n.Ports[0].At, n.Ports[k].At
		corner := drawing.Pt{X: b.X, Y: a.Y}
		if math.Abs(n.Ports[0].Dir.Y) > 0 {
			corner = drawing.Pt{X: a.X, Y: b.Y}
		}
		for _, leg := range [][2]drawing.Pt{{a, corner}, {corner, b}} {
			if leg[0] != leg[1] {
				r.Segments = append(r.Segments, leg)
			}
		}
	}
	if len(n.Ports) > 2 {
		r.Dots = []drawing.Pt{n.Ports[0].At}
	}
	return r
}

// carryLabels moves the labels of moved blocks and drops those of stale lines.
func (s *Sheet) carryLabels(from *Sheet, moves map[int]bool, stale map[int]bool, dx, dy float64) {
	s.seen = nil // counts the stretches of the sheet before
	kept := map[int]int{}
	k := 0
	for i, st := range from.stretches {
		if !stale[st.net] {
			kept[i] = k
			k++
		}
	}
	s.labels = nil
	for _, l := range from.labels {
		switch {
		case l.part >= 0 && moves[l.part]:
			l.box = movedBox(l.box, drawing.Pt{X: dx, Y: dy})
		case l.part < 0:
			n, ok := kept[l.stretch]
			if !ok {
				continue
			}
			l.stretch = n
		}
		s.labels = append(s.labels, l)
	}
}
