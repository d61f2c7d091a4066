package sheet

import (
	"maps"
	"slices"

	"fyne.io/fyne/v2"

	"barlitre/audit/figures"
	"barlitre/circuit"
)

// selectOnly selects one block, or none with "". A block that is selected together
// with others keeps them.
func (e *editor) selectOnly(block string) {
	if block != "" && e.selected[block] {
		return
	}
	e.selected = map[string]bool{}
	if block != "" {
		e.selectLine(-1)
		e.selectMarks(nil, -1)
	}
	if block != "" && e.drawn != nil && e.drawn.Block(block) != nil {
		e.selected[block] = true
	}
	e.opt.Selected = e.selected
}

// selectLine selects a line by its number on the sheet, or none with −1.
func (e *editor) selectLine(net int) {
	e.line, e.opt.Lines = net, nil
	e.piece, e.opt.Piece, e.lineOf = nil, nil, ""
	if net >= 0 {
		e.opt.Lines = map[int]bool{net: true}
	}
}

// selectPiece selects a piece of a line.
func (e *editor) selectPiece(p figures.SheetPiece) {
	of := e.lineOf
	e.selectLine(p.Net)
	e.lineOf = of
	e.piece, e.opt.Piece = &p, &p
}

// selectMarks selects notes, by their places in the circuit, and a group, −1 for none.
func (e *editor) selectMarks(notes []int, group int) {
	e.notes, e.group = map[int]bool{}, group
	for _, i := range notes {
		e.notes[i] = true
	}
	e.opt.Notes, e.opt.Groups = e.notes, nil
	if group >= 0 {
		e.opt.Groups = map[int]bool{group: true}
	}
}

// keep returns what selects again, once another state of the circuit is shown, the line,
// notes and group that are selected now.
func (e *editor) keep(c *circuit.Circuit) func() {
	line, piece, notes, group := e.line, e.piece, slices.Collect(maps.Keys(e.notes)), e.group
	if c == nil || e.sheet == nil || line < 0 && len(notes) == 0 && group < 0 {
		return func() {}
	}
	was, ports := e.drawn, e.sheet.Net(line)
	var mid [2]float64
	if piece != nil {
		a, b, _ := e.sheet.PieceEnds(*piece)
		mid = [2]float64{(a[0]+b[0])/2 + e.bentBy[0], (a[1]+b[1])/2 + e.bentBy[1]}
	}
	return func() {
		e.bentBy = [2]float64{}
		for _, p := range ports {
			net := e.netOf(p)
			if b := e.drawn.Block(p.Block); net < 0 || b != nil && b.Kind == "tank" {
				continue
			}
			e.selectLine(net)
			if q, ok := e.sheet.PieceAt(net, mid[0], mid[1]); ok && piece != nil {
				e.selectPiece(q)
			}
			break
		}
		if len(c.Notes) == len(was.Notes) && len(c.Groups) == len(was.Groups) {
			e.selectMarks(notes, group)
		}
	}
}

// ids lists the selected blocks, sorted.
func (e *editor) ids() []string { return slices.Sorted(maps.Keys(e.selected)) }

// noteList lists the selected notes.
func (e *editor) noteList() []int { return slices.Sorted(maps.Keys(e.notes)) }

// movable lists what a move takes along: the selected blocks and notes, and what is in the
// selected group.
func (e *editor) movable() (ids []string, notes []int) {
	ids = e.ids()
	if e.group >= 0 && e.group < len(e.drawn.Groups) {
		for _, id := range e.drawn.Groups[e.group].Blocks {
			if !e.selected[id] {
				ids = append(ids, id)
			}
		}
	}
	return ids, e.noteList()
}

// choose selects a block; with add it is added to the selection, or taken out of it.
// "" selects the circuit alone.
func (e *editor) choose(block string, add bool) {
	notes := e.noteList()
	switch {
	case add && e.selected[block]:
		delete(e.selected, block)
		if block = ""; len(e.selected) > 0 {
			block = e.ids()[0]
		}
	case add:
		e.selected[block] = true
	default:
		notes = nil
		e.selected = map[string]bool{}
		if block != "" {
			e.selected[block] = true
		}
	}
	e.settle(block, notes)
}

// settle makes the set of selected blocks and notes that of the window, block at hand.
func (e *editor) settle(block string, notes []int) {
	set := e.selected
	e.selectLine(-1)
	e.opt.Selected = e.selected
	if e.circuit >= 0 {
		e.s.ctx.Select(e.circuit, block)
	}
	e.selected, e.opt.Selected = set, set
	e.selectMarks(notes, -1)
	e.redraw()
}

// chooseMark selects a note or a group; with add a note is added to the selection, or
// taken out of it.
func (e *editor) chooseMark(m figures.SheetMark, add bool) {
	if m.Note >= 0 && add {
		if e.notes[m.Note] {
			delete(e.notes, m.Note)
		} else {
			e.notes[m.Note] = true
		}
		e.selectMarks(e.noteList(), -1)
		e.redraw()
		return
	}
	e.choose("", false)
	if m.Note >= 0 {
		e.selectMarks([]int{m.Note}, -1)
		e.s.ctx.Say("Note: drag it, Enter or F2 changes it, Del removes it.")
	} else {
		e.selectMarks(nil, m.Group)
		e.s.ctx.Say("Group " + e.drawn.Groups[m.Group].Label + ": drag its label to move all in it, F2 renames it, Del takes the box away.")
	}
	e.redraw()
}

// selectAll selects every block and note of the sheet.
func (e *editor) selectAll() {
	if e.drawn == nil || len(e.drawn.Blocks) == 0 {
		return
	}
	e.selected = map[string]bool{}
	for i := range e.drawn.Blocks {
		e.selected[e.drawn.Blocks[i].ID] = true
	}
	var notes []int
	for i := range e.drawn.Notes {
		notes = append(notes, i)
	}
	e.settle(e.drawn.Blocks[0].ID, notes)
}

// nothing tells whether nothing is selected.
func (e *editor) nothing() bool {
	return len(e.selected) == 0 && len(e.notes) == 0 && e.group < 0 && e.line < 0
}

// drawBand shows the selecting box.
func (e *editor) drawBand(p fyne.Position) {
	a, b := e.gesture.from, p
	e.band.Move(fyne.NewPos(min(a.X, b.X), min(a.Y, b.Y)))
	e.band.Resize(fyne.NewSize(max(a.X, b.X)-min(a.X, b.X), max(a.Y, b.Y)-min(a.Y, b.Y)))
	e.band.Show()
	e.over.Refresh()
}

// endBand selects the blocks and notes whose middle lies in the box; with Shift in addition.
func (e *editor) endBand(g gesture) {
	e.band.Hide()
	e.over.Refresh()
	x0, y0 := e.at(e.band.Position())
	x1, y1 := e.at(e.band.Position().Add(e.band.Size()))
	within := func(x, y, w, h float64) bool {
		x, y = x+w/2, y+h/2
		return x >= x0 && x <= x1 && y >= y0 && y <= y1
	}
	notes := map[int]bool{}
	if g.shifted {
		maps.Copy(notes, e.notes)
	} else {
		e.selected = map[string]bool{}
	}
	last := ""
	for _, b := range e.boxes {
		if within(b.x, b.y, b.w, b.h) {
			e.selected[b.id] = true
			last = b.id
		}
	}
	for i := 0; e.drawn != nil && i < len(e.drawn.Notes); i++ {
		if x, y, w, h, ok := e.sheet.MarkBox(figures.SheetMark{Note: i, Group: -1}); ok && within(x, y, w, h) {
			notes[i] = true
		}
	}
	if last == "" {
		if ids := e.ids(); len(ids) > 0 {
			last = ids[0]
		}
	}
	e.settle(last, slices.Collect(maps.Keys(notes)))
}
