package figures

import (
	"path/filepath"
	"testing"

	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/circuit/drawing"
)

// eachSheet lays every circuit of every sample out.
func eachSheet(t *testing.T, do func(what string, c *circuit.Circuit, s *Sheet)) {
	t.Helper()
	paths, _ := filepath.Glob("../../samples/*.yaml")
	if len(paths) == 0 {
		t.Fatal("no samples")
	}
	for _, path := range paths {
		f, found := audit.Read(path)
		if f == nil {
			t.Fatalf("%s: %v", path, found)
		}
		for _, c := range f.Circuits {
			do(filepath.Base(path)+", "+c.Name, c.Circuit, NewSheet(c.Circuit))
		}
	}
}

// Each line ends where a port of its block is said to stand, and each line of the
// circuit is in one drawn line.
func TestPortsAreWhereLinesEnd(t *testing.T) {
	eachSheet(t, func(what string, c *circuit.Circuit, s *Sheet) {
		ports := map[SheetPort]bool{}
		for _, p := range s.Ports() {
			ports[p] = true
		}
		seen := map[int]bool{}
		for i, n := range s.nets {
			for _, e := range n.ends {
				at := s.endPoint(e)
				if p := (SheetPort{circuit.PortRef{Block: s.parts[e.part].id, Port: e.port}, at.X, at.Y}); !e.opposite && !ports[p] {
					t.Errorf("%s: a line ends at %v, where no port is said to stand", what, p)
				}
			}
			lines, _ := s.Lines(i)
			for _, l := range lines {
				seen[l] = true
			}
		}
		if len(seen) != len(c.Lines) {
			t.Errorf("%s: the drawn lines are %d of %d lines", what, len(seen), len(c.Lines))
		}
	})
}

func TestFreePlaceIsClear(t *testing.T) {
	eachSheet(t, func(what string, c *circuit.Circuit, s *Sheet) {
		for i := range s.parts {
			at := s.parts[i].at
			for _, kind := range []string{"pump", "junction", "valve"} {
				x, y := s.FreePlace(kind, at.X, at.Y)
				sym, _ := drawing.Lookup(circuit.SymbolOf(c, &circuit.Block{Kind: kind}))
				box := sym.Placed(drawing.Pt{X: x, Y: y}, 0, false).Box()
				for k := range s.parts {
					if shared(box, s.parts[k].symbol.Box()) > 0 {
						t.Errorf("%s: a %s for %g, %g stands on %s at %g, %g", what, kind, at.X, at.Y, s.parts[k].id, x, y)
					}
				}
			}
		}
	})
}

// TestMarksCoverNoLabel: wherever a block of a sample may be marked, no label lies below.
func TestMarksCoverNoLabel(t *testing.T) {
	eachSheet(t, func(what string, _ *circuit.Circuit, s *Sheet) {
		for i := range s.parts {
			at := s.markPlace(&s.parts[i])
			box := grown(drawing.Box{Min: at, Max: at}, 1)
			for _, l := range s.labels {
				if shared(l.box, box) > 0 && !s.parts[i].isJunction() {
					t.Errorf("%s: the mark of %s covers a label", what, s.parts[i].id)
				}
			}
		}
	})
}
