package figures

import (
	"slices"

	"barlitre/circuit"
	"barlitre/circuit/drawing"
)

// MakeRoom finds places for the blocks that other symbols of a changed circuit lie over, and
// those they had did not: for each the nearest where it stands clear of all others, in the
// circuit's own coordinates [M]. Blocks without a place of their own get out of the way by
// themselves.
func MakeRoom(was, c *circuit.Circuit) map[string][2]float64 {
	before, s := placed(was), placed(c)
	moved := map[string][2]float64{}
	for i := range s.parts {
		p := &s.parts[i]
		if k := before.partOf(p.id); !p.copied && k >= 0 && before.parts[k].base.Name != p.base.Name {
			s.giveWay(i, before, moved)
		}
	}
	return moved
}

// placed is a circuit with its blocks at their places, and no lines.
func placed(c *circuit.Circuit) *Sheet {
	s := &Sheet{circuit: c, parts: partsOf(c)}
	s.connect()
	s.place()
	return s
}

// partOf is the place of the symbol of a block among the parts, -1 for none.
func (s *Sheet) partOf(id string) int {
	return slices.IndexFunc(s.parts, func(p part) bool { return p.id == id && !p.copied })
}

// over tells whether the symbols of two parts lie over each other.
func (s *Sheet) over(i, k int) bool {
	return i >= 0 && k >= 0 && shared(s.parts[i].symbol.Box(), s.parts[k].symbol.Box()) > 0
}

// giveWay moves what part i lies over, unless it did so before.
func (s *Sheet) giveWay(i int, before *Sheet, moved map[string][2]float64) {
	for k := range s.parts {
		o := &s.parts[k]
		if _, done := moved[o.id]; k == i || done || o.copied || !o.fixed || o.isJunction() || !s.over(i, k) ||
			before.over(before.partOf(s.parts[i].id), before.partOf(o.id)) {
			continue
		}
		if by, ok := s.toClear(o.symbol.Box(), k); ok {
			o.at = drawing.Pt{X: o.at.X + by.X, Y: o.at.Y + by.Y}
			o.stand()
			moved[o.id] = [2]float64{o.at.X, o.at.Y}
		}
	}
}
