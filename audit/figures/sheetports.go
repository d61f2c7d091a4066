package figures

import (
	"math"
	"slices"

	"barlitre/circuit"
	"barlitre/circuit/drawing"
)

// SheetPort is a port of a block where it stands on a sheet, in the circuit's own
// coordinates [M]. A tank that is drawn several times has each of its ports as often.
type SheetPort struct {
	circuit.PortRef
	X, Y float64
}

// Ports lists the ports of all blocks, also those that no line is drawn to yet.
func (s *Sheet) Ports() []SheetPort {
	var out []SheetPort
	for i := range s.parts {
		p := &s.parts[i]
		sym, ok := drawing.Lookup(p.base.Name)
		if !ok {
			continue
		}
		for _, q := range sym.Placed(p.at, p.block.Turn, p.block.Mirror).Ports {
			out = append(out, SheetPort{circuit.PortRef{Block: p.id, Port: q.Name}, q.At.X, q.At.Y})
		}
	}
	return out
}

// LabelBox is the room that the label of a block has, in the circuit's own coordinates [M].
func (s *Sheet) LabelBox(block string) (x, y, w, h float64, ok bool) {
	for _, l := range s.labels {
		if l.part >= 0 && s.parts[l.part].id == block && !s.parts[l.part].copied {
			return l.box.Min.X, l.box.Min.Y, l.box.Max.X - l.box.Min.X, l.box.Max.Y - l.box.Min.Y, true
		}
	}
	return 0, 0, 0, 0, false
}

// Lines returns what a line that is drawn consists of: places in Circuit.Lines,
// ascending, and the ids of the junctions between them.
func (s *Sheet) Lines(net int) (lines []int, junctions []string) {
	if net < 0 || net >= len(s.nets) {
		return nil, nil
	}
	n := s.nets[net]
	for _, j := range n.junctions {
		junctions = append(junctions, s.parts[j].id)
	}
	var own []circuit.PortRef
	for _, e := range n.ends {
		if p := &s.parts[e.part]; !p.isTank() {
			own = append(own, circuit.PortRef{Block: p.id, Port: e.port})
		}
	}
	for i, l := range s.circuit.Lines {
		if slices.ContainsFunc(l.Ports, func(p circuit.PortRef) bool { return slices.Contains(own, p) || slices.Contains(junctions, p.Block) }) {
			lines = append(lines, i)
		}
	}
	return lines, junctions
}

// FreePlace returns the place nearest to (x, y), in the circuit's own coordinates,
// where the symbol of a new block of a kind stands clear of all blocks.
func (s *Sheet) FreePlace(kind string, x, y float64) (px, py float64) {
	x, y = math.Round(x), math.Round(y)
	sym, ok := drawing.Lookup(circuit.SymbolOf(s.circuit, &circuit.Block{Kind: kind}))
	if !ok {
		sym = unknownSymbol()
	}
	by, _ := s.toClear(movedBox(sym.Box(), drawing.Pt{X: x, Y: y}), -1)
	return x + by.X, y + by.Y
}

// clearReach is how far off a clear place is looked for [M].
const clearReach = 60

// toClear is the shortest way by which a box comes to lie a module beside all symbols, but for
// that of one part (-1: none); ok is false where there is no room.
func (s *Sheet) toClear(box drawing.Box, but int) (by drawing.Pt, ok bool) {
	least := math.Inf(1)
	box = grown(box, 1)
	for dy := -clearReach; dy <= clearReach; dy++ {
		for dx := -clearReach; dx <= clearReach; dx++ {
			to := drawing.Pt{X: float64(dx), Y: float64(dy)}
			if d := math.Hypot(to.X, to.Y); d < least && s.clearBut(but, movedBox(box, to)) {
				least, by, ok = d, to, true
			}
		}
	}
	return by, ok
}

// clear tells whether a box lies beside all symbols.
func (s *Sheet) clear(box drawing.Box) bool { return s.clearBut(-1, box) }

// clearBut is clear for all symbols but that of one part.
func (s *Sheet) clearBut(but int, box drawing.Box) bool {
	for i := range s.parts {
		if i != but && shared(box, s.parts[i].symbol.Box()) > 0 {
			return false
		}
	}
	return true
}
