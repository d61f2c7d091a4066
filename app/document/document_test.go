package document

import (
	"errors"
	"fmt"
	"math/rand"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/samples"
)

func TestNewIsEmptyAndClean(t *testing.T) {
	b := newBench(t, quick, Options{})
	f := b.File()
	if string(f.Bytes()) != emptyText || len(f.Findings()) == 0 || b.Dirty() || b.Title() != "untitled" || b.Path() != "" {
		t.Errorf("%q, findings %v, title %q", f.Bytes(), f.Findings(), b.Title())
	}
	for _, n := range f.Findings() {
		if !strings.Contains(n.Text, "circuit") && !strings.Contains(n.Text, "dut") {
			t.Errorf("the empty audit lacks more than duties and circuits: %v", n)
		}
	}
	if _, err := f.Conditions(); err != nil {
		t.Errorf("oil of the empty audit: %v", err)
	}
	if s, rev := b.Solution(); s != nil || rev != 0 || b.Current() {
		t.Error("the empty audit has a solution")
	}
}

// Edit, undo, redo and save give the same bytes, and only then is it clean.
func TestEditUndoRedoSave(t *testing.T) {
	b := newBench(t, quick, Options{})
	path := b.openPress(t)
	old := readFile(t, path)
	texts := []string{old}
	for _, set := range [][2]string{{"As found/RV1.crack", "231 bar"}, {"As found/RV1.crack.origin", "assumed"}, {"As found/note", "Käufer: µ, \"x\""}, {"oil.temperature", "51 C"}} {
		revision := b.Revision()
		check(t, b.Set(set[0], set[1]))
		if b.Revision() != revision+1 || !b.Dirty() || b.Title() != "press.yaml*" {
			t.Errorf("%v: revision %d, title %q", set, b.Revision(), b.Title())
		}
		texts = append(texts, string(b.File().Bytes()))
	}
	saved := len(texts) - 2
	walk := func(step func() (string, bool), from, by int) {
		for i := from; i >= 0 && i < len(texts); i += by {
			if got := string(b.File().Bytes()); got != texts[i] {
				t.Fatalf("text %d differs:\n%s", i, got)
			}
			if b.Dirty() != (i != saved) {
				t.Errorf("text %d: dirty %v", i, b.Dirty())
			}
			if _, ok := step(); ok != (i+by >= 0 && i+by < len(texts)) {
				t.Fatalf("text %d: ok %v", i, ok)
			}
		}
	}
	b.Undo()
	check(t, b.Save())
	if b.Dirty() || b.Title() != "press.yaml" || readFile(t, path) != texts[saved] {
		t.Errorf("after save: title %q, text\n%s", b.Title(), readFile(t, path))
	}
	b.Redo()
	walk(b.Undo, len(texts)-1, -1)
	walk(b.Redo, 0, 1)
	for range texts {
		b.Undo()
	}
	check(t, b.Save())
	if readFile(t, path) != old {
		t.Error("undone and saved, but not the bytes that were opened")
	}
	if b.events.wait(t, Saved, 1).Err != nil {
		t.Error("no event of saving")
	}
}

// Whatever was edited, undo leads back through the very same texts.
func TestUndoRandom(t *testing.T) {
	b := newBench(t, quick, Options{})
	b.openPress(t)
	r := rand.New(rand.NewSource(1))
	texts := []string{string(b.File().Bytes())}
	at := 0
	for range 150 {
		b.clock.pass(time.Minute) // no merging
		switch r.Intn(4) {
		case 0:
			if _, ok := b.Undo(); ok != (at > 0) {
				t.Fatalf("undo at %d: %v", at, ok)
			}
			at = max(at-1, 0)
		case 1:
			if _, ok := b.Redo(); ok != (at < len(texts)-1) {
				t.Fatalf("redo at %d of %d: %v", at, len(texts), ok)
			}
			at = min(at+1, len(texts)-1)
		default:
			check(t, randomEdit(b.Document, r))
			if now := string(b.File().Bytes()); now != texts[at] {
				texts = append(texts[:at+1], now)
				at++
			}
		}
		if string(b.File().Bytes()) != texts[at] {
			t.Fatalf("text %d differs", at)
		}
	}
	if len(texts) < 10 {
		t.Errorf("only %d texts", len(texts))
	}
}

// randomEdit changes a value, a place or a point; all of them can be solved.
func randomEdit(d *Document, r *rand.Rand) error {
	switch r.Intn(4) {
	case 0:
		return d.Set("As found/RV1.crack", fmt.Sprintf("%d bar", 226+r.Intn(9)))
	case 1:
		return d.SetPoint("baling", "ram.load", 5, fmt.Sprintf("%d kN", 60+r.Intn(40)))
	case 2:
		return move(d, "As found", map[string][2]float64{"RV1": {float64(r.Intn(50)), 34}, "P1": {24, float64(r.Intn(50))}})
	}
	return d.Set("C1.friction", fmt.Sprintf("%.1f kN", 1.5+float64(r.Intn(20))/10))
}

func TestRefusedEditChangesNothing(t *testing.T) {
	b := newBench(t, quick, Options{})
	b.openPress(t)
	check(t, b.Set("As found/note", "one"))
	b.Undo()
	text, revision := string(b.File().Bytes()), b.Revision()
	boom := errors.New("boom")
	for name, err := range map[string]error{
		"unit":    b.Set("As found/RV1.crack", "5 m"),
		"error":   b.Edit("x", func(f *audit.File) error { return errors.Join(f.Set("As found/note", "two"), boom) }),
		"panic":   b.Edit("x", func(f *audit.File) error { _ = f.Set("As found/note", "two"); panic("oh") }),
		"one bad": move(b.Document, "As found", map[string][2]float64{"P1": {1, 2}, "X9": {1, 2}}),
	} {
		if err == nil {
			t.Errorf("%s: accepted", name)
		}
		if fault := (*Fault)(nil); errors.As(err, &fault) != (name == "panic") {
			t.Errorf("%s: %v", name, err)
		}
	}
	check(t, b.Set("As found/pump_at_rest", "keep")) // as it is
	if string(b.File().Bytes()) != text || b.Revision() != revision || b.RedoName() == "" || b.Dirty() {
		t.Errorf("revision %d, want %d; redo %q; dirty %v", b.Revision(), revision, b.RedoName(), b.Dirty())
	}
}

// A file that was handed out stays as it is.
func TestFileIsASnapshot(t *testing.T) {
	b := newBench(t, quick, Options{})
	b.openPress(t)
	f := b.File()
	text, set := string(f.Bytes()), f.Circuit("As found").Block("RV1").Values["crack"].Text
	check(t, b.Set("As found/RV1.crack", "231 bar"))
	if string(f.Bytes()) != text || f.Circuit("As found").Block("RV1").Values["crack"].Text != set {
		t.Error("an edit changed a file that was handed out")
	}
	if got := b.File().Circuit("As found").Block("RV1").Values["crack"].Text; got != "231 bar" {
		t.Errorf("set to %s", got)
	}
}

func TestMerging(t *testing.T) {
	b := newBench(t, quick, Options{})
	b.openPress(t)
	start := string(b.File().Bytes())
	undone := func(want ...string) {
		t.Helper()
		var got []string
		for {
			name, ok := b.Undo()
			if !ok {
				break
			}
			got = append(got, name)
		}
		if strings.Join(got, "; ") != strings.Join(want, "; ") || string(b.File().Bytes()) != start {
			t.Errorf("undone %q, want %q", got, want)
		}
	}
	drag := func(x float64) {
		t.Helper()
		check(t, move(b.Document, "As found", map[string][2]float64{"RV1": {x, 34}}))
	}
	step := func(bar int) { t.Helper(); check(t, b.Step("As found/RV2.crack", fmt.Sprintf("%d bar", bar))) }

	for x := range 10 {
		drag(float64(x))
		b.clock.pass(900 * time.Millisecond)
	}
	undone("Move RV1")
	b.Redo()
	if x := b.File().Circuit("As found").Block("RV1").At[0]; x != 9 {
		t.Errorf("redone to %g", x)
	}
	drag(10) // after undo and redo it is another drag
	undone("Move RV1", "Move RV1")

	step(231)
	step(232)
	b.clock.pass(1001 * time.Millisecond)
	step(233)
	undone("Change RV2: cracks at (As found)", "Change RV2: cracks at (As found)")

	step(231)
	drag(1) // something else between
	step(232)
	undone("Change RV2: cracks at (As found)", "Move RV1", "Change RV2: cracks at (As found)")

	step(231)
	check(t, b.Save()) // saved between: that state can be reached
	step(232)
	b.Undo()
	if b.Dirty() {
		t.Error("undo went past what was saved")
	}
	undone("Change RV2: cracks at (As found)")

	step(231)
	step(260) // back: nothing to undo
	undone()
	drag(3)
	check(t, b.Set("As found/RV2.crack", "231 bar"))
	check(t, b.Set("As found/RV2.crack", "232 bar")) // Set does not merge
	undone("Change RV2: cracks at (As found)", "Change RV2: cracks at (As found)", "Move RV1")
}

func TestNames(t *testing.T) {
	b := newBench(t, quick, Options{})
	b.openPress(t)
	for target, want := range map[string]string{
		"RV1.crack":                 "Change RV1: cracks at",
		"As found/RV1.crack.origin": "Change RV1: cracks at, origin (As found)",
		"RV1.turn":                  "Turn RV1",
		"As found/RV1.mirror":       "Mirror RV1 (As found)",
		"oil.viscosity_index":       "Change oil viscosity index",
		"As found/pump_at_rest":     "Change pump at rest (As found)",
		"X9.crack":                  "Change X9 crack",
		"no such circuit/RV1.crack": "Change RV1 crack (no such circuit)",
		"RV1":                       "Change RV1",
		"":                          "Change ",
		"site.name":                 "Change site name",
		"energy.price.low":          "Change energy price low",
		"RV1.nothing":               "Change RV1: nothing",
		"As found/RV2.crack":        "Change RV2: cracks at (As found)",
		"As found/C1.rating.value":  "Change C1: " + circuit.InSentence(circuit.KindNamed("cylinder").Param("rating").Title) + ", value (As found)",
	} {
		if got := setName(b.File(), target); got != want {
			t.Errorf("%s: %q, want %q", target, got, want)
		}
	}
	check(t, b.Set("As found/RV1.crack", "231 bar"))
	check(t, b.SetPoint("baling", "ram.load", 5, "80 kN"))
	if got := b.UndoName(); got != "Change ram.load of baling, row 6" {
		t.Errorf("undo name %q", got)
	}
	b.Undo()
	if b.UndoName() != "Change RV1: cracks at (As found)" || b.RedoName() != "Change ram.load of baling, row 6" {
		t.Errorf("undo %q, redo %q", b.UndoName(), b.RedoName())
	}
	check(t, b.Set("As found/RV1.crack", "232 bar"))
	if b.RedoName() != "" {
		t.Error("redo outlives an edit")
	}
}

// A file with faults opens with what is right in it; one that is none does not.
func TestOpenWithFaults(t *testing.T) {
	b := newBench(t, quick, Options{})
	path := b.openPress(t)
	text := readFile(t, path)
	bad := filepath.Join(b.dir, "bad.yaml")
	check(t, os.WriteFile(bad, []byte(strings.Replace(text, "value: 71 cm3/rev", "value: 71 bar", 1)), 0o644))
	problems, err := b.Open(bad)
	check(t, err)
	if len(problems) == 0 || problems[0].Block != "P1" || b.Path() != bad || len(b.File().Circuits) != 2 {
		t.Errorf("problems %v, path %s", problems, b.Path())
	}
	check(t, b.Set("As found/note", "kept"))
	for name, data := range map[string]string{"none.yaml": "", "text.yaml": "hello", "syntax.yaml": "a: [", "newer.yaml": "format: barlitre/9\n"} {
		p := filepath.Join(b.dir, name)
		if data != "" {
			check(t, os.WriteFile(p, []byte(data), 0o644))
		}
		_, err := b.Open(p)
		if err == nil || !strings.Contains(err.Error(), p) || !strings.Contains(err.Error(), "stays") || b.Path() != bad || !b.Dirty() {
			t.Errorf("%s: %v; open is %s", name, err, b.Title())
		}
	}
	if b.OpenSample("none.yaml") == nil || b.Path() != bad {
		t.Error("a sample that is not there")
	}
}

func TestSampleIsUntitled(t *testing.T) {
	b := newBench(t, quick, Options{})
	b.openPress(t)
	check(t, b.Set("As found/RV1.crack", "231 bar"))
	check(t, b.OpenSample(press))
	if b.Path() != "" || b.File().Path != "" || b.Dirty() || b.Title() != "baling-press (sample)" || b.UndoName() != "" {
		t.Errorf("path %q, title %q, undo %q", b.Path(), b.Title(), b.UndoName())
	}
	if err := b.Save(); !errors.Is(err, ErrNoPath) {
		t.Errorf("saved: %v", err)
	}
	for _, s := range samples.Starters() {
		check(t, b.OpenStarter(s.Name))
		if want := strings.TrimSuffix(s.Name, ".yaml") + " (starter)"; b.Path() != "" || b.Dirty() || b.Title() != want {
			t.Errorf("path %q, title %q, want %q", b.Path(), b.Title(), want)
		}
	}
	if b.OpenStarter("none.yaml") == nil {
		t.Error("a starter that is not there")
	}
	check(t, b.OpenEmpty())
	if b.Title() != "untitled" || string(b.File().Bytes()) != emptyText {
		t.Errorf("title %q", b.Title())
	}
}

func TestClosed(t *testing.T) {
	b := newBench(t, quick, Options{})
	path := b.openPress(t)
	check(t, b.Close())
	check(t, b.Close())
	_, err := b.Open(path)
	for _, err := range []error{err, b.Set("As found/RV1.crack", "231 bar"), b.OpenEmpty()} {
		if !errors.Is(err, errClosed) {
			t.Errorf("after close: %v", err)
		}
	}
	if _, ok := b.Undo(); ok {
		t.Error("undo after close")
	}
}

func TestRecent(t *testing.T) {
	b := newBench(t, quick, Options{})
	if got := b.Recent(); len(got) != 0 {
		t.Errorf("at first %v", got)
	}
	path := b.openPress(t)
	for i := range 10 {
		check(t, b.SaveAs(filepath.Join(b.dir, fmt.Sprint("p", i))))
	}
	_, err := b.Open(path)
	check(t, err)
	check(t, os.Remove(filepath.Join(b.dir, "p8.yaml")))
	want := []string{"press", "p9", "p7", "p6", "p5", "p4", "p3"}
	other := newBench(t, quick, Options{Config: b.config})
	got := other.Recent()
	for i, w := range want {
		if i >= len(got) || got[i] != filepath.Join(b.dir, w+".yaml") {
			t.Fatalf("got %v, want %v", got, want)
		}
	}
	if len(got) != len(want) {
		t.Errorf("got %v", got)
	}
	check(t, os.WriteFile(b.recentPath(), []byte("{"), 0o644))
	_, err = b.Open(path)
	if got := b.Recent(); err != nil || len(got) != 1 {
		t.Errorf("after a damaged list: %v, %v", got, err)
	}
}
