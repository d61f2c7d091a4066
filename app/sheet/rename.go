package sheet

import "strings"

// openRename asks for another id of the selected block, or another label of the selected
// group; a note is changed.
func (e *editor) openRename() {
	switch {
	case e.group >= 0:
		e.editGroup(e.group)
		return
	case len(e.selected) == 0 && len(e.notes) == 1:
		e.editNote(e.noteList()[0])
		return
	}
	ids := e.chosen("rename it")
	if len(ids) == 0 || e.s.ctx.Window() == nil {
		return
	}
	if len(ids) > 1 {
		e.s.ctx.Say("Several blocks are selected; select one to rename it.")
		return
	}
	e.ask("Name of the block on the sheet:", ids[0], "sheet.rename", func(text string) bool {
		return e.rename(ids[0], strings.TrimSpace(text))
	})
}

// rename gives a block another id, everywhere it is named, and reports whether it has it.
func (e *editor) rename(old, id string) bool {
	if id == old {
		return true
	}
	if err := e.s.ctx.Doc().Rename(e.name, old, id); err != nil {
		e.s.refused(err)
		return false
	}
	e.take([]string{id})
	e.s.ctx.Say("Renamed " + old + " to " + id + ".")
	return true
}
