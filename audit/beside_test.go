package audit

import (
	"context"
	"reflect"
	"testing"
)

// several is the first sample with three proposals, in the order as found, second, …
func several(t *testing.T) *File {
	t.Helper()
	f, _ := Read("../samples/baling-press.yaml")
	for _, name := range []string{"Second", "Third"} {
		if err := f.CopyCircuit("Pump-controlled", name); err != nil {
			t.Fatal(err)
		}
	}
	if err := f.Set("Third/P1.displacement", "50 cm3/rev"); err != nil {
		t.Fatal(err)
	}
	return f
}

// TestBesideKeepsFigures: two circuits taken out of many have the figures they had among
// all, and the base of every comparison is the first circuit as found.
func TestBesideKeepsFigures(t *testing.T) {
	f := several(t)
	s, err := Solve(context.Background(), f, Options{})
	if err != nil {
		t.Fatal(err)
	}
	if got := f.Besides(); !reflect.DeepEqual(got, []string{"Pump-controlled", "Second", "Third"}) || f.Base().Name != "As found" {
		t.Fatalf("beside %s may stand %v", f.Base().Name, got)
	}
	all := s.Report(0)
	if len(all.Decisions) != 3 || len(all.Circuits) != 4 {
		t.Fatalf("%d decisions, %d circuits in the whole report", len(all.Decisions), len(all.Circuits))
	}
	for i, name := range f.Besides() {
		pair := s.Beside(name)
		r := pair.Report(0)
		if len(r.Decisions) != 1 || len(r.Circuits) != 2 || r.Circuits[0].Name != "As found" || r.Circuits[1].Name != name {
			t.Fatalf("%s: %d decisions on %d circuits", name, len(r.Decisions), len(r.Circuits))
		}
		if !reflect.DeepEqual(r.Decisions[0].Outcome[0], all.Decisions[i].Outcome[0]) || r.Decisions[0].Verdict != all.Decisions[i].Verdict {
			t.Errorf("%s: %q among two, %q among all", name, r.Decisions[0].Verdict, all.Decisions[i].Verdict)
		}
	}
	if a, b := s.Beside("Second").Comparisons[0].SavedDrawn, s.Beside("Third").Comparisons[0].SavedDrawn; a == b {
		t.Errorf("another pump saves the same %g J", a)
	}
	if got := s.Beside("not there").Circuits[1].Circuit.Name; got != "Pump-controlled" {
		t.Errorf("an unknown name shows %s", got)
	}
	if got := s.Beside("As found").Circuits[1].Circuit.Name; got != "Pump-controlled" {
		t.Errorf("beside itself stands %s", got)
	}
}

// TestSwappedSides: after a swap the other circuit is the base, and what was saved is lost.
func TestSwappedSides(t *testing.T) {
	f := several(t)
	if err := f.SwapRoles("As found", "Third"); err != nil {
		t.Fatal(err)
	}
	if f.Base().Name != "Third" || !reflect.DeepEqual(f.Besides(), []string{"As found", "Pump-controlled", "Second"}) {
		t.Fatalf("base %s, beside %v", f.Base().Name, f.Besides())
	}
	s, err := Solve(context.Background(), f, Options{})
	if err != nil {
		t.Fatal(err)
	}
	if c := s.Beside("As found").Comparisons; len(c) != 1 || c[0].Base.Circuit.Name != "Third" || !(c[0].SavedDrawn < 0) {
		t.Errorf("comparisons %+v", c)
	}
}
