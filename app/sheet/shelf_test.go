package sheet

import (
	"strings"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/test"

	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/circuit"
)

// typeShelf opens the shelf at a place of a sheet and types into it.
func (b *bench) typeShelf(sheet int, at fyne.Position, text string) *keyed {
	b.t.Helper()
	e := b.s.editors[sheet]
	e.MouseMoved(event(at, 0, 0))
	e.focus()
	e.TypedRune('/')
	search, ok := b.win.Canvas().Focused().(*keyed)
	if !ok {
		b.t.Fatalf("/ gives the keys to %T", b.win.Canvas().Focused())
	}
	test.Type(search, text)
	return search
}

func enter(o fyne.Focusable, keys ...fyne.KeyName) {
	for _, k := range keys {
		o.TypedKey(&fyne.KeyEvent{Name: k})
	}
}

func TestShelfAddsAtThePointer(t *testing.T) {
	b := newBench(t, press, window)
	e := b.s.editors[0]
	before := b.doc.File().Bytes()
	at := fyne.NewPos(40, 40)
	x, y := e.at(at)
	enter(b.typeShelf(0, at, "reli"), fyne.KeyReturn)
	b.pump()
	id := b.block
	block := b.doc.File().Circuits[0].Block(id)
	if block == nil || block.Kind != "relief" || b.circuit != 0 || len(e.ids()) != 1 {
		t.Fatalf("selected is %d %q %v; said %q", b.circuit, id, block, b.said)
	}
	if block.At[0] != float64(int(block.At[0])) || !close(block.At[0], x, 20) || !close(block.At[1], y, 20) {
		t.Errorf("it stands at %v, the pointer was at %g, %g", block.At, x, y)
	}
	for _, o := range e.boxes {
		for _, n := range e.boxes {
			if n.id == id && o.id != id && n.x < o.x+o.w && o.x < n.x+n.w && n.y < o.y+o.h && o.y < n.y+n.h {
				t.Errorf("%s stands on %s", id, o.id)
			}
		}
	}
	if b.win.Canvas().Focused() != fyne.Focusable(e) {
		t.Error("the sheet does not get the keys back")
	}
	b.undone(before, "Add relief valve "+id)
}

func TestShelfKeysAndClicks(t *testing.T) {
	b := newBench(t, press, window)
	before := len(b.doc.File().Circuits[0].Blocks)
	search := b.typeShelf(0, fyne.NewPos(40, 40), "no such thing")
	enter(search, fyne.KeyReturn, fyne.KeyEscape)
	if _, open := b.win.Canvas().Focused().(*keyed); open || len(b.doc.File().Circuits[0].Blocks) != before {
		t.Errorf("Escape leaves the shelf open: %v, or a block came", open)
	}
	search = b.typeShelf(0, fyne.NewPos(40, 40), "")
	enter(search, fyne.KeyDown, fyne.KeyUp, fyne.KeyDown, fyne.KeyReturn)
	b.pump()
	kinds := circuit.Catalog()
	if got := b.doc.File().Circuits[0].Block(b.block); got == nil || got.Kind != kinds[1].Name && got.Kind == kinds[0].Name {
		t.Errorf("the second row adds %v", got)
	}
	b.typeShelf(0, fyne.NewPos(40, 40), "cool")
	list := widgets.Named("shelf.list").(*widgets.Figure)
	list.Tapped(widgets.Part{Name: "cooler"}, 0, 0)
	b.pump()
	if got := b.doc.File().Circuits[0].Block(b.block); got == nil || got.Kind != "cooler" {
		t.Errorf("a click on the cooler adds %v", got)
	}
}

// Each kind is found by its own title, first.
func TestShelfFindsEveryKind(t *testing.T) {
	b := newBench(t, press, window)
	h := &shelf{e: b.s.editors[0]}
	h.search, h.list = newKeyed(h.key), widgets.NewFigure(fyne.NewSize(1, 1), h.draw)
	h.scroll = b.s.panel.scroll
	if h.filter(); len(h.kinds) != len(circuit.Catalog()) {
		t.Errorf("nothing typed lists %d of %d kinds", len(h.kinds), len(circuit.Catalog()))
	}
	for _, k := range circuit.Catalog() {
		h.search.Text = strings.ToUpper(k.Title)
		if h.filter(); len(h.kinds) == 0 || !strings.HasPrefix(h.kinds[0].Title, k.Title) {
			t.Errorf("%q finds %d kinds, not itself first", k.Title, len(h.kinds))
		}
	}
}

// What a trainee types first finds the common kind, not one that only begins with the word.
func TestShelfPutsTheCommonKindFirst(t *testing.T) {
	b := newBench(t, press, window)
	h := &shelf{e: b.s.editors[0]}
	h.search, h.list = newKeyed(h.key), widgets.NewFigure(fyne.NewSize(1, 1), h.draw)
	h.scroll = b.s.panel.scroll
	for _, c := range []struct{ typed, kind string }{{"cylinder", "cylinder"}, {"cyl", "cylinder"}, {"motor", "motor"},
		{"valve", "valve"}, {"pump", "pump"}, {"relief", "relief"}, {"check", "check"}, {"electric", "electric_motor"}, {"tank", "tank"}} {
		h.search.Text = c.typed
		if h.filter(); len(h.kinds) == 0 || h.kinds[0].Name != c.kind {
			t.Errorf("%q finds first %q, want %q", c.typed, h.kinds[0].Name, c.kind)
		}
	}
}

func TestFirstBlockOfAnEmptyAudit(t *testing.T) {
	b := newBench(t, "", window)
	if err := b.doc.OpenEmpty(); err != nil {
		t.Fatal(err)
	}
	b.pump()
	before := b.doc.File().Bytes()
	b.picture("empty")
	enter(b.typeShelf(0, fyne.NewPos(200, 200), "pump"), fyne.KeyReturn)
	b.pump()
	f := b.doc.File()
	if len(f.Circuits) != 1 || f.Circuits[0].Role != audit.AsFound || len(f.Circuits[0].Blocks) != 1 || b.block != "P1" {
		t.Fatalf("%d circuits, %q selected, said %q", len(f.Circuits), b.block, b.said)
	}
	b.picture("first-block")
	if !b.s.editors[1].copied.Visible() {
		t.Fatal("the second sheet does not offer a copy")
	}
	one := f.Bytes()
	b.s.editors[1].copied.OnTapped()
	b.pump()
	if f = b.doc.File(); len(f.Circuits) != 2 || f.Circuits[1].Role != audit.Proposal || f.Circuits[1].Block("P1") == nil || b.s.editors[1].copied.Visible() {
		t.Fatalf("%d circuits; said %q", len(f.Circuits), b.said)
	}
	b.undone(one, "Copy As found to Proposal")
	b.undone(before, "Add pump")
}
