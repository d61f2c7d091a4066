package sheet

import (
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/widgets"
)

// renameWidth leaves room for an id and the words above it [units at scale 1].
const renameWidth = 240

// openRename asks for another id of the selected block, at the block.
func (e *editor) openRename() {
	ids := e.chosen("rename it")
	w := e.s.ctx.Window()
	if len(ids) == 0 || w == nil {
		return
	}
	if len(ids) > 1 {
		e.s.ctx.Say("Several blocks are selected; select one to rename it.")
		return
	}
	e.askName("Name of the block on the sheet:", ids[0], e.popPlace(), func(id string) bool { return e.rename(ids[0], id) })
}

// askName asks for a name in a small window; it stays while take does not take it.
func (e *editor) askName(words, now string, at fyne.Position, take func(string) bool) {
	w := e.s.ctx.Window()
	var pop *widget.PopUp
	var field *keyed
	field = newKeyed(func(k fyne.KeyName) bool {
		switch k {
		case fyne.KeyReturn, fyne.KeyEnter:
			if !take(strings.TrimSpace(field.Text)) {
				return true // it stays, to be mended
			}
		case fyne.KeyEscape:
		default:
			return false
		}
		pop.Hide()
		e.focus()
		return true
	})
	field.SetText(now)
	widgets.Name(field, "sheet.rename")
	pop = widget.NewPopUp(container.NewVBox(widget.NewLabel(words), field), w.Canvas())
	k := widgets.Scale()
	e.s.popAt(pop, at, fyne.NewSize(renameWidth*k, pop.MinSize().Height))
	w.Canvas().Focus(field)
	field.TypedShortcut(&fyne.ShortcutSelectAll{})
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
