package figures

import (
	"math"
	"sync"

	"barlitre/audit/pen"
	"barlitre/circuit/drawing"
)

// fixture is what every drawing of a sheet needs and no instant changes. It is worked out at
// the first drawing, and belongs to one set of parts, lines and veil: what changes one of
// these takes a new one, which may be before it is done, for nothing is worked out until then.
type fixture struct {
	once      sync.Once
	stubs     []stub
	asLine    [][]bool // by part: pieces of its symbol that are drawn as lines
	stretches []fixedStretch
	over      [][2]*stretch // by crossing: the stretches that run upright and level, nil for none
	dots      [][]fixedDot  // by net
	ends      [][]endSignals
}

// endSignals are the names of pressure and flow at an end of a net.
type endSignals struct{ p, q string }

// fixedStretch is what is known of a stretch.
type fixedStretch struct {
	pts  []pen.Pt
	tips [2][]chevron // for flow along the points and against them
}

// fixedDot is a place where lines of a net meet.
type fixedDot struct {
	at   pen.Pt
	ends []*stretch // that end there
}

// fixed returns what no instant changes.
func (s *Sheet) fixed() *fixture {
	k := s.fixture
	if k == nil {
		k = &fixture{}
	}
	k.once.Do(func() { k.find(s) })
	return k
}

// find works it out for what is not veiled.
func (k *fixture) find(s *Sheet) {
	k.stubs = s.stubs()
	k.asLine = make([][]bool, len(s.parts))
	for _, sb := range k.stubs {
		if k.asLine[sb.part] == nil {
			k.asLine[sb.part] = make([]bool, len(s.parts[sb.part].symbol.Prims))
		}
		k.asLine[sb.part][sb.prim] = true
	}
	k.stretches = make([]fixedStretch, len(s.stretches))
	of := make([][]*stretch, len(s.nets))
	for i := range s.stretches {
		st := &s.stretches[i]
		if s.veil.net(st.net) {
			continue
		}
		of[st.net] = append(of[st.net], st)
		k.stretches[i] = fixedStretch{penPts(st.pts), [2][]chevron{s.chevrons(st, 1), s.chevrons(st, -1)}}
	}
	k.over = make([][2]*stretch, len(s.crossings))
	for i, c := range s.crossings {
		if !s.veil.net(c.Over) && !s.veil.net(c.Under) {
			k.over[i] = [2]*stretch{stretchAt(of[c.Over], c.At, true), stretchAt(of[c.Under], c.At, false)}
		}
	}
	k.ends = make([][]endSignals, len(s.nets))
	for i := range s.nets {
		for _, e := range s.nets[i].ends {
			name := s.parts[e.part].id + "." + e.port
			k.ends[i] = append(k.ends[i], endSignals{name + ".p", name + ".q"})
		}
	}
	k.dots = make([][]fixedDot, len(s.nets))
	for i := range s.nets {
		if !s.nets[i].kind.Fluid() || s.veil.net(i) {
			continue
		}
		for _, at := range s.nets[i].route.Dots {
			d := fixedDot{at: penPt(at)}
			for _, st := range of[i] {
				if st.pts[0] == at || st.pts[len(st.pts)-1] == at {
					d.ends = append(d.ends, st)
				}
			}
			k.dots[i] = append(k.dots[i], d)
		}
	}
}

// drawnAsLine tells whether a piece of a symbol is drawn with the line at it.
func (k *fixture) drawnAsLine(part, prim int) bool {
	of := k.asLine[part]
	return of != nil && of[prim]
}

// tipsFor returns the marks of direction of a stretch with flow q along its points.
func (k *fixture) tipsFor(stretch int, q float64) []chevron {
	if q < 0 {
		return k.stretches[stretch].tips[1]
	}
	return k.stretches[stretch].tips[0]
}

// stretchAt finds the one of the stretches that passes a point upright or level.
func stretchAt(of []*stretch, at drawing.Pt, upright bool) *stretch {
	for _, st := range of {
		for k := 1; k < len(st.pts); k++ {
			a, b := st.pts[k-1], st.pts[k]
			if (a.X == b.X) == upright && contains(grown(union(drawing.Box{Min: a, Max: a}, drawing.Box{Min: b, Max: b}), 1e-6), at) {
				return st
			}
		}
	}
	return nil
}

// widest is the width of the widest of the stretches that end at a dot.
func (d *sheetDrawing) widest(dot fixedDot) float64 {
	w := 0.0
	for _, st := range dot.ends {
		w = math.Max(w, d.strokeWidth(st))
	}
	return w
}
