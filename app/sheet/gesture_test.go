package sheet

import (
	"bytes"
	"strings"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"

	"barlitre/app/station"
	"barlitre/audit/figures"
)

// typed types letters on a sheet.
func (b *bench) typed(sheet int, letters string) {
	for _, r := range letters {
		b.s.editors[sheet].TypedRune(r)
		b.pump()
	}
}

// piece is the middle of the longest piece of the line of a port that runs level, or
// upright, and at no port.
func (b *bench) piece(sheet int, port string, level bool) fyne.Position {
	b.t.Helper()
	e := b.s.editors[sheet]
	net, _ := b.lineOf(sheet, port)
	longest, at := -1.0, fyne.Position{}
	for _, p := range e.sheet.Pieces(net) {
		a, c, _ := e.sheet.PieceEnds(p)
		mid := e.onSheet((a[0]+c[0])/2, (a[1]+c[1])/2)
		if l := (c[0]-a[0])*(c[0]-a[0]) + (c[1]-a[1])*(c[1]-a[1]); e.level(p) == level && l > longest && e.portAt(mid) == nil {
			longest, at = l, mid
		}
	}
	if longest < 0 {
		b.t.Fatalf("the line of %s has no such piece", port)
	}
	return at
}

// bends are those of a circuit in the file, as text.
func (b *bench) bends(at int) string {
	text := string(b.doc.File().Bytes())
	_, after, ok := strings.Cut(text, "bends:")
	if !ok {
		return ""
	}
	line, _, _ := strings.Cut(strings.TrimSpace(after), "\n")
	return line
}

// answer types a text into the small window that asks for it, and ends it.
func (b *bench) answer(text string) {
	b.t.Helper()
	switch f := b.win.Canvas().Focused().(type) {
	case *keyed:
		f.SetText(text)
		f.TypedKey(&fyne.KeyEvent{Name: fyne.KeyReturn})
	case *pages:
		f.SetText(text)
		f.TypedShortcut(&desktop.CustomShortcut{KeyName: fyne.KeyReturn, Modifier: fyne.KeyModifierControl})
	default:
		b.t.Fatalf("nothing asks for a text: %T", f)
	}
	b.pump()
}

// three is a drawing with a line of three ends.
func three(t *testing.T) *bench {
	b := drawing(t)
	e := b.s.editors[0]
	if _, err := b.doc.AddBlock(e.name, "relief", [2]float64{30, 30}); err != nil {
		t.Fatal(err)
	}
	for _, p := range []string{"RV1.P", "RV2.P"} {
		if err := b.doc.Connect(e.name, "P1.P", p); err != nil {
			t.Fatal(err)
		}
	}
	b.pump()
	b.s.fitAll()
	return b
}

// A line that is dropped on another line joins the two; what may not be is refused in
// words while the button is still down.
func TestLineOnLine(t *testing.T) {
	b := three(t)
	e := b.s.editors[0]
	var ids []string
	for _, at := range [][2]float64{{0, 60}, {40, 60}} {
		id, err := b.doc.AddBlock(e.name, "relief", at)
		if err != nil {
			t.Fatal(err)
		}
		ids = append(ids, id)
	}
	for _, c := range [][2]string{{ids[0] + ".P", ids[1] + ".P"}, {"M1.shaft", "P1.shaft"}} {
		if err := b.doc.Connect(e.name, c[0], c[1]); err != nil {
			t.Fatal(err)
		}
	}
	b.pump()
	b.s.fitAll()
	before := b.doc.File().Bytes()
	on := b.piece(0, "P1.P", true)
	e.MouseDown(event(on, desktop.MouseButtonPrimary, 0))
	b.dragOn(0, on, b.piece(0, "M1.shaft", true))
	if got := e.hover.text(); !strings.HasPrefix(got, "⚠") || e.wire.line.StrokeColor != b.Palette().Danger {
		t.Errorf("oil to a shaft: the label says %q", got)
	}
	b.picture("refused-join")
	e.DragEnd()
	b.pump()
	if !bytes.Equal(before, b.doc.File().Bytes()) {
		t.Error("a refused join changed the file")
	}
	b.drag(0, on, b.piece(0, ids[0]+".P", true), desktop.MouseButtonPrimary, 0)
	if got := b.line(0, "P1.P"); len(got) != 5 {
		t.Fatalf("P1.P stands on %v; said %q", got, b.said)
	}
	b.undone(before, "Join two lines")
}

// A drag on a selected line moves the piece sideways; S lays the line as before, to the
// byte; arrow keys do the same.
func TestBendALine(t *testing.T) {
	b := newBench(t, press, window)
	e := b.s.editors[0]
	before := b.doc.File().Bytes()
	on := b.piece(0, "P1.P", true)
	b.click(0, on, 0)
	b.drag(0, on, on.AddXY(0, float32(4*e.zoom)), desktop.MouseButtonPrimary, 0)
	if got := b.bends(0); !strings.HasPrefix(got, "- {port: P1.P, runs: [[") {
		t.Fatalf("bends are %q; said %q", got, b.said)
	}
	if !strings.HasPrefix(b.doc.UndoName(), "Bend line P1.P") {
		t.Errorf("undo is called %q", b.doc.UndoName())
	}
	if e.line < 0 || !e.sheet.Bent(e.line) || e.piece == nil {
		t.Fatalf("after the drag line %d, piece %v", e.line, e.piece)
	}
	first := b.bends(0)
	b.key(0, fyne.KeyDown)
	if b.bends(0) == first {
		t.Errorf("Down leaves the bend as it was; said %q", b.said[len(b.said)-1])
	}
	moved := 0
	for i, line := range strings.Split(string(b.doc.File().Bytes()), "\n") {
		if old := strings.Split(string(before), "\n"); i >= len(old) || old[i] != line {
			moved++
		}
	}
	b.typed(0, "s")
	if b.bends(0) != "" && b.bends(0) != "[]" || e.sheet.Bent(e.line) {
		t.Errorf("straightened, the bends are %q", b.bends(0))
	}
	for b.doc.UndoName() != "" {
		b.doc.Undo()
	}
	b.pump()
	if !bytes.Equal(before, b.doc.File().Bytes()) || moved == 0 {
		t.Errorf("undone, the file is not as it was; %d lines were changed", moved)
	}
}

// A note of several lines: added at the pointer, moved, changed, removed.
func TestNotes(t *testing.T) {
	b := newBench(t, press, window)
	e := b.s.editors[0]
	start := b.doc.File().Bytes()
	e.MouseMoved(event(fyne.NewPos(40, 40), 0, 0))
	b.typed(0, "n")
	b.answer("Label not legible:\nask the maintenance chief")
	notes := b.doc.File().Circuits[0].Notes
	if len(notes) != 1 || !e.notes[0] || !strings.Contains(notes[0].Text, ":\nask") {
		t.Fatalf("notes %v, selected %v; said %q", notes, e.notes, b.said)
	}
	b.picture("note")
	x, y, w, h, _ := e.sheet.MarkBox(figures.SheetMark{Note: 0, Group: -1})
	at := e.onSheet(x+w/2, y+h/2)
	b.drag(0, at, at.AddXY(float32(2*e.zoom), float32(e.zoom)), desktop.MouseButtonPrimary, 0)
	if got := b.doc.File().Circuits[0].Notes[0].At; got != [2]float64{notes[0].At[0] + 2, notes[0].At[1] + 1} || b.doc.UndoName() != "Move note" {
		t.Errorf("the note is at %v, was at %v; undo is called %q", got, notes[0].At, b.doc.UndoName())
	}
	b.key(0, fyne.KeyReturn)
	b.answer("Asked: 220 bar")
	if got := b.doc.File().Circuits[0].Notes[0].Text; got != "Asked: 220 bar" {
		t.Errorf("the note says %q", got)
	}
	b.key(0, fyne.KeyDelete)
	if got := b.doc.File().Circuits[0].Notes; len(got) != 0 {
		t.Errorf("after Del there are %d notes", len(got))
	}
	b.backTo(start)
}

// Ctrl+A selects all, Escape nothing; Tab reaches notes and groups behind the blocks.
func TestSelectAll(t *testing.T) {
	b := newBench(t, press, window)
	e := b.s.editors[0]
	if _, err := b.doc.AddNote(e.name, "a note", [2]float64{0, 0}); err != nil {
		t.Fatal(err)
	}
	if _, err := b.doc.AddGroup(e.name, "Drive", "M1", "P1"); err != nil {
		t.Fatal(err)
	}
	b.pump()
	b.s.active = 0
	b.s.Act(station.SelectAll)
	if len(e.selected) != len(e.drawn.Blocks) || len(e.notes) != 1 {
		t.Errorf("%d of %d blocks and %d notes are selected", len(e.selected), len(e.drawn.Blocks), len(e.notes))
	}
	b.key(0, fyne.KeyEscape)
	if !e.nothing() {
		t.Error("Escape leaves something selected")
	}
	b.win.Canvas().Focus(e)
	for range e.drawn.Blocks {
		b.key(0, fyne.KeyTab)
	}
	b.key(0, fyne.KeyTab)
	if !e.notes[0] {
		t.Errorf("Tab behind the blocks selects notes %v, group %d", e.notes, e.group)
	}
	b.key(0, fyne.KeyTab)
	if e.group != 0 {
		t.Errorf("the next Tab selects notes %v, group %d", e.notes, e.group)
	}
}

// What another program put into the clipboard is refused in words.
func TestForeignText(t *testing.T) {
	b := newBench(t, press, window)
	before := b.doc.File().Bytes()
	for _, text := range []string{"", "Dear sir,\n\tplease find", "format: barlitre/1\n", "{\"a\": [1, 2}"} {
		b.app.Clipboard().SetContent(text)
		b.s.Act(station.Paste)
		b.pump()
		if last := b.said[len(b.said)-1]; !strings.Contains(last, "clipboard holds no blocks") || !bytes.Equal(before, b.doc.File().Bytes()) {
			t.Errorf("%q: said %q", text, last)
		}
	}
}
