package sheet

import (
	"fmt"
	"slices"
	"strings"
	"time"

	"barlitre/audit"
	"barlitre/audit/figures"
)

// twice is how soon a second click must follow the first.
const twice = 400 * time.Millisecond

// clickMark selects a note or group; a second click changes it.
func (e *editor) clickMark(m figures.SheetMark, add bool) {
	again := m == e.clicked.mark && time.Since(e.clicked.at) < twice && !add
	e.clicked.mark, e.clicked.at = m, time.Now()
	e.chooseMark(m, add)
	if again {
		e.clicked.at = time.Time{}
		e.openRename()
	}
}

// openNote asks for the text of a new note, which goes where the pointer is.
func (e *editor) openNote() {
	if e.s.ctx.Window() == nil {
		return
	}
	if e.circuit < 0 {
		e.s.ctx.Say("There is no circuit on this sheet yet; / adds a first block.")
		return
	}
	at := e.target()
	e.askLines("Note on the sheet:", "", "Add note", "sheet.note", func(text string) bool {
		if strings.TrimSpace(text) == "" {
			e.s.ctx.Say("The note is empty; write something, or close with Escape.")
			return false
		}
		n, err := e.s.ctx.Doc().AddNote(e.name, text, at)
		if err != nil {
			e.s.refused(err)
			return false
		}
		e.take(nil)
		e.chooseMark(figures.SheetMark{Note: n, Group: -1}, false)
		return true
	})
}

// editNote changes what a note says.
func (e *editor) editNote(i int) {
	if e.s.ctx.Window() == nil || i >= len(e.present().Notes) {
		return
	}
	note := e.present().Notes[i]
	e.askLines("Note on the sheet:", note.Text, "Change note", "sheet.note", func(text string) bool {
		if strings.TrimSpace(text) == "" {
			e.s.ctx.Say("The note is empty; write something, or remove it with Del.")
			return false
		}
		if err := e.s.ctx.Doc().SetNote(e.name, i, text, note.At); err != nil {
			e.s.refused(err)
			return false
		}
		e.fitted = false
		return true
	})
}

// openGroup asks for the label of a box around the selected blocks.
func (e *editor) openGroup() {
	ids := e.chosen("draw a box around it")
	if len(ids) == 0 || e.s.ctx.Window() == nil {
		return
	}
	e.ask("What these blocks are, as in Manifold:", "", "sheet.group", func(label string) bool {
		n, err := e.s.ctx.Doc().AddGroup(e.name, label, ids...)
		if err != nil {
			e.s.refused(err)
			return false
		}
		e.take(nil)
		e.chooseMark(figures.SheetMark{Note: -1, Group: n}, false)
		return true
	})
}

// editGroup gives a box another label.
func (e *editor) editGroup(i int) {
	if e.s.ctx.Window() == nil || i >= len(e.present().Groups) {
		return
	}
	g := e.present().Groups[i]
	e.ask("Label of the group:", g.Label, "sheet.group", func(label string) bool {
		if err := e.s.ctx.Doc().SetGroup(e.name, i, label, g.Blocks...); err != nil {
			e.s.refused(err)
			return false
		}
		e.fitted = false
		return true
	})
}

// deleteGroup takes the selected box off the sheet; its blocks stay.
func (e *editor) deleteGroup() {
	label := e.drawn.Groups[e.group].Label
	if err := e.s.ctx.Doc().DeleteGroup(e.name, e.group); err != nil {
		e.s.refused(err)
		return
	}
	e.choose("", false)
	e.s.ctx.Say("Took the box " + label + " away; its blocks stay. Ctrl+Z brings it back.")
}

// deleteNotes takes the selected notes off the sheet, and blocks with them.
func (e *editor) deleteNotes(ids []string) {
	notes := e.noteList()
	what := namesOf(ids, notes)
	err := e.s.ctx.Doc().Edit("Delete "+what, func(f *audit.File) error {
		return deleteAll(f, e.name, notes, true, ids)
	})
	if err != nil {
		e.s.refused(err)
		return
	}
	e.choose("", false)
	e.s.ctx.Say("Deleted " + what + ". Ctrl+Z brings it back.")
}

// namesOf names blocks and notes: "P1, V1 and 2 notes".
func namesOf(ids []string, notes []int) string {
	what := "note"
	if len(notes) > 1 {
		what = fmt.Sprintf("%d notes", len(notes))
	}
	switch {
	case len(notes) == 0:
		return strings.Join(ids, ", ")
	case len(ids) == 0:
		return what
	}
	return strings.Join(ids, ", ") + " and " + what
}

// deleteAll takes notes and blocks off a sheet; with heal the lines at a block become one
// where that makes sense.
func deleteAll(f *audit.File, name string, notes []int, heal bool, ids []string) error {
	for _, i := range slices.Backward(notes) {
		if err := f.DeleteNote(name, i); err != nil {
			return err
		}
	}
	if len(ids) == 0 {
		return nil
	}
	if heal && f.Delete(name, true, ids...) == nil {
		return nil
	}
	return f.Delete(name, false, ids...)
}
