package frame

import (
	"image/color"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"

	"barlitre/app/station"
)

// taker is a station that takes recordings in.
type taker struct {
	plain
	took   []string
	picked int
}

func (t *taker) PickRecording()         { t.picked++ }
func (t *taker) TakeIn(paths ...string) { t.took = append(t.took, paths...) }

// A recording that is dropped goes to the station that takes recordings, shown first; an
// audit that is dropped is opened. The File menu asks that station too.
func TestDropped(t *testing.T) {
	first := &plain{name: "Circuit", box: container.NewStack(canvas.NewRectangle(color.Transparent))}
	second := &taker{plain: plain{name: "Duty", box: container.NewStack(canvas.NewRectangle(color.Transparent))}}
	b := (&bench{t: t}).open(func(station.Context) station.Station { return first }, func(station.Context) station.Station { return second })
	b.drain()
	b.dropped("/somewhere/Press.CSV")
	if b.current != 1 || len(second.took) != 1 || second.took[0] != "/somewhere/Press.CSV" {
		t.Errorf("station %d, took %v", b.current, second.took)
	}
	path := filepath.Join(t.TempDir(), "a.yaml")
	if err := os.WriteFile(path, []byte("format: barlitre/1\ntitle: Dropped\n"), 0o644); err != nil {
		t.Fatal(err)
	}
	b.dropped(path)
	b.drain()
	if b.doc.File().Title != "Dropped" || len(second.took) != 1 {
		t.Errorf("%q is open, took %v", b.doc.File().Title, second.took)
	}
	second.took = nil
	if b.dropped("/a/day_1.csv", "/a/notes.pdf", "/a/day_2.CSV"); strings.Join(second.took, " ") != "/a/day_1.csv /a/day_2.CSV" {
		t.Errorf("of several files it took %v", second.took)
	}
	var item *fyne.MenuItem
	for _, x := range b.menu.main.Items[0].Items {
		if x.Label == "Duty from a recording…" {
			item = x
		}
	}
	if item == nil {
		t.Fatal("no item in the File menu")
	}
	b.show(0)
	if item.Action(); second.picked != 1 || b.current != 1 {
		t.Errorf("picked %d, station %d", second.picked, b.current)
	}
}
