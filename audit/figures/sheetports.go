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
		sym, ok := drawing.Lookup(circuit.SymbolOf(s.circuit, p.block))
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
	const reach = 60
	box := grown(sym.Box(), 1)
	least := math.Inf(1)
	px, py = x, y
	for dy := -reach; dy <= reach; dy++ {
		for dx := -reach; dx <= reach; dx++ {
			d := math.Hypot(float64(dx), float64(dy))
			if at := (drawing.Pt{X: x + float64(dx), Y: y + float64(dy)}); d < least && s.clear(movedBox(box, at)) {
				least, px, py = d, at.X, at.Y
			}
		}
	}
	return px, py
}

// clear tells whether a box lies beside all symbols.
func (s *Sheet) clear(box drawing.Box) bool {
	return !slices.ContainsFunc(s.parts, func(p part) bool { return shared(box, p.symbol.Box()) > 0 })
}
