package sheet

import (
	"errors"
	"math"
	"slices"
	"strings"

	"fyne.io/fyne/v2"

	"barlitre/app/document"
	"barlitre/app/station"
	"barlitre/audit"
	"barlitre/circuit"
)

var _ station.Drawing = (*Station)(nil)

// Steps that put a copy beside what it was made of [M].
const (
	copyShift = 2.0
	copyClear = 6.0 // between the places of a copy and of another block
)

// Act does what the Edit menu, or a key on a sheet, asks of the selection.
func (s *Station) Act(a station.Action) {
	e := s.editors[s.active]
	e.cancel()
	s.bringCircuits(false) // an edit may have come that the sheet does not show yet
	switch a {
	case station.Cut:
		e.cut()
	case station.Copy:
		e.copy()
	case station.Paste:
		e.paste()
	case station.Duplicate:
		e.duplicate()
	case station.Delete:
		e.delete()
	case station.Rename:
		e.openRename()
	case station.AddBlock:
		e.openShelf()
	case station.SelectAll:
		e.selectAll()
	case station.Group:
		e.openGroup()
	case station.AddNote:
		e.openNote()
	case station.Connect:
		e.join.begin(e)
	case station.Straighten:
		e.straighten()
	case station.FitSelection:
		e.fitSelection()
	case station.Rotate:
		e.turn("Rotated ", func(ids []string) error { return s.ctx.Doc().Rotate(e.name, 1, ids...) })
	case station.Mirror:
		e.turn("Mirrored ", func(ids []string) error { return s.ctx.Doc().Mirror(e.name, ids...) })
	}
}

// refused tells in the status line why an edit was not made.
func (s *Station) refused(err error) {
	var fault *document.Fault
	if errors.As(err, &fault) {
		s.ctx.Fail(err)
		return
	}
	s.ctx.Say("⚠ " + strings.ReplaceAll(err.Error(), "\n", " "))
}

// chosen returns the selected blocks, and says so when there are none.
func (e *editor) chosen(to string) []string {
	ids := e.ids()
	if len(ids) == 0 {
		e.s.ctx.Say("Select a block first, by a click or Tab, to " + to + ".")
	}
	return ids
}

func (e *editor) copy() {
	ids, notes := e.ids(), e.noteList()
	if len(notes) == 0 && len(e.chosen("copy it")) == 0 {
		return
	}
	text, err := e.s.ctx.Doc().File().CopyNoted(e.name, notes, ids...)
	if err != nil {
		e.s.refused(err)
		return
	}
	fyne.CurrentApp().Clipboard().SetContent(text)
	e.s.ctx.Say("Copied " + namesOf(ids, notes) + "; Ctrl+V puts it at the pointer, on either sheet.")
}

func (e *editor) cut() {
	ids, notes := e.ids(), e.noteList()
	if len(notes) == 0 && len(e.chosen("cut it")) == 0 {
		return
	}
	var text string
	err := e.s.ctx.Doc().Edit("Cut "+namesOf(ids, notes), func(f *audit.File) (err error) {
		if text, err = f.CopyNoted(e.name, notes, ids...); err != nil {
			return err
		}
		return deleteAll(f, e.name, notes, false, ids)
	})
	if err != nil {
		e.s.refused(err)
		return
	}
	fyne.CurrentApp().Clipboard().SetContent(text)
	e.choose("", false)
	e.s.ctx.Say("Cut " + namesOf(ids, notes) + "; Ctrl+V puts it at the pointer, on either sheet.")
}

// paste puts the blocks of the clipboard at the pointer, or in the middle of what is seen.
func (e *editor) paste() {
	if e.circuit < 0 {
		e.s.ctx.Say("There is no circuit on this sheet yet; / adds a first block.")
		return
	}
	text := fyne.CurrentApp().Clipboard().Content()
	from, err := audit.PartPlace(text)
	if err != nil {
		e.s.refused(err)
		return
	}
	to := e.target()
	shift := e.clear(text, [2]float64{to[0] - from[0], to[1] - from[1]})
	before := len(e.present().Notes)
	ids, err := e.s.ctx.Doc().Paste(e.name, text, shift)
	e.came(ids, before, err, "Pasted ")
}

// clear shifts pasted blocks on while one would stand on another.
func (e *editor) clear(text string, shift [2]float64) [2]float64 {
	part, _ := audit.Parse([]byte(text), nil, "")
	for part != nil && len(part.Circuits) > 0 && slices.ContainsFunc(part.Circuits[0].Blocks, func(b circuit.Block) bool {
		return b.At != nil && e.stands(b.At[0]+shift[0], b.At[1]+shift[1])
	}) {
		shift[0], shift[1] = shift[0]+copyShift, shift[1]+copyShift
	}
	return shift
}

// stands tells whether a block has its place about a point.
func (e *editor) stands(x, y float64) bool {
	return slices.ContainsFunc(e.drawn.Blocks, func(b circuit.Block) bool {
		return b.At != nil && math.Abs(b.At[0]-x) < copyClear && math.Abs(b.At[1]-y) < copyClear
	})
}

func (e *editor) duplicate() {
	ids, notes := e.ids(), e.noteList()
	if len(notes) == 0 && len(e.chosen("duplicate it")) == 0 {
		return
	}
	text, err := e.s.ctx.Doc().File().CopyNoted(e.name, notes, ids...)
	if err != nil {
		e.s.refused(err)
		return
	}
	before, shift := len(e.present().Notes), e.clear(text, [2]float64{copyShift, copyShift})
	var copies map[string]string
	err = e.s.ctx.Doc().Edit("Duplicate "+namesOf(ids, notes), func(f *audit.File) (err error) {
		copies, err = f.DuplicateNoted(e.name, shift, notes, ids...)
		return err
	})
	e.came(copies, before, err, "Duplicated: ")
}

// came selects blocks that an edit brought, and the notes behind those before it.
func (e *editor) came(ids map[string]string, before int, err error, said string) {
	if err != nil {
		e.s.refused(err)
		return
	}
	var list []string
	for _, id := range ids {
		list = append(list, id)
	}
	slices.Sort(list)
	e.take(list)
	var notes []int
	for i := before; i < len(e.drawn.Notes); i++ {
		notes = append(notes, i)
	}
	e.selectMarks(notes, -1)
	e.redraw()
	e.s.ctx.Say(said + namesOf(list, notes) + ". Drag it to its place; Ctrl+Z takes it back.")
}

// take selects blocks of the present file, of which the sheet may not know yet.
func (e *editor) take(ids []string) {
	e.fitted = false // the view stays while one draws
	e.s.bringCircuits(false)
	e.fitted = false
	e.selected = map[string]bool{}
	for _, id := range ids {
		e.selected[id] = true
	}
	e.selectLine(-1)
	e.opt.Selected = e.selected
	if len(ids) > 0 {
		e.s.ctx.Select(e.circuit, ids[0])
	}
	e.redraw()
}

// delete takes the selected blocks, or the selected line, off the sheet. The lines on
// both sides of a block that stands in a line become one where that makes sense.
func (e *editor) delete() {
	switch {
	case e.line >= 0 && len(e.selected) == 0 && e.piece != nil:
		e.deleteBranch()
		return
	case e.line >= 0 && len(e.selected) == 0:
		e.deleteLine()
		return
	case e.group >= 0 && len(e.selected) == 0:
		e.deleteGroup()
		return
	case len(e.notes) > 0:
		e.deleteNotes(e.ids())
		return
	}
	ids := e.chosen("delete it")
	if len(ids) == 0 {
		return
	}
	doc, said := e.s.ctx.Doc(), ""
	err := doc.Delete(e.name, true, ids...)
	if err != nil {
		if err = doc.Delete(e.name, false, ids...); err == nil {
			said = " The lines beside it stay apart: together they would not fit."
		}
	}
	if err != nil {
		e.s.refused(err)
		return
	}
	e.choose("", false)
	e.s.ctx.Say("Deleted " + strings.Join(ids, ", ") + "." + said + " Ctrl+Z brings it back.")
}

// deleteLine takes a line off the sheet, with its branches and their junctions.
func (e *editor) deleteLine() {
	lines, junctions := e.sheet.Lines(e.line)
	what := e.lineName(e.line)
	err := e.s.ctx.Doc().Edit("Delete line "+what, func(f *audit.File) error {
		for _, i := range slices.Backward(lines) {
			if err := f.DeleteLine(e.name, i); err != nil {
				return err
			}
		}
		if len(junctions) == 0 {
			return nil
		}
		return f.Delete(e.name, false, junctions...)
	})
	if err != nil {
		e.s.refused(err)
		return
	}
	e.choose("", false)
	e.s.ctx.Say("Deleted the line " + what + ". Ctrl+Z brings it back.")
}

// lineName names a line by its ends.
func (e *editor) lineName(net int) string {
	var names []string
	for _, p := range e.sheet.Net(net) {
		names = append(names, p.String())
	}
	return strings.Join(names, " – ")
}

func (e *editor) turn(said string, do func(ids []string) error) {
	ids := e.chosen("turn it")
	if len(ids) == 0 {
		return
	}
	if err := do(ids); err != nil {
		e.s.refused(err)
		return
	}
	e.take(ids)
	e.s.ctx.Say(said + strings.Join(ids, ", ") + ".")
}

// target is where what is added goes, in the circuit's coordinates: at the pointer, or
// in the middle of what is seen.
func (e *editor) target() [2]float64 {
	p := e.pointer
	w, h := e.room()
	if !e.inside || float64(p.Y) > h {
		p = fyne.NewPos(float32(w/2), float32(h/2))
	}
	x, y := e.at(p)
	return [2]float64{math.Round(x), math.Round(y)}
}
