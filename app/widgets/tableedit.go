package widgets

import (
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/widget"
)

// cellEntry is where a cell is typed into.
type cellEntry struct {
	widget.Entry
	table *Table
}

func newCellEntry(t *Table) *cellEntry {
	e := &cellEntry{table: t}
	e.ExtendBaseWidget(e)
	e.Wrapping = fyne.TextWrapOff
	e.Scroll = container.ScrollNone
	return e
}

// AcceptsTab makes Tab go to the next cell.
func (e *cellEntry) AcceptsTab() bool { return true }

// FocusLost hands over what was typed.
func (e *cellEntry) FocusLost() {
	e.Entry.FocusLost()
	e.table.finish()
}

// TypedKey hands over and goes on, or gives up.
func (e *cellEntry) TypedKey(k *fyne.KeyEvent) {
	t := e.table
	switch k.Name {
	case fyne.KeyEscape:
		t.giveUp()
		t.stop()
		t.focus()
	case fyne.KeyReturn, fyne.KeyEnter, fyne.KeyDown:
		e.leave(1, 0)
	case fyne.KeyUp:
		e.leave(-1, 0)
	case fyne.KeyTab:
		if e.leave(0, 0) {
			t.tabbing = true
			t.tab(tabWay())
		}
	case fyne.KeyF1:
		PassKey(t, k)
	default:
		e.Entry.TypedKey(k)
	}
}

// tabWay is −1 while Shift is held, else 1.
func tabWay() int {
	if d, ok := fyne.CurrentApp().Driver().(desktop.Driver); ok && d.CurrentKeyModifiers()&fyne.KeyModifierShift != 0 {
		return -1
	}
	return 1
}

// AcceptsTab lets Tab go on from cell to cell once it has left one that was typed into.
func (t *Table) AcceptsTab() bool { return t.tabbing }

// tab goes to the next cell by row, and beyond the last to what comes after the table.
func (t *Table) tab(by int) {
	row, col := t.selRow, t.selCol+by
	if col < 0 || col >= len(t.columns) {
		row, col = t.next(row, by), 0
		if by < 0 {
			col = len(t.columns) - 1
		}
	}
	if row >= 0 {
		t.choose(row, col)
		return
	}
	t.tabbing = false
	if c := fyne.CurrentApp().Driver().CanvasForObject(t); c != nil {
		if by > 0 {
			c.FocusNext()
		} else {
			c.FocusPrevious()
		}
	}
}

// leave goes to another cell when what was typed is taken; else it stays.
func (e *cellEntry) leave(rows, cols int) bool {
	t := e.table
	if !t.take() {
		return false
	}
	t.stop()
	t.focus()
	t.step(rows, cols)
	return true
}

func (t *Table) canType(row, col int) bool {
	return t.Commit != nil && t.Editable != nil && t.at(row).Kind != RowGroup && t.Editable(row, col)
}

// edit opens the editor on the selected cell, with what stands there or with what
// was typed to open it.
func (t *Table) edit(typed string) {
	text := t.original(t.selRow, t.selCol)
	if bad, ok := t.refused[cellAt{t.selRow, t.selCol}]; ok {
		text = bad.text
	}
	if typed != "" {
		text = typed
	}
	t.reveal()
	t.editing = true
	t.editor.SetText(text)
	t.editor.Show()
	t.editor.CursorColumn = len([]rune(text))
	t.Refresh()
	if c := fyne.CurrentApp().Driver().CanvasForObject(t); c != nil {
		c.Focus(t.editor)
	}
}

// original is what typing starts from.
func (t *Table) original(row, col int) string {
	if t.EditText != nil {
		return t.EditText(row, col)
	}
	return t.at(row).cell(col)
}

// take hands over what was typed; false when it was refused.
func (t *Table) take() bool {
	at, text := cellAt{t.selRow, t.selCol}, strings.TrimSpace(t.editor.Text)
	_, bad := t.refused[at]
	if text == t.original(at.row, at.col) {
		delete(t.refused, at)
		t.say()
		return true
	}
	if err := t.Commit(at.row, at.col, text); err != nil {
		t.refused[at] = refusal{text, err.Error()}
		t.say()
		t.Refresh()
		return false
	}
	if bad {
		delete(t.refused, at)
	}
	t.say()
	return true
}

// finish ends typing when the focus goes elsewhere; what is refused stays in the cell.
func (t *Table) finish() {
	if t.editing {
		t.editing = false // the focus leaves once more when the editor hides
		t.take()
		t.stop()
	}
}

// stop closes the editor.
func (t *Table) stop() {
	t.editing = false
	if t.editor.Visible() {
		t.editor.Hide()
	}
	t.Refresh()
}

// giveUp brings back what the model has where something was refused.
func (t *Table) giveUp() {
	delete(t.refused, cellAt{t.selRow, t.selCol})
	t.say()
	t.Refresh()
}

// say shows why the selected cell was refused, else the hint; a refusal elsewhere is
// pointed to.
func (t *Table) say() {
	if t.Note == nil {
		return
	}
	text, importance := "", widget.LowImportance
	if bad, ok := t.refused[cellAt{t.selRow, t.selCol}]; ok {
		text, importance = "⚠ “"+bad.text+"” was not taken: "+bad.reason, widget.DangerImportance
	} else if len(t.refused) > 0 {
		text, importance = "⚠ What was typed in a marked cell was not taken; select it for the reason, Escape gives it up.", widget.DangerImportance
	} else if t.Hint != nil {
		text = t.Hint(t.selRow, t.selCol)
	}
	t.Note.Importance = importance
	t.Note.SetText(text)
}
