package audit

import (
	"fmt"
	"slices"

	"barlitre/circuit"
)

// Place puts blocks and notes of a circuit at places on its sheet [modules]. A line laid by
// hand goes along where all that it leads to moves the same way.
func (f *File) Place(circuitName string, blocks map[string][2]float64, notes map[int][2]float64) error {
	e, err := f.drawn(circuitName)
	if err != nil {
		return err
	}
	var ids []string
	for id := range blocks {
		if _, err := e.block(id); err != nil {
			return err
		}
		ids = append(ids, id)
	}
	slices.Sort(ids)
	for i := range notes {
		if i < 0 || i >= len(e.Notes) {
			return fmt.Errorf("there is no note %d in circuit %q; it has %d", i+1, e.Name, len(e.Notes))
		}
	}
	return f.sheetEdit(e, "places", func(d *draft, ci int) error {
		splices, err := d.movedBends(ci, func(b circuit.SheetBend) (circuit.SheetBend, bool) { return e.Carried(b, blocks) })
		if err != nil {
			return err
		}
		list := child(d.circuit(ci), "blocks")
		for _, id := range ids {
			if b := e.Block(id); b.At != nil && *b.At == blocks[id] {
				continue
			}
			more, err := d.src.putPlace(child(list, id), blocks[id])
			if err != nil {
				return fmt.Errorf("%s: %w", id, err)
			}
			splices = append(splices, more...)
		}
		for i, at := range notes {
			more, err := d.src.putPlace(item(child(d.circuit(ci), "notes"), i), at)
			if err != nil {
				return fmt.Errorf("note %d: %w", i+1, err)
			}
			splices = append(splices, more...)
		}
		return d.do(splices, nil)
	}, func(g *CircuitEntry) bool {
		for id, at := range blocks {
			if b := g.Block(id); b == nil || b.At == nil || *b.At != at {
				return false
			}
		}
		for i, at := range notes {
			if g.Notes[i].At != at {
				return false
			}
		}
		return true
	})
}

// SplitLine cuts a line, by its place in Circuit.Lines, in two: the ports of side stand on
// a line of their own. What is left with one port is no line any more.
func (f *File) SplitLine(circuitName string, line int, side ...circuit.PortRef) error {
	e, err := f.drawn(circuitName)
	if err != nil {
		return err
	}
	p, err := e.portOn(line)
	if err != nil {
		return err
	}
	var off, rest []circuit.PortRef
	for _, q := range e.Lines[line].Ports {
		if slices.Contains(side, q) {
			off = append(off, q)
		} else {
			rest = append(rest, q)
		}
	}
	if len(off) == 0 || len(rest) == 0 {
		return fmt.Errorf("the line at %s cannot be cut there: all of its ports are on one side", p)
	}
	if len(rest) < 2 {
		off, rest = rest, off // the longer part keeps the place of the line
	}
	return f.redraw(e, "line at "+p.String(), map[int][]circuit.PortRef{line: rest}, off)
}
