package frame

import (
	"bytes"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"barlitre/app/station"
	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/audit/pdf"
)

// TestPickedProposal: the verdict, and what every station reads, are of the proposal that
// was picked; picking tells the stations; undo of the proposal falls back to the first.
func TestPickedProposal(t *testing.T) {
	b := newBench(t)
	b.Open("")
	b.solved()
	one := b.verdictText()
	if b.Beside() != "Pump-controlled" {
		t.Fatalf("beside stands %q", b.Beside())
	}
	err := b.doc.Edit("Add a worse proposal", func(f *audit.File) error {
		if err := f.CopyCircuit("As found", "Lower relief"); err != nil {
			return err
		}
		return f.Set("Lower relief/RV1.crack", "200 bar")
	})
	if err != nil {
		t.Fatal(err)
	}
	b.drain()
	b.solved()
	if got := b.verdictText(); got != one {
		t.Errorf("a second proposal changes the verdict on the first:\n%s\nwas\n%s", got, one)
	}
	told := len(b.pages[0].told)
	b.Pick("Lower relief")
	if len(b.pages[0].told) == told || !b.pages[0].told[told].Has(station.Solution) {
		t.Errorf("the station shown was told %v", b.pages[0].told[told:])
	}
	if got := b.verdictText(); got == one || b.ofSeveral() != "Lower relief" {
		t.Errorf("picked %q, the verdict is still\n%s", b.ofSeveral(), got)
	}
	if r := b.Report(); len(r.Circuits) != 2 || r.Circuits[1].Name != "Lower relief" || len(b.Solution().Comparisons) != 1 {
		t.Errorf("the report is of %d circuits", len(r.Circuits))
	}
	if all, _ := b.doc.Solution(); len(all.Circuits) != 3 || len(all.Comparisons) != 2 {
		t.Errorf("the document has %d circuits, %d comparisons", len(all.Circuits), len(all.Comparisons))
	}
	b.Select(1, "P1") // of the first proposal, which is not shown
	if b.Beside() != "Pump-controlled" || b.verdictText() != one {
		t.Errorf("a block of %s is selected, and beside stands %s", "Pump-controlled", b.Beside())
	}
	b.Pick("Lower relief")
	b.doc.Undo()
	b.drain()
	b.solved()
	if b.Beside() != "Pump-controlled" || b.verdictText() != one {
		t.Errorf("undone, beside stands %s, and the verdict is\n%s\nwas\n%s", b.Beside(), b.verdictText(), one)
	}
}

// TestPrintedSheets: what is printed is the two circuits shown, at the clock, by the signs
// that are on, on the paper asked for.
func TestPrintedSheets(t *testing.T) {
	dir := t.TempDir()
	t.Setenv(saveDirVariable, dir)
	b := newBench(t)
	b.Open("")
	b.solved()
	b.SetClock(23)
	b.view = station.View{Cycle: true, Hide: figures.Chevrons}
	v := b.seen(pdf.A3)
	if v.At != 23 || !v.Cycle || v.Hide != figures.Chevrons || v.Paper != pdf.A3 || strings.Join(v.Circuits, "|") != "As found|Pump-controlled" {
		t.Errorf("seen is %+v", v)
	}
	b.printSheets(pdf.A3)
	path := filepath.Join(dir, "baling-press-sheets.pdf")
	b.until("the sheets are saved", func() bool { return strings.HasPrefix(b.status.Text, "Saved the sheets") })
	if data, err := os.ReadFile(path); err != nil || !strings.HasPrefix(string(data), "%PDF-") {
		t.Errorf("%s: %v", path, err)
	}
	t.Setenv(saveDirVariable, filepath.Join(dir, "missing"))
	b.printSheets(pdf.A4)
	b.until("the failure is said", func() bool { return strings.Contains(b.status.Text, "nothing was written") })
}

// TestSheetsPrintedAtOnce: sheets that are printed right after an edit wait for its results.
func TestSheetsPrintedAtOnce(t *testing.T) {
	dir := t.TempDir()
	t.Setenv(saveDirVariable, dir)
	today = func() time.Time { return time.Date(2024, 5, 6, 12, 0, 0, 0, time.UTC) }
	t.Cleanup(func() { today = time.Now })
	b := newBench(t)
	b.Open("")
	b.solved()
	sheets := func() []byte {
		b.status.SetText("")
		b.printSheets(pdf.A4)
		b.until("the sheets are saved", func() bool { return strings.HasPrefix(b.status.Text, "Saved the sheets: ") })
		data, err := os.ReadFile(filepath.Join(dir, "baling-press-sheets.pdf"))
		if err != nil {
			t.Fatal(err)
		}
		return data
	}
	before := sheets()
	if err := b.doc.Set("As found/RV1.crack", "180 bar"); err != nil {
		t.Fatal(err)
	}
	atOnce := sheets()
	b.solved()
	if later := sheets(); bytes.Equal(before, later) || !bytes.Equal(atOnce, later) {
		t.Errorf("what was printed at once is not the audit as it stands (that of before: %v)", bytes.Equal(atOnce, before))
	}
}

// TestSpeedOfTheClock: as fitted a cycle takes 8 s to a minute; a factor is that.
func TestSpeedOfTheClock(t *testing.T) {
	b := newBench(t)
	b.Open("") // a cycle of 40 s
	b.solved()
	if r := b.player.rate(); r != 1 {
		t.Errorf("a cycle of 40 s runs %g times as fast as time", r)
	}
	for _, text := range b.strip.speed.Options {
		b.strip.speed.SetSelected(text)
		if r, want := b.player.rate(), b.player.factor; text != speedText(0) && (r != want || !strings.HasPrefix(text, strings.TrimSuffix(speedText(want), "\u202f×"))) {
			t.Errorf("%s runs at %g", text, r)
		}
	}
	if b.strip.speed.Options[2] != "0.25\u202f×" || b.player.rate() != 100 {
		t.Errorf("speeds %v, the last is %g", b.strip.speed.Options, b.player.rate())
	}
}

// TestTwoMachinesAsFound: where nothing is proposed, the verdict is of the first circuit and says so.
func TestTwoMachinesAsFound(t *testing.T) {
	b := newBench(t)
	b.Open("")
	b.solved()
	if b.ofSeveral() != "" {
		t.Errorf("one proposal, and the verdict is named %q", b.ofSeveral())
	}
	if err := b.doc.Edit("Two machines", func(f *audit.File) error {
		if err := f.AddCircuit("Other", audit.AsFound); err != nil {
			return err
		}
		return f.DeleteCircuit("Pump-controlled")
	}); err != nil {
		t.Fatal(err)
	}
	b.drain()
	b.solved()
	r := b.Report()
	if len(r.Decisions) != 0 || len(r.Circuits) != 2 {
		t.Fatalf("%d decisions on %d circuits", len(r.Decisions), len(r.Circuits))
	}
	drawn := ""
	for _, x := range r.Circuits[0].Year {
		if x.Name == "drawn a year" {
			drawn = x.Text
		}
	}
	if got := b.verdictText(); b.ofSeveral() != r.Circuits[0].Name || drawn == "" || !strings.Contains(got, drawn) {
		t.Errorf("the verdict of %q, which draws %s, is\n%s", b.ofSeveral(), drawn, got)
	}
}
