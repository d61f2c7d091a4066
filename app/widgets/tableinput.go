package widgets

import (
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"
)

// grip says what the pointer holds.
type grip int

const (
	gripNone grip = iota
	gripAcross
	gripDown
)

// at scale 1
func (t *Table) point(p fyne.Position) (x, y float64) {
	k := float64(Scale())
	return float64(p.X) / k, float64(p.Y) / k
}

// MouseDown selects, or takes hold of a scroll bar.
func (t *Table) MouseDown(ev *desktop.MouseEvent) {
	if ev.Button != desktop.MouseButtonPrimary {
		return
	}
	t.focus()
	x, y := t.point(ev.Position)
	_, _, viewW, viewH := t.body()
	across, down := t.bars()
	switch {
	case across[2] > 0 && y > t.headHeight()+viewH:
		t.grabbed = gripAcross
		return
	case down[2] > 0 && x > viewW:
		t.grabbed = gripDown
		return
	}
	row, col := t.find(x, y)
	if row < 0 || t.at(row).Kind == RowGroup {
		return
	}
	again := row == t.selRow && col == t.selCol
	t.choose(row, col)
	if t.Tapped != nil {
		t.Tapped(row, col)
	}
	if again && t.canType(row, col) {
		t.edit("")
	}
}

// MouseUp lets go.
func (t *Table) MouseUp(*desktop.MouseEvent) { t.grabbed = gripNone }

// Dragged moves a scroll bar.
func (t *Table) Dragged(ev *fyne.DragEvent) {
	width, height, viewW, viewH := t.body()
	across, down := t.bars()
	dx, dy := t.point(fyne.NewPos(ev.Dragged.DX, ev.Dragged.DY))
	switch t.grabbed {
	case gripAcross:
		if room := viewW - t.frozen() - across[2]; room > 0 {
			t.move(dx*(width-viewW)/room, 0)
		}
	case gripDown:
		if room := viewH - down[3]; room > 0 {
			t.move(0, dy*(height-viewH)/room)
		}
	}
}

// DragEnd lets go.
func (t *Table) DragEnd() { t.grabbed = gripNone }

// Scrolled turns the wheel.
func (t *Table) Scrolled(ev *fyne.ScrollEvent) {
	x, y := t.scrollX, t.scrollY
	dx, dy := float64(ev.Scrolled.DX), float64(ev.Scrolled.DY)
	t.move(-dx, -dy)
	if t.Outer != nil && x == t.scrollX && y == t.scrollY {
		t.Outer(ev)
	}
}

func (t *Table) move(dx, dy float64) {
	x, y := t.scrollX, t.scrollY
	t.scroll(dx, dy)
	if x == t.scrollX && y == t.scrollY {
		return
	}
	t.finish()
	t.Refresh()
}

// MouseIn, MouseMoved and MouseOut follow the pointer for its shape.
func (t *Table) MouseIn(ev *desktop.MouseEvent)    { t.pointer = ev.Position }
func (t *Table) MouseMoved(ev *desktop.MouseEvent) { t.pointer = ev.Position }
func (t *Table) MouseOut()                         { t.pointer = fyne.NewPos(-1, -1) }

// Cursor is a hand over what can be clicked.
func (t *Table) Cursor() desktop.Cursor {
	if t.Tapped == nil {
		return desktop.DefaultCursor
	}
	if row, _ := t.find(t.point(t.pointer)); row >= 0 && t.at(row).Kind != RowGroup {
		return desktop.PointerCursor
	}
	return desktop.DefaultCursor
}

func (t *Table) focus() {
	if t.editing {
		t.finish()
	}
	if c := fyne.CurrentApp().Driver().CanvasForObject(t); c != nil {
		c.Focus(t)
	}
}

// FocusGained shows that the keys go here, with something selected.
func (t *Table) FocusGained() {
	t.focused = true
	if t.selRow < 0 {
		if row := t.next(-1, 1); row >= 0 {
			t.selRow, t.selCol = row, 0
			t.reveal()
			t.say()
		}
	}
	t.Refresh()
}

// FocusLost is the end of it.
func (t *Table) FocusLost() {
	t.focused, t.tabbing = false, false
	t.Refresh()
}

// choose selects as the user does.
func (t *Table) choose(row, col int) {
	if row == t.selRow && col == t.selCol {
		return
	}
	t.Select(row, col)
	if t.Selected != nil {
		t.Selected(row, col)
	}
}

// next returns the first row from row on, in steps, that can be selected; −1 if none.
func (t *Table) next(row, step int) int {
	for row += step; row >= 0 && row < t.rows; row += step {
		if t.at(row).Kind != RowGroup {
			return row
		}
	}
	return -1
}

// step moves the selection.
func (t *Table) step(rows, cols int) {
	row, col := t.selRow, t.selCol
	for n := rows; n != 0; {
		s := 1
		if n < 0 {
			s = -1
		}
		to := t.next(row, s)
		if to < 0 {
			break
		}
		row, n = to, n-s
	}
	if !t.ByRow {
		col = max(0, min(len(t.columns)-1, col+cols))
	} else if cols != 0 {
		t.move(float64(cols)*60, 0)
	}
	if row >= 0 {
		t.choose(row, col)
	}
}

// TypedKey moves the selection and begins to type.
func (t *Table) TypedKey(k *fyne.KeyEvent) {
	_, _, _, viewH := t.body()
	page := max(1, int(viewH/tableRow)-1)
	switch k.Name {
	case fyne.KeyUp:
		t.step(-1, 0)
	case fyne.KeyDown:
		t.step(1, 0)
	case fyne.KeyLeft:
		t.step(0, -1)
	case fyne.KeyRight:
		t.step(0, 1)
	case fyne.KeyPageUp:
		t.step(-page, 0)
	case fyne.KeyPageDown:
		t.step(page, 0)
	case fyne.KeyHome:
		t.jump(t.next(-1, 1))
	case fyne.KeyEnd:
		t.jump(t.next(t.rows, -1))
	case fyne.KeyReturn, fyne.KeyEnter, fyne.KeyF2:
		t.enter()
	case fyne.KeyEscape:
		t.tabbing = false
		t.giveUp()
	case fyne.KeyTab:
		if t.tabbing {
			t.tab(tabWay())
		}
	default:
		if t.Key == nil || !t.Key(k.Name) {
			PassKey(t, k)
		}
	}
}

// jump selects a row and keeps the column.
func (t *Table) jump(row int) {
	if row >= 0 {
		t.choose(row, t.selCol)
	}
}

func (t *Table) enter() {
	switch {
	case t.selRow < 0:
	case t.canType(t.selRow, t.selCol):
		t.edit("")
	case t.Tapped != nil:
		t.Tapped(t.selRow, t.selCol)
	}
}

// TypedRune begins to type in place of what stands there.
func (t *Table) TypedRune(r rune) {
	if t.selRow >= 0 && t.canType(t.selRow, t.selCol) {
		t.edit(string(r))
	}
}

// TypedShortcut copies and pastes, with tabs between cells and rows in lines.
func (t *Table) TypedShortcut(s fyne.Shortcut) {
	switch s.(type) {
	case *fyne.ShortcutCopy:
		if t.selRow >= 0 {
			fyne.CurrentApp().Clipboard().SetContent(t.copied())
		}
	case *fyne.ShortcutPaste:
		if text := fyne.CurrentApp().Clipboard().Content(); t.Paste != nil && t.selRow >= 0 && text != "" {
			t.Paste(t.selRow, t.selCol, block(text))
		}
	}
}

// copied is the cell, or the row where rows are selected.
func (t *Table) copied() string {
	if !t.ByRow {
		return t.text(t.selRow, t.selCol)
	}
	return strings.Join(t.at(t.selRow).Cells, "\t")
}

func block(text string) [][]string {
	var out [][]string
	for _, line := range strings.Split(strings.TrimRight(strings.ReplaceAll(text, "\r\n", "\n"), "\n"), "\n") {
		out = append(out, strings.Split(line, "\t"))
	}
	return out
}
