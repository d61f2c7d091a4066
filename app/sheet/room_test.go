package sheet

import (
	"maps"
	"slices"
	"testing"

	"barlitre/audit/figures"
	"barlitre/circuit"
)

// A choice that makes a symbol larger puts aside what it would lie over, in one step of undo;
// nothing else moves.
func TestGrownSymbolGetsRoom(t *testing.T) {
	b := drawing(t)
	e := b.s.editors[0]
	if _, err := b.doc.AddBlock(e.name, "filter", [2]float64{40, 0}); err != nil {
		t.Fatal(err)
	}
	if err := b.doc.Place("", "Move", e.name, map[string][2]float64{"RV1": {10, 0}}, nil); err != nil {
		t.Fatal(err)
	}
	b.pump()
	over := func() []string {
		var out []string
		for _, q := range e.boxes {
			for _, r := range e.boxes {
				if q.id < r.id && q.x < r.x+r.w && r.x < q.x+q.w && q.y < r.y+r.h && r.y < q.y+q.h {
					out = append(out, q.id+" "+r.id)
				}
			}
		}
		return out
	}
	if got := over(); got != nil {
		t.Fatalf("before: %v", got)
	}
	before := b.doc.File().Bytes()
	b.Select(0, "RV1")
	b.Select(0, "P1")
	if err := b.s.panel.choose(e.name+"/P1.control", "load_sensing"); err != nil {
		t.Fatal(err)
	}
	b.pump()
	if over() != nil {
		t.Errorf("still over each other: %v", over())
	}
	x, _, _ := e.sheet.At("RV1")
	if fx, fy, _ := e.sheet.At("F1"); x == 10 || fx != 40 || fy != 0 || len(b.said) == 0 {
		t.Errorf("RV1 at %g, F1 at %g, %g; said %q", x, fx, fy, b.said)
	}
	b.undone(before, "P1")
}

// Of symbols that grow together the later gives way, and what lay under the symbol before stays
// there: somebody may have wanted that.
func TestRoomForSymbolsThatGrowTogether(t *testing.T) {
	plant := func(control string, filter float64) *circuit.Circuit {
		at := func(x float64) *[2]float64 { return &[2]float64{x, 0} }
		words := map[string]circuit.Word{"control": {Text: control}}
		return &circuit.Circuit{Blocks: []circuit.Block{{ID: "P1", Kind: "pump", At: at(0), Words: words}, {ID: "P2", Kind: "pump", At: at(11), Words: words}, {ID: "F1", Kind: "filter", At: at(filter)}}}
	}
	for _, c := range []struct {
		filter float64
		want   []string
	}{{40, []string{"P2"}}, {1, []string{"P2"}}} {
		got := figures.MakeRoom(plant("fixed", c.filter), plant("load_sensing", c.filter))
		if ids := slices.Sorted(maps.Keys(got)); !slices.Equal(ids, c.want) {
			t.Errorf("filter at %g: %v put aside, expected %v", c.filter, got, c.want)
		}
	}
	if got := figures.MakeRoom(plant("load_sensing", 5), plant("load_sensing", 5)); len(got) > 0 {
		t.Errorf("nothing has changed, and %v put aside", got)
	}
}
