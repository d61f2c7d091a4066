package whole

import (
	"os"
	"path/filepath"
	"testing"
)

// Files come to their folder all at once, in place of those of an earlier time; given up, they leave it as it was.
func TestFolder(t *testing.T) {
	in := filepath.Join(t.TempDir(), "steps")
	put := func(text string, place bool) {
		f := NewFolder(in, true)
		for _, name := range []string{"one.csv", "two.csv"} {
			w, err := f.Create(name)
			if err != nil {
				t.Fatal(err)
			}
			if _, err := w.Write([]byte(text)); err != nil || w.Close() != nil {
				t.Fatal(err)
			}
		}
		if place {
			if err := f.Place("press-"); err != nil {
				t.Fatal(err)
			}
		}
		if err := f.Close(); err != nil {
			t.Fatal(err)
		}
	}
	put("old", true)
	put("half", false)
	alone(t, in, 2)
	if got := content(t, filepath.Join(in, "press-one.csv")); got != "old" {
		t.Errorf("given up, %q is there", got)
	}
	put("new", true)
	alone(t, in, 2)
	if got := content(t, filepath.Join(in, "press-two.csv")); got != "new" {
		t.Errorf("%q is there", got)
	}
}

// A folder into which nothing came is not made, nor one that should be there.
func TestFolderOfNothing(t *testing.T) {
	in := filepath.Join(t.TempDir(), "steps")
	f := NewFolder(in, true)
	if err := f.Place(""); err != nil || f.Close() != nil || f.Len() != 0 {
		t.Fatal(err)
	}
	if _, err := NewFolder(in, false).Create("one.csv"); !os.IsNotExist(err) {
		t.Error(err)
	}
	if _, err := os.Stat(in); !os.IsNotExist(err) {
		t.Error("it is there")
	}
}

// Where a later file cannot be put in place, it is said that others are.
func TestFolderInPart(t *testing.T) {
	in := t.TempDir()
	if err := os.MkdirAll(filepath.Join(in, "two.csv", "taken"), 0o755); err != nil {
		t.Fatal(err)
	}
	f := NewFolder(in, false)
	for _, name := range []string{"one.csv", "two.csv"} {
		w, err := f.Create(name)
		if err != nil {
			t.Fatal(err)
		}
		if err := w.Close(); err != nil {
			t.Fatal(err)
		}
	}
	if _, ok := f.Place("").(*PartError); !ok {
		t.Error("not said")
	}
}
