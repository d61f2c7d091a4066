package cure

import (
	"fmt"
	"os"
	"path/filepath"
	"regexp"
	"slices"
	"strings"
	"testing"

	"barlitre/audit"
	"barlitre/circuit"
)

// read reads a sample or starter.
func read(t *testing.T, path string) *audit.File {
	t.Helper()
	f, found := audit.Read(path)
	if f == nil || circuit.AnyStops(found) {
		t.Fatal(path, found)
	}
	return f
}

// sound are files that have nothing to stop at.
func sound(t *testing.T) map[string]*audit.File {
	t.Helper()
	out := map[string]*audit.File{}
	for _, pattern := range []string{"baling*.yaml", "starters/*.yaml"} {
		paths, err := filepath.Glob(filepath.Join("../../samples", pattern))
		if err != nil || len(paths) == 0 {
			t.Fatal(pattern, err)
		}
		for _, p := range paths {
			out[filepath.Base(p)] = read(t, p)
		}
	}
	return out
}

// same compares findings without the numbers of lines and the names of ports listed.
func same(a, b circuit.Finding) bool {
	return a.Circuit == b.Circuit && a.Block == b.Block && a.Cause == b.Cause && a.Port == b.Port && a.Parameter == b.Parameter && (a.Cause != "" || a.Text == b.Text)
}

func has(list []circuit.Finding, f circuit.Finding) bool {
	return slices.ContainsFunc(list, func(o circuit.Finding) bool { return same(o, f) })
}

func rank(l circuit.Level) int {
	return slices.Index([]circuit.Level{circuit.Stops, circuit.Warns, circuit.Caution, circuit.Note}, l)
}

// judge mends a finding and holds the cure to its word: the finding is gone, the file
// still reads as it is written, and nothing new came that is as bad or worse. What
// stops hides what is checked after it, so of a finding that stops only the new blocks
// are looked at.
func judge(t *testing.T, f *audit.File, c *Cure, g circuit.Finding, what string) *audit.File {
	t.Helper()
	before := f.Check()
	mended := *f
	if err := c.Mend(&mended); err != nil {
		t.Errorf("%s: %s: %s: %v", what, g.Text, c.Name, err)
		return nil
	}
	after := mended.Check()
	if has(after, g) {
		t.Errorf("%s: %s: still there after %q", what, g.Text, c.Name)
	}
	for _, n := range after {
		isNew := f.Circuit(g.Circuit).Block(n.Block) == nil && n.Block != ""
		worse := rank(n.Level) <= rank(g.Level) && n.Level != circuit.Note
		if !has(before, n) && n.Circuit == g.Circuit && worse && (g.Level != circuit.Stops || isNew) {
			t.Errorf("%s: %s: %q brought %s: %s", what, g.Text, c.Name, n.Level, n.Text)
		}
	}
	again, found := audit.Parse(mended.Bytes(), nil, "")
	if again == nil || len(found) > len(f.Findings()) {
		t.Errorf("%s: after %q the file reads %v", what, c.Name, found)
	}
	return &mended
}

// TestCuresOfDamage takes each block and each line out of sound circuits, one at a time,
// and mends what is then found until no cure is left. Every cure must keep its word.
func TestCuresOfDamage(t *testing.T) {
	tried := map[circuit.Cause]int{}
	for name, f := range sound(t) {
		for _, e := range f.Circuits {
			for _, b := range e.Blocks {
				d := *f
				if d.Delete(e.Name, false, b.ID) == nil {
					mendAll(t, &d, e.Name, name+" without "+b.ID, tried)
				}
			}
			for i := range e.Lines {
				d := *f
				if d.DeleteLine(e.Name, i) == nil {
					mendAll(t, &d, e.Name, fmt.Sprintf("%s without line %d of %s", name, i, e.Name), tried)
				}
			}
		}
	}
	for _, c := range []circuit.Cause{circuit.OpenPort, circuit.NoRelief, circuit.NoDrive, circuit.NoConverter, circuit.NoLoadSignal} {
		if tried[c] == 0 {
			t.Errorf("no damage called for the cure of %q", c)
		}
	}
	t.Log(tried)
}

func mendAll(t *testing.T, f *audit.File, circuitName, what string, tried map[circuit.Cause]int) {
	t.Helper()
	for range 12 {
		var c *Cure
		var at circuit.Finding
		for _, g := range f.Check() {
			if g.Circuit != circuitName || g.Level == circuit.Note {
				continue
			}
			if x := Of(f, nil, g); x != nil && x.Mend != nil {
				c, at = x, g
				break
			}
		}
		if c == nil {
			return
		}
		tried[at.Cause]++
		if f = judge(t, f, c, at, what); f == nil {
			return
		}
	}
	t.Errorf("%s: mending does not come to an end", what)
}

// edited is a starter with edits that make a fault.
func edited(t *testing.T, starter string, edits func(f *audit.File) error) *audit.File {
	t.Helper()
	f := read(t, "../../samples/starters/"+starter)
	if err := edits(f); err != nil {
		t.Fatal(err)
	}
	return f
}

// TestCuresOfValues plants one fault in a value and looks for its cure.
func TestCuresOfValues(t *testing.T) {
	const compensated, throttled = "pressure-compensated-pump.yaml", "throttled-constant-flow.yaml"
	name := read(t, "../../samples/starters/"+throttled).Circuits[0].Name
	for _, c := range []struct {
		starter, target, value string
		cause                  circuit.Cause
		holds                  func(f *audit.File) bool
	}{
		{throttled, "C1.hold", "pump", circuit.HeldByValve, func(f *audit.File) bool { return f.Circuits[0].Block("C1").Word("hold") == "valve" }},
		{throttled, name + "/pump_at_rest", "unload", circuit.RestNotSaid, func(f *audit.File) bool { return f.Circuits[0].PumpAtRest == circuit.Keep }},
		{compensated, "RV1.set", "100 bar", circuit.ReliefTooLow, func(f *audit.File) bool {
			held, _ := circuit.HoldsPressure(f.Circuits[0].Block("P1"))
			opens, _ := circuit.ReliefOpens(f.Circuits[0].Block("RV1"))
			return opens >= circuit.ReliefAbove(held) && opens < circuit.ReliefAbove(held)+5e5
		}},
		{throttled, "M1.idle_speed", "500 rpm", circuit.NoConverter, func(f *audit.File) bool { return f.Circuits[0].Block("U1") != nil }},
	} {
		f := edited(t, c.starter, func(f *audit.File) error { return f.Set(c.target, c.value) })
		mended := mendOne(t, f, c.cause)
		if mended != nil && !c.holds(mended) {
			t.Errorf("%s = %s: mended to\n%s", c.target, c.value, mended.Bytes())
		}
	}
}

// mendOne mends the finding of a cause, which must be there and have a cure.
func mendOne(t *testing.T, f *audit.File, cause circuit.Cause) *audit.File {
	t.Helper()
	for _, g := range f.Check() {
		if g.Cause != cause {
			continue
		}
		c := Of(f, nil, g)
		if c == nil || c.Mend == nil {
			t.Errorf("%s: no cure", g.Text)
			return nil
		}
		return judge(t, f, c, g, string(cause))
	}
	t.Errorf("no finding of %q; there are %v", cause, f.Check())
	return nil
}

// TestMissingNumberLeadsToItsField: a number that only the user knows is asked for, not invented.
func TestMissingNumberLeadsToItsField(t *testing.T) {
	text, err := os.ReadFile("../../samples/starters/throttled-constant-flow.yaml")
	if err != nil {
		t.Fatal(err)
	}
	f, _ := audit.Parse(regexp.MustCompile(`bore: \{[^}]*\}, `).ReplaceAll(text, nil), nil, "")
	for _, g := range f.Check() {
		if g.Parameter == "bore" {
			if c := Of(f, nil, g); c == nil || c.Mend != nil || c.Field != "bore" {
				t.Errorf("%s: cure %+v", g.Text, c)
			}
			return
		}
	}
	t.Errorf("the bore is not missed: %v", f.Check())
}

// TestReliefIsSetAboveWhatWorks: a new valve lies above the pump, by ReliefAbove.
func TestReliefIsSetAboveWhatWorks(t *testing.T) {
	f := edited(t, "pressure-compensated-pump.yaml", func(f *audit.File) error { return f.Delete(f.Circuits[0].Name, false, "RV1", "T6") })
	mended := mendOne(t, f, circuit.NoRelief)
	if mended == nil {
		return
	}
	e := mended.Circuits[0]
	held, _ := circuit.HoldsPressure(e.Block("P1"))
	valve := e.Block("RV1")
	if opens, ok := circuit.ReliefOpens(valve); !ok || opens < circuit.ReliefAbove(held) || opens > circuit.ReliefAbove(held)+5e5 {
		t.Errorf("opens at %g, pump holds %g", opens, held)
	}
	if v := valve.Values["crack"]; v.Origin != circuit.Assumed || !strings.Contains(v.Note, "P1") {
		t.Errorf("its setting does not say where it comes from: %+v", v)
	}
	for _, port := range []string{"P", "T"} {
		if !slices.ContainsFunc(e.Lines, func(l circuit.Line) bool { return slices.Contains(l.Ports, circuit.PortRef{Block: "RV1", Port: port}) }) {
			t.Errorf("RV1.%s is not connected", port)
		}
	}
}

// TestOilWithoutTank: returns that are joined to each other alone are led to a new tank.
func TestOilWithoutTank(t *testing.T) {
	f := edited(t, "throttled-constant-flow.yaml", func(f *audit.File) error {
		name := f.Circuits[0].Name
		for _, b := range slices.Clone(f.Circuits[0].Blocks) {
			if b.Kind == tank {
				if err := f.Delete(name, false, b.ID); err != nil {
					return err
				}
			}
		}
		for _, port := range []string{"RV1.T", "F1.B"} {
			if err := f.Connect(name, "P1.S", port); err != nil {
				return err
			}
		}
		return nil
	})
	mendOne(t, f, circuit.NoTank)
}

// TestTanksAreNotJoined: of two tanks that stand alone none is a place for the other's oil.
func TestTanksAreNotJoined(t *testing.T) {
	f, _ := audit.Parse([]byte("format: barlitre/1\noil: {grade: ISO VG 46, temperature: 50 C}\naxes: {}\nduties: []\n"+
		"circuits: [{name: Bench, pump_at_rest: keep, blocks: {T1: {kind: tank}, T2: {kind: tank}}, lines: []}]\n"), nil, "")
	n := 0
	for _, g := range f.Check() {
		if g.Cause != circuit.OpenPort {
			continue
		}
		n++
		if c := Of(f, nil, g); c == nil || c.Name != "Take "+g.Block+" out" {
			t.Errorf("%s: cure %+v", g.Text, c)
		}
	}
	if n != 2 {
		t.Errorf("%d open ports", n)
	}
}

// TestTheOnlyControlFollows: where one control can follow the axis, the cure lets it.
func TestTheOnlyControlFollows(t *testing.T) {
	text, err := os.ReadFile("../../samples/starters/throttled-constant-flow.yaml")
	if err != nil {
		t.Fatal(err)
	}
	f, _ := audit.Parse(regexp.MustCompile(`follows: [a-z]+,? ?`).ReplaceAll(text, nil), nil, "")
	for _, g := range f.Check() {
		if g.Cause == circuit.NoFollower {
			c := Of(f, nil, g)
			if c == nil || c.Mend == nil || g.Parameter != "follows" || !strings.Contains(g.Text, g.Block+" has to follow axis "+g.Axis) {
				t.Fatalf("%s: cure %+v", g.Text, c)
			}
			if err := c.Mend(f); err != nil {
				t.Fatal(err)
			}
			for _, g := range f.Check() {
				if g.Cause == circuit.NoFollower {
					t.Error(g.Text)
				}
			}
			return
		}
	}
	t.Errorf("nothing says that no control follows: %v", f.Check())
}
