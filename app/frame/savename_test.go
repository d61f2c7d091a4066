package frame

import (
	"errors"
	"io"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"fyne.io/fyne/v2/storage"
	"fyne.io/fyne/v2/test"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/station"
	"barlitre/audit/pdf"
)

// press presses a button of what lies on top of the window, if it is there.
func (b *bench) press(text string) bool {
	b.t.Helper()
	top := b.win.Canvas().Overlays().Top()
	if top == nil {
		return false
	}
	for _, o := range test.LaidOutObjects(top) {
		switch o := o.(type) {
		case *boxButton:
			if o.Text == text {
				test.Tap(o)
				return true
			}
		case *widget.Button:
			if o.Text == text {
				test.Tap(o)
				return true
			}
		}
	}
	return false
}

// typeName puts a name into the dialog for saving.
func (b *bench) typeName(name string) {
	b.t.Helper()
	for _, o := range test.LaidOutObjects(b.win.Canvas().Overlays().Top()) {
		if e, ok := o.(*widget.Entry); ok {
			e.SetText(name)
			return
		}
	}
	b.t.Fatal("no field for a name")
}

// holds is what a file holds.
func (b *bench) holds(path string) string {
	b.t.Helper()
	data, err := os.ReadFile(path)
	if err != nil {
		b.t.Fatal(err)
	}
	return string(data)
}

// A file that is chosen in the dialog for saving, and agreed to be replaced, is as it was until
// what takes its place is whole: where writing fails, and where it is cancelled.
func TestChosenFileIsKept(t *testing.T) {
	t.Setenv(saveDirVariable, "")
	b := newBench(t)
	b.Open("")
	b.solved()
	b.pickedIn = t.TempDir()
	path := filepath.Join(b.pickedIn, "baling-press-sheets.pdf")
	if err := os.WriteFile(path, []byte("of last year"), 0o644); err != nil {
		t.Fatal(err)
	}
	choose := func() {
		if !b.press("Save") || !b.press("Yes") {
			t.Fatal("the dialog does not ask before it replaces a file")
		}
	}
	asked := false
	b.PickPlace("Save", filepath.Base(path), func(got string) {
		asked = true
		if got != path || b.holds(path) != "of last year" {
			t.Errorf("%s, and %s holds %q", got, path, b.holds(path))
		}
		full := errors.New("no room left")
		if err := station.WriteWhole(got, func(w io.Writer) error { return full }); !errors.Is(err, full) {
			t.Error(err)
		}
	})
	choose()
	if got := b.holds(path); !asked || got != "of last year" {
		t.Errorf("after a failure it holds %q", got)
	}
	shown := shownFrom
	t.Cleanup(func() { shownFrom = shown })
	waitsFor, shownFrom = 0, 0
	b.printSheets(pdf.A4)
	if err := b.doc.Set("As found/RV1.crack", "180 bar"); err != nil {
		t.Fatal(err)
	}
	choose()
	b.working.stop()
	b.until("over", func() bool { return b.working == nil })
	if got := b.holds(path); got != "of last year" || !strings.HasPrefix(b.status.Text, "Cancelled") {
		t.Errorf("cancelled, it holds %q, and the status says %q", got, b.status.Text)
	}
	b.printSheets(pdf.A4)
	choose()
	b.until("over", func() bool { return b.working == nil })
	if got := b.holds(path); !strings.HasPrefix(got, "%PDF-") {
		t.Errorf("saved, it holds %q, and the status says %q", got[:min(len(got), 20)], b.status.Text)
	}
	if left, _ := os.ReadDir(b.pickedIn); len(left) != 1 {
		t.Errorf("the folder holds %v", left)
	}
}

// A dialog that was cancelled leaves no file; a name without an ending gets it, and what is there
// under that is asked about.
func TestNameWithoutEnding(t *testing.T) {
	t.Setenv(saveDirVariable, "")
	b := newBench(t)
	b.pickedIn = t.TempDir()
	path := filepath.Join(b.pickedIn, "press.pdf")
	var got string
	pick := func(name string) {
		got = ""
		b.PickPlace("Save", "other.pdf", func(path string) { got = path })
		b.typeName(name)
	}
	if pick("press"); !b.press("Cancel") || got != "" {
		t.Errorf("cancelled, %q was chosen", got)
	}
	if pick("press"); !b.press("Save") || got != path {
		t.Errorf("%q was chosen, not %q", got, path)
	}
	if left, _ := os.ReadDir(b.pickedIn); len(left) != 0 {
		t.Errorf("choosing made %v", left)
	}
	if err := os.WriteFile(path, []byte("old"), 0o644); err != nil {
		t.Fatal(err)
	}
	if pick("press"); !b.press("Save") || got != "" || !b.press("Keep") || got != "" {
		t.Errorf("%q was chosen without asking", got)
	}
	if pick("press"); !b.press("Save") || !b.press("Replace") || got != path {
		t.Errorf("%q was chosen, not %q", got, path)
	}
}

// What else writes by way of the toolkit still does.
func TestLateWriter(t *testing.T) {
	newBench(t)
	keepFiles()
	path := filepath.Join(t.TempDir(), "a")
	if err := os.WriteFile(path, []byte("old and long"), 0o644); err != nil {
		t.Fatal(err)
	}
	w, err := storage.Writer(storage.NewFileURI(path))
	if err != nil {
		t.Fatal(err)
	}
	if _, err := io.WriteString(w, "ne"); err != nil {
		t.Fatal(err)
	}
	if _, err := io.WriteString(w, "w"); err != nil {
		t.Fatal(err)
	}
	if err := w.Close(); err != nil {
		t.Fatal(err)
	}
	if data, _ := os.ReadFile(path); string(data) != "new" {
		t.Errorf("it holds %q", data)
	}
}
