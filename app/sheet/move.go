package sheet

import (
	"math"
	"strings"

	"barlitre/audit"
)

// move puts blocks (dx, dy) modules further, as one step of undo. Places are taken
// from the present file, which may be newer than what is drawn.
func (s *Station) move(e *editor, ids []string, dx, dy float64) {
	if e.sheet == nil || e.drawn == nil || len(ids) == 0 || dx == 0 && dy == 0 {
		e.moved = nil
		e.redraw()
		return
	}
	at, others := e.places(ids, dx, dy)
	var err error
	if len(others) == 0 {
		err = s.ctx.Doc().Move(e.name, at)
	} else {
		// Blocks without a place of their own would be placed anew around the moved
		// ones: they keep the places they were given.
		err = s.ctx.Doc().Edit("Move "+strings.Join(ids, ", "), func(f *audit.File) error {
			for _, list := range []map[string][2]float64{others, at} {
				for id, p := range list {
					if err := f.SetAt(e.name, id, p); err != nil {
						return err
					}
				}
			}
			return nil
		})
	}
	if err != nil {
		e.moved = nil
		s.ctx.Fail(err)
		e.redraw()
	}
}

// places returns where the moved blocks go, and the places of the others if any
// block has none in the file.
func (e *editor) places(ids []string, dx, dy float64) (at, others map[string][2]float64) {
	moved := map[string]bool{}
	for _, id := range ids {
		moved[id] = true
	}
	at, others = map[string][2]float64{}, map[string][2]float64{}
	missing := false
	c := e.drawn
	if entry := e.s.ctx.Doc().File().Circuit(e.name); entry != nil {
		c = entry.Circuit
	}
	for i := range c.Blocks {
		b := &c.Blocks[i]
		x, y, ok := e.sheet.At(b.ID)
		if b.At != nil {
			x, y, ok = b.At[0], b.At[1], true
		} else {
			missing = true
		}
		switch {
		case !ok:
		case moved[b.ID]:
			at[b.ID] = [2]float64{math.Round(x + dx), math.Round(y + dy)}
		default:
			others[b.ID] = [2]float64{x, y}
		}
	}
	if !missing {
		others = nil
	}
	return at, others
}
