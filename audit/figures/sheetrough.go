package figures

import (
	"maps"
	"slices"

	"barlitre/audit/pen"
	"barlitre/circuit"
	"barlitre/circuit/drawing"
)

// Rough is Next for the moment until Next is done: lines between ports that did not move
// stay as they are, the others become plain elbows, and labels stay at their blocks.
// Blocks, ports and lines have the numbers that Next gives them. before may be nil.
func (before *Sheet) Rough(c *circuit.Circuit) *Sheet {
	s := &Sheet{circuit: c, parts: partsOf(c), notes: notesOf(c)}
	if before == nil {
		before = &Sheet{}
	}
	s.connect()
	s.place()
	s.splitShafts()
	boxes, nets := s.routeInput()
	r := &routing{boxes, nets, make([]drawing.Route, len(nets))}
	stayed := map[int]int{} // net before, by net
	s.stale = map[int]bool{}
	for i := range nets {
		if j := before.laid.find(nets[i]); j >= 0 {
			stayed[i] = j
			r.routes[i] = before.laid.routes[j]
			r.routes[i].Net = i
			s.stale[i] = before.laid.covered(r.routes[i], boxes)
		} else {
			r.routes[i] = star(i, nets[i])
			s.stale[i] = true
		}
		s.nets[i].route = r.routes[i]
	}
	maps.DeleteFunc(s.stale, func(_ int, stale bool) bool { return !stale })
	s.laid, s.fixture = r, &fixture{}
	for i := range s.nets {
		s.stretches = append(s.stretches, s.cut(i, nets[i])...)
	}
	s.crossings = drawing.Crossings(r.routes)
	s.keepLabels(before, stayed)
	s.measure()
	return s
}

// nearMost is from how many lines on it is no quicker to lay those alone that must be.
const nearMost = 24

// Near is a rough sheet with the lines laid that have plain elbows, or that a block was put
// on, all others as they are; ok is false where these are none, or so many that Next is as
// quick.
func (s *Sheet) Near() (near *Sheet, ok bool) {
	if len(s.stale) == 0 || len(s.stale) > nearMost {
		return nil, false
	}
	boxes, nets := s.routeInput()
	out := *s
	out.stale, out.nets = nil, slices.Clone(s.nets)
	out.laid = &routing{boxes, nets, drawing.RouteSome(boxes, nets, s.laid.routes, s.stale)}
	for i := range s.stale {
		out.nets[i].route = out.laid.routes[i]
	}
	out.relay(s.stale, nets)
	out.crossings = drawing.Crossings(out.laid.routes)
	out.carryLabels(s, nil, s.stale, 0, 0)
	return &out, true
}

// covered tells whether one of the boxes that were not there when a route was laid lies on it.
func (r *routing) covered(route drawing.Route, boxes []drawing.Box) bool {
	for _, b := range boxes {
		if b.Max.X-b.Min.X < 1 || slices.Contains(r.boxes, b) {
			continue // a junction, which lines may pass, or as before
		}
		for _, g := range route.Segments {
			if shared(grown(b, -0.1), grown(segmentBox(g[0], g[1]), -0.4)) > 0 {
				return true
			}
		}
	}
	return false
}

// Bare is the sheet without its lines and their labels.
func (s *Sheet) Bare() *Sheet {
	lines := newVeil()
	for i := range s.nets {
		lines.nets[i] = true
	}
	return s.veiled(lines)
}

// find returns the number of a net with the same ports in the same places, −1 for none.
func (r *routing) find(n drawing.Net) int {
	if r == nil {
		return -1
	}
	return slices.IndexFunc(r.nets, func(m drawing.Net) bool {
		return m.Type == n.Type && slices.Equal(m.Runs, n.Runs) && slices.EqualFunc(m.Ports, n.Ports, func(a, b drawing.PlacedPort) bool {
			return a.Name == b.Name && a.At == b.At && a.Dir == b.Dir
		})
	})
}

// keepLabels takes the labels of the sheet before along with their blocks, and those of
// lines that stayed. A new block has its name beside it.
func (s *Sheet) keepLabels(before *Sheet, stayed map[int]int) {
	was := map[string]int{}
	for k, l := range before.labels {
		if l.part >= 0 && !before.parts[l.part].copied {
			was[before.parts[l.part].id] = k
		}
	}
	for i := range s.parts {
		p := &s.parts[i]
		if k, ok := was[p.id]; ok && !p.copied {
			l := before.labels[k]
			from := before.parts[l.part].at
			l.box = movedBox(l.box, drawing.Pt{X: p.at.X - from.X, Y: p.at.Y - from.Y})
			l.part = i
			s.labels = append(s.labels, l)
			continue
		}
		w, h := labelSize(p, []row{rowTag})
		at := drawing.Pt{X: p.body.Max.X + labelGap, Y: p.centre.Y - h/2}
		box := drawing.Box{Min: at, Max: drawing.Pt{X: at.X + w, Y: at.Y + h}}
		s.labels = append(s.labels, sheetLabel{part: i, stretch: -1, rows: []row{rowTag}, box: box, align: pen.Left})
	}
	first := func(all []stretch, net int) int {
		return slices.IndexFunc(all, func(t stretch) bool { return t.net == net })
	}
	for net, old := range stayed {
		to, from := first(s.stretches, net), first(before.stretches, old)
		for _, l := range before.labels {
			if l.part < 0 && l.stretch >= from && l.stretch < len(before.stretches) && before.stretches[l.stretch].net == old {
				l.stretch += to - from
				s.labels = append(s.labels, l)
			}
		}
	}
}
