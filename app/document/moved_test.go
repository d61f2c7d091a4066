package document

import (
	"bytes"
	"fmt"
	"maps"
	"math/rand/v2"
	"os"
	"path/filepath"
	"slices"
	"testing"
	"time"

	"barlitre/samples"
)

// move puts blocks at places, as a drag does.
func move(d *Document, circuit string, at map[string][2]float64) error {
	ids := slices.Sorted(maps.Keys(at))
	return d.Place(fmt.Sprint("move ", ids), "Move "+these(ids), circuit, at, nil)
}

// A file that the program saved, opened, drawn on at random, undone to the start and saved
// again is the same file, byte for byte.
func TestUndoneFileIsTheSavedFile(t *testing.T) {
	for i, name := range samples.Names() {
		text, err := samples.Read(name)
		check(t, err)
		path := filepath.Join(t.TempDir(), name)
		first := newBench(t, quick, Options{})
		check(t, first.OpenSample(name))
		c := first.File().Circuits[0]
		at := first.File().Circuits[0].Blocks[0].At
		check(t, move(first.Document, c.Name, map[string][2]float64{c.Blocks[0].ID: {at[0] + 1, at[1]}}))
		check(t, first.Bend(c.Name, "a", []int{0}, [][2][2]float64{{{1, 2}, {9, 2}}}))
		check(t, first.SaveAs(path))
		saved, err := os.ReadFile(path)
		check(t, err)
		if bytes.Equal(saved, text) {
			t.Fatal("the edits before saving left no trace")
		}
		b := newBench(t, quick, Options{})
		_, err = b.Open(path)
		check(t, err)
		p := &player{T: t, d: b.Document, r: rand.New(rand.NewPCG(7, uint64(i)))}
		done := 0
		for tries := 0; done < 40 && tries < 400; tries++ {
			b.clock.pass(time.Minute)
			was := b.Revision()
			if _, err := p.edit(); err == nil && b.Revision() != was {
				done++
			}
		}
		check(t, b.Save())
		if now, _ := os.ReadFile(path); bytes.Equal(now, saved) || done < 40 {
			t.Errorf("%s: %d edits left no trace in the file", name, done)
		}
		for _, ok := b.Undo(); ok; _, ok = b.Undo() {
		}
		check(t, b.Save())
		now, err := os.ReadFile(path)
		check(t, err)
		if !bytes.Equal(now, saved) {
			t.Errorf("%s: undone to the start and saved, the file differs from the one saved before", name)
		}
	}
}
