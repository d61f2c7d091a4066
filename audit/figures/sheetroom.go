package figures

import (
	"math"
	"slices"

	"barlitre/circuit"
	"barlitre/circuit/drawing"
)

// asideReach is how far off a block that gives way is put at most [M].
const asideReach = 60

// MakeRoom finds places for the blocks that the symbols of the named ones lie over, as after
// one has grown: for each the nearest where it stands clear of all others, in the circuit's own
// coordinates [M]. Blocks without a place of their own get out of the way by themselves.
func MakeRoom(c *circuit.Circuit, grown ...string) map[string][2]float64 {
	s := &Sheet{circuit: c, parts: partsOf(c)}
	s.connect()
	s.place()
	moved := map[string][2]float64{}
	for i := range s.parts {
		if p := &s.parts[i]; !p.copied && slices.Contains(grown, p.id) {
			s.giveWay(i, grown, moved)
		}
	}
	return moved
}

// giveWay moves what part i lies over.
func (s *Sheet) giveWay(i int, grown []string, moved map[string][2]float64) {
	for k := range s.parts {
		o := &s.parts[k]
		if k == i || o.copied || !o.fixed || o.isJunction() || slices.Contains(grown, o.id) || shared(s.parts[i].symbol.Box(), o.symbol.Box()) == 0 {
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
