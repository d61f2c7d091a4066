package sheet

import (
	"math"

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
	mark    *figures.SheetMark // a note or group under it, nil for none
	moved   bool               // a drag has begun
	port    *figures.SheetPort // under it, nil for none
	at      fyne.Position      // where a line is dragged to
	ids     []string           // blocks that are dragged
	notes   []int              // and notes
	dx, dy  float64            // by how much [M], whole
	shifted bool               // Shift was held
}

type gestureKind int

const (
	idle      gestureKind = iota
	pressed               // a button is down, nothing decided
	panning               // the picture moves
	banding               // a box selects
	dragging              // blocks move
	wiring                // a line is drawn from a port or from a line
	bending               // a piece of a line is moved sideways
	cancelled             // by Escape; the rest of the drag does nothing
)

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
	e.join.end()
	e.gesture = gesture{kind: pressed, net: -1, from: ev.Position, shifted: ev.Modifier&fyne.KeyModifierShift != 0}
	switch {
	case ev.Button == desktop.MouseButtonTertiary || e.keys.space:
		e.gesture.kind = panning
	case ev.Button != desktop.MouseButtonPrimary || e.sheet == nil:
		e.gesture.kind = idle
	default:
		e.press(ev.Position)
	}
}

// press notes what lies under the pressed button.
func (e *editor) press(p fyne.Position) {
	g := &e.gesture
	g.block, g.net, _ = e.hit(p)
	if port := e.portAt(p); port != nil && !g.shifted {
		g.port = port
	}
	if x, y := e.at(p); g.block == "" && g.port == nil && g.net < 0 {
		if m, ok := e.sheet.MarkAt(x, y); ok {
			g.mark = &m
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
	case bending:
		e.bendTo(ev.Position)
	}
}

// beginDrag decides what a drag with the first button is: on a port it draws a line, on
// a block, a note or the label of a group it moves the selection, on a line it pulls a
// branch or, once the line is selected, bends it; on the ground it selects with a box.
func (e *editor) beginDrag() {
	g := &e.gesture
	switch {
	case g.port != nil:
		g.kind = wiring
	case g.block != "":
		g.kind = dragging
		if !e.selected[g.block] {
			e.choose(g.block, g.shifted)
		}
	case g.mark != nil:
		g.kind = dragging
		if !e.notes[g.mark.Note] && (g.mark.Group < 0 || e.group != g.mark.Group) {
			e.chooseMark(*g.mark, g.shifted)
		}
	case g.net >= 0 && g.net == e.line && !g.shifted:
		g.kind = bending
		x, y := e.at(g.from)
		if p, ok := e.sheet.PieceAt(g.net, x, y); ok {
			e.selectPiece(p)
		}
	case g.net >= 0 && !g.shifted:
		g.kind = wiring
	default:
		g.kind = banding
	}
	if g.kind == dragging {
		g.ids, g.notes = e.movable()
	}
}

// MouseUp ends a gesture that was no drag: a click.
func (e *editor) MouseUp(*desktop.MouseEvent) {
	g := e.gesture
	if g.moved {
		return // DragEnd follows
	}
	e.gesture = gesture{}
	defer e.takeLaid()
	if g.kind != pressed {
		return
	}
	switch {
	case g.block != "":
		e.choose(g.block, g.shifted)
	case g.port != nil && g.net < 0:
		e.choose(g.port.Block, false)
	case g.mark != nil:
		e.clickMark(*g.mark, g.shifted)
	case !g.shifted:
		e.clickLine(g.net, g.from)
	}
}

// clickLine selects a line, or with a further click the branch of it under the pointer;
// −1 selects nothing.
func (e *editor) clickLine(net int, at fyne.Position) {
	again := net >= 0 && net == e.line
	e.choose("", false)
	e.selectLine(net)
	x, y := e.at(at)
	if p, ok := e.sheet.PieceAt(net, x, y); ok && again {
		e.selectPiece(p)
	}
	e.sayLine()
	e.redraw()
}

// DragEnd ends a drag, also one that left the widget.
func (e *editor) DragEnd() {
	g := e.gesture
	e.gesture = gesture{}
	defer e.takeLaid()
	switch g.kind {
	case banding:
		e.endBand(g)
	case dragging:
		e.endDrag(g)
	case wiring:
		e.endWire(g)
	case bending:
		e.endBend(g)
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
	e.lift.end()
	e.wire.hide()
	e.band.Hide()
	e.redraw()
	return true
}

// Scrolled zooms at the pointer; with Shift it pans sideways, with Ctrl up and down. A
// flick of the wheel arrives as a huge step.
func (e *editor) Scrolled(ev *fyne.ScrollEvent) {
	limit := func(d float32) float64 { return math.Max(-200, math.Min(200, float64(d))) }
	dx, dy := limit(ev.Scrolled.DX), limit(ev.Scrolled.DY)
	e.hover.hide()
	switch mod := modifiers(); {
	case mod&fyne.KeyModifierShift != 0 || e.keys.shift:
		e.panBy(dx+dy, 0) // some systems turn the wheel with Shift themselves
	case mod&fyne.KeyModifierControl != 0:
		e.panBy(dx, dy)
	default:
		e.zoomAt(float64(ev.Position.X), float64(ev.Position.Y), math.Pow(1.006, dy))
	}
}

// modifiers are the keys held now; a wheel does not tell them.
func modifiers() fyne.KeyModifier {
	if d, ok := fyne.CurrentApp().Driver().(desktop.Driver); ok {
		return d.CurrentKeyModifiers()
	}
	return 0
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
	case e.gesture.kind == bending || e.hover.block == "" && e.hover.port == nil && e.hover.net >= 0 && e.hover.net == e.line:
		if p, ok := e.pieceUnder(e.pointer); ok && p {
			return desktop.VResizeCursor
		}
		return desktop.HResizeCursor
	case e.gesture.kind == panning || e.keys.space || e.hover.port != nil:
		return desktop.CrosshairCursor
	case e.hover.block != "":
		return desktop.PointerCursor
	}
	return desktop.DefaultCursor
}
