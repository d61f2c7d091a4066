package sheet

import (
	"bytes"
	"strings"
	"testing"

	"fyne.io/fyne/v2"
)

func TestRenameByF2(t *testing.T) {
	b := newBench(t, press, window)
	before := b.doc.File().Bytes()
	b.click(0, b.middle(0, "RV1"), 0)
	b.key(0, fyne.KeyF2)
	field, ok := b.win.Canvas().Focused().(*keyed)
	if !ok || field.Text != "RV1" {
		t.Fatalf("F2 gives the keys to %T", b.win.Canvas().Focused())
	}
	field.SetText("V1") // taken
	enter(field, fyne.KeyReturn)
	if last := b.said[len(b.said)-1]; !strings.HasPrefix(last, "⚠") || !bytes.Equal(before, b.doc.File().Bytes()) {
		t.Errorf("a name that is taken says %q", last)
	}
	if b.win.Canvas().Focused() != fyne.Focusable(field) {
		t.Error("a refused name closes the field")
	}
	field.SetText("RV_main")
	enter(field, fyne.KeyReturn)
	b.pump()
	if c := b.doc.File().Circuits[0]; c.Block("RV1") != nil || c.Block("RV_main") == nil || b.block != "RV_main" {
		t.Errorf("%q is selected; said %q", b.block, b.said)
	}
	b.undone(before, "Rename RV1")
	b.click(0, b.middle(0, "RV1"), 0)
	b.key(0, fyne.KeyF2)
	enter(b.win.Canvas().Focused(), fyne.KeyEscape)
	if _, open := b.win.Canvas().Focused().(*keyed); open || !bytes.Equal(before, b.doc.File().Bytes()) {
		t.Error("Escape leaves the field open, or renames")
	}
}
