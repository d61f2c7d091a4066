package sheet

import (
	"bytes"
	"strings"
	"testing"

	"fyne.io/fyne/v2"

	"barlitre/app/station"
	"barlitre/circuit"
)

// undone checks that one undo brings the file back.
func (b *bench) undone(before []byte, name string) {
	b.t.Helper()
	if got, ok := b.doc.Undo(); !ok || !strings.Contains(got, name) {
		b.t.Errorf("undo takes back %q, expected %s", got, name)
	}
	b.pump()
	if !bytes.Equal(before, b.doc.File().Bytes()) {
		b.t.Error("one undo does not bring the file back")
	}
}

func TestDeleteHealsTheLine(t *testing.T) {
	b := newBench(t, press, window)
	before := b.doc.File().Bytes()
	lines := len(b.doc.File().Circuits[0].Lines)
	b.click(0, b.middle(0, "F1"), 0)
	b.key(0, fyne.KeyDelete)
	c := b.doc.File().Circuits[0]
	if c.Block("F1") != nil || len(c.Lines) != lines-1 {
		t.Errorf("F1 is there: %v; %d lines, were %d", c.Block("F1") != nil, len(c.Lines), lines)
	}
	if b.block != "" || len(b.s.editors[0].selected) != 0 {
		t.Errorf("%q is still selected", b.block)
	}
	b.undone(before, "Delete F1")
}

func TestTurnByKeys(t *testing.T) {
	b := newBench(t, press, window)
	before := b.doc.File().Bytes()
	b.click(0, b.middle(0, "RV1"), 0)
	was := *b.doc.File().Circuits[0].Block("RV1")
	b.s.editors[0].TypedRune('r')
	b.pump()
	if got := b.doc.File().Circuits[0].Block("RV1"); got.Turn != (was.Turn+1)%4 || b.block != "RV1" {
		t.Errorf("turn %d, was %d; %q is selected", got.Turn, was.Turn, b.block)
	}
	b.undone(before, "Rotate RV1")
	b.s.editors[0].TypedRune('M')
	b.pump()
	if got := b.doc.File().Circuits[0].Block("RV1"); got == nil || got.Mirror == was.Mirror {
		t.Error("M does not mirror")
	}
	b.undone(before, "Mirror RV1")
}

func TestDuplicateSelectsTheCopies(t *testing.T) {
	b := newBench(t, press, window)
	before := b.doc.File().Bytes()
	blocks := len(b.doc.File().Circuits[0].Blocks)
	b.click(0, b.middle(0, "RV1"), 0)
	b.click(0, b.middle(0, "V1"), fyne.KeyModifierShift)
	b.s.Act(station.Duplicate)
	b.pump()
	e := b.s.editors[0]
	if got := len(b.doc.File().Circuits[0].Blocks); got != blocks+2 {
		t.Fatalf("%d blocks, were %d", got, blocks)
	}
	if len(e.selected) != 2 || e.selected["RV1"] || e.selected["V1"] {
		t.Errorf("selected are %v, expected the copies", e.ids())
	}
	b.undone(before, "Duplicate")
}

// A block goes from one sheet to the other by the clipboard, to where the pointer is.
func TestCopyToTheOtherSheet(t *testing.T) {
	b := newBench(t, press, window)
	b.click(0, b.middle(0, "F1"), 0)
	b.s.Act(station.Copy)
	before := b.doc.File().Bytes()
	blocks := len(b.doc.File().Circuits[1].Blocks)
	b.click(1, fyne.NewPos(5, 5), 0)
	e := b.s.editors[1]
	x, y := e.at(fyne.NewPos(5, 5))
	b.s.Act(station.Paste)
	b.pump()
	c := b.doc.File().Circuits[1]
	if len(c.Blocks) != blocks+1 || len(e.ids()) != 1 {
		t.Fatalf("%d blocks, were %d; selected %v; said %q", len(c.Blocks), blocks, e.ids(), b.said)
	}
	if at := c.Block(e.ids()[0]).At; c.Block(e.ids()[0]).Kind != "filter" || !close(at[0], x, 0.51) || !close(at[1], y, 0.51) {
		t.Errorf("%v at %v, the pointer is at %g, %g", e.ids(), at, x, y)
	}
	b.undone(before, "Paste")
	b.app.Clipboard().SetContent("300 bar")
	b.s.Act(station.Paste)
	if last := b.said[len(b.said)-1]; !strings.Contains(last, "no blocks") || !bytes.Equal(before, b.doc.File().Bytes()) {
		t.Errorf("pasting text that is no block says %q", last)
	}
}

func TestCutAndPaste(t *testing.T) {
	b := newBench(t, press, window)
	b.click(0, b.middle(0, "F1"), 0)
	b.s.Act(station.Cut)
	b.pump()
	if b.doc.File().Circuits[0].Block("F1") != nil {
		t.Fatal("cut leaves F1")
	}
	b.s.Act(station.Paste)
	b.pump()
	if b.doc.File().Circuits[0].Block("F1") == nil || b.block != "F1" {
		t.Errorf("pasting brings no F1 back; %q is selected", b.block)
	}
}

// lineOf returns a drawn line that a port stands on, and a point of the window that hits it.
func (b *bench) lineOf(sheet int, port string) (net int, at fyne.Position) {
	b.t.Helper()
	e := b.s.editors[sheet]
	w, h := e.room()
	for y := 1.0; y < h; y += 2 {
		for x := 1.0; x < w; x += 2 {
			p := fyne.NewPos(float32(x), float32(y))
			block, n, ok := e.hit(p)
			if !ok || block != "" {
				continue
			}
			for _, q := range e.sheet.Net(n) {
				if q.String() == port {
					return n, p
				}
			}
		}
	}
	b.t.Fatalf("no line at %s can be hit", port)
	return -1, fyne.Position{}
}

func TestDeleteALine(t *testing.T) {
	b := newBench(t, press, window)
	e := b.s.editors[0]
	before := b.doc.File().Bytes()
	net, at := b.lineOf(0, "C1.A")
	b.click(0, at, 0)
	if e.line != net || !strings.Contains(e.DumpText(), "C1.A") {
		t.Fatalf("a click selects line %d, expected %d; %q", e.line, net, e.DumpText())
	}
	blocks := len(e.drawn.Blocks)
	b.key(0, fyne.KeyDelete)
	c := b.doc.File().Circuits[0]
	for _, l := range c.Lines {
		for _, p := range l.Ports {
			if p == (circuit.PortRef{Block: "C1", Port: "A"}) {
				t.Errorf("C1.A still stands on %v", l.Ports)
			}
		}
	}
	if e.line != -1 || len(c.Blocks) > blocks {
		t.Errorf("line %d is selected", e.line)
	}
	b.undone(before, "Delete line")
}
