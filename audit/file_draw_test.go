package audit

import (
	"bytes"
	"strings"
	"testing"

	"barlitre/circuit"
	"barlitre/circuit/duty"
)

// sheet is a file with comments everywhere that an edit may meet them.
const sheet = `format: barlitre/1
# top
oil: {grade: ISO VG 46, temperature: 50 C}
axes: {ram: linear}
duties:
- name: cycle # d
  points:
    t: [0 s, 1 s]
    ram.speed: [0 m/s, 0.1 m/s]   # v
    "V1.command []": [0, 1]
circuits:
- name: As found
  pump_at_rest: keep
  blocks: # all
    # the supply
    T1: {kind: tank, at: [1, 9]}
    P1: {kind: pump, displacement: 45 cm3/rev, at: [1, 5]} # big one
    # behind it
    F1:
      kind: filter   # 10 µm
      nominal_flow: 60 L/min
    CK1: {kind: check, mirror: no}

    V1: {kind: valve, nominal_flow: 60 L/min, at: [4, 2], turn: 1}
  lines: # one line = one node
  - T1.T - P1.S # suction
  # pressure
  - P1.P - F1.A
  - F1.B - CK1.in   # clean
  - "CK1.out - V1.P"
  - V1.T - T1.T
  groups:
  - {label: Supply, blocks: [P1, T1]} # g
  - {label: Clean, blocks: [F1]}
# end
`

func sheetFile(t *testing.T) *File {
	t.Helper()
	return mustParse(t, strings.Replace(sheet, `"V1.command []"`, "V1.command", 1))
}

func mustParse(t testing.TB, text string) *File {
	t.Helper()
	f, found := Parse([]byte(text), nil, "")
	if f == nil || circuit.AnyStops(found) {
		t.Fatalf("not readable: %v", found)
	}
	return f
}

// becomes fails unless the file is the sheet with pieces of text changed.
func becomes(t *testing.T, f *File, err error, pairs ...string) {
	t.Helper()
	if err != nil {
		t.Error(err)
		return
	}
	want := strings.Replace(sheet, `"V1.command []"`, "V1.command", 1)
	for i := 0; i < len(pairs); i += 2 {
		if strings.Count(want, pairs[i]) != 1 {
			t.Fatalf("%q stands %d times in the sheet", pairs[i], strings.Count(want, pairs[i]))
		}
		want = strings.Replace(want, pairs[i], pairs[i+1], 1)
	}
	if got := string(f.Bytes()); got != want {
		t.Errorf("got\n%s\nwant\n%s", got, want)
	}
}

func TestAddBlock(t *testing.T) {
	f := sheetFile(t)
	id, err := f.AddBlock("As found", "relief", [2]float64{3, 4.5}, "")
	if id != "RV1" {
		t.Errorf("id %q", id)
	}
	becomes(t, f, err, "turn: 1}\n", "turn: 1}\n    RV1: {kind: relief, crack: {value: 160 bar, origin: assumed, note: \"typical, put in your own\"}, at: [3, 4.5]}\n")
	if v := f.Circuit("As found").Block("RV1").Values["crack"]; v.Origin != circuit.Assumed || v.SI != 160e5 {
		t.Errorf("got %+v", v)
	}
	becomes(t, f, f.Delete("As found", false, "RV1"))
	for _, c := range []struct{ kind, id, want string }{
		{"relief", "", "RV1"}, {"relief", "", "RV2"}, {"pump", "", "P2"}, {"valve", "", "V2"}, {"cylinder", "C9", "C9"}, {"cylinder", "", "C1"},
	} {
		if id, err := f.AddBlock("As found", c.kind, [2]float64{}, c.id); err != nil || id != c.want {
			t.Errorf("%s: %q, %v", c.kind, id, err)
		}
	}
	e := f.Circuit("As found")
	if a := e.Block("C9").Word("axis"); a != "ram" {
		t.Errorf("the first cylinder has axis %q", a)
	}
	if a := e.Block("C1").Word("axis"); a != "" {
		t.Errorf("the second cylinder takes axis %q, which is moved already", a)
	}
	if a := e.Block("V2").Word("follows"); a != "ram" {
		t.Errorf("the second valve follows %q; the first is commanded", a)
	}
	for _, c := range [][3]string{
		{"As found", "relif", `did you mean relief valve (relief)?`}, {"As", "relief", `there is no circuit "As"`}, {"As found", "relief", "has a block V1 already"},
	} {
		before := f.Bytes()
		if _, err := f.AddBlock(c[0], c[1], [2]float64{}, "V1"); err == nil || !strings.Contains(err.Error(), c[2]) || !bytes.Equal(before, f.Bytes()) {
			t.Errorf("%v: got %v", c, err)
		}
	}
}

// An actuator that takes the only axis gives it to the only valve that waits for one.
func TestAddBlockBindsTheWaitingValve(t *testing.T) {
	start := "format: barlitre/1\noil: {grade: ISO VG 46, temperature: 50 C}\naxes: {}\nduties: [{name: d, points: {t: [0 s, 1 s]}}]\ncircuits: [{name: x}]\n"
	draw := func(valves int) *File {
		f := mustParse(t, start)
		for i := 0; i < valves; i++ {
			if _, err := f.AddBlock("x", "valve", [2]float64{}, ""); err != nil {
				t.Fatal(err)
			}
		}
		if err := f.AddAxis("ram", duty.Linear); err != nil {
			t.Fatal(err)
		}
		if _, err := f.AddBlock("x", "cylinder", [2]float64{}, ""); err != nil {
			t.Fatal(err)
		}
		return f
	}
	if b := draw(1).Circuits[0].Block("V1"); b.Word("follows") != "ram" {
		t.Errorf("the only valve follows %q", b.Word("follows"))
	}
	for _, id := range []string{"V1", "V2"} {
		if b := draw(2).Circuits[0].Block(id); b.Word("follows") != "" {
			t.Errorf("%s of two valves follows %q; that is for the user to say", id, b.Word("follows"))
		}
	}
}

// A new block of any kind is complete but for ports, and for what only the user knows.
func TestEveryKindBeginsComplete(t *testing.T) {
	for _, k := range circuit.Catalog() {
		f := mustParse(t, "format: barlitre/1\noil: {grade: ISO VG 46, temperature: 50 C}\naxes: {ram: linear, drum: rotary}\nduties: [{name: d, points: {t: [0 s, 1 s]}}]\ncircuits: [{name: x, pump_at_rest: keep}]\n")
		id, err := f.AddBlock("x", k.Name, [2]float64{1, 2}, "")
		if err != nil || !strings.HasPrefix(id, k.Letter) || k.Letter == "" {
			t.Errorf("%s: %q, %v", k.Name, id, err)
			continue
		}
		for _, n := range circuit.Check(f.Circuits[0].Circuit, f.Axes, nil) {
			if n.Level == circuit.Stops && n.Parameter != "" && n.Parameter != "hold" {
				t.Errorf("%s: %s", k.Name, n.Text)
			}
		}
	}
}

func TestDelete(t *testing.T) {
	f := sheetFile(t)
	becomes(t, f, f.Delete("As found", false, "V1"), "    V1: {kind: valve, nominal_flow: 60 L/min, at: [4, 2], turn: 1}\n", "",
		"  - \"CK1.out - V1.P\"\n  - V1.T - T1.T\n", "", "    V1.command: [0, 1]\n", "")
	f = sheetFile(t)
	becomes(t, f, f.Delete("As found", false, "P1"), "    P1: {kind: pump, displacement: 45 cm3/rev, at: [1, 5]} # big one\n", "",
		"- T1.T - P1.S # suction", "# suction", "  - P1.P - F1.A\n", "", "[P1, T1]", "[T1]")
	f = sheetFile(t)
	becomes(t, f, f.Delete("As found", true, "CK1", "F1"), "    F1:\n      kind: filter   # 10 µm\n      nominal_flow: 60 L/min\n    CK1: {kind: check, mirror: no}\n", "",
		"- P1.P - F1.A", "- P1.P - V1.P", "- F1.B - CK1.in   # clean\n  - \"CK1.out - V1.P\"", "# clean", "  - {label: Clean, blocks: [F1]}\n", "")
	f = sheetFile(t)
	if err := f.Delete("As found", false, "T1", "P1", "F1", "CK1", "V1"); err != nil {
		t.Error(err)
	}
	for _, want := range []string{"blocks: {} # all\n    # the supply\n    # behind it\n\n  lines: [] # one line = one node\n  # suction\n  # pressure\n  # clean\n  groups: []\n  # g\n"} {
		if !strings.Contains(string(f.Bytes()), want) {
			t.Errorf("an empty sheet is\n%s", f.Bytes())
		}
	}
	if _, err := f.AddBlock("As found", "tank", [2]float64{1, 2}, ""); err != nil || !strings.Contains(string(f.Bytes()), "blocks: # all\n    T1: {kind: tank, at: [1, 2]}\n    # the supply") {
		t.Errorf("%v\n%s", err, f.Bytes())
	}
	f = sheetFile(t)
	if err := f.Delete("As found", false, "P1", "X9"); err == nil || !strings.Contains(err.Error(), `no block "X9"`) {
		t.Errorf("got %v", err)
	}
}

// A junction that goes joins its lines; what must not become one is not healed.
func TestDeleteHeals(t *testing.T) {
	f := sheetFile(t)
	if _, err := f.AddJunction("As found", 1, [2]float64{}); err != nil {
		t.Fatal(err)
	}
	if err := f.Connect("As found", "J1.2", "P1.LS"); err != nil {
		t.Fatal(err)
	}
	becomes(t, f, f.Delete("As found", true, "J1"), "P1.P - F1.A", "P1.P - F1.A - P1.LS")
	for _, do := range []error{f.Disconnect("As found", "V1.P"), f.Disconnect("As found", "P1.P"), f.Connect("As found", "F1.A", "T1.T")} {
		if do != nil {
			t.Fatal(do)
		}
	}
	id, err := f.AddBlock("As found", "pressure_source", [2]float64{}, "")
	if err == nil {
		err = f.Connect("As found", "F1.B", id+".P")
	}
	if err != nil {
		t.Fatal(err)
	}
	before := f.Bytes()
	if err := f.Delete("As found", true, "F1"); err == nil || !strings.Contains(err.Error(), "F1: the lines on both sides cannot become one: LP1 and T1 hold") || !bytes.Equal(before, f.Bytes()) {
		t.Errorf("got %v", err)
	}
	if err := f.Delete("As found", false, "F1"); err != nil {
		t.Error(err)
	}
}

func TestRename(t *testing.T) {
	f := sheetFile(t)
	becomes(t, f, f.Rename("As found", "V1", "V7"), "    V1: {", "    V7: {", "CK1.out - V1.P", "CK1.out - V7.P", "V1.T - T1.T", "V7.T - T1.T", "V1.command", "V7.command")
	f = sheetFile(t)
	becomes(t, f, f.Rename("As found", "P1", "MP"), "    P1: {", "    MP: {", "T1.T - P1.S", "T1.T - MP.S", "P1.P - F1.A", "MP.P - F1.A", "[P1, T1]", "[MP, T1]")
	for id, want := range map[string]string{"V1": "has a block V1 already", "P 2": "letters, digits and _", "ram": "name of an axis"} {
		if err := f.Rename("As found", "MP", id); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%s: got %v", id, err)
		}
	}
}

func TestTurnAndMirror(t *testing.T) {
	f := sheetFile(t)
	becomes(t, f, f.Rotate("As found", 1, "V1"), "turn: 1}", "turn: 2}")
	f = sheetFile(t)
	becomes(t, f, f.Mirror("As found", "V1"), "turn: 1}", "turn: 3, mirror: yes}")
	f = sheetFile(t)
	becomes(t, f, f.Rotate("As found", -1, "F1"), "60 L/min\n    CK1", "60 L/min\n      turn: 3\n    CK1")
	f = sheetFile(t)
	becomes(t, f, f.Rotate("As found", 1, "T1", "P1"), "at: [1, 9]", "at: [1, 9], turn: 1", "at: [1, 5]", "at: [5, 9], turn: 1")
	f = sheetFile(t)
	becomes(t, f, f.MoveBy("As found", [2]float64{2, -1}, "T1", "V1"), "at: [1, 9]", "at: [3, 8]", "at: [4, 2]", "at: [6, 1]")
	for i := 0; i < 4; i++ {
		if err := f.Rotate("As found", 1, "T1", "P1", "V1"); err != nil {
			t.Fatal(err)
		}
	}
	if b := f.Circuit("As found").Block("V1"); *b.At != [2]float64{6, 1} || b.Turn != 1 {
		t.Errorf("four quarter turns leave V1 at %v, turn %d", *b.At, b.Turn)
	}
}
