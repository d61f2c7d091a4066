package figures

import (
	"math"
	"strings"

	"barlitre/circuit"
	"barlitre/circuit/drawing"
)

// part is a symbol on the sheet: a block, or a further symbol of a tank that stands
// in several lines.
type part struct {
	id     string
	block  *circuit.Block
	kind   *circuit.Kind // nil for a kind the program does not know
	copied bool          // a further symbol of the same block
	base   drawing.Symbol
	symbol drawing.Symbol // where it stands
	at     drawing.Pt
	fixed  bool

	body   drawing.Box   // of the symbol without its stubs
	centre drawing.Pt    // of the heat disc
	reach  []drawing.Box // room that moving parts need beside the symbol
	solid  []drawing.Box // where no label may stand
	blocks []drawing.Box // where no line may pass
}

// farthest is the largest coordinate that counts as a place on a sheet [M], 25 m of
// paper; what lies beyond, or is not a number, is placed anew.
const farthest = 1e4

// partsOf makes a part of every block, without a place yet.
func partsOf(c *circuit.Circuit) []part {
	parts := make([]part, 0, len(c.Blocks))
	for i := range c.Blocks {
		b := &c.Blocks[i]
		p := part{id: b.ID, block: b, kind: circuit.KindNamed(b.Kind)}
		if b.At != nil && math.Abs(b.At[0]) <= farthest && math.Abs(b.At[1]) <= farthest {
			p.at, p.fixed = drawing.Pt{X: b.At[0], Y: b.At[1]}, true
		}
		sym, ok := drawing.Lookup(circuit.SymbolOf(c, b))
		if !ok {
			sym = unknownSymbol()
		}
		p.base = sym
		parts = append(parts, p)
	}
	return parts
}

// unknownSymbol stands for a block that has no symbol.
func unknownSymbol() drawing.Symbol {
	box := []drawing.Pt{{X: -3, Y: -3}, {X: 3, Y: -3}, {X: 3, Y: 3}, {X: -3, Y: 3}}
	return drawing.Symbol{
		Name: "unknown", Title: "Unknown kind", Level: 3, Min: box[0], Max: box[2],
		Prims: []drawing.Prim{
			{Kind: drawing.Poly, Style: drawing.Chain, Pts: box, Part: "frame"},
			{Kind: drawing.Text, Text: "?", H: 2.4, Part: "letter"},
		},
	}
}

// isStub tells whether a piece of a symbol belongs to its connections rather than to
// its body.
func isStub(name string) bool {
	return name == "ports" || name == "shaft" || name == "pilot" || name == "turning" || strings.HasPrefix(name, "port:")
}

// stand puts the symbol at its place.
func (p *part) stand() {
	p.symbol = p.base.Placed(p.at, p.block.Turn, p.block.Mirror)
	p.body = emptyBox()
	p.solid = nil
	for _, q := range p.symbol.Prims {
		b := primBox(q)
		p.solid = append(p.solid, b)
		if !isStub(q.Part) {
			p.body = union(p.body, b)
		}
	}
	if p.body.Min.X > p.body.Max.X {
		p.body = p.symbol.Box()
	}
	p.blocks = blocksOf(&p.symbol)
	p.centre = p.heart()
	p.reach = nil
	if rod, ok := p.rodReach(); ok {
		p.reach = append(p.reach, rod)
		p.solid = append(p.solid, rod)
	}
}

// blocksOf are the boxes of the pieces that a symbol consists of: lines keep out of them, and
// may pass in the corners that the symbol leaves free. A box ends where its port does.
func blocksOf(s *drawing.Symbol) []drawing.Box {
	var boxes []drawing.Box
	at := map[string]int{}
	for _, q := range s.Prims {
		i, known := at[q.Part]
		if !known {
			i, boxes = len(boxes), append(boxes, emptyBox())
			at[q.Part] = i
		}
		boxes[i] = union(boxes[i], primBox(q))
	}
	for i := range boxes {
		b := &boxes[i]
		for _, q := range s.Ports {
			if contains(grown(*b, stubLap), q.At) {
				*b = endAt(*b, q)
			}
		}
	}
	return boxes
}

// stubLap is how near a port is that a piece of a symbol leads to [M].
const stubLap = 0.2

// endAt is a box that ends at a port where that lies at its edge.
func endAt(b drawing.Box, q drawing.Port) drawing.Box {
	at := func(edge *float64, port float64) {
		if math.Abs(*edge-port) <= stubLap {
			*edge = port
		}
	}
	switch {
	case q.Dir.X > 0:
		at(&b.Max.X, q.At.X)
	case q.Dir.X < 0:
		at(&b.Min.X, q.At.X)
	case q.Dir.Y > 0:
		at(&b.Max.Y, q.At.Y)
	case q.Dir.Y < 0:
		at(&b.Min.Y, q.At.Y)
	}
	return b
}

// heart is the middle of the part of a symbol that does the work, without what sets it.
func (p *part) heart() drawing.Pt {
	for _, q := range p.symbol.Prims {
		switch q.Part {
		case "circle", "square", "square:middle", "ball", "diamond":
			return mid(primBox(q))
		}
	}
	return mid(p.body)
}

func mid(b drawing.Box) drawing.Pt {
	return drawing.Pt{X: (b.Min.X + b.Max.X) / 2, Y: (b.Min.Y + b.Max.Y) / 2}
}

// primBox is the box of a piece of a symbol. A text is as wide as it may get.
func primBox(q drawing.Prim) drawing.Box {
	b := emptyBox()
	switch q.Kind {
	case drawing.Circle, drawing.Arc: // the whole circle, for an arc on the safe side
		return grown(drawing.Box{Min: q.C, Max: q.C}, q.R)
	case drawing.Text:
		return grown(drawing.Box{Min: q.C, Max: q.C}, q.H*0.6)
	}
	for _, p := range q.Pts {
		b = union(b, drawing.Box{Min: p, Max: p})
	}
	return grown(b, symbolLine/2)
}

// heats tells whether the block can turn energy into heat.
func (p *part) heats() bool { return p.kind != nil && len(p.kind.Losses) > 0 }

func (p *part) isTank() bool     { return p.block.Kind == "tank" }
func (p *part) isJunction() bool { return p.block.Kind == "junction" }

// place gives every part its place, and the tank symbols that were added one near what
// they are joined to.
func (s *Sheet) place() {
	items := make([]drawing.Item, 0, len(s.parts))
	for i := range s.parts {
		if p := &s.parts[i]; !p.copied {
			items = append(items, drawing.Item{Symbol: p.withRoom(), Fixed: p.fixed, At: p.at, Turn: p.block.Turn, Mirror: p.block.Mirror})
		}
	}
	var nets [][]drawing.ItemPort
	for _, n := range s.nets {
		var ends []drawing.ItemPort
		for _, e := range n.ends {
			if !s.parts[e.part].copied {
				ends = append(ends, drawing.ItemPort{Item: e.part, Port: e.port})
			}
		}
		if len(ends) > 1 {
			nets = append(nets, ends)
		}
	}
	for i, at := range drawing.Place(items, nets) {
		s.parts[i].at = at
		s.parts[i].stand()
	}
	for i := len(items); i < len(s.parts); i++ {
		s.placeCopy(i)
	}
}

// labelRoom is the width that a symbol is given on top of its own in an automatic
// layout, so that its label has room beside it [M].
const labelRoom = 6

// withRoom returns the symbol with an invisible piece that keeps room for its label.
func (p *part) withRoom() drawing.Symbol {
	s := p.base
	if p.fixed || p.isJunction() || p.isTank() {
		return s
	}
	to := drawing.Pt{X: s.Max.X + labelRoom, Y: s.Max.Y}
	s.Prims = append(append([]drawing.Prim(nil), s.Prims...), drawing.Prim{Kind: drawing.Line, Pts: []drawing.Pt{s.Max, to}})
	s.Max = to
	return s
}

// placeCopy puts a further tank symbol below the port it is joined to, or as near to
// that as there is room.
func (s *Sheet) placeCopy(i int) {
	p := &s.parts[i]
	var from drawing.Pt
	for _, n := range s.nets {
		for k, e := range n.ends {
			if e.part == i {
				from = s.endPoint(n.ends[(k+1)%len(n.ends)])
			}
		}
	}
	best, least := drawing.Pt{X: math.Round(from.X), Y: math.Round(from.Y) + 6}, math.Inf(1)
	for dy := 6.0; dy <= 30; dy++ {
		for dx := -24.0; dx <= 24; dx++ {
			at := drawing.Pt{X: math.Round(from.X) + dx, Y: math.Round(from.Y) + dy}
			if cost := dy + 2*math.Abs(dx); cost < least && s.free(i, at) {
				best, least = at, cost
			}
		}
	}
	p.at = best
	p.stand()
}

// free tells whether part i would be clear of all parts that stand already.
func (s *Sheet) free(i int, at drawing.Pt) bool {
	box := grown(s.parts[i].base.Placed(at, 0, false).Box(), 2)
	for k := range s.parts {
		o := &s.parts[k]
		if k != i && len(o.symbol.Prims) > 0 && shared(box, o.symbol.Box()) > 0 {
			return false
		}
	}
	return true
}
