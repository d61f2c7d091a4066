package frame

import (
	"context"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/test"

	"barlitre/app/document"
	"barlitre/app/widgets"
)

// longBench is a bench on which all work on files is long.
func longBench(t *testing.T) *bench {
	b := newBench(t)
	b.drain()
	waits, shown := waitsFor, shownFrom
	waitsFor, shownFrom = 0, 10*time.Millisecond
	t.Cleanup(func() { waitsFor, shownFrom = waits, shown })
	return b
}

// Long work shows how far it is before a window that answers, lets nothing else be begun, and
// ends with Cancel and with Escape; what it was to go on with is told so.
func TestLongWorkIsShownAndCancelled(t *testing.T) {
	b := longBench(t)
	for _, by := range []string{"button", "key"} {
		var result error
		over := false
		b.Perform("Opening press.yaml", func(ctx context.Context, tell document.Progress) error {
			tell("press.csv", 120<<20, 300<<20)
			<-ctx.Done()
			return document.ErrCancelled
		}, func(err error) { result, over = err, true })
		if !b.asking() {
			t.Error("something else may be begun")
		}
		b.until("shown", func() bool { return b.working != nil && b.working.box != nil })
		b.until("told", func() bool { return b.working.bar.Value > 0 })
		if text := b.working.says.Text; text != "press.csv, 120.0 MB of 300.0 MB" || b.working.bar.Value != 0.4 {
			t.Errorf("says %q at %g", text, b.working.bar.Value)
		}
		b.capture("long")
		if by == "button" {
			test.Tap(widgets.Named("ask.cancel").(*boxButton))
		} else {
			b.win.Canvas().Focused().TypedKey(&fyne.KeyEvent{Name: fyne.KeyEscape})
		}
		b.until("over", func() bool { return over })
		if !errors.Is(result, document.ErrCancelled) || b.working != nil || b.asking() {
			t.Errorf("%s: %v, asking %v", by, result, b.asking())
		}
	}
}

// An audit whose recording takes long opens behind the box; cancelled, the audit that was open stays.
func TestOpeningIsCancelled(t *testing.T) {
	b := longBench(t)
	dir := t.TempDir()
	path := filepath.Join(dir, "long.yaml")
	text := "format: barlitre/1\ntitle: Long\noil: {temperature: 50 C, density: 870 kg/m3, viscosity: 40 mPa s}\naxes: {ram: linear}\nduties:\n- {name: d, file: a.csv, columns: {t: t, ram.speed: v}}\ncircuits: []\n"
	var rows strings.Builder
	rows.WriteString("t [s],v [m/s]\n")
	for i := range 100_000 {
		fmt.Fprintf(&rows, "%.2f,1\n", 0.01*float64(i))
	}
	for name, data := range map[string]string{"long.yaml": text, "a.csv": rows.String()} {
		if err := os.WriteFile(filepath.Join(dir, name), []byte(data), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	b.openSample(firstSample)
	b.drain()
	title := b.doc.File().Title
	b.Frame.open(path)
	b.working.stop()
	b.until("over", func() bool { return b.working == nil })
	if b.doc.File().Title != title || !strings.HasPrefix(b.status.Text, "Cancelled") {
		t.Errorf("%q is open, the status says %q", b.doc.File().Title, b.status.Text)
	}
	b.Frame.open(path)
	b.until("over", func() bool { return b.working == nil })
	if b.doc.File().Title != "Long" {
		t.Errorf("%q is open, the status says %q", b.doc.File().Title, b.status.Text)
	}
}
