package sheet

import (
	"slices"
	"strings"
	"testing"

	"barlitre/app/station"
	"barlitre/circuit"
)

// What the card, the folded card and the list itself count is one count, also after what fix first finds came late.
func TestFindingsCountOnce(t *testing.T) {
	b := newBench(t, press, window)
	list := b.s.findings
	counted := func(what string) circuit.Tally {
		t.Helper()
		all, _ := b.doc.Listed(b.System())
		mend := 0
		for _, g := range all {
			if g.Level == circuit.Stops || g.Level == circuit.Warns {
				mend++
			}
		}
		tally := circuit.TallyOf(list.list)
		if tally.All != len(all) || tally.Faults+tally.ToMend != mend {
			t.Errorf("%s: counted %+v, there are %d, %d of them to mend", what, tally, len(all), mend)
		}
		edge, _ := b.s.edgeText()
		for _, text := range []string{list.DumpText(), edge} {
			if !strings.HasSuffix(text, "findings: "+tally.String()) {
				t.Errorf("%s: %q, counted %s", what, text, tally)
			}
		}
		if b.s.Mend() != (mend > 0) {
			t.Errorf("%s: the rail says to mend: %v, of %d", what, b.s.Mend(), mend)
		}
		return tally
	}
	before := counted("as opened")
	if err := b.doc.Set("As found/C1.rod", "130 mm"); err != nil {
		t.Fatal(err)
	}
	b.solved()
	if after := counted("a rod above its bore"); after.Faults == 0 || after == before {
		t.Errorf("a rod above its bore: %+v as before", after)
	}
	b.s.Changed(station.Advice)
	counted("told of faults")
}

func TestTally(t *testing.T) {
	of := func(levels ...circuit.Level) (out []circuit.Finding) {
		for _, l := range levels {
			out = append(out, circuit.Finding{Level: l})
		}
		return out
	}
	for want, list := range map[string][]circuit.Finding{
		"0":                      nil,
		"2, none to mend":        of(circuit.Note, circuit.Caution),
		"3, 1 to mend":           of(circuit.Note, circuit.Warns, circuit.Caution),
		"1, 1 fault":             of(circuit.Stops),
		"4, 2 faults, 1 to mend": of(circuit.Stops, circuit.Stops, circuit.Warns, circuit.Note),
	} {
		if got := circuit.TallyOf(list).String(); got != want {
			t.Errorf("%v are called %q, want %q", list, got, want)
		}
	}
}

// The list keeps its place while an audit is edited, never stands beyond its end, and begins at its top with another file.
func TestFindingsPlace(t *testing.T) {
	b := newBench(t, press, window)
	list := b.s.findings
	end := func() float32 { return max(0, list.MinSize().Height-list.scroll.Size().Height) }
	if end() < 50 {
		t.Fatalf("%d findings leave nothing to scroll", len(list.list))
	}
	list.scrollTo(len(list.list) - 1)
	if y := list.scroll.Offset.Y; y > end()+0.5 || y < end()-0.5 {
		t.Errorf("at the last finding the list stands at %g, its end is %g", y, end())
	}

	// A finding that comes in above pushes nothing out of sight.
	list.scrollTo(2)
	at, top := list.list[2], list.scroll.Offset.Y
	if err := b.doc.Set("As found/P1.rating", "100 bar"); err != nil {
		t.Fatal(err)
	}
	b.solved()
	i := slices.Index(list.list, at)
	if want := min(float32(list.above(i)), end()); i < 0 || list.scroll.Offset.Y < want-0.5 || list.scroll.Offset.Y > want+0.5 {
		t.Errorf("finding 2 is now %d, at %g; the list stands at %g, before at %g", i, list.above(i), list.scroll.Offset.Y, top)
	}

	// A list that has become short.
	list.scrollTo(len(list.list) - 1)
	list.list = list.list[:2]
	list.cures, list.faults = list.cures[:2], list.faults[:2]
	list.measure()
	list.keepPlace(listPlace{})
	if y := list.scroll.Offset.Y; y > end() {
		t.Errorf("with two findings the list stands at %g, its end is %g", y, end())
	}

	list.reload()
	list.scrollTo(len(list.list) - 1)
	if err := b.doc.OpenSample("quayside-winch.yaml"); err != nil {
		t.Fatal(err)
	}
	b.pump()
	if list.scroll.Offset.Y != 0 || len(list.list) == 0 || slices.Contains(list.list, at) {
		t.Errorf("another file: the list stands at %g and has %d findings", list.scroll.Offset.Y, len(list.list))
	}
	b.solved()
	if list.scroll.Offset.Y != 0 {
		t.Errorf("another file, solved: the list stands at %g", list.scroll.Offset.Y)
	}
}
