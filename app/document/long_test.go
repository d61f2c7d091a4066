package document

import (
	"context"
	"errors"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"barlitre/audit"
)

// Cancelled, an audit with a recording is neither opened nor saved elsewhere; what is open,
// with its unsaved changes, stays, and no copy of a recording is left.
func TestCancelledLeavesAllAsItWas(t *testing.T) {
	b, path := recorded(t)
	check(t, b.Set("As found/RV1.crack", "231 bar"))
	revision, text := b.Revision(), string(b.File().Bytes())
	ended, stop := context.WithCancel(context.Background())
	stop()
	to := t.TempDir()
	for what, do := range map[string]func() error{
		"open":    func() error { _, err := b.OpenWith(ended, path, nil); return err },
		"save as": func() error { return b.SaveAsWith(ended, filepath.Join(to, "copy"), nil) },
	} {
		if err := do(); !errors.Is(err, ErrCancelled) {
			t.Errorf("%s: %v", what, err)
		}
		if b.Revision() != revision || string(b.File().Bytes()) != text || b.Path() != path || !b.Dirty() {
			t.Errorf("%s: revision %d, path %s, dirty %v", what, b.Revision(), b.Path(), b.Dirty())
		}
	}
	if left := exists(t, to); len(left) > 1 || len(left) == 1 && left[0] != "logs" {
		t.Errorf("left behind: %v", left)
	}
	check(t, b.SaveAsWith(context.Background(), filepath.Join(to, "copy"), nil))
}

// What was edited while another audit was read is not replaced by that.
func TestOpenDoesNotReplaceWhatWasEdited(t *testing.T) {
	b, path := recorded(t)
	other := filepath.Join(b.dir, "other.yaml")
	check(t, os.WriteFile(other, []byte(readFile(t, path)), 0o644))
	check(t, os.WriteFile(filepath.Join(b.dir, "logs", "day.csv"), []byte("t [s]; ram.speed [m/s]; ram.load [kN]\n0;0;5\n41;0;5\n"), 0o644))
	edited := false
	_, err := b.OpenWith(context.Background(), other, func(string, int64, int64) {
		if !edited {
			edited = true
			check(t, b.Set("As found/RV1.crack", "231 bar"))
		}
	})
	if !edited || err == nil || !strings.Contains(err.Error(), "changed meanwhile") || b.Path() != path || !b.Dirty() {
		t.Errorf("edited %v, %v, path %s", edited, err, b.Path())
	}
}

// An undo that must read a recording again can be cancelled, and is then there to be done later.
func TestUndoIsCancelled(t *testing.T) {
	b, _ := recorded(t)
	text := string(b.File().Bytes())
	for n, name := range []string{"two.csv", "three.csv"} {
		check(t, os.WriteFile(filepath.Join(b.dir, "logs", name), []byte("t [s]; ram.speed [m/s]; ram.load [kN]\n0;0;5\n42;0;5\n"), 0o644))
		was := []string{"day.csv", "two.csv"}[n]
		check(t, b.Edit("Take another recording", func(f *audit.File) error {
			f.Replace([]byte(strings.Replace(string(f.Bytes()), was, name, 1)))
			return nil
		}))
	}
	b.Undo()
	ended, stop := context.WithCancel(context.Background())
	stop()
	if name, ok := b.UndoWith(ended, nil); ok {
		t.Fatalf("%s was undone though it was cancelled", name)
	}
	if b.File().Sources[0].File != "logs/two.csv" {
		t.Errorf("sources %v", b.File().Sources)
	}
	if _, ok := b.Undo(); !ok || string(b.File().Bytes()) != text {
		t.Error("it cannot be undone later")
	}
}
