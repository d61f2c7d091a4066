package figures

import (
	"math"
	"slices"

	"barlitre/circuit"
	"barlitre/circuit/drawing"
)

// asideReach is how far off a block that gives way is put at most [M].
const asideReach = 60

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
		if at, ok := s.aside(k); ok {
			o.at = at
			o.stand()
			moved[o.id] = [2]float64{at.X, at.Y}
		}
	}
}

// aside is the nearest place for a part where it stands clear.
func (s *Sheet) aside(k int) (best drawing.Pt, ok bool) {
	from, own, least := s.parts[k].at, s.parts[k].symbol.Box(), math.Inf(1)
	for dy := -asideReach; dy <= asideReach; dy++ {
		for dx := -asideReach; dx <= asideReach; dx++ {
			by := drawing.Pt{X: float64(dx), Y: float64(dy)}
			if d := math.Hypot(by.X, by.Y); d < least && s.clearBut(k, movedBox(own, by)) {
				best, least, ok = drawing.Pt{X: from.X + by.X, Y: from.Y + by.Y}, d, true
			}
		}
	}
	return best, ok
}

// clearBut tells whether a box lies a module beside all symbols but one.
func (s *Sheet) clearBut(k int, box drawing.Box) bool {
	box = grown(box, 1)
	for i := range s.parts {
		if i != k && shared(box, s.parts[i].symbol.Box()) > 0 {
			return false
		}
	}
	return true
}
