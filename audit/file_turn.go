package audit

import (
	"errors"
	"fmt"
	"math"
	"strconv"
	"strings"

	"barlitre/circuit"
)

// Rotate turns blocks of a circuit clockwise by quarter turns, several of them about
// the one in their middle, so that four turns lead back and all stay on the grid.
func (f *File) Rotate(circuitName string, quarters int, ids ...string) error {
	q := ((quarters % 4) + 4) % 4
	return f.pose(circuitName, ids, func(b *circuit.Block) { b.Turn = (b.Turn + q) % 4 }, func(at [2]float64, c centre) [2]float64 {
		if len(ids) == 1 {
			return at
		}
		x, y := at[0]-c.pivot[0], at[1]-c.pivot[1]
		for i := 0; i < q; i++ {
			x, y = -y, x
		}
		return [2]float64{c.pivot[0] + x, c.pivot[1] + y}
	})
}

// Mirror flips blocks of a circuit left to right, several of them about the middle of
// their places.
func (f *File) Mirror(circuitName string, ids ...string) error {
	return f.pose(circuitName, ids, func(b *circuit.Block) {
		// A block is mirrored before it is turned, so its turn goes the other way.
		b.Turn, b.Mirror = (4-b.Turn)%4, !b.Mirror
	}, func(at [2]float64, c centre) [2]float64 {
		if len(ids) == 1 {
			return at
		}
		return [2]float64{2*c.middle[0] - at[0], at[1]}
	})
}

// MoveBy shifts blocks of a circuit that have a place [modules].
func (f *File) MoveBy(circuitName string, by [2]float64, ids ...string) error {
	return f.pose(circuitName, ids, func(*circuit.Block) {}, func(at [2]float64, _ centre) [2]float64 {
		return [2]float64{at[0] + by[0], at[1] + by[1]}
	})
}

// centre is what blocks are turned and mirrored about.
type centre struct {
	middle [2]float64 // of the box around their places
	pivot  [2]float64 // place of the block nearest to it
}

func centreOf(blocks []*circuit.Block) centre {
	low, high := [2]float64{math.Inf(1), math.Inf(1)}, [2]float64{math.Inf(-1), math.Inf(-1)}
	for _, b := range blocks {
		for i := 0; i < 2 && b.At != nil; i++ {
			low[i], high[i] = math.Min(low[i], b.At[i]), math.Max(high[i], b.At[i])
		}
	}
	c := centre{middle: [2]float64{(low[0] + high[0]) / 2, (low[1] + high[1]) / 2}}
	best := math.Inf(1)
	for _, b := range blocks {
		if b.At == nil {
			continue
		}
		if d := math.Hypot(b.At[0]-c.middle[0], b.At[1]-c.middle[1]); d < best-1e-9 {
			best, c.pivot = d, *b.At
		}
	}
	return c
}

// pose changes how blocks lie on the sheet; turn gets copies of them, and place maps where
// they stand, and the bends of lines that lead to no other blocks.
func (f *File) pose(circuitName string, ids []string, turn func(b *circuit.Block), place func(at [2]float64, c centre) [2]float64) error {
	e, err := f.drawn(circuitName)
	if err != nil {
		return err
	}
	if len(ids) == 0 {
		return errors.New("no block is chosen; choose the blocks to turn or move")
	}
	blocks := map[string]*circuit.Block{}
	var chosen []*circuit.Block
	for _, id := range ids {
		b, err := e.block(id)
		if err != nil {
			return err
		}
		c := *b
		blocks[id] = &c
		chosen = append(chosen, b)
	}
	p := centreOf(chosen)
	d, ci := f.draft(), f.circuitIndex(circuitName)
	var splices []splice
	for id, b := range blocks {
		if turn(b); b.At != nil {
			at := place(*b.At, p)
			b.At = &at
		}
		more, err := d.posed(ci, e.Block(id), b)
		if err != nil {
			return fmt.Errorf("%s: %w", id, err)
		}
		splices = append(splices, more...)
	}
	more, err := d.movedBends(ci, func(b circuit.SheetBend) (circuit.SheetBend, bool) {
		return b.Mapped(func(at [2]float64) [2]float64 { return place(at, p) }), e.Within(b.Port, ids)
	})
	what := strings.Join(ids, ", ")
	if err := d.do(append(splices, more...), err); err != nil {
		return fmt.Errorf("%s: %w", what, err)
	}
	return f.take(what, d, func(g *File) bool {
		for id, want := range blocks {
			b := g.Circuit(circuitName).Block(id)
			if b == nil || b.Turn != want.Turn || b.Mirror != want.Mirror || want.At != nil && (b.At == nil || *b.At != *want.At) {
				return false
			}
		}
		return true
	})
}

// posed writes how a block lies where that changed. Keys that are missing are added at once.
func (d *draft) posed(ci int, was, is *circuit.Block) ([]splice, error) {
	m := child(child(d.circuit(ci), "blocks"), was.ID)
	if m == nil {
		return nil, errLayout
	}
	var splices []splice
	var missing []string
	set := func(key, text string) error {
		if child(m, key) == nil {
			missing = append(missing, key+": "+text)
			return nil
		}
		sp, err := d.src.put(m, key, text)
		splices = append(splices, sp)
		return err
	}
	if was.Turn != is.Turn {
		if err := set("turn", strconv.Itoa(is.Turn)); err != nil {
			return nil, err
		}
	}
	if was.Mirror != is.Mirror {
		if err := set("mirror", map[bool]string{true: "yes", false: "no"}[is.Mirror]); err != nil {
			return nil, err
		}
	}
	if is.At != nil && was.At != nil && *is.At != *was.At {
		more, err := d.src.putPlace(m, *is.At)
		if err != nil {
			return nil, err
		}
		splices = append(splices, more...)
	}
	if len(missing) > 0 {
		sp, err := d.src.attach(m, missing...)
		return append(splices, sp), err
	}
	return splices, nil
}
