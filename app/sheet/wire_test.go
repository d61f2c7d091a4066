package sheet

import (
	"bytes"
	"fmt"
	"slices"
	"strings"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"
)

// port is where a port is on a sheet.
func (b *bench) port(sheet int, name string) fyne.Position {
	b.t.Helper()
	e := b.s.editors[sheet]
	for _, p := range e.ports {
		if p.String() == name {
			return e.onScreen(p)
		}
	}
	b.t.Fatalf("no port %s on sheet %d", name, sheet)
	return fyne.Position{}
}

// line returns the ports of the line that a port stands on.
func (b *bench) line(at int, name string) []string {
	for _, l := range b.doc.File().Circuits[at].Lines {
		var out []string
		for _, p := range l.Ports {
			out = append(out, p.String())
		}
		if slices.Contains(out, name) {
			return out
		}
	}
	return nil
}

// drawing is an audit with a pump, a relief valve and a motor drawn on it, far apart.
func drawing(t *testing.T) *bench {
	b := newBench(t, "", window)
	if err := b.doc.OpenEmpty(); err != nil {
		t.Fatal(err)
	}
	b.pump()
	e := b.s.editors[0]
	e.add("pump", [2]float64{0, 0})
	b.pump()
	for kind, at := range map[string][2]float64{"relief": {30, 0}, "electric_motor": {-30, 0}} {
		if _, err := b.doc.AddBlock(e.name, kind, at); err != nil {
			t.Fatal(err)
		}
	}
	b.pump()
	b.s.fitAll()
	return b
}

func TestDragConnectsPorts(t *testing.T) {
	b := drawing(t)
	before := b.doc.File().Bytes()
	from, to := b.port(0, "P1.P"), b.port(0, "RV1.P")
	b.s.editors[0].MouseMoved(event(from, 0, 0))
	if e := b.s.editors[0]; !strings.HasPrefix(e.hover.text(), "P1.P") || !e.wire.rings[0].Visible() {
		t.Errorf("over the port the label says %q, ring %v", e.hover.text(), e.wire.rings[0].Visible())
	}
	b.drag(0, from, to.AddXY(2, -1), desktop.MouseButtonPrimary, 0)
	if got := b.line(0, "P1.P"); !slices.Equal(got, []string{"P1.P", "RV1.P"}) {
		t.Fatalf("P1.P stands on %v; said %q", got, b.said)
	}
	if e := b.s.editors[0]; e.wire.line.Visible() || e.sheet.Nets() != 1 {
		t.Errorf("the rubber line stays: %v; %d lines are drawn", e.wire.line.Visible(), e.sheet.Nets())
	}
	b.undone(before, "Connect P1.P and RV1.P")
}

// The gestures work in every size: a port is caught anywhere in its ring.
func TestDragConnectsAtAnyScale(t *testing.T) {
	for _, scale := range []float32{1, 1.5, 2} {
		b := drawing(t)
		b.theme(scale > 1, scale)
		b.s.fitAll()
		e := b.s.editors[0]
		e.zoomAt(0, 0, 7/e.zoom) // small, so that the ring is large to the drawing
		near := float32(portRing-2) * scale
		from, to := b.port(0, "P1.P").AddXY(-near, 0), b.port(0, "RV1.P").AddXY(0, -near)
		e.MouseDown(event(from, desktop.MouseButtonPrimary, 0))
		b.dragOn(0, from, to)
		b.picture(fmt.Sprintf("wire-%.0f", 100*scale))
		if w := &e.wire; !w.line.Visible() || !w.rings[1].Visible() || w.line.StrokeColor != b.Palette().Gain {
			t.Errorf("scale %g: line %v, ring %v, %v", scale, w.line.Visible(), w.rings[1].Visible(), w.line.StrokeColor)
		}
		e.DragEnd()
		b.pump()
		if got := b.line(0, "P1.P"); !slices.Equal(got, []string{"P1.P", "RV1.P"}) {
			t.Errorf("scale %g: P1.P stands on %v; said %q", scale, got, b.said)
		}
	}
}

func TestDragConnectsToALine(t *testing.T) {
	b := drawing(t)
	e := b.s.editors[0]
	if err := b.doc.Connect(e.name, "P1.P", "RV1.P"); err != nil {
		t.Fatal(err)
	}
	if _, err := b.doc.AddBlock(e.name, "relief", [2]float64{30, 30}); err != nil {
		t.Fatal(err)
	}
	b.pump()
	b.s.fitAll()
	_, on := b.lineOf(0, "P1.P")
	if e.portAt(on) != nil {
		t.Fatal("the line can be hit at its port only")
	}
	b.drag(0, b.port(0, "RV2.P"), on, desktop.MouseButtonPrimary, 0)
	if got := b.line(0, "RV2.P"); len(got) != 3 || !slices.Contains(got, "P1.P") {
		t.Errorf("RV2.P stands on %v; said %q", got, b.said)
	}
}

func TestRefusedConnections(t *testing.T) {
	b := drawing(t)
	before := b.doc.File().Bytes()
	b.drag(0, b.port(0, "P1.P"), b.port(0, "M1.E"), desktop.MouseButtonPrimary, 0)
	if last := b.said[len(b.said)-1]; !strings.HasPrefix(last, "⚠") || !bytes.Equal(before, b.doc.File().Bytes()) {
		t.Errorf("oil to electricity says %q; file changed %v", last, !bytes.Equal(before, b.doc.File().Bytes()))
	}
	if len(b.failed) != 0 {
		t.Errorf("a refusal opens a dialog: %v", b.failed)
	}
	e := b.s.editors[0]
	w, h := e.room()
	b.drag(0, b.port(0, "P1.P"), fyne.NewPos(float32(w)-2, float32(h)-2), desktop.MouseButtonPrimary, 0)
	if last := b.said[len(b.said)-1]; !strings.Contains(last, "Nothing connected") || !bytes.Equal(before, b.doc.File().Bytes()) {
		t.Errorf("a release on the ground says %q", last)
	}
}

func TestEscapeDropsTheLine(t *testing.T) {
	b := drawing(t)
	before := b.doc.Revision()
	e := b.s.editors[0]
	from, to := b.port(0, "P1.P"), b.port(0, "RV1.P")
	e.MouseDown(event(from, desktop.MouseButtonPrimary, 0))
	b.dragOn(0, from, to)
	if !e.wire.line.Visible() || !e.wire.rings[1].Visible() {
		t.Error("no rubber line to the port under the pointer")
	}
	b.picture("wiring")
	b.key(0, fyne.KeyEscape)
	b.dragOn(0, to, to.AddXY(4, 0))
	e.DragEnd()
	b.pump()
	if b.doc.Revision() != before || e.wire.line.Visible() {
		t.Errorf("revision %d was %d; rubber line %v", b.doc.Revision(), before, e.wire.line.Visible())
	}
}

// Each port of each block can be pressed, and the middle of each block still drags it.
func TestPortsCanBePressed(t *testing.T) {
	b := newBench(t, press, window)
	for sheet, e := range b.s.editors {
		for _, p := range e.ports {
			if got := e.portAt(e.onScreen(p)); got == nil || got.Block != p.Block && e.drawn.Block(p.Block).Kind != "junction" && e.drawn.Block(got.Block).Kind != "junction" {
				t.Errorf("sheet %d: at %s the port under the pointer is %v", sheet, p, got)
			}
		}
		for i := range e.drawn.Blocks {
			block := &e.drawn.Blocks[i]
			if block.Kind == "junction" {
				continue
			}
			if got := e.portAt(b.middle(sheet, block.ID)); got != nil {
				t.Errorf("sheet %d: a press on the middle of %s begins a line at %s", sheet, block.ID, got)
			}
		}
	}
}
