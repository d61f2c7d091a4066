package frame

import (
	"path/filepath"
	"strings"
	"testing"

	"fyne.io/fyne/v2"

	"barlitre/app/duty"
	"barlitre/app/energy"
	"barlitre/app/heat"
	"barlitre/app/payback"
	"barlitre/app/report"
	"barlitre/app/sheet"
)

// Every faulty file either opens with its findings, and every station can be shown, or is
// refused with a reason, and the sample stays open.
func TestFaultyFiles(t *testing.T) {
	files, err := filepath.Glob("../../audit/testdata/wrong/*.yaml")
	if err != nil || len(files) < 50 {
		t.Fatalf("%d files, %v", len(files), err)
	}
	b := (&bench{t: t}).open(sheet.New, duty.New, energy.New, heat.New, payback.New, report.New)
	b.Open("")
	b.solved()
	b.win.Resize(fyne.NewSize(640, 560))
	refused := 0
	for _, path := range files {
		before := b.doc.Title()
		problems, err := b.doc.Open(path)
		b.drain()
		b.until("settled", func() bool { return !b.busy() })
		b.drain()
		switch {
		case err != nil:
			refused++
			if b.doc.Title() != before || !strings.Contains(err.Error(), filepath.Base(path)) {
				t.Errorf("%s: refused with %q, open is %q", path, err, b.doc.Title())
			}
		case len(problems) == 0:
			t.Errorf("%s: no findings", path)
		}
		for i := range b.stations {
			b.show(i)
			if i < 2 { // the stations that draw what the file has, solved or not
				b.capture("wrong")
			}
		}
		b.SetClock(1)
	}
	if refused == len(files) {
		t.Error("every file was refused")
	}
}

// With several proposals the verdict says which it is about.
func TestVerdictOfSeveral(t *testing.T) {
	b := newBench(t)
	b.Open("")
	b.solved()
	if got := b.ofSeveral(); got != "" {
		t.Errorf("one proposal is named %q", got)
	}
}

// A low window gives room to the station, and every station stays within it.
func TestLowWindow(t *testing.T) {
	b := (&bench{t: t}).open(sheet.New, duty.New, energy.New, heat.New, payback.New, report.New)
	b.Open("")
	b.solved()
	b.settings.scale = 2
	b.applySettings()
	size := fyne.NewSize(1280, 800)
	for i := range b.stations {
		b.show(i)
		b.win.Resize(size)
		if got := b.win.Canvas().Size(); got != size {
			t.Errorf("%s asks for %v", b.stations[i].Name(), got)
		}
		if h := b.strip.content.Size().Height; h > 2*stripLow {
			t.Errorf("%s: the strip is %v high", b.stations[i].Name(), h)
		}
	}
}

// Escape closes the dialog on top even when nothing has the focus, and the menu waits
// while a dialog is open.
func TestDialogsAndKeys(t *testing.T) {
	b := newBench(t)
	b.Open("")
	b.solved()
	b.help()
	if !b.asking() {
		t.Fatal("help is not open")
	}
	b.menu.main.Items[2].Items[1].Action()
	if b.current != 0 {
		t.Error("the menu changed the station under a dialog")
	}
	b.win.Canvas().Unfocus()
	b.win.Canvas().OnTypedKey()(&fyne.KeyEvent{Name: fyne.KeyEscape})
	if b.asking() || b.win.Canvas().Overlays().Top() != nil {
		t.Error("Escape left the dialog open")
	}
	b.menu.main.Items[2].Items[1].Action()
	if b.current != 1 {
		t.Error("the menu does not work after a dialog")
	}
}

// Undo and redo say what they did.
func TestUndoSays(t *testing.T) {
	b := newBench(t)
	b.Open("")
	b.solved()
	if err := b.doc.Set("As found/RV1.crack", "210 bar"); err != nil {
		t.Fatal(err)
	}
	b.drain()
	b.menu.undo.Action()
	if !strings.HasPrefix(b.status.Text, "Undone: change RV1") {
		t.Errorf("said %q", b.status.Text)
	}
	b.drain()
	b.menu.redo.Action()
	if !strings.HasPrefix(b.status.Text, "Done again: change RV1") {
		t.Errorf("said %q", b.status.Text)
	}
}
