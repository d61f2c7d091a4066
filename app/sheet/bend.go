package sheet

import (
	"fmt"
	"math"
	"slices"

	"fyne.io/fyne/v2"

	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/circuit"
)

// level tells whether a piece of a line runs level.
func (e *editor) level(p figures.SheetPiece) bool {
	a, b, _ := e.sheet.PieceEnds(p)
	return a[1] == b[1]
}

// pieceUnder tells whether the piece of the selected line at a place on screen runs level.
func (e *editor) pieceUnder(at fyne.Position) (level, ok bool) {
	if e.sheet == nil || e.line < 0 {
		return false, false
	}
	x, y := e.at(at)
	p, ok := e.sheet.PieceAt(e.line, x, y)
	return ok && e.level(p), ok
}

// bendTo moves the picture of a piece of a line sideways by whole modules.
func (e *editor) bendTo(at fyne.Position) {
	g := &e.gesture
	if e.piece == nil {
		return
	}
	by := math.Round(float64(at.X-g.from.X) / e.zoom)
	if e.level(*e.piece) {
		by = math.Round(float64(at.Y-g.from.Y) / e.zoom)
	}
	if by == g.dx && e.moved != nil {
		return
	}
	g.dx = by
	e.moved = e.sheet.WithBend(e.line, e.sheet.Bend(*e.piece, by))
	e.hover.tell(at, fmt.Sprintf("Bend by %g modules; S straightens the line", math.Abs(by)))
	e.redraw()
}

// endBend keeps the line where it was dragged to.
func (e *editor) endBend(g gesture) {
	e.hover.hide()
	e.moved = nil
	e.redraw()
	if e.piece != nil && g.dx != 0 {
		e.bend(g.dx)
	}
}

// bend lays the chosen piece of a line some modules aside.
func (e *editor) bend(by float64) {
	runs := e.sheet.Bend(*e.piece, by)
	e.bentBy = [2]float64{by, 0}
	if e.level(*e.piece) {
		e.bentBy = [2]float64{0, by}
	}
	e.lay(runs, "Bent the line "+e.lineName(e.line)+"; S straightens it.")
}

// straighten lets the program lay the selected line again.
func (e *editor) straighten() {
	switch {
	case e.line < 0:
		e.s.ctx.Say("Select a line first, by a click or L, to straighten it.")
	case !e.sheet.Bent(e.line):
		e.s.ctx.Say("The line " + e.lineName(e.line) + " was not bent by hand.")
	default:
		e.lay(nil, "Straightened the line "+e.lineName(e.line)+".")
	}
}

// lay lays the selected line by hand, or no longer.
func (e *editor) lay(runs [][2][2]float64, said string) {
	lines, _ := e.sheet.Lines(e.line)
	e.fitted = false
	if err := e.s.ctx.Doc().Bend(e.name, e.lineName(e.line), lines, runs); err != nil {
		e.bentBy = [2]float64{}
		e.s.refused(err)
		return
	}
	e.s.ctx.Say(said)
}

// nextLine selects the next line of the selected block, or of the sheet.
func (e *editor) nextLine() {
	var nets []int
	ids, from := e.ids(), e.line
	if e.line >= 0 && e.lineOf != "" {
		ids = []string{e.lineOf}
	}
	for n := 0; e.sheet != nil && n < e.sheet.Nets(); n++ {
		for _, p := range e.sheet.Net(n) {
			if len(ids) != 1 || p.Block == ids[0] {
				nets = append(nets, n)
				break
			}
		}
	}
	if len(nets) == 0 {
		e.s.ctx.Say("There is no line here.")
		return
	}
	next := nets[0]
	for _, n := range nets {
		if n > from {
			next = n
			break
		}
	}
	e.choose("", false)
	if e.selectLine(next); len(ids) == 1 {
		e.lineOf = ids[0]
	}
	e.sayLine()
	e.redraw()
}

// nextPiece selects the next piece of the selected line, or of the first one.
func (e *editor) nextPiece() {
	if e.line < 0 {
		e.nextLine()
	}
	if e.line < 0 {
		return
	}
	pieces := e.sheet.Pieces(e.line)
	at := 0
	for i, p := range pieces {
		if e.piece != nil && p == *e.piece {
			at = (i + 1) % len(pieces)
		}
	}
	if len(pieces) > 0 {
		e.selectPiece(pieces[at])
	}
	e.sayLine()
	e.redraw()
}

// sayLine tells what can be done with the selected line.
func (e *editor) sayLine() {
	switch {
	case e.line < 0:
	case e.piece == nil:
		e.s.ctx.Say("Line " + e.lineName(e.line) + ": Del removes it, a drag bends it; a further click chooses a branch.")
	default:
		text := "Piece of the line " + e.lineName(e.line) + ": arrow keys move it sideways, "
		if p, ok := e.sheet.Leaf(*e.piece); ok {
			text += "Del takes " + e.portName(p.Block, p.Port) + " off the line."
		} else {
			text += "Del cuts the line here."
		}
		e.s.ctx.Say(text)
	}
}

// portName names a port; of a junction the dot is meant.
func (e *editor) portName(block, port string) string {
	if port == "" {
		return block
	}
	return block + "." + port
}

// deleteBranch takes the chosen branch off its line: what it leads to stands on a line of
// its own, or on none.
func (e *editor) deleteBranch() {
	beyond := e.sheet.Beyond(*e.piece)
	lines, _ := e.sheet.Lines(e.line)
	if len(beyond) == 0 || len(e.sheet.Net(e.line)) < 3 {
		e.deleteLine()
		return
	}
	what := e.lineName(e.line)
	bent, runs := e.sheet.Bent(e.line), e.sheet.Rest(e.line, beyond)
	stay := slices.DeleteFunc(slices.Clone(e.sheet.Net(e.line)), func(p circuit.PortRef) bool {
		b := e.drawn.Block(p.Block) // a tank stands on other lines too
		return slices.Contains(beyond, p) || slices.Contains(beyond, circuit.PortRef{Block: p.Block}) || b == nil || b.Kind == "tank"
	})
	err := e.s.ctx.Doc().Edit("Delete branch of "+what, func(f *audit.File) error {
		if bent {
			if err := f.Bend(e.name, lines, nil); err != nil {
				return err
			}
		}
		if err := cutLines(f, e.name, lines, beyond); err != nil || len(runs) == 0 {
			return err
		}
		left := linesOf(f.Circuit(e.name), stay)
		if len(left) == 0 { // tanks alone: each of their symbols has a line of its own
			return nil
		}
		return f.Bend(e.name, left, runs)
	})
	if err != nil {
		e.s.refused(err)
		return
	}
	e.choose("", false)
	e.s.ctx.Say("Deleted a branch of the line " + what + ". Ctrl+Z brings it back.")
}

// linesOf are the lines, by their places, that one of the ports is on.
func linesOf(c *audit.CircuitEntry, ports []circuit.PortRef) []int {
	var out []int
	for i, l := range c.Lines {
		if slices.ContainsFunc(l.Ports, func(p circuit.PortRef) bool { return slices.Contains(ports, p) }) {
			out = append(out, i)
		}
	}
	return out
}

// cutLines parts the ports beyond a branch from the others, in each of the lines that are
// drawn as one. A port without a name stands for all of its block.
func cutLines(f *audit.File, name string, lines []int, beyond []circuit.PortRef) error {
	for _, i := range slices.Backward(lines) {
		var side []circuit.PortRef
		ports := f.Circuit(name).Lines[i].Ports
		for _, p := range ports {
			if slices.Contains(beyond, p) || slices.Contains(beyond, circuit.PortRef{Block: p.Block}) {
				side = append(side, p)
			}
		}
		if len(side) == 0 || len(side) == len(ports) {
			continue
		}
		if err := f.SplitLine(name, i, side...); err != nil {
			return err
		}
	}
	return nil
}
