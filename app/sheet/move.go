package sheet

import (
	"fmt"
	"maps"
	"math"
	"strings"

	"barlitre/circuit"
)

// move puts blocks and notes (dx, dy) modules further, as one step of undo. Places are
// taken from the present file, which may be newer than what is drawn.
func (s *Station) move(e *editor, ids []string, notes []int, dx, dy float64) {
	if e.sheet == nil || e.drawn == nil || len(ids)+len(notes) == 0 || dx == 0 && dy == 0 {
		e.moved = nil
		e.redraw()
		return
	}
	at, others := e.places(ids, dx, dy)
	// Blocks without a place of their own would be placed anew around the moved
	// ones: they keep the places they were given.
	maps.Copy(at, others)
	to := map[int][2]float64{}
	for _, i := range notes {
		p := e.present().Notes[i].At
		to[i] = [2]float64{math.Round(p[0] + dx), math.Round(p[1] + dy)}
	}
	key := fmt.Sprint("move ", e.name, ids, notes)
	if err := s.ctx.Doc().Place(key, moveName(ids, notes), e.name, at, to); err != nil {
		e.moved = nil
		s.ctx.Fail(err)
		e.redraw()
	}
}

// moveName names a move for undo.
func moveName(ids []string, notes []int) string {
	var what []string
	switch {
	case len(ids) == 1:
		what = append(what, ids[0])
	case len(ids) > 1:
		what = append(what, fmt.Sprintf("%d blocks", len(ids)))
	}
	switch {
	case len(notes) == 1:
		what = append(what, "note")
	case len(notes) > 1:
		what = append(what, fmt.Sprintf("%d notes", len(notes)))
	}
	return "Move " + strings.Join(what, " and ")
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
	c := e.present()
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

// present is the circuit of the present file, which may be newer than what is drawn.
func (e *editor) present() *circuit.Circuit {
	if entry := e.s.ctx.Doc().File().Circuit(e.name); entry != nil {
		return entry.Circuit
	}
	return e.drawn
}
