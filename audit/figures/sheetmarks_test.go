package figures

import (
	"reflect"
	"testing"

	"barlitre/circuit"
	"barlitre/circuit/drawing"
)

// marked is a pump and two reliefs with a note and two groups, one within the other.
func marked() *circuit.Circuit {
	at := func(x, y float64) *[2]float64 { return &[2]float64{x, y} }
	port := func(b, p string) circuit.PortRef { return circuit.PortRef{Block: b, Port: p} }
	return &circuit.Circuit{
		Name: "Marked",
		Blocks: []circuit.Block{
			{ID: "P1", Kind: "pump", At: at(0, 0)}, {ID: "RV1", Kind: "relief", At: at(30, 0)}, {ID: "RV2", Kind: "relief", At: at(30, 30)},
		},
		Lines:  []circuit.Line{{Ports: []circuit.PortRef{port("P1", "P"), port("RV1", "P"), port("RV2", "P")}}},
		Notes:  []circuit.SheetNote{{Text: "one\ntwo", At: [2]float64{-30, -20}}},
		Groups: []circuit.SheetGroup{{Label: "Reliefs", Blocks: []string{"RV1", "RV2"}}, {Label: "All", Blocks: []string{"P1", "RV1", "RV2"}}},
	}
}

// A group goes around its blocks and around the groups within it; the sheet holds notes
// and groups whole.
func TestMarksHaveRoom(t *testing.T) {
	s := NewSheet(marked())
	g := s.groups()
	for i := range s.parts {
		p := &s.parts[i]
		if !around(g[1].box, p.symbol.Box()) || p.id != "P1" && !around(g[0].box, p.symbol.Box()) {
			t.Errorf("%s is not within its groups", p.id)
		}
	}
	if !around(g[1].box, g[0].box) || !around(s.box, g[1].box) || !around(s.box, s.notes[0].box) || !around(s.box, g[1].label) {
		t.Errorf("boxes %v, note %v, sheet %v", g, s.notes[0].box, s.box)
	}
	for _, l := range s.labels {
		if shared(l.box, s.notes[0].box) > 0 || shared(l.box, g[0].label) > 0 {
			t.Error("a label lies on a note or on the label of a group")
		}
	}
}

func around(a, b drawing.Box) bool { return contains(a, b.Min) && contains(a, b.Max) }

// The ports beyond a branch are those that only it leads to.
func TestBeyondABranch(t *testing.T) {
	s := NewSheet(marked())
	found := map[circuit.PortRef]bool{}
	for _, p := range s.Pieces(0) {
		if port, ok := s.Leaf(p); ok {
			found[port] = true
		}
	}
	if len(found) != 3 {
		t.Errorf("leaves of three ports: %v", found)
	}
}

// Bending a piece there and back leads to the lines as they were, and every bend joins
// what was joined.
func TestBendThereAndBack(t *testing.T) {
	for _, by := range []float64{-7, -1, 2, 5} {
		c := marked()
		s := NewSheet(c)
		for _, p := range s.Pieces(0) {
			c.Bends = []circuit.SheetBend{{Port: circuit.PortRef{Block: "P1", Port: "P"}, Runs: s.Bend(p, by)}}
			bent := NewSheet(c)
			if len(bent.stretches) < len(s.stretches) || !bent.Bent(0) || bent.nets[0].route.Through {
				t.Errorf("piece %v by %g: %d branches of %d", p, by, len(bent.stretches), len(s.stretches))
			}
			for _, q := range bent.nets[0].ends {
				if got := bent.endPoint(q); !touches(bent, got) {
					t.Errorf("piece %v by %g: the line leaves out %v", p, by, q.port)
				}
			}
		}
		c.Bends = nil
		if back := NewSheet(c); !reflect.DeepEqual(back.stretches, s.stretches) {
			t.Error("straightened, the line is not as before")
		}
	}
}

func touches(s *Sheet, at drawing.Pt) bool {
	for _, st := range s.stretches {
		for _, p := range st.pts {
			if p == at {
				return true
			}
		}
	}
	return false
}

// What Next takes over is what NewSheet would lay.
func TestNextIsNewSheet(t *testing.T) {
	c := marked()
	s := NewSheet(c)
	for _, x := range []float64{30, 36} {
		d := *c
		d.Blocks = append([]circuit.Block(nil), c.Blocks...)
		d.Blocks[1].At = &[2]float64{x, 0}
		a, b := s.Next(&d), NewSheet(&d)
		if !reflect.DeepEqual(a.stretches, b.stretches) || !reflect.DeepEqual(a.labels, b.labels) {
			t.Errorf("RV1 at %g: the sheets differ", x)
		}
		if reused := a.laid == s.laid; reused != (x == 30) {
			t.Errorf("RV1 at %g: lines taken over: %v", x, reused)
		}
	}
}
