package sheet

import (
	"math"
	"time"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"

	"barlitre/audit/figures"
)

// gesture is what the pressed button is doing.
type gesture struct {
	kind    gestureKind
	from    fyne.Position      // where the button went down
	block   string             // under it
	net     int                // a line under it, −1 for none
	moved   bool               // a drag has begun
	port    *figures.SheetPort // under it, nil for none
	at      fyne.Position      // where a line is dragged to
	ids     []string           // blocks that are dragged
	dx, dy  float64            // by how much [M], whole
	laid    time.Duration      // what laying the lines anew took last
	shifted bool               // Shift was held
}

type gestureKind int

const (
	idle      gestureKind = iota
	pressed               // a button is down, nothing decided
	panning               // the picture moves
	banding               // a box selects
	dragging              // blocks move
	wiring                // a line is drawn from a port
	cancelled             // by Escape; the rest of the drag does nothing
)

// slowLay is how long laying the lines may take while a block follows the pointer;
// above it they are laid when the button is released.
const slowLay = 40 * time.Millisecond

var (
	_ desktop.Mouseable  = (*editor)(nil)
	_ desktop.Hoverable  = (*editor)(nil)
	_ desktop.Cursorable = (*editor)(nil)
	_ fyne.Draggable     = (*editor)(nil)
	_ fyne.Scrollable    = (*editor)(nil)
)

// MouseDown begins a gesture.
func (e *editor) MouseDown(ev *desktop.MouseEvent) {
	e.focus()
	e.s.active = e.index
	e.pointer, e.inside = ev.Position, true
	e.hover.hide()
	e.wire.hide()
	e.gesture = gesture{kind: pressed, net: -1, from: ev.Position, shifted: ev.Modifier&fyne.KeyModifierShift != 0}
	switch {
	case ev.Button == desktop.MouseButtonTertiary || e.keys.space:
		e.gesture.kind = panning
	case ev.Button != desktop.MouseButtonPrimary || e.sheet == nil:
		e.gesture.kind = idle
	default:
		e.gesture.block, e.gesture.net, _ = e.hit(ev.Position)
		if port := e.portAt(ev.Position); port != nil && !e.gesture.shifted {
			e.gesture.port = port
		}
	}
}

// focus gives the sheet the keys, without the frame that they bring.
func (e *editor) focus() {
	if c := fyne.CurrentApp().Driver().CanvasForObject(e); c != nil {
		e.keys.quiet = true
		c.Focus(e)
		e.keys.quiet = false
	}
}

// Dragged carries a gesture on.
func (e *editor) Dragged(ev *fyne.DragEvent) {
	g := &e.gesture
	if g.kind == pressed {
		e.beginDrag()
	}
	g.moved = true
	e.pointer = ev.Position
	switch g.kind {
	case panning:
		e.panBy(float64(ev.Dragged.DX), float64(ev.Dragged.DY))
	case banding:
		e.drawBand(ev.Position)
	case dragging:
		e.dragTo(ev.Position)
	case wiring:
		e.wireTo(ev.Position)
	}
}

// beginDrag decides what a drag with the first button is: on a port it draws a line, on
// a block it moves the selection, on the ground it selects with a box.
func (e *editor) beginDrag() {
	g := &e.gesture
	if g.port != nil {
		g.kind = wiring
		return
	}
	if g.block == "" {
		g.kind = banding
		return
	}
	g.kind = dragging
	if !e.selected[g.block] {
		e.choose(g.block, g.shifted)
	}
	g.ids = e.ids()
}

// MouseUp ends a gesture that was no drag: a click.
func (e *editor) MouseUp(*desktop.MouseEvent) {
	g := e.gesture
	if g.moved {
		return // DragEnd follows
	}
	e.gesture = gesture{}
	if g.kind != pressed {
		return
	}
	switch {
	case g.block != "":
		e.choose(g.block, g.shifted)
	case g.port != nil && g.net < 0:
		e.choose(g.port.Block, false)
	case !g.shifted:
		e.choose("", false)
		e.selectLine(g.net)
		if g.net >= 0 {
			e.s.ctx.Say("Line " + e.lineName(g.net) + ": Del removes it.")
			e.redraw()
		}
	}
}

// DragEnd ends a drag, also one that left the widget.
func (e *editor) DragEnd() {
	g := e.gesture
	e.gesture = gesture{}
	e.hover.clearGhosts()
	switch g.kind {
	case banding:
		e.endBand(g)
	case dragging:
		e.s.move(e, g.ids, g.dx, g.dy)
	case wiring:
		e.endWire(g)
	}
}

// cancel gives a gesture up and reports whether there was one.
func (e *editor) cancel() bool {
	was := e.gesture.kind
	if was == idle || was == cancelled {
		return false
	}
	e.gesture = gesture{kind: cancelled, moved: e.gesture.moved}
	e.moved = nil
	e.hover.clearGhosts()
	e.wire.hide()
	e.band.Hide()
	e.redraw()
	return true
}

// dragTo moves the picture of the dragged blocks by whole modules; the lines follow
// as long as that is quick.
func (e *editor) dragTo(p fyne.Position) {
	g := &e.gesture
	dx := math.Round(float64(p.X-g.from.X) / e.zoom)
	dy := math.Round(float64(p.Y-g.from.Y) / e.zoom)
	if dx == g.dx && dy == g.dy {
		return
	}
	g.dx, g.dy = dx, dy
	if g.laid > slowLay {
		e.hover.ghost(g.ids, dx, dy)
		return
	}
	began := time.Now()
	e.moved = e.sheet.MoveAll(g.ids, dx, dy)
	g.laid = time.Since(began)
	e.redraw()
}

// drawBand shows the selecting box.
func (e *editor) drawBand(p fyne.Position) {
	a, b := e.gesture.from, p
	e.band.Move(fyne.NewPos(min(a.X, b.X), min(a.Y, b.Y)))
	e.band.Resize(fyne.NewSize(max(a.X, b.X)-min(a.X, b.X), max(a.Y, b.Y)-min(a.Y, b.Y)))
	e.band.Show()
	e.over.Refresh()
}

// endBand selects the blocks whose middle lies in the box; with Shift in addition.
func (e *editor) endBand(g gesture) {
	e.band.Hide()
	e.over.Refresh()
	x0, y0 := e.at(e.band.Position())
	x1, y1 := e.at(e.band.Position().Add(e.band.Size()))
	if !g.shifted {
		e.selected = map[string]bool{}
	}
	last := ""
	for _, b := range e.boxes {
		if x, y := b.x+b.w/2, b.y+b.h/2; x >= x0 && x <= x1 && y >= y0 && y <= y1 {
			e.selected[b.id] = true
			last = b.id
		}
	}
	e.opt.Selected = e.selected
	if last == "" {
		if ids := e.ids(); len(ids) > 0 {
			last = ids[0]
		}
	}
	e.s.ctx.Select(e.circuit, last)
	e.redraw()
}

// choose selects a block; with add it is added to the selection, or taken out of it.
// "" selects the circuit alone.
func (e *editor) choose(block string, add bool) {
	switch {
	case add && e.selected[block]:
		delete(e.selected, block)
		if block = ""; len(e.selected) > 0 {
			block = e.ids()[0]
		}
	case add:
		e.selected[block] = true
	default:
		e.selected = map[string]bool{}
		if block != "" {
			e.selected[block] = true
		}
	}
	e.selectLine(-1)
	e.opt.Selected = e.selected
	if e.circuit >= 0 {
		e.s.ctx.Select(e.circuit, block)
	}
	e.redraw()
}

// Scrolled zooms at the pointer. A flick of the wheel arrives as a huge step.
func (e *editor) Scrolled(ev *fyne.ScrollEvent) {
	step := math.Max(-200, math.Min(200, float64(ev.Scrolled.DY)))
	e.zoomAt(float64(ev.Position.X), float64(ev.Position.Y), math.Pow(1.006, step))
	e.hover.hide()
}

// MouseIn, MouseMoved and MouseOut follow the pointer.
func (e *editor) MouseIn(ev *desktop.MouseEvent) { e.MouseMoved(ev) }

// MouseMoved reads what lies under the pointer.
func (e *editor) MouseMoved(ev *desktop.MouseEvent) {
	e.pointer, e.inside = ev.Position, true
	if e.gesture.kind == idle || e.gesture.kind == cancelled {
		e.hover.moveTo(ev.Position)
	}
}

// MouseOut ends the reading.
func (e *editor) MouseOut() {
	e.inside = false
	e.hover.hide()
}

// Cursor is a hand over blocks.
func (e *editor) Cursor() desktop.Cursor {
	switch {
	case e.gesture.kind == panning || e.keys.space || e.hover.port != nil:
		return desktop.CrosshairCursor
	case e.hover.block != "":
		return desktop.PointerCursor
	}
	return desktop.DefaultCursor
}
