package sheet

import (
	"math"
	"sort"
	"unicode"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/driver/desktop"

	"barlitre/app/station"
	"barlitre/app/widgets"
	"barlitre/audit/figures"
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
	e.s.active = e.index
	switch unicode.ToLower(r) {
	case 'f', '0':
		e.s.fitAll()
	case 'w':
		e.s.setWide(!e.s.wide)
	case '+':
		e.zoomMiddle(zoomStep)
	case '-':
		e.zoomMiddle(1 / zoomStep)
	case 'l':
		e.nextLine()
	case 'b':
		e.nextPiece()
	default:
		if a, ok := letters[unicode.ToLower(r)]; ok {
			e.act(a)
		}
	}
}

// letters are the keys of what the Edit menu has too.
var letters = map[rune]station.Action{
	'/': station.AddBlock, 'r': station.Rotate, 'm': station.Mirror, 'n': station.AddNote,
	'c': station.Connect, 's': station.Straighten, 'z': station.FitSelection,
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
	if e.join.key(k.Name) {
		return
	}
	switch k.Name {
	case fyne.KeyEscape:
		switch {
		case e.cancel():
		case !e.nothing():
			e.choose("", false)
		default:
			widgets.PassKey(e, k)
		}
	case fyne.KeyF2:
		e.act(station.Rename)
	case fyne.KeyDelete, fyne.KeyBackspace:
		e.act(station.Delete)
	case fyne.KeyTab:
		e.nextStop()
	case fyne.KeyReturn, fyne.KeyEnter:
		if len(e.selected) == 0 && (len(e.notes) == 1 || e.group >= 0) {
			e.act(station.Rename)
			return
		}
		e.s.panel.focusFirst()
	case fyne.KeyHome:
		e.s.fitAll()
	default:
		if way, ok := ways[k.Name]; ok {
			e.arrow(way[0], way[1])
			return
		}
		widgets.PassKey(e, k)
	}
}

// ways are the directions of the keys that move the selection, or the view; a page is as
// far as the sheet is high.
var ways = map[fyne.KeyName][2]float64{
	fyne.KeyLeft: {-1, 0}, fyne.KeyRight: {1, 0}, fyne.KeyUp: {0, -1}, fyne.KeyDown: {0, 1},
	fyne.KeyPageUp: {0, -page}, fyne.KeyPageDown: {0, page},
}

// page marks a way that always moves the view.
const page = 1000

// arrow moves the selection or the chosen piece of a line, or without one the view.
func (e *editor) arrow(dx, dy float64) {
	if e.gesture.kind == dragging || e.gesture.kind == bending {
		return
	}
	_, h := e.room()
	if math.Abs(dy) == page {
		e.panBy(0, -dy/page*0.8*h)
		return
	}
	step := nudge
	if e.keys.shift {
		step = nudgeMore
	}
	e.s.bringCircuits(false) // a step may have come that the sheet does not show yet
	ids, notes := e.movable()
	switch {
	case len(ids)+len(notes) > 0:
		e.fitted = false
		e.s.move(e, ids, notes, dx*step, dy*step)
	case e.piece != nil && e.level(*e.piece) == (dy != 0):
		e.bend((dx + dy) * step)
	case e.piece != nil:
		e.s.ctx.Say("This piece runs that way; move it across, or choose another piece with B.")
	default:
		e.panBy(-dx*panStep, -dy*panStep)
	}
}

// stop is what Tab goes to: a block, else a note or a group.
type stop struct {
	block string
	mark  figures.SheetMark
}

// stops are the blocks in the order of reading, then notes and groups.
func (e *editor) stops() []stop {
	var out []stop
	for _, id := range e.order() {
		out = append(out, stop{block: id})
	}
	for i := 0; e.drawn != nil && i < len(e.drawn.Notes); i++ {
		out = append(out, stop{mark: figures.SheetMark{Note: i, Group: -1}})
	}
	for i := 0; e.drawn != nil && i < len(e.drawn.Groups); i++ {
		out = append(out, stop{mark: figures.SheetMark{Note: -1, Group: i}})
	}
	return out
}

// isAt tells whether a stop is what is selected.
func (e *editor) isAt(s stop, block string) bool {
	switch {
	case s.block != "":
		return e.selected[s.block] && (block == "" || s.block == block || !e.selected[block])
	case s.mark.Note >= 0:
		return e.notes[s.mark.Note]
	}
	return e.group == s.mark.Group
}

// nextStop selects the next block in the order of reading, note or group, with Shift the
// one before; after the last one the focus goes on to what follows the sheet.
func (e *editor) nextStop() {
	list := e.stops()
	at := -1
	_, block := e.s.ctx.Selected()
	for i, s := range list {
		if e.isAt(s, block) {
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
	if next >= 0 && next < len(list) {
		if s := list[next]; s.block != "" {
			e.choose(s.block, false)
		} else {
			e.chooseMark(s.mark, false)
		}
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
