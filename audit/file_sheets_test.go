package audit

import (
	"bytes"
	"fmt"
	"strings"
	"testing"

	"barlitre/circuit"
	"barlitre/circuit/duty"
)

func TestCircuits(t *testing.T) {
	f := sheetFile(t)
	becomes(t, f, f.AddCircuit("Pump, fast", Proposal), "# end\n", "- name: \"Pump, fast\"\n  role: proposal\n  blocks: {}\n  lines: []\n# end\n")
	f = sheetFile(t)
	becomes(t, f, f.RenameCircuit("As found", "As: built"), "name: As found", `name: "As: built"`)
	f = sheetFile(t)
	if err := f.CopyCircuit("As found", "Pump-controlled"); err != nil {
		t.Fatal(err)
	}
	from := strings.Index(sheet, "  pump_at_rest")
	body := strings.TrimSuffix(sheet[from:], "# end\n")
	if got := string(f.Bytes()); !strings.HasSuffix(got, body+"- name: Pump-controlled\n"+strings.TrimSuffix(body, "\n")+"\n  role: proposal\n# end\n") {
		t.Errorf("the copy is\n%s", got)
	}
	if err := f.Set("Pump-controlled/pump_at_rest", "stop"); err != nil || f.Circuit("As found").PumpAtRest != circuit.Keep {
		t.Errorf("the copy is not one of its own: %v", err)
	}
	if err := f.Put("Pump-controlled/retrofit_cost.likely", "9000 EUR"); err != nil {
		t.Fatal(err)
	}
	if err := f.SwapRoles("As found", "Pump-controlled"); err != nil {
		t.Fatal(err)
	}
	if a, b := f.Circuit("As found"), f.Circuit("Pump-controlled"); a.Role != Proposal || b.Role != AsFound || a.Cost.Likely.SI != 9000 || b.Cost.Given {
		t.Errorf("swapped: %+v, %+v", a, b)
	}
	// The first circuit without a role is the one as found; with it gone the next must not become it.
	if err := f.AddCircuit("Third", Proposal); err != nil {
		t.Fatal(err)
	}
	if err := f.DeleteCircuit("As found"); err != nil || len(f.Circuits) != 2 || f.Circuit("Third").Role != Proposal {
		t.Errorf("%v\n%s", err, f.Bytes())
	}
	for _, c := range []struct {
		do   error
		want string
	}{
		{f.DeleteCircuit("Pump-controlled"), "as found, which proposals are compared with"},
		{f.AddCircuit("Third", Proposal), `a circuit "Third" already`},
		{f.AddCircuit(" ", Proposal), "needs a name"},
		{f.CopyCircuit("Fourth", "Fifth"), `no circuit "Fourth"`},
		{f.RenameCircuit("Third", "Pump-controlled"), "already"},
		{f.SwapRoles("Third", "Third"), "are both proposal"},
	} {
		if c.do == nil || !strings.Contains(c.do.Error(), c.want) {
			t.Errorf("got %v, want %q", c.do, c.want)
		}
	}
}

// A proposal that stands first takes its implied role along when it goes.
func TestDeleteFirstProposal(t *testing.T) {
	f := mustParse(t, "format: barlitre/1\noil: {grade: ISO VG 46, temperature: 50 C}\nduties: [{name: d, points: {t: [0 s, 1 s]}}]\ncircuits:\n- {name: a, role: proposal}\n- {name: b}\n- {name: c, role: as found}\n")
	if err := f.DeleteCircuit("a"); err != nil || f.Circuit("b").Role != Proposal {
		t.Errorf("%v\n%s", err, f.Bytes())
	}
}

func TestAxes(t *testing.T) {
	f := sheetFile(t)
	becomes(t, f, f.AddAxis("drum", duty.Rotary), "{ram: linear}", "{ram: linear, drum: rotary}")
	if err := f.RemoveAxis("drum"); err != nil {
		t.Error(err)
	}
	becomes(t, f, nil)
	if err := f.Set("V1.follows", "ram"); err != nil {
		t.Fatal(err)
	}
	if err := f.SetStandstill("cycle", "ram", "1 mm/s"); err != nil {
		t.Fatal(err)
	}
	becomes(t, f, f.RenameAxis("ram", "press"), "{ram: linear}", "{press: linear}", "ram.speed", "press.speed",
		"at: [4, 2], turn: 1}", "at: [4, 2], turn: 1, follows: press}", "    V1.command: [0, 1]\n", "    V1.command: [0, 1]\n  standstill: {press: 1 mm/s}\n")
	for _, c := range []struct {
		do   error
		want string
	}{
		{f.RemoveAxis("press"), `named by As found/V1.follows, duty "cycle", track press.speed, duty "cycle", standstill`},
		{f.AddAxis("press", duty.Linear), "already"},
		{f.AddAxis("a b", duty.Linear), "letters, digits"},
		{f.AddAxis("V1", duty.Linear), "is a block"},
		{f.RenameAxis("ram", "x"), `no axis "ram"`},
	} {
		if c.do == nil || !strings.Contains(c.do.Error(), c.want) {
			t.Errorf("got %v, want %q", c.do, c.want)
		}
	}
	f = mustParse(t, "format: barlitre/1\noil: {grade: ISO VG 46, temperature: 50 C}\nduties: [{name: d, points: {t: [0 s, 1 s]}}]\ncircuits: [{name: a}]\n")
	if err := f.AddAxis("ram", duty.Linear); err != nil || !strings.HasSuffix(string(f.Bytes()), "\naxes: {ram: linear}\n") {
		t.Errorf("%v\n%s", err, f.Bytes())
	}
}

// What stands at the load side is kept beside the kind of an axis.
func TestAxisLoadSide(t *testing.T) {
	f := sheetFile(t)
	becomes(t, f, f.SetAxisLoad("ram", " platen, and bale "), "{ram: linear}", `{ram: {kind: linear, load: "platen, and bale"}}`)
	if got := f.Axes[0].Load; got != "platen, and bale" {
		t.Errorf("load side %q", got)
	}
	becomes(t, f, f.SetAxisLoad("ram", "platen"), "{ram: linear}", "{ram: {kind: linear, load: \"platen\"}}")
	becomes(t, f, f.SetAxisLoad("ram", ""), "{ram: linear}", "{ram: {kind: linear}}")
	becomes(t, f, f.AddAxis("drum", duty.Linear), "{ram: linear}", "{ram: {kind: linear}, drum: linear}")
	becomes(t, f, f.SetAxisKind("drum", duty.Rotary), "{ram: linear}", "{ram: {kind: linear}, drum: rotary}")
	if err := f.SetAxisKind("ram", duty.Rotary); err == nil || f.Axes[0].Kind != duty.Linear {
		t.Errorf("ram has a speed in m/s and became rotary: %v", err)
	}
	if err := f.SetAxisLoad("sled", "x"); err == nil || !strings.Contains(err.Error(), `no axis "sled"`) {
		t.Error(err)
	}
	_, found := Parse([]byte("format: barlitre/1\naxes: {ram: {load: x}, drum: {kind: round}, arm: {kind: linear, mass: 3}}\n"), nil, "")
	for _, want := range []string{"axes, ram, kind: is missing", `axes, drum, kind: is "round"`, "axes, arm, mass: unknown key"} {
		if !strings.Contains(fmt.Sprint(found), want) {
			t.Errorf("no %q in %v", want, found)
		}
	}
}

// A copy of a duty has its points and comments, but not its hours.
func TestCopyDuty(t *testing.T) {
	f := sheetFile(t)
	if err := f.SetDuty("cycle", "hours", "300 h"); err != nil {
		t.Fatal(err)
	}
	points := "  points:\n    t: [0 s, 1 s]\n    ram.speed: [0 m/s, 0.1 m/s]   # v\n    V1.command: [0, 1]\n"
	becomes(t, f, f.CopyDuty("cycle", "night"), points, points+"  hours: 300 h\n- name: night # d\n"+points)
	if err := f.CopyDuty("cycle", "night"); err == nil || !strings.Contains(err.Error(), "already") {
		t.Error(err)
	}
	heads, columns, err := f.Table("night")
	if fmt.Sprint(heads, columns, err) != "[t ram.speed V1.command] [[0 s 1 s] [0 m/s 0.1 m/s] [0 1]] <nil>" {
		t.Error(heads, columns, err)
	}
}

func TestDuties(t *testing.T) {
	f := sheetFile(t)
	becomes(t, f, f.AddDuty("night", "60 s"), "    V1.command: [0, 1]\n", "    V1.command: [0, 1]\n- name: night\n  points:\n    t: [0 s, 60 s]\n")
	becomes(t, f, f.RemoveDuty("night"))
	becomes(t, f, f.AddTrack("cycle", "ram.load", "kN"), "    V1.command: [0, 1]\n", "    V1.command: [0, 1]\n    \"ram.load [kN]\": [0, 0]\n")
	becomes(t, f, f.RemoveTrack("cycle", "ram.load"))
	becomes(t, f, f.AddRow("cycle", 1, map[string]string{"t": "0.5 s", "ram.speed": "50 mm/s"}),
		"t: [0 s, 1 s]", "t: [0 s, 0.5 s, 1 s]", "[0 m/s, 0.1 m/s]", "[0 m/s, 50 mm/s, 0.1 m/s]", "V1.command: [0, 1]", "V1.command: [0, 0, 1]")
	becomes(t, f, f.RemoveRow("cycle", 1))
	becomes(t, f, f.AddRow("cycle", 2, map[string]string{"t": "2 s"}),
		"t: [0 s, 1 s]", "t: [0 s, 1 s, 2 s]", "[0 m/s, 0.1 m/s]", "[0 m/s, 0.1 m/s, 0.1 m/s]", "V1.command: [0, 1]", "V1.command: [0, 1, 1]")
	becomes(t, f, f.SetTable("cycle", []string{"t", "ram.speed [mm/s]"}, [][]string{{"0 s", "3 s"}, {"0", "100"}}),
		"t: [0 s, 1 s]", "t: [0 s, 3 s]", "ram.speed: [0 m/s, 0.1 m/s]   # v", "\"ram.speed [mm/s]\": [0, 100]   # v", "    V1.command: [0, 1]\n", "")
	for key, value := range map[string]string{"hours": "3000 h", "repeats": "no", "step": "5 ms", "instants": "no", "note": "night: 2"} {
		if err := f.SetDuty("cycle", key, value); err != nil {
			t.Error(err)
		}
	}
	if err := f.SetPhase("cycle", "out", "1 s"); err != nil {
		t.Error(err)
	}
	if d := f.Duties[0]; d.Hours != 3000*3600 || d.Repeats || d.Step != 5e-3 || !d.Sampled || len(d.Phases) != 1 || d.Phases[0].From != 1 {
		t.Errorf("got %+v", d)
	}
	if err := f.SetPhase("cycle", "out", ""); err != nil || len(f.Duties[0].Phases) != 0 {
		t.Errorf("%v, %v", err, f.Duties[0].Phases)
	}
	for _, c := range []struct {
		do   error
		want string
	}{
		{f.AddDuty("cycle", "1 s"), "already"},
		{f.AddDuty("x", "1 m"), "write a time above 0"},
		{f.RenameDuty("nix", "y"), `no duty "nix"`},
		{f.AddTrack("cycle", "ram.pressure", ""), "is not a track"},
		{f.AddTrack("cycle", "ram.load", "bar"), "not a unit of force"},
		{f.AddTrack("cycle", "ram.speed", ""), "already"},
		{f.RemoveTrack("cycle", "t"), "no track"},
		{f.RemoveRow("cycle", 0), "needs two"},
		{f.AddRow("cycle", 0, map[string]string{"t": "9 s"}), "time runs backwards"},
		{f.AddRow("cycle", 0, nil), "has no time"},
		{f.AddRow("cycle", 0, map[string]string{"t": "0 s", "ram.load": "1 kN"}), `no track "ram.load"`},
		{f.SetDuty("cycle", "hours", "9000 h"), "8784 h"},
		{f.SetDuty("cycle", "hour", "1 h"), "give one of hours"},
		{f.SetStandstill("cycle", "arm", "1 mm/s"), `no axis "arm"`},
	} {
		if c.do == nil || !strings.Contains(c.do.Error(), c.want) {
			t.Errorf("got %v, want %q", c.do, c.want)
		}
	}
	g := full(t)
	if err := g.AddRow("Spätschicht", 0, map[string]string{"t": "0 s"}); err == nil || !strings.Contains(err.Error(), "taken from press.csv") {
		t.Errorf("got %v", err)
	}
}

func TestNotesAndGroups(t *testing.T) {
	f := sheetFile(t)
	_, err := f.AddNote("As found", "ask: is it 160 bar?\n{maybe}", [2]float64{3, 4})
	becomes(t, f, err, "blocks: [F1]}\n", "blocks: [F1]}\n  notes:\n  - {text: \"ask: is it 160 bar?\\n{maybe}\", at: [3, 4]}\n")
	if n := f.Circuit("As found").Notes; len(n) != 1 || n[0] != (circuit.SheetNote{Text: "ask: is it 160 bar?\n{maybe}", At: [2]float64{3, 4}}) {
		t.Errorf("got %v", n)
	}
	becomes(t, f, f.SetNote("As found", 0, "asked", [2]float64{3, 5}), "blocks: [F1]}\n", "blocks: [F1]}\n  notes:\n  - {text: \"asked\", at: [3, 5]}\n")
	becomes(t, f, f.DeleteNote("As found", 0), "blocks: [F1]}\n", "blocks: [F1]}\n  notes: []\n")
	f = sheetFile(t)
	becomes(t, f, f.SetGroup("As found", 0, "Power unit", "P1"), "{label: Supply, blocks: [P1, T1]} # g", "{label: Power unit, blocks: [P1]} # g")
	_, err = f.AddGroup("As found", "Rest", "V1", "CK1")
	becomes(t, f, err, "{label: Supply, blocks: [P1, T1]} # g", "{label: Power unit, blocks: [P1]} # g", "blocks: [F1]}\n", "blocks: [F1]}\n  - {label: Rest, blocks: [V1, CK1]}\n")
	if err := f.DeleteGroup("As found", 2); err != nil || len(f.Circuit("As found").Groups) != 2 {
		t.Error(err)
	}
	for _, c := range []struct{ from, to, want string }{
		{"label: Supply", "labl: Supply", `did you mean "label"?`},
		{"label: Supply, ", "", "label: is missing"},
		{"[P1, T1]", "[P1, P1]", "P1 stands here twice"},
		{"[P1, T1]", "[P1, T9]", `there is no block "T9" in the circuit`},
		{"[P1, T1]", "[]", "name the blocks"},
		{"  groups:", "  notes: [{text: x}]\n  groups:", "at: is missing"},
		{"  groups:", "  notes: [{at: [1, 2]}]\n  groups:", "text: is missing"},
		{"  groups:", "  notes: [{text: x, at: 3}]\n  groups:", "needs two numbers"},
	} {
		_, found := Parse([]byte(strings.Replace(strings.Replace(sheet, `"V1.command []"`, "V1.command", 1), c.from, c.to, 1)), nil, "")
		if len(found) == 0 || !strings.Contains(found[0].Text, c.want) {
			t.Errorf("%s: got %v", c.want, found)
		}
	}
	if _, err := f.AddGroup("As found", "x", "T9"); err == nil || !strings.Contains(err.Error(), `no block "T9"`) {
		t.Errorf("got %v", err)
	}
	if _, err := f.AddGroup("As found", "x"); err == nil {
		t.Error("a group of nothing")
	}
}

func TestClear(t *testing.T) {
	f := sheetFile(t)
	becomes(t, f, f.Clear("V1.turn"), ", turn: 1}", "}")
	if err := f.Clear("As found/F1.nominal_flow"); err != nil || f.Circuit("As found").Block("F1").Values["nominal_flow"].Text != "" {
		t.Errorf("%v\n%s", err, f.Bytes())
	}
	before := f.Bytes()
	if err := f.Clear("oil.temperature"); err == nil || !bytes.Equal(before, f.Bytes()) {
		t.Errorf("took out what the file needs: %v", err)
	}
	if err := f.PutOil(map[string]string{"temperature": "60 C", "density": "870 kg/m3", "viscosity": "30 mPa s"}); err != nil ||
		!strings.Contains(string(f.Bytes()), "oil: {temperature: 60 C, density: 870 kg/m3, viscosity: 30 mPa s}\n") {
		t.Errorf("%v\n%s", err, f.Bytes())
	}
	if err := f.PutOil(map[string]string{"temperature": "60 C"}); err == nil {
		t.Error("an oil without grade and viscosity")
	}
}

// What somebody typed in place of a typical value is no typical value any more.
func TestSetDropsTypicalNote(t *testing.T) {
	f := sheetFile(t)
	id, err := f.AddBlock("As found", "relief", [2]float64{}, "")
	if err != nil {
		t.Fatal(err)
	}
	if err := f.Set(id+".crack", "200 bar"); err != nil {
		t.Fatal(err)
	}
	if v := f.Circuit("As found").Block(id).Values["crack"]; v.Note != "" || v.Origin != circuit.Assumed || v.SI != 200e5 {
		t.Errorf("got %+v", v)
	}
}
