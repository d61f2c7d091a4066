package figures

// Lifted is a sheet with some of its blocks and notes taken up, to be moved. What stays
// can be drawn once and kept; only what moves is drawn for each step.
type Lifted struct {
	Still  *Sheet // what stays
	s      *Sheet
	blocks []string
	notes  []int
	rest   *veil
}

// veil says what of a sheet is not drawn.
type veil struct{ parts, nets, notes, groups map[int]bool }

// veiled is the sheet without what a veil hides.
func (s *Sheet) veiled(v *veil) *Sheet {
	out := *s
	out.veil, out.fixture = v, &fixture{}
	return &out
}

func newVeil() *veil {
	return &veil{map[int]bool{}, map[int]bool{}, map[int]bool{}, map[int]bool{}}
}

func (v *veil) part(i int) bool  { return v != nil && v.parts[i] }
func (v *veil) net(i int) bool   { return v != nil && v.nets[i] }
func (v *veil) note(i int) bool  { return v != nil && v.notes[i] }
func (v *veil) group(i int) bool { return v != nil && v.groups[i] }

// Lift takes up blocks and notes, with the lines at the blocks and the boxes around them.
func (s *Sheet) Lift(blocks []string, notes ...int) *Lifted {
	up, rest := newVeil(), newVeil()
	moves := map[string]bool{}
	for _, id := range blocks {
		moves[id] = true
	}
	for i := range s.parts {
		list := rest
		if moves[s.parts[i].id] && !s.parts[i].copied {
			list = up
		}
		list.parts[i] = true
	}
	for i := range s.nets {
		list := rest
		for _, e := range s.nets[i].ends {
			if up.parts[e.part] {
				list = up
			}
		}
		for _, j := range s.nets[i].junctions {
			if up.parts[j] {
				list = up
			}
		}
		list.nets[i] = true
	}
	for i := range s.notes {
		rest.notes[i] = true
	}
	for _, i := range notes {
		if rest.notes[i] {
			delete(rest.notes, i)
			up.notes[i] = true
		}
	}
	for i, g := range s.circuit.Groups {
		list := rest
		for _, id := range g.Blocks {
			if moves[id] {
				list = up
			}
		}
		list.groups[i] = true
	}
	return &Lifted{Still: s.veiled(up), s: s, blocks: blocks, notes: notes, rest: rest}
}

// At is what was taken up, moved [M], with plain elbows for its lines.
func (l *Lifted) At(dx, dy float64) *Sheet {
	return l.s.Drag(l.blocks, dx, dy, l.notes...).veiled(l.rest)
}
