package circuit

import "slices"

// SheetNote is a text on the sheet of a circuit, at its upper left corner [modules].
type SheetNote struct {
	Text string
	At   [2]float64
}

// SheetGroup is a label on a box around blocks of a circuit.
type SheetGroup struct {
	Label  string
	Blocks []string
}

// SheetBend says how the line at a port was laid by hand: pieces of it, each upright or
// level, from one point to another [modules].
type SheetBend struct {
	Port PortRef
	Runs [][2][2]float64
}

// Mapped returns a bend with its points elsewhere.
func (b SheetBend) Mapped(to func([2]float64) [2]float64) SheetBend {
	runs := make([][2][2]float64, len(b.Runs))
	for i, r := range b.Runs {
		runs[i] = [2][2]float64{to(r[0]), to(r[1])}
	}
	b.Runs = runs
	return b
}

// DrawnWith lists the ports of the lines that are drawn as one with the line of a port,
// the port first: junctions join them.
func (c *Circuit) DrawnWith(p PortRef) []PortRef {
	out := []PortRef{p}
	taken := map[int]bool{}
	for k := 0; k < len(out); k++ {
		b := c.Block(out[k].Block)
		if b != nil && b.Kind == "tank" && k > 0 {
			continue
		}
		for i, l := range c.Lines {
			if taken[i] || !slices.ContainsFunc(l.Ports, func(q PortRef) bool {
				return q == out[k] || b != nil && b.Kind == "junction" && q.Block == out[k].Block
			}) {
				continue
			}
			taken[i] = true
			for _, q := range l.Ports {
				if !slices.Contains(out, q) {
					out = append(out, q)
				}
			}
		}
	}
	return out
}

// Within tells whether the drawn line of a port leads to none but the given blocks. Tanks
// do not count: each line has a symbol of its own for them.
func (c *Circuit) Within(p PortRef, ids []string) bool {
	for _, q := range c.DrawnWith(p) {
		if b := c.Block(q.Block); b != nil && b.Kind != "tank" && !slices.Contains(ids, q.Block) {
			return false
		}
	}
	return slices.Contains(ids, p.Block)
}

// Carried returns a bend where it goes with blocks that are put at other places; ok is
// false where what its line leads to does not all move alike.
func (c *Circuit) Carried(bend SheetBend, blocks map[string][2]float64) (moved SheetBend, ok bool) {
	var by *[2]float64
	for _, p := range c.DrawnWith(bend.Port) {
		b := c.Block(p.Block)
		if b == nil || b.Kind == "tank" {
			continue
		}
		at, moves := blocks[p.Block]
		if !moves || b.At == nil {
			return bend, false
		}
		d := [2]float64{at[0] - b.At[0], at[1] - b.At[1]}
		if by != nil && *by != d {
			return bend, false
		}
		by = &d
	}
	if by == nil {
		return bend, false
	}
	return bend.Mapped(func(at [2]float64) [2]float64 { return [2]float64{at[0] + by[0], at[1] + by[1]} }), true
}
