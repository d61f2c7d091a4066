package sheet

import (
	"bytes"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"
)

func TestDragMovesInOneStep(t *testing.T) {
	b := newBench(t, press, window)
	e := b.s.editors[0]
	before := b.doc.File().Bytes()
	was := *e.drawn.Block("RV1").At
	from := b.middle(0, "RV1")
	to := fyne.NewPos(from.X+float32(4.2*e.zoom), from.Y-float32(2.9*e.zoom))
	b.drag(0, from, to, desktop.MouseButtonPrimary, 0)
	got := *b.doc.File().Circuits[0].Block("RV1").At
	if want := [2]float64{was[0] + 4, was[1] - 3}; got != want {
		t.Fatalf("RV1 went from %v to %v, expected %v", was, got, want)
	}
	if x, y, _ := e.sheet.At("RV1"); x != got[0] || y != got[1] {
		t.Errorf("the sheet draws RV1 at %g, %g", x, y)
	}
	if e.moved != nil {
		t.Error("the picture of the drag stays")
	}
	if name, ok := b.doc.Undo(); !ok || name != "Move RV1" {
		t.Errorf("undo takes back %q", name)
	}
	if !bytes.Equal(before, b.doc.File().Bytes()) {
		t.Error("one undo does not bring the file back")
	}
}

func TestDragMovesTheSelection(t *testing.T) {
	b := newBench(t, press, window)
	e := b.s.editors[0]
	b.click(0, b.middle(0, "RV1"), 0)
	b.click(0, b.middle(0, "V1"), fyne.KeyModifierShift)
	rv, v, c := *e.drawn.Block("RV1").At, *e.drawn.Block("V1").At, *e.drawn.Block("C1").At
	from := b.middle(0, "V1")
	b.drag(0, from, from.AddXY(float32(2*e.zoom), 0), desktop.MouseButtonPrimary, 0)
	now := b.doc.File().Circuits[0]
	if got := *now.Block("RV1").At; got != [2]float64{rv[0] + 2, rv[1]} {
		t.Errorf("RV1 %v to %v", rv, got)
	}
	if got := *now.Block("V1").At; got != [2]float64{v[0] + 2, v[1]} {
		t.Errorf("V1 %v to %v", v, got)
	}
	if got := *now.Block("C1").At; got != c {
		t.Errorf("C1, not selected, moved to %v", got)
	}
	if len(e.selected) != 2 {
		t.Errorf("the selection is %v", e.ids())
	}
	if name, _ := b.doc.Undo(); name == "" || *b.doc.File().Circuits[0].Block("RV1").At != rv || *b.doc.File().Circuits[0].Block("V1").At != v {
		t.Errorf("%q does not take both back", name)
	}
}

func TestEscapeCancelsTheDrag(t *testing.T) {
	b := newBench(t, press, window)
	e := b.s.editors[0]
	before := b.doc.Revision()
	from := b.middle(0, "RV1")
	to := from.AddXY(40, 40)
	e.MouseDown(event(from, desktop.MouseButtonPrimary, 0))
	b.dragOn(0, from, to)
	if e.moved == nil {
		t.Fatal("the lines do not follow the block")
	}
	b.key(0, fyne.KeyEscape)
	b.dragOn(0, to, to.AddXY(20, 0))
	e.DragEnd()
	b.pump()
	if b.doc.Revision() != before || e.moved != nil || e.gesture.kind != idle {
		t.Errorf("revision %d was %d, picture left %v, gesture %v", b.doc.Revision(), before, e.moved != nil, e.gesture.kind)
	}
}

func TestNudge(t *testing.T) {
	b := newBench(t, press, window)
	e := b.s.editors[0]
	b.click(0, b.middle(0, "RV1"), 0)
	was := *e.drawn.Block("RV1").At
	at := func() [2]float64 { return *b.doc.File().Circuits[0].Block("RV1").At }
	b.key(0, fyne.KeyRight, fyne.KeyRight, fyne.KeyUp)
	if got := at(); got != [2]float64{was[0] + 2, was[1] - 1} {
		t.Errorf("two right, one up: %v to %v", was, got)
	}
	e.KeyDown(&fyne.KeyEvent{Name: desktop.KeyShiftLeft})
	b.key(0, fyne.KeyLeft)
	e.KeyUp(&fyne.KeyEvent{Name: desktop.KeyShiftLeft})
	if got := at(); got != [2]float64{was[0] - 3, was[1] - 1} {
		t.Errorf("Shift and left: %v", got)
	}
	// Keys can come faster than the sheet follows the file.
	e.TypedKey(&fyne.KeyEvent{Name: fyne.KeyDown})
	e.TypedKey(&fyne.KeyEvent{Name: fyne.KeyDown})
	b.pump()
	if got := at(); got != [2]float64{was[0] - 3, was[1] + 1} {
		t.Errorf("two steps at once: %v", got)
	}
	before := b.doc.Revision()
	b.key(0, fyne.KeyEscape)
	x := e.x
	b.key(0, fyne.KeyRight)
	if b.doc.Revision() != before || close(e.x, x, 1) {
		t.Errorf("without a selection the arrows pan: revision %d was %d, x %g was %g", b.doc.Revision(), before, e.x, x)
	}
}

// A block without a place of its own stays where it was put when another is moved.
func TestMoveKeepsPlacedBlocks(t *testing.T) {
	b := newBench(t, press, window)
	text := b.doc.File().Bytes()
	from := bytes.Index(text, []byte("\n    RV1:"))
	from += bytes.Index(text[from:], []byte("      at: ["))
	text = append(text[:from], text[from+bytes.IndexByte(text[from:], '\n')+1:]...)
	f := *b.doc.File()
	f.Replace(text)
	if f.Circuits[0].Block("RV1").At != nil {
		t.Fatal("the sample has changed: RV1 still has a place")
	}
	if err := b.doc.Edit("take away", func(g *auditFile) error { *g = f; return nil }); err != nil {
		t.Fatal(err)
	}
	b.pump()
	e := b.s.editors[0]
	x, y, _ := e.sheet.At("RV1")
	b.click(0, b.middle(0, "F1"), 0)
	b.key(0, fyne.KeyDown)
	if got := b.doc.File().Circuits[0].Block("RV1").At; got == nil || got[0] != x || got[1] != y {
		t.Errorf("RV1 was put at %g, %g and is now at %v", x, y, got)
	}
	if name, _ := b.doc.Undo(); name != "Move F1" {
		t.Errorf("undo takes back %q", name)
	}
}

func TestZoomKeepsThePoint(t *testing.T) {
	b := newBench(t, press, window)
	e := b.s.editors[0]
	p := fyne.NewPos(123, 217)
	x, y := e.at(p)
	zoom := e.zoom
	for i, dy := range []float32{25, 25, -25, 4000, -25, -4000, 25} {
		e.Scrolled(&fyne.ScrollEvent{PointEvent: fyne.PointEvent{Position: p}, Scrolled: fyne.NewDelta(0, dy)})
		if x1, y1 := e.at(p); !close(x, x1, 1e-6) || !close(y, y1, 1e-6) {
			t.Errorf("step %d: the point under the pointer was %g, %g and is %g, %g", i, x, y, x1, y1)
		}
		if e.zoom < leastZoom || e.zoom > mostZoom {
			t.Errorf("step %d: zoom %g", i, e.zoom)
		}
	}
	if e.zoom == zoom {
		t.Error("the wheel does nothing")
	}
	b.s.editors[0].TypedRune('f')
	if !close(e.zoom, zoom, 1e-9) || !e.fitted {
		t.Errorf("F goes to zoom %g, was %g", e.zoom, zoom)
	}
	b.drag(0, p, p.AddXY(30, 10), desktop.MouseButtonTertiary, 0)
	if x1, y1 := e.at(p.AddXY(30, 10)); !close(x, x1, 1e-5) || !close(y, y1, 1e-5) {
		t.Errorf("panning moves the point under the pointer from %g, %g to %g, %g", x, y, x1, y1)
	}
	e.KeyDown(&fyne.KeyEvent{Name: fyne.KeySpace})
	before := b.doc.Revision()
	from := b.middle(0, "RV1")
	b.drag(0, from, from.AddXY(-20, 0), desktop.MouseButtonPrimary, 0)
	if to := b.middle(0, "RV1"); !close(float64(to.X), float64(from.X)-20, 0.01) || b.doc.Revision() != before {
		t.Errorf("Space and a drag move RV1 on screen from %v to %v; file changed: %v", from, to, b.doc.Revision() != before)
	}
}

// Where laying the lines takes long, what stays is drawn once and what moves over it,
// until the button is released.
func TestLiftedBlocks(t *testing.T) {
	b := newBench(t, press, window)
	e := b.s.editors[0]
	e.lift.tried, e.lift.quick = true, false
	from := b.middle(0, "RV1")
	was := *e.drawn.Block("RV1").At
	w, h := int(e.Size().Width), int(e.Size().Height)
	e.MouseDown(event(from, desktop.MouseButtonPrimary, 0))
	to := from.AddXY(float32(3*e.zoom), 0)
	b.dragOn(0, from, to)
	e.paint(w, h)
	if e.moved == nil || e.lift.still == nil {
		t.Fatalf("moved %v, picture of what stays %v", e.moved != nil, e.lift.still != nil)
	}
	// Drawn at once and in two layers it is the same picture but for edges that are
	// blended twice.
	two := append([]byte(nil), e.pen.Image().Pix...)
	whole := e.sheet.Drag([]string{"RV1"}, 3, 0)
	e.moved, e.lift.up = whole, nil
	e.paint(w, h)
	differ := 0
	for i := range two {
		if d := int(two[i]) - int(e.pen.Image().Pix[i]); d > 40 || d < -40 {
			differ++
		}
	}
	if differ > len(two)/1000 {
		t.Errorf("%d of %d values of the picture in two layers differ", differ, len(two))
	}
	e.DragEnd()
	b.pump()
	if got := *b.doc.File().Circuits[0].Block("RV1").At; got != [2]float64{was[0] + 3, was[1]} || e.lift.still != nil {
		t.Errorf("RV1 at %v, was %v; picture kept %v", got, was, e.lift.still != nil)
	}
}
