package figures

import (
	"math"

	"barlitre/circuit"
	"barlitre/circuit/drawing"
)

// Sheet is a circuit laid out for drawing: placed symbols, routed lines, and a
// place for every label. It is made once for a drawing and then drawn at any
// instant; labels keep their places while the clock moves. It is not changed
// after NewSheet and safe for use by several goroutines.
//
// Lengths are in modules of the symbol grid. A point of the sheet is the point of
// the circuit's own coordinates (Block.At) less Origin.
type Sheet struct {
	circuit   *circuit.Circuit
	parts     []part
	nets      []lineNet
	stretches []stretch
	crossings []drawing.Crossing
	labels    []sheetLabel
	notes     []sheetNote
	veil      *veil // what is not drawn, nil = all is
	fixture   *fixture
	laid      *routing
	stale     map[int]bool // nets of a rough sheet that are to be laid
	seen      *seen        // nil before there are results
	box       drawing.Box  // of everything that may be drawn, without legend
}

// sheetMargin is the free room round the drawing [M].
const sheetMargin = 1.5

// NewSheet lays a circuit out: blocks without a place are placed, lines are routed,
// labels find room. It never fails: a block of unknown kind is drawn as a box with its
// id, ports that do not exist are left out. c must not change afterwards.
func NewSheet(c *circuit.Circuit) *Sheet { return (*Sheet)(nil).Next(c) }

// Next is NewSheet for another state of the circuit of a sheet: where places and lines
// are as before, as after a change of a value, the lines need not be laid again. The
// answer is that of NewSheet.
func (before *Sheet) Next(c *circuit.Circuit) *Sheet {
	s := &Sheet{circuit: c, parts: partsOf(c), notes: notesOf(c)}
	s.connect()
	s.place()
	s.route(before)
	s.placeLabels()
	s.measure()
	return s
}

// Circuit returns the circuit that is drawn.
func (s *Sheet) Circuit() *circuit.Circuit { return s.circuit }

// Size returns width and height [M] without a legend.
func (s *Sheet) Size() (w, h float64) {
	return s.box.Max.X - s.box.Min.X, s.box.Max.Y - s.box.Min.Y
}

// Origin returns where the upper left corner of the sheet lies in the circuit's own
// coordinates [M].
func (s *Sheet) Origin() (x, y float64) { return s.box.Min.X, s.box.Min.Y }

// At returns the place of a block in the circuit's own coordinates [M]: as given, or
// as found for a block that has none; ok is false for an unknown id.
func (s *Sheet) At(block string) (x, y float64, ok bool) {
	for i := range s.parts {
		if p := &s.parts[i]; p.id == block && !p.copied {
			return p.at.X, p.at.Y, true
		}
	}
	return 0, 0, false
}

// Move returns the sheet with a block moved by (dx, dy) [M], rounded to whole modules.
// Lines and labels are laid anew. Blocks that had no place of their own keep the one
// they were given, so that nothing else moves. An unknown id moves nothing.
func (s *Sheet) Move(block string, dx, dy float64) *Sheet {
	return s.MoveAll([]string{block}, dx, dy)
}

// MoveAll is Move for several blocks at once.
func (s *Sheet) MoveAll(blocks []string, dx, dy float64) *Sheet {
	return NewSheet(s.moved(blocks, dx, dy))
}

// moved returns a copy of the circuit with every block at its place on this sheet, and
// the named ones moved.
func (s *Sheet) moved(blocks []string, dx, dy float64) *circuit.Circuit {
	c := *s.circuit
	c.Blocks = append([]circuit.Block(nil), c.Blocks...)
	moves := map[string]bool{}
	for _, id := range blocks {
		moves[id] = true
	}
	for i := range c.Blocks {
		b := &c.Blocks[i]
		x, y, ok := s.At(b.ID)
		if !ok {
			continue
		}
		if moves[b.ID] {
			x, y = math.Round(x+dx), math.Round(y+dy)
		}
		b.At = &[2]float64{x, y}
	}
	s.carryBends(&c)
	return &c
}

// carryBends takes along the lines laid by hand that lead to moved blocks only.
func (s *Sheet) carryBends(c *circuit.Circuit) {
	at := map[string][2]float64{}
	for i := range c.Blocks {
		if b := &c.Blocks[i]; b.At != nil {
			at[b.ID] = *b.At
		}
	}
	c.Bends = append([]circuit.SheetBend(nil), c.Bends...)
	for i, b := range c.Bends {
		c.Bends[i], _ = s.circuit.Carried(b, at)
	}
}

// measure sets the box of the sheet from all that may be drawn on it.
func (s *Sheet) measure() {
	box := emptyBox()
	for i := range s.parts {
		p := &s.parts[i]
		box = union(box, p.symbol.Box())
		for _, o := range p.reach {
			box = union(box, o)
		}
		if p.heats() {
			box = union(box, grown(drawing.Box{Min: p.centre, Max: p.centre}, discRadius))
		}
	}
	for _, st := range s.stretches {
		for _, q := range st.pts {
			box = union(box, grown(drawing.Box{Min: q, Max: q}, lineWidest))
		}
	}
	for _, l := range s.labels {
		box = union(box, l.box)
	}
	for _, n := range s.notes {
		box = union(box, n.box)
	}
	for _, g := range s.groups() {
		box = union(box, union(g.box, g.label))
	}
	if box.Min.X > box.Max.X {
		box = drawing.Box{Max: drawing.Pt{X: 20, Y: 10}} // an empty circuit still has a sheet
	}
	box = grown(box, sheetMargin)
	s.box = drawing.Box{
		Min: drawing.Pt{X: math.Floor(box.Min.X), Y: math.Floor(box.Min.Y)},
		Max: drawing.Pt{X: math.Ceil(box.Max.X), Y: math.Ceil(box.Max.Y)},
	}
}

func emptyBox() drawing.Box {
	inf := math.Inf(1)
	return drawing.Box{Min: drawing.Pt{X: inf, Y: inf}, Max: drawing.Pt{X: -inf, Y: -inf}}
}

func union(a, b drawing.Box) drawing.Box {
	return drawing.Box{
		Min: drawing.Pt{X: math.Min(a.Min.X, b.Min.X), Y: math.Min(a.Min.Y, b.Min.Y)},
		Max: drawing.Pt{X: math.Max(a.Max.X, b.Max.X), Y: math.Max(a.Max.Y, b.Max.Y)},
	}
}

func grown(b drawing.Box, by float64) drawing.Box {
	return drawing.Box{Min: drawing.Pt{X: b.Min.X - by, Y: b.Min.Y - by}, Max: drawing.Pt{X: b.Max.X + by, Y: b.Max.Y + by}}
}

// shared returns the area two boxes have in common [M²].
func shared(a, b drawing.Box) float64 {
	w := math.Min(a.Max.X, b.Max.X) - math.Max(a.Min.X, b.Min.X)
	h := math.Min(a.Max.Y, b.Max.Y) - math.Max(a.Min.Y, b.Min.Y)
	if w <= 0 || h <= 0 {
		return 0
	}
	return w * h
}

func contains(b drawing.Box, p drawing.Pt) bool {
	return p.X >= b.Min.X && p.X <= b.Max.X && p.Y >= b.Min.Y && p.Y <= b.Max.Y
}
