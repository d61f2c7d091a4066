package sheet

import (
	"bytes"
	"slices"
	"strings"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"

	"barlitre/app/station"
)

// A line is drawn by keys alone: C, the port, the target, Enter.
func TestConnectByKeys(t *testing.T) {
	b := drawing(t)
	e := b.s.editors[0]
	before := b.doc.File().Bytes()
	e.choose("P1", false)
	b.typed(0, "c")
	for range 10 {
		if p := e.join.ports[e.join.at]; p.Port == "P" {
			break
		}
		b.key(0, fyne.KeyTab)
	}
	if !strings.HasPrefix(e.hover.text(), "P1.P") || !e.wire.rings[0].Visible() {
		t.Errorf("the label says %q", e.hover.text())
	}
	b.key(0, fyne.KeyReturn)
	for range 10 {
		if e.join.ports[e.join.at].String() == "RV1.P" {
			break
		}
		b.key(0, fyne.KeyTab)
	}
	if e.hover.text() != "Connect P1.P and RV1.P" || !e.wire.line.Visible() {
		t.Errorf("before Enter the label says %q", e.hover.text())
	}
	b.picture("connect-by-keys")
	b.key(0, fyne.KeyReturn)
	if got := b.line(0, "P1.P"); !slices.Equal(got, []string{"P1.P", "RV1.P"}) || e.wire.line.Visible() {
		t.Fatalf("P1.P stands on %v; said %q", got, b.said)
	}
	b.undone(before, "Connect P1.P and RV1.P")
	e.choose("P1", false)
	b.typed(0, "c")
	b.key(0, fyne.KeyEscape)
	if e.join.on || !bytes.Equal(before, b.doc.File().Bytes()) {
		t.Error("Escape does not give up")
	}
}

// A box with a label: made, renamed, moved with what is in it, taken away.
func TestGroupByKeys(t *testing.T) {
	b := newBench(t, press, window)
	e := b.s.editors[0]
	start := b.doc.File().Bytes()
	b.click(0, b.middle(0, "P1"), 0)
	b.click(0, b.middle(0, "M1"), fyne.KeyModifierShift)
	b.s.Act(station.Group)
	b.answer("Power unit")
	g := b.doc.File().Circuits[0].Groups
	if len(g) != 1 || g[0].Label != "Power unit" || !slices.Equal(g[0].Blocks, []string{"M1", "P1"}) || e.group != 0 {
		t.Fatalf("groups %v, selected %d; said %q", g, e.group, b.said)
	}
	b.picture("group")
	x, y, _ := e.sheet.GroupLabel(0)
	label := e.onSheet(x, y)
	was := *b.doc.File().Circuits[0].Block("P1").At
	b.drag(0, label, label.AddXY(float32(3*e.zoom), 0), desktop.MouseButtonPrimary, 0)
	if got := *b.doc.File().Circuits[0].Block("P1").At; got != [2]float64{was[0] + 3, was[1]} || b.doc.UndoName() != "Move 2 blocks" {
		t.Errorf("P1 is at %v, was at %v; undo is called %q", got, was, b.doc.UndoName())
	}
	b.key(0, fyne.KeyF2)
	b.answer("Supply: left")
	if got := b.doc.File().Circuits[0].Groups[0].Label; got != "Supply: left" {
		t.Errorf("the label is %q", got)
	}
	b.key(0, fyne.KeyDelete)
	if got := b.doc.File().Circuits[0]; len(got.Groups) != 0 || got.Block("P1") == nil {
		t.Errorf("after Del there are %d groups", len(got.Groups))
	}
	b.backTo(start)
}

// backTo undoes all and expects a text.
func (b *bench) backTo(start []byte) {
	b.t.Helper()
	for b.doc.UndoName() != "" {
		b.doc.Undo()
	}
	b.pump()
	if !bytes.Equal(start, b.doc.File().Bytes()) {
		b.t.Error("undone to the start, the text is not as it was")
	}
}

// Dragged blocks show what they are level and upright with.
func TestGuides(t *testing.T) {
	b := drawing(t)
	e := b.s.editors[0]
	from := b.middle(0, "RV1")
	x, y, _ := e.sheet.At("RV1")
	px, py, _ := e.sheet.At("P1")
	e.MouseDown(event(from, desktop.MouseButtonPrimary, 0))
	b.dragOn(0, from, from.AddXY(float32((px-x)*e.zoom), float32((py-y+20)*e.zoom)))
	if !e.lift.guides[0].Visible() {
		t.Error("no line shows that RV1 stands below P1")
	}
	b.picture("guides")
	e.cancel()
	if e.lift.guides[0].Visible() || e.lift.guides[1].Visible() {
		t.Error("a guide stays after the drag was given up")
	}
}

// The wheel pans with Shift, keys see the selection large and the whole.
func TestViewByKeys(t *testing.T) {
	b := newBench(t, press, window)
	e := b.s.editors[0]
	x, y := e.x, e.y
	e.KeyDown(&fyne.KeyEvent{Name: desktop.KeyShiftLeft})
	e.Scrolled(&fyne.ScrollEvent{Scrolled: fyne.NewDelta(0, 25)})
	e.KeyUp(&fyne.KeyEvent{Name: desktop.KeyShiftLeft})
	if e.x == x || e.y != y {
		t.Errorf("Shift and wheel move the view by %g, %g", e.x-x, e.y-y)
	}
	e.choose("RV1", false)
	before := e.zoom
	b.typed(0, "z")
	at := b.middle(0, "RV1")
	w, h := e.room()
	if e.zoom <= before || float64(at.X) < 0.3*w || float64(at.X) > 0.7*w || float64(at.Y) < 0.3*h || float64(at.Y) > 0.7*h {
		t.Errorf("zoom %g, was %g; RV1 at %v of %g, %g", e.zoom, before, at, w, h)
	}
	for _, id := range []string{"C1", "P1", "V1"} { // with its label, whichever side that is on
		e.choose(id, false)
		b.typed(0, "z")
		x, y, lw, lh, _ := e.sheet.LabelBox(id)
		for _, p := range []fyne.Position{e.onSheet(x, y), e.onSheet(x+lw, y+lh)} {
			if float64(p.X) < 0 || float64(p.Y) < 0 || float64(p.X) > w || float64(p.Y) > h {
				t.Errorf("the label of %s is cut: a corner is at %v of %g, %g", id, p, w, h)
			}
		}
	}
	b.key(0, fyne.KeyHome)
	if !e.fitted {
		t.Error("Home does not show the whole sheet")
	}
}
