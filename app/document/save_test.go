package document

import (
	"errors"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
)

// With an autosave beside the file or not, a failed save says what, where and where
// the changes are safe, and changes neither the document nor the disk.
func refused(t *testing.T, b *bench, err error, words ...string) {
	t.Helper()
	if err == nil {
		t.Fatal("saved")
	}
	for _, w := range append(words, "nothing is lost") {
		if !strings.Contains(err.Error(), w) {
			t.Errorf("%q is not in: %v", w, err)
		}
	}
	if !b.Dirty() || b.UndoName() == "" {
		t.Error("the changes are gone")
	}
	_, place, ok := strings.Cut(err.Error(), "kept in ")
	place, _, _ = strings.Cut(place, "\n")
	if !ok {
		t.Fatalf("no word of what is kept: %v", err)
	}
	if _, text, err := decodeAutosave([]byte(readFile(t, place))); err != nil || string(text) != string(b.File().Bytes()) {
		t.Errorf("%s does not have the changes: %v", place, err)
	}
}

func TestSaveRefused(t *testing.T) {
	b := newBench(t, quick, Options{})
	path := b.openPress(t)
	old := readFile(t, path)
	check(t, b.Set("As found/RV1.crack", "231 bar"))

	gone := filepath.Join(b.dir, "gone", "deep", "press.yaml")
	refused(t, b, b.SaveAs(gone), gone, "the folder "+filepath.Dir(gone)+" is not there")
	refused(t, b, b.SaveAs(filepath.Join(path, "press.yaml")), path+" is not a folder")
	check(t, os.Mkdir(filepath.Join(b.dir, "folder.yaml"), 0o755))
	refused(t, b, b.SaveAs(filepath.Join(b.dir, "folder.yaml")), "there is a folder of that name")
	long := filepath.Join(b.dir, strings.Repeat("x", 300)+".yaml")
	refused(t, b, b.SaveAs(long), long)
	check(t, os.Chmod(path, 0o444))
	refused(t, b, b.Save(), path, "write-protected")
	check(t, os.Chmod(path, 0o644))
	if b.Path() != path || readFile(t, path) != old || b.File().Path != path {
		t.Errorf("path %s", b.Path())
	}
	if err := b.SaveAs(" "); err == nil || !strings.Contains(err.Error(), "not the name of a file") {
		t.Errorf("no name: %v", err)
	}

	check(t, b.Save())
	if readFile(t, path) == old || b.Dirty() {
		t.Error("not saved at last")
	}
	if got := exists(t, b.dir); !slices.Equal(got, []string{"folder.yaml", "press.yaml"}) {
		t.Errorf("left behind: %v", got)
	}
	if got := exists(t, b.recoveryFolder()); len(got) != 0 {
		t.Errorf("left in the recovery list: %v", got)
	}
}

// The folder went away while the audit was open: the copy goes to the settings.
func TestSaveFolderGone(t *testing.T) {
	b := newBench(t, quick, Options{})
	path := b.openPress(t)
	check(t, b.Set("As found/RV1.crack", "231 bar"))
	check(t, os.RemoveAll(b.dir))
	refused(t, b, b.Save(), path, "is not there", b.recoveryFolder())
	other := t.TempDir()
	check(t, b.SaveAs(filepath.Join(other, "press")))
	if b.Dirty() || b.Title() != "press.yaml" || len(exists(t, b.recoveryFolder())) != 0 {
		t.Errorf("title %s, kept %v", b.Title(), exists(t, b.recoveryFolder()))
	}
}

func TestSaveAfterChangeOutside(t *testing.T) {
	b := newBench(t, quick, Options{})
	path := b.openPress(t)
	check(t, b.Set("As found/RV1.crack", "231 bar"))
	other := readFile(t, path) + "# by hand\n"
	check(t, os.WriteFile(path, []byte(other), 0o644))
	err := b.Save()
	refused(t, b, err, path, "changed by another program")
	if !errors.Is(err, ErrChanged) || readFile(t, path) != other {
		t.Errorf("%v", err)
	}
	check(t, b.SaveAs(path)) // chosen on purpose
	if readFile(t, path) != string(b.File().Bytes()) || b.Dirty() {
		t.Error("not replaced")
	}
	check(t, b.Set("As found/RV1.crack", "232 bar"))
	check(t, os.Remove(path)) // gone is no reason not to save
	check(t, b.Save())
}

func TestSaveAs(t *testing.T) {
	b := newBench(t, quick, Options{})
	check(t, b.OpenSample(press))
	check(t, b.Set("As found/RV1.crack", "231 bar"))
	revision := b.Revision()
	check(t, b.SaveAs(filepath.Join(b.dir, "v1.2")))
	want := filepath.Join(b.dir, "v1.2.yaml")
	if b.Path() != want || b.File().Path != want || b.Title() != "v1.2.yaml" || b.Revision() != revision {
		t.Errorf("path %s, title %s, revision %d", b.Path(), b.Title(), b.Revision())
	}
	check(t, b.Set("As found/RV1.crack", "232 bar"))
	if err := b.SaveAs(filepath.Join(b.dir, "v1.2")); !errors.Is(err, ErrExists) || !b.Dirty() {
		t.Errorf("replaced a file that was not named: %v", err)
	}
	check(t, b.SaveAs(filepath.Join(b.dir, "b.YML")))
	if b.Title() != "b.YML" || !strings.Contains(readFile(t, want), "231 bar") {
		t.Errorf("title %s", b.Title())
	}
	for range 2 {
		b.Undo()
	}
	if !b.Dirty() || !strings.Contains(string(b.File().Bytes()), "value: 230 bar") {
		t.Error("undo does not reach behind a save")
	}
}

// recorded makes an audit with a recording in a folder below it.
func recorded(t *testing.T) (b *bench, path string) {
	t.Helper()
	b = newBench(t, quick, Options{})
	path = b.path(t)
	text := readFile(t, path)
	from, to := strings.Index(text, "  points:\n"), strings.Index(text, "  phases: {feed")
	text = text[:from] + "  file: logs/day.csv\n" + text[to:]
	check(t, os.WriteFile(path, []byte(text), 0o644))
	check(t, os.Mkdir(filepath.Join(b.dir, "logs"), 0o755))
	check(t, os.WriteFile(filepath.Join(b.dir, "logs", "day.csv"), []byte("t [s]; ram.speed [m/s]; ram.load [kN]\n0;0;5\n40;0;5\n"), 0o644))
	_, err := b.Open(path)
	check(t, err)
	if b.File().Sources[0].File != "logs/day.csv" {
		t.Fatalf("sources %v, findings %v", b.File().Sources, b.File().Findings())
	}
	return b, path
}

func TestSaveAsTakesRecordingsAlong(t *testing.T) {
	b, _ := recorded(t)
	csv := filepath.Join(b.dir, "logs", "day.csv")
	check(t, b.Set("As found/RV1.crack", "231 bar"))
	revision, to := b.Revision(), t.TempDir()
	check(t, b.SaveAs(filepath.Join(to, "copy")))
	if got := readFile(t, filepath.Join(to, "logs", "day.csv")); got != readFile(t, csv) || b.Revision() != revision {
		t.Errorf("copied %q, revision %d", got, b.Revision())
	}
	check(t, os.RemoveAll(b.dir)) // the former place is no longer needed
	check(t, b.Set("As found/RV1.crack", "232 bar"))
	check(t, b.SaveAs(filepath.Join(to, "again"))) // the recording is there already
	if problems, err := b.Open(filepath.Join(to, "again.yaml")); err != nil || len(problems) != 0 {
		t.Errorf("%v, %v", problems, err)
	}
}

// Tables of measured points that blocks name go along as well; one that was not there when the audit was read is no reason not
// to save.
func TestSaveAsTakesPointsAlong(t *testing.T) {
	for _, there := range []bool{true, false} {
		b := newBench(t, quick, Options{})
		path := b.path(t)
		text := strings.Replace(readFile(t, path), "    P1:\n", "    P1:\n      points: bench/pump.csv\n", 1)
		check(t, os.WriteFile(path, []byte(text), 0o644))
		csv := filepath.Join(b.dir, "bench", "pump.csv")
		check(t, os.Mkdir(filepath.Dir(csv), 0o755))
		if there {
			check(t, os.WriteFile(csv, []byte("n [1/min]; dp [bar]; q [L/min]; T [N m]\n1000;100;40;70\n1500;200;60;140\n"), 0o644))
		}
		_, err := b.Open(path)
		check(t, err)
		if b.File().Circuits[0].Block("P1").Word("points") == "" {
			t.Fatal("the block names no points")
		}
		to := t.TempDir()
		check(t, b.SaveAs(filepath.Join(to, "copy.yaml")))
		_, err = os.Stat(filepath.Join(to, "bench", "pump.csv"))
		if (err == nil) != there {
			t.Errorf("points there: %v, copied: %v", there, err == nil)
		}
	}
}

func TestSaveAsRecordingRefused(t *testing.T) {
	b, path := recorded(t)
	csv := filepath.Join(b.dir, "logs", "day.csv")
	check(t, b.Set("As found/RV1.crack", "231 bar"))
	to := t.TempDir()
	check(t, os.Mkdir(filepath.Join(to, "logs"), 0o755))
	other := filepath.Join(to, "logs", "day.csv")
	check(t, os.WriteFile(other, []byte("another"), 0o644))
	refused(t, b, b.SaveAs(filepath.Join(to, "copy.yaml")), "logs/day.csv", "would replace a different file", other)
	if readFile(t, other) != "another" || len(exists(t, to)) != 1 {
		t.Errorf("changed: %v", exists(t, to))
	}
	check(t, os.RemoveAll(filepath.Join(to, "logs")))
	check(t, os.WriteFile(filepath.Join(to, "logs"), nil, 0o644)) // a file where the folder should be
	refused(t, b, b.SaveAs(filepath.Join(to, "copy.yaml")), "logs/day.csv", "cannot be copied", other)
	check(t, os.Remove(csv))
	refused(t, b, b.SaveAs(filepath.Join(t.TempDir(), "copy.yaml")), csv, "cannot be read")
	if b.Path() != path {
		t.Errorf("path %s", b.Path())
	}
}

// When the audit cannot be written after all, no recordings are left behind.
func TestSaveAsLeavesNoRecordings(t *testing.T) {
	b, _ := recorded(t)
	check(t, b.Set("As found/RV1.crack", "231 bar"))
	to := t.TempDir()
	refused(t, b, b.SaveAs(filepath.Join(to, strings.Repeat("x", 300)+".yaml")), to)
	if _, err := os.Stat(filepath.Join(to, "logs", "day.csv")); err == nil {
		t.Error("a recording was left behind")
	}
}

// A recording that changed on disk since it was read is another duty: solved anew.
func TestSaveAsNewRecording(t *testing.T) {
	b, _ := recorded(t)
	csv := filepath.Join(b.dir, "logs", "day.csv")
	check(t, os.WriteFile(csv, []byte("t [s]; ram.speed [m/s]; ram.load [kN]\n0;0;7\n40;0;7\n"), 0o644))
	revision := b.Revision()
	check(t, b.SaveAs(filepath.Join(t.TempDir(), "copy")))
	if b.Revision() != revision+1 || b.Dirty() {
		t.Errorf("revision %d, want %d; dirty %v", b.Revision(), revision+1, b.Dirty())
	}
	b.events.wait(t, Solved, revision+1)
}
