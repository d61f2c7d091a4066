package sheet

import (
	"sort"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/driver/desktop"

	"barlitre/app/station"
	"barlitre/app/widgets"
)

var (
	_ fyne.Focusable  = (*editor)(nil)
	_ fyne.Tabbable   = (*editor)(nil)
	_ desktop.Keyable = (*editor)(nil)
)

// Steps of the arrow keys.
const (
	nudge     = 1.0  // module
	nudgeMore = 5.0  // modules, with Shift
	panStep   = 40.0 // units, without a selection
	zoomStep  = 1.25
)

// FocusGained shows the frame of the focus.
func (e *editor) FocusGained() {
	e.s.active = e.index
	if !e.keys.quiet {
		e.showRing()
	}
	e.keys.quiet = false
}

// showRing shows the frame of the focus: not after a click, but as soon as a key is used.
func (e *editor) showRing() {
	if !e.ring.Visible() {
		e.ring.Show()
		canvas.Refresh(e.over)
	}
}

// FocusLost forgets the keys that were held.
func (e *editor) FocusLost() {
	e.keys.shift, e.keys.space = false, false
	e.ring.Hide()
	canvas.Refresh(e.over)
}

// AcceptsTab: Tab goes from block to block first.
func (e *editor) AcceptsTab() bool { return true }

// KeyDown remembers the keys that change what others do.
func (e *editor) KeyDown(k *fyne.KeyEvent) { e.held(k.Name, true) }

// KeyUp forgets them.
func (e *editor) KeyUp(k *fyne.KeyEvent) { e.held(k.Name, false) }

func (e *editor) held(k fyne.KeyName, down bool) {
	switch k {
	case desktop.KeyShiftLeft, desktop.KeyShiftRight:
		e.keys.shift = down
	case fyne.KeySpace:
		e.keys.space = down
	}
}

// TypedRune takes the letters.
func (e *editor) TypedRune(r rune) {
	e.showRing()
	switch r {
	case 'f', 'F', '0':
		e.s.fitAll()
	case 'w', 'W':
		e.s.active = e.index
		e.s.setWide(!e.s.wide)
	case '/':
		e.act(station.AddBlock)
	case 'r', 'R':
		e.act(station.Rotate)
	case 'm', 'M':
		e.act(station.Mirror)
	case '+':
		e.zoomMiddle(zoomStep)
	case '-':
		e.zoomMiddle(1 / zoomStep)
	}
}

// act does on this sheet what the Edit menu does on the one at hand.
func (e *editor) act(a station.Action) {
	e.s.active = e.index
	e.s.Act(a)
}

func (e *editor) zoomMiddle(factor float64) {
	w, h := e.room()
	e.zoomAt(w/2, h/2, factor)
}

// TypedKey takes the keys without a letter.
func (e *editor) TypedKey(k *fyne.KeyEvent) {
	e.showRing()
	switch k.Name {
	case fyne.KeyEscape:
		switch {
		case e.cancel():
		case len(e.selected) > 0 || e.line >= 0:
			e.choose("", false)
		default:
			widgets.PassKey(e, k)
		}
	case fyne.KeyF2:
		e.act(station.Rename)
	case fyne.KeyDelete, fyne.KeyBackspace:
		e.act(station.Delete)
	case fyne.KeyTab:
		e.nextBlock()
	case fyne.KeyReturn, fyne.KeyEnter:
		e.s.panel.focusFirst()
	case fyne.KeyLeft:
		e.arrow(-1, 0)
	case fyne.KeyRight:
		e.arrow(1, 0)
	case fyne.KeyUp:
		e.arrow(0, -1)
	case fyne.KeyDown:
		e.arrow(0, 1)
	default:
		widgets.PassKey(e, k)
	}
}

// arrow moves the selection, or without one the view.
func (e *editor) arrow(dx, dy float64) {
	if e.gesture.kind == dragging {
		return
	}
	if len(e.selected) == 0 {
		e.panBy(-dx*panStep, -dy*panStep)
		return
	}
	step := nudge
	if e.keys.shift {
		step = nudgeMore
	}
	e.s.move(e, e.ids(), dx*step, dy*step)
}

// nextBlock selects the next block in the order of reading, with Shift the one
// before; after the last one the focus goes on to what follows the sheet.
func (e *editor) nextBlock() {
	order := e.order()
	at := -1
	_, block := e.s.ctx.Selected()
	for i, id := range order {
		if e.selected[id] && (block == "" || id == block || !e.selected[block]) {
			at = i
			break
		}
	}
	next := at + 1
	if e.keys.shift {
		if next = at - 1; at < 0 {
			next = -1
		}
	}
	if next >= 0 && next < len(order) {
		e.choose(order[next], false)
		e.reveal()
		return
	}
	c := fyne.CurrentApp().Driver().CanvasForObject(e)
	switch {
	case c == nil:
	case e.keys.shift:
		c.FocusPrevious()
	default:
		c.FocusNext()
	}
}

// order lists the blocks from top to bottom in rows of ten modules, each from left to
// right.
func (e *editor) order() []string {
	const rows = 10
	list := append([]blockBox(nil), e.boxes...)
	key := func(b blockBox) (int, float64) { return int((b.y + b.h/2) / rows), b.x + b.w/2 }
	sort.SliceStable(list, func(i, j int) bool {
		yi, xi := key(list[i])
		yj, xj := key(list[j])
		return yi < yj || yi == yj && xi < xj
	})
	var out []string
	seen := map[string]bool{}
	for _, b := range list {
		if !seen[b.id] {
			out = append(out, b.id)
		}
		seen[b.id] = true
	}
	return out
}
