package sheet

import (
	"slices"
	"testing"

	"fyne.io/fyne/v2"

	"barlitre/audit"
	"barlitre/circuit/duty"
)

// A cylinder drawn where there is no axis yet offers a new one, and one made elsewhere is
// offered without the block being selected anew.
func TestNewAxisFromABlock(t *testing.T) {
	b := newBench(t, "", fyne.NewSize(1280, 800))
	if err := b.doc.AddCircuit("Drawn", audit.AsFound); err != nil {
		t.Fatal(err)
	}
	b.pump()
	circuit := b.doc.File().Circuits[0].Name
	id, err := b.doc.AddBlock(circuit, "cylinder", [2]float64{20, 20})
	if err != nil {
		t.Fatal(err)
	}
	b.pump()
	b.Select(0, id)
	b.pump()
	axis := func() *choiceRow { return b.row("axis").(*choiceRow) }
	row := axis()
	if want := "new axis: ram"; !slices.Contains(row.sel.Options, want) {
		t.Fatalf("offers %q, not %q", row.sel.Options, want)
	}
	if err := b.doc.AddAxis("lift", duty.Linear); err != nil {
		t.Fatal(err)
	}
	b.pump()
	if !slices.Contains(axis().sel.Options, "lift") {
		t.Errorf("offers %q, not the axis that was made meanwhile", axis().sel.Options)
	}
	axis().sel.SetSelected("new axis: ram")
	b.pump()
	f := b.doc.File()
	if got := f.Circuits[0].Block(id).Word("axis"); got != "ram" || len(f.Axes) != 2 || f.Axes[1] != (duty.Axis{Name: "ram", Kind: duty.Linear}) {
		t.Errorf("moves %q, axes %v", got, f.Axes)
	}
	if name, ok := b.doc.Undo(); !ok || name != "Make axis ram" || len(b.doc.File().Axes) != 1 {
		t.Errorf("undone %q, axes %v", name, b.doc.File().Axes)
	}
}
