package document

import (
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
	"time"
)

// settled writes the autosave now.
func (b *bench) settled(t testing.TB) {
	t.Helper()
	b.files.Lock()
	defer b.files.Unlock()
	_, err := b.settle()
	check(t, err)
}

const besidePress = ".press.yaml" + autosaveExt

func TestAutosaveComesAndGoes(t *testing.T) {
	b := newBench(t, quick, Options{AutosaveAfter: 5 * time.Millisecond})
	path := b.openPress(t)
	check(t, b.Set("As found/RV1.crack", "231 bar"))
	b.events.wait(t, Autosaved, b.Revision())
	if got := exists(t, b.dir); !slices.Equal(got, []string{besidePress, "press.yaml"}) {
		t.Fatalf("got %v", got)
	}
	k, text, err := decodeAutosave([]byte(readFile(t, filepath.Join(b.dir, besidePress))))
	if err != nil || k.Path != path || string(text) != string(b.File().Bytes()) || !k.When.Equal(b.clock.now()) {
		t.Errorf("%+v, %v", k, err)
	}
	if got := b.Recoverable(); len(got) != 0 {
		t.Errorf("offers to recover what is open: %v", got)
	}
	b.Undo() // clean: it goes by itself
	for end := time.Now().Add(10 * time.Second); len(exists(t, b.dir)) != 1; {
		if time.Now().After(end) {
			t.Fatalf("stays after undo: %v", exists(t, b.dir))
		}
		time.Sleep(time.Millisecond)
	}
	for name, end := range map[string]func() error{"save": b.Save, "abandon": b.Abandon} {
		_ = b.Set("As found/RV1.crack", "232 bar")
		b.settled(t)
		check(t, end())
		if got := exists(t, b.dir); len(got) != 1 || len(exists(t, b.recoveryFolder())) != 0 {
			t.Errorf("%s leaves %v, %v", name, got, exists(t, b.recoveryFolder()))
		}
		if name == "abandon" {
			break
		}
	}
}

// Closed with unsaved changes, as by the end of the computer's session: they are kept.
func TestCloseKeepsUnsaved(t *testing.T) {
	b := newBench(t, quick, Options{})
	b.openPress(t)
	check(t, b.Set("As found/RV1.crack", "231 bar"))
	check(t, b.Close())
	c := newBench(t, quick, Options{Config: b.config})
	if got := c.Recoverable(); len(got) != 1 || got[0].Name != "press.yaml" {
		t.Errorf("got %v", got)
	}
}

func TestRecover(t *testing.T) {
	for name, open := range map[string]func(b *bench) error{
		"press.yaml":                 func(b *bench) error { _, err := b.Open(filepath.Join(b.dir, "press.yaml")); return err },
		"baling-press (sample)":      func(b *bench) error { return b.OpenSample(press) },
		"load-sensing-two (starter)": func(b *bench) error { return b.OpenStarter("load-sensing-two.yaml") },
		"untitled":                   func(b *bench) error { return b.OpenEmpty() },
	} {
		t.Run(name, func(t *testing.T) {
			b := newBench(t, quick, Options{})
			b.path(t)
			check(t, open(b))
			old, path := string(b.File().Bytes()), b.Path()
			check(t, b.Set("oil.temperature", "51 C"))
			b.settled(t)
			check(t, b.Set("oil.temperature", "52 C"))
			b.settled(t)
			text := string(b.File().Bytes())
			b.crash(t)

			c := newBench(t, quick, Options{Config: b.config})
			list := c.Recoverable()
			if len(list) != 1 || list[0].Path != path || list[0].Name != name || !list[0].When.Equal(b.clock.now()) {
				t.Fatalf("got %+v", list)
			}
			check(t, c.Recover(list[0]))
			if string(c.File().Bytes()) != text || c.Path() != path || c.Title() != name+"*" {
				t.Errorf("title %q, text\n%s", c.Title(), c.File().Bytes())
			}
			c.events.wait(t, Solved, c.Revision())
			if len(c.Recoverable()) != 0 || c.Recover(list[0]) == nil {
				t.Error("what is open again is offered once more")
			}
			if n, ok := c.Undo(); !ok || n != "Recover unsaved changes" || c.Dirty() || string(c.File().Bytes()) != old {
				t.Errorf("undo %q %v, dirty %v", n, ok, c.Dirty())
			}
			c.Redo()
			check(t, c.Set("oil.temperature", "53 C"))
			text = string(c.File().Bytes())
			c.settled(t)
			c.crash(t) // a second time

			d := newBench(t, quick, Options{Config: b.config})
			list = d.Recoverable()
			if len(list) != 1 {
				t.Fatalf("after the second crash: %v", list)
			}
			check(t, d.Recover(list[0]))
			if string(d.File().Bytes()) != text {
				t.Error("the second crash took something")
			}
			if path == "" {
				check(t, d.SaveAs(filepath.Join(d.dir, "new")))
			} else {
				check(t, d.Save())
			}
			if got := exists(t, d.recoveryFolder()); len(got) != 0 || len(d.Recoverable()) != 0 {
				t.Errorf("left behind: %v", got)
			}
		})
	}
}

func TestDiscard(t *testing.T) {
	b := newBench(t, quick, Options{})
	b.openPress(t)
	check(t, b.Set("As found/RV1.crack", "231 bar"))
	b.settled(t)
	b.crash(t)
	c := newBench(t, quick, Options{Config: b.config})
	list := c.Recoverable()
	check(t, c.Discard(list[0]))
	if len(c.Recoverable()) != 0 || len(exists(t, b.dir)) != 1 || len(exists(t, b.recoveryFolder())) != 0 {
		t.Errorf("left: %v, %v", exists(t, b.dir), exists(t, b.recoveryFolder()))
	}
	if err := c.Discard(list[0]); err == nil || !strings.Contains(err.Error(), besidePress) {
		t.Errorf("a second time: %v", err)
	}
}

// What nobody has recovered yet is not overwritten by the next edits of the file, nor
// by a second window.
func TestAutosavesDoNotCollide(t *testing.T) {
	b := newBench(t, quick, Options{})
	path := b.openPress(t)
	check(t, b.Set("As found/RV1.crack", "231 bar"))
	b.settled(t)
	first := string(b.File().Bytes())
	b.crash(t)
	c := newBench(t, quick, Options{Config: b.config})
	_, err := c.Open(path)
	check(t, err)
	check(t, c.Set("As found/RV1.crack", "232 bar"))
	c.settled(t)
	second := string(c.File().Bytes())
	d := newBench(t, quick, Options{Config: b.config})
	if list := d.Recoverable(); len(list) != 1 {
		t.Fatalf("while a window is open: %v", list)
	}
	c.crash(t)
	var got []string
	for _, r := range d.Recoverable() {
		check(t, d.Recover(r))
		got = append(got, string(d.File().Bytes()))
		check(t, d.OpenEmpty())
	}
	slices.Sort(got)
	if !slices.Equal(got, []string{first, second}) {
		t.Errorf("%d recovered", len(got))
	}
}

// What is damaged or away is not offered, and not removed either; what is on disk
// already, or has no autosave, is removed.
func TestRecoverableLeavesAlone(t *testing.T) {
	b := newBench(t, quick, Options{})
	path := b.openPress(t)
	check(t, b.Set("As found/RV1.crack", "231 bar"))
	b.settled(t)
	autosave := b.session.autosave
	b.crash(t)
	c := newBench(t, quick, Options{Config: b.config})
	r := c.Recoverable()[0]
	whole := readFile(t, autosave)

	check(t, os.WriteFile(autosave, []byte(whole[:len(whole)-10]), 0o600))
	if len(c.Recoverable()) != 0 || len(exists(t, c.recoveryFolder())) != 1 {
		t.Error("damaged: offered, or dropped")
	}
	if err := c.Recover(r); err == nil || !strings.Contains(err.Error(), "not a whole autosave") || !strings.Contains(err.Error(), autosave) {
		t.Errorf("damaged: %v", err)
	}
	check(t, os.Rename(b.dir, b.dir+"-away"))
	if len(c.Recoverable()) != 0 || len(exists(t, c.recoveryFolder())) != 1 {
		t.Error("away: offered, or dropped")
	}
	check(t, os.Rename(b.dir+"-away", b.dir))
	check(t, os.WriteFile(autosave, []byte(whole), 0o600))
	if len(c.Recoverable()) != 1 {
		t.Error("whole again, but not offered")
	}
	_, text, err := decodeAutosave([]byte(whole))
	check(t, err)
	check(t, os.WriteFile(path, text, 0o644)) // saved, and killed before the autosave was removed
	if len(c.Recoverable()) != 0 || len(exists(t, c.recoveryFolder())) != 0 || len(exists(t, b.dir)) != 1 {
		t.Error("saved already, but still kept")
	}
	check(t, os.WriteFile(filepath.Join(c.recoveryFolder(), "00"+sessionExt), []byte(`{"auto`), 0o600))
	if len(c.Recoverable()) != 0 || len(exists(t, c.recoveryFolder())) != 0 {
		t.Error("an entry that never had an autosave stays")
	}
}

// The file that was edited is gone or spoilt meanwhile: its changes are still there.
func TestRecoverWithoutFile(t *testing.T) {
	for name, spoil := range map[string]func(path string) error{
		"gone":    os.Remove,
		"spoilt":  func(path string) error { return os.WriteFile(path, []byte("a: ["), 0o644) },
		"changed": func(path string) error { return os.WriteFile(path, []byte(emptyText), 0o644) },
	} {
		t.Run(name, func(t *testing.T) {
			b := newBench(t, quick, Options{})
			path := b.openPress(t)
			check(t, b.Set("As found/RV1.crack", "231 bar"))
			b.settled(t)
			text := string(b.File().Bytes())
			b.crash(t)
			check(t, spoil(path))
			c := newBench(t, quick, Options{Config: b.config})
			check(t, c.Recover(c.Recoverable()[0]))
			if string(c.File().Bytes()) != text || !c.Dirty() || (c.UndoName() != "") != (name == "changed") {
				t.Errorf("dirty %v, undo %q", c.Dirty(), c.UndoName())
			}
			check(t, c.Save())
			if readFile(t, path) != text {
				t.Error("not saved")
			}
		})
	}
}

func TestAutosaveFails(t *testing.T) {
	config := filepath.Join(t.TempDir(), "a file")
	check(t, os.WriteFile(config, nil, 0o644))
	b := newBench(t, quick, Options{Config: config, AutosaveAfter: time.Millisecond})
	b.openPress(t)
	check(t, b.Set("As found/RV1.crack", "231 bar"))
	e := b.events.wait(t, AutosaveFailed, b.Revision())
	if e.Err == nil || !strings.Contains(e.Err.Error(), config) {
		t.Errorf("told %v", e.Err)
	}
	check(t, b.Save())
}
