package sheet

import (
	"slices"
	"strings"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/test"

	"barlitre/app/widgets"
)

// press taps a named button.
func (b *bench) press(name string) {
	b.t.Helper()
	button, ok := widgets.Named(name).(*widgets.Button)
	if !ok {
		b.t.Fatalf("no button %s", name)
	}
	test.Tap(button)
	b.pump()
}

// names lists the circuits of the file.
func (b *bench) names() []string {
	var out []string
	for _, c := range b.doc.File().Circuits {
		out = append(out, c.Name)
	}
	return out
}

// circuits opens the list of what is done with whole circuits, and takes one.
func (b *bench) circuits(what string) {
	b.t.Helper()
	b.press("sheet.circuits")
	b.press("circuits." + what)
}

// TestSeveralProposals makes, picks, renames, swaps and deletes proposals by their
// buttons; the second sheet follows, and undo brings all back, byte for byte.
func TestSeveralProposals(t *testing.T) {
	b := newBench(t, press, window)
	before := string(b.doc.File().Bytes())
	second := func() string { return b.s.editors[1].name }
	if b.s.cards[1].picker.content.Visible() {
		t.Error("a picker for one proposal")
	}
	b.circuits("duplicate")
	if got := b.names(); !slices.Equal(got, []string{"As found", "Pump-controlled", "Pump-controlled 2"}) || second() != "Pump-controlled 2" {
		t.Fatalf("circuits %v, second sheet %q", got, second())
	}
	if p := b.s.cards[1].picker; !p.content.Visible() || p.sel.Selected != "Pump-controlled 2" {
		t.Errorf("picker shows %q", p.sel.Selected)
	}
	b.circuits("copy")
	b.circuits("empty")
	if second() != "Proposal 2" || len(b.s.editors[1].drawn.Blocks) != 0 {
		t.Errorf("second sheet %q", second())
	}
	b.s.cards[1].picker.sel.SetSelected("Proposal")
	if second() != "Proposal" || len(b.s.editors[1].drawn.Blocks) != len(b.s.editors[0].drawn.Blocks) {
		t.Errorf("picked Proposal, second sheet %q", second())
	}
	b.circuits("rename")
	field := widgets.Named("sheet.rename").(*keyed)
	field.SetText("Load sensing")
	field.TypedKey(&fyne.KeyEvent{Name: fyne.KeyReturn})
	b.pump()
	if second() != "Load sensing" {
		t.Errorf("renamed, second sheet %q", second())
	}
	b.circuits("swap")
	if b.s.editors[0].name != "Load sensing" || second() != "As found" {
		t.Errorf("swapped: %q and %q", b.s.editors[0].name, second())
	}
	b.circuits("delete")
	if got := b.names(); slices.Contains(got, "As found") || second() == "As found" {
		t.Errorf("deleted, circuits %v, second sheet %q", got, second())
	}
	for range 6 {
		b.doc.Undo()
		b.pump()
	}
	if string(b.doc.File().Bytes()) != before {
		t.Error("undo does not bring the file back")
	}
	b.solved()
	if second() != "Pump-controlled" || strings.Contains(b.said[len(b.said)-1], "⚠") {
		t.Errorf("at the end %q, said %q", second(), b.said[len(b.said)-1])
	}
}
