package audit

import (
	"bytes"
	"math"
	"os"
	"strings"
	"testing"
)

// edited parses text, sets target and returns the new text; the new value must
// also be what the File has.
func edited(t *testing.T, text, target, quantity string) string {
	t.Helper()
	f, _ := Parse([]byte(text), nil, "")
	if f == nil {
		t.Fatalf("not readable:\n%s", text)
	}
	if err := f.Set(target, quantity); err != nil {
		t.Fatalf("%s = %s: %v", target, quantity, err)
	}
	again, _ := Parse(f.Bytes(), nil, "")
	if again == nil || !again.holds(target, quantity) {
		t.Errorf("%s = %s does not read back from\n%s", target, quantity, f.Bytes())
	}
	return string(f.Bytes())
}

// block wraps the text of a block's value, at its indentation, into a file.
func block(value string) string {
	return "format: barlitre/1\naxes: {ram: linear, arm: linear}\ncircuits:\n- name: As found\n  blocks:\n    RV1:" + value + "\n  # end\n"
}

// Each edit changes the value and nothing else.
func TestSetLayouts(t *testing.T) {
	for name, c := range map[string]struct{ before, target, quantity, after string }{
		"flow":               {" {kind: relief, crack: 160 bar, set: 180 bar} # c", "RV1.crack", "170 bar", " {kind: relief, crack: 170 bar, set: 180 bar} # c"},
		"flow, last":         {" {kind: relief, crack: 160 bar}", "RV1.crack", "170.5 bar", " {kind: relief, crack: 170.5 bar}"},
		"flow, spaces":       {" { kind: relief , crack:   160 bar  }", "RV1.crack", "2300 psi", " { kind: relief , crack:   2300 psi  }"},
		"double quotes":      {` {kind: relief, "crack": "160 bar"}`, "RV1.crack", "170 bar", ` {kind: relief, "crack": "170 bar"}`},
		"single quotes":      {` {kind: relief, crack: '160 bar' }`, "RV1.crack", "170 bar", ` {kind: relief, crack: '170 bar' }`},
		"block":              {"\n      kind: relief\n      crack: 160 bar   # was 150\n      set: 180 bar", "RV1.crack", "170 bar", "\n      kind: relief\n      crack: 170 bar   # was 150\n      set: 180 bar"},
		"two lines":          {"\n      kind: relief\n      crack: 160\n        bar\n      set: 180 bar", "RV1.crack", "170 bar", "\n      kind: relief\n      crack: 170 bar\n      set: 180 bar"},
		"folded text":        {"\n      kind: relief\n      crack: >-\n        160\n        bar\n\n      set: 180 bar", "RV1.crack", "170 bar", "\n      kind: relief\n      crack: 170 bar\n\n      set: 180 bar"},
		"value mapping":      {" {kind: relief, crack: {origin: measured, value: 160 bar, low: 150}}", "RV1.crack", "170 bar", " {kind: relief, crack: {origin: measured, value: 170 bar, low: 150}}"},
		"value block":        {"\n      kind: relief\n      crack:\n        value: 160 bar # v\n        low: 150", "RV1.crack", "170 bar", "\n      kind: relief\n      crack:\n        value: 170 bar # v\n        low: 150"},
		"no value yet":       {"\n      kind: relief\n      crack:   # ask\n      set: 180 bar", "RV1.crack", "170 bar", "\n      kind: relief\n      crack: 170 bar   # ask\n      set: 180 bar"},
		"empty in braces":    {" {kind: relief, crack: , set: 180 bar}", "RV1.crack", "170 bar", " {kind: relief, crack: 170 bar , set: 180 bar}"},
		"non-ASCII before":   {" {kind: relief, override: {value: 10 bar per 100 L/min, note: \"größer µ °\"}, crack: 160 bar}", "RV1.crack", "170 bar", " {kind: relief, override: {value: 10 bar per 100 L/min, note: \"größer µ °\"}, crack: 170 bar}"},
		"new, flow":          {" {kind: relief, crack: 160 bar} # c", "RV1.vented", "5 bar", " {kind: relief, crack: 160 bar, vented: 5 bar} # c"},
		"new, trailing":      {" {kind: relief, crack: 160 bar,}", "RV1.vented", "5 bar", " {kind: relief, crack: 160 bar, vented: 5 bar,}"},
		"new, long flow":     {" {\n      kind: relief,\n      crack: 160 bar # a, b}\n    } # c", "RV1.vented", "5 bar", " {\n      kind: relief,\n      crack: 160 bar, vented: 5 bar # a, b}\n    } # c"},
		"new, after mapping": {" {kind: relief, crack: {value: 160 bar, note: 'a, }'} }", "RV1.vented", "5 bar", " {kind: relief, crack: {value: 160 bar, note: 'a, }'}, vented: 5 bar }"},
		"new, after list":    {" {kind: relief, at: [1, 2, ] }", "RV1.crack", "5 bar", " {kind: relief, at: [1, 2, ], crack: 5 bar }"},
		"new, block":         {"\n      kind: relief\n      crack: 160 bar   # was 150", "RV1.vented", "5 bar", "\n      kind: relief\n      crack: 160 bar   # was 150\n      vented: 5 bar"},
		"new, after a block": {"\n      kind: relief\n      crack:\n        value: 160 bar\n        note: |\n          long\n\n          text\n\n    T1: {kind: tank}", "RV1.vented", "5 bar", "\n      kind: relief\n      crack:\n        value: 160 bar\n        note: |\n          long\n\n          text\n      vented: 5 bar\n\n    T1: {kind: tank}"},
		"new, after at":      {"\n      kind: relief\n      at:\n      - 1\n      - 2 # y", "RV1.crack", "5 bar", "\n      kind: relief\n      at:\n      - 1\n      - 2 # y\n      crack: 5 bar"},
		"origin":             {" {kind: relief, crack: 160 bar}", "RV1.crack.origin", "name plate", " {kind: relief, crack: {value: 160 bar, origin: name plate}}"},
		"origin, quoted":     {" {kind: relief, crack: \"160 bar\"}", "RV1.crack.origin", "measured", " {kind: relief, crack: {value: 160 bar, origin: measured}}"},
		"note":               {" {kind: relief, crack: {value: 160 bar, note: old}}", "RV1.crack.note", `read: "165", twice`, ` {kind: relief, crack: {value: 160 bar, note: "read: \"165\", twice"}}`},
		"note, a number":     {" {kind: relief, crack: {value: 160 bar}}", "RV1.crack.note", "165", ` {kind: relief, crack: {value: 160 bar, note: "165"}}`},
		"low":                {" {kind: relief, crack: {value: 160 bar}}", "RV1.crack.low", "155", " {kind: relief, crack: {value: 160 bar, low: 155}}"},
		"choice":             {" {kind: valve, centre: closed, follows: ram}", "RV1.centre", "tandem", " {kind: valve, centre: tandem, follows: ram}"},
		"axis":               {" {kind: valve, centre: closed, follows: ram}", "RV1.follows", "arm", " {kind: valve, centre: closed, follows: arm}"},
		"mirror":             {" {kind: relief, mirror: no}", "RV1.mirror", "yes", " {kind: relief, mirror: yes}"},
		"turn":               {" {kind: relief}", "RV1.turn", "3", " {kind: relief, turn: 3}"},
		"negative":           {" {kind: pump, setting: 1}", "RV1.setting", "-0.5", " {kind: pump, setting: -0.5}"},
		"percent":            {" {kind: pump, setting: 1}", "RV1.setting", "50 %", " {kind: pump, setting: 50 %}"},
	} {
		t.Run(name, func(t *testing.T) {
			if got, want := edited(t, block(c.before), c.target, c.quantity), block(c.after); got != want {
				t.Errorf("got\n%s\nwant\n%s", got, want)
			}
			crlf := func(s string) string { return strings.ReplaceAll(s, "\n", "\r\n") }
			if got, want := edited(t, crlf(block(c.before)), c.target, c.quantity), crlf(block(c.after)); got != want {
				t.Errorf("CRLF: got\n%q\nwant\n%q", got, want)
			}
			bare := strings.TrimSuffix(block(c.before), "\n  # end\n")
			if got, want := edited(t, "\ufeff"+bare, c.target, c.quantity), "\ufeff"+strings.TrimSuffix(block(c.after), "\n  # end\n"); got != want {
				t.Errorf("at the end of the file: got\n%s\nwant\n%s", got, want)
			}
		})
	}
}

// swapped is the full file with one piece of text changed, which must be in it once.
func swapped(t *testing.T, pairs ...string) string {
	t.Helper()
	data, err := os.ReadFile("testdata/full.yaml")
	if err != nil {
		t.Fatal(err)
	}
	text := string(data)
	for i := 0; i < len(pairs); i += 2 {
		if strings.Count(text, pairs[i]) != 1 {
			t.Fatalf("%q is not in the file once", pairs[i])
		}
		text = strings.Replace(text, pairs[i], pairs[i+1], 1)
	}
	return text
}

func TestSetInFullFile(t *testing.T) {
	for _, c := range []struct {
		target, quantity string
		pairs            []string
	}{
		{"RV1.crack", "150 bar", []string{"crack: 160 bar", "crack: 150 bar", "crack: 210 bar", "crack: 150 bar"}}, // in both circuits
		{"As found/RV1.crack", "150 bar", []string{"crack: 160 bar", "crack: 150 bar"}},
		{"As found/RV1.override.high", "25", []string{"low: 5, high: 20,", "low: 5, high: 25,"}},
		{"P1.displacement", "55 cm³/rev", []string{"45 cm³/rev", "55 cm³/rev"}},
		{"P1.control", "pressure", []string{"rating: 250 bar        # name plate\n", "rating: 250 bar        # name plate\n      control: pressure\n"}},
		{"V1.nominal_drop", "7 bar", []string{"nominal_flow: 100 L/min\n", "nominal_flow: 100 L/min, nominal_drop: 7 bar\n"}},
		{"oil.temperature", "60 °C", []string{"temperature: 50 °C", "temperature: 60 °C"}},
		{"oil.viscosity_index", "140", []string{"viscosity_index: 100 ", "viscosity_index: 140 "}},
		{"oil.density.origin", "measured", []string{"origin: data sheet", "origin: measured"}},
		{"energy.price", "0.2 EUR/kWh", []string{"value: 0.18 EUR/kWh", "value: 0.2 EUR/kWh"}},
		{"energy.credit_returned", "yes", []string{"credit_returned: no", "credit_returned: yes"}},
		{"site.customer", "Meier's", []string{"'Käufer''s plant'", "'Meier''s'"}},
		{"As found/note", "line one", []string{">-\n    throttled,\n    constant flow", "line one"}},
		{"Pump-controlled/pump_at_rest", "keep", []string{"pump_at_rest: stop", "pump_at_rest: keep"}},
		{"Pump-controlled/retrofit_cost.likely", "25000 EUR", []string{"likely: 26000 EUR", "likely: 25000 EUR"}},
	} {
		f := full(t)
		if err := f.Set(c.target, c.quantity); err != nil {
			t.Errorf("%s: %v", c.target, err)
		} else if got, want := string(f.Bytes()), swapped(t, c.pairs...); got != want {
			t.Errorf("%s: got\n%s", c.target, got)
		}
		if n := len(f.Findings()); n > 0 {
			t.Errorf("%s: %d findings", c.target, n)
		}
	}
}

// The model follows the text.
func TestSetChangesModel(t *testing.T) {
	f := full(t)
	for _, set := range [][2]string{{"As found/RV1.crack", "150 bar"}, {"As found/RV1.crack.low", "140 bar"}, {"V1.centre", "open"}} {
		if err := f.Set(set[0], set[1]); err != nil {
			t.Fatal(err)
		}
	}
	v := f.Circuit("As found").Block("RV1").Values["crack"]
	near(t, "crack", v.SI, 150e5, 1e-12)
	near(t, "crack low", v.Low, 140e5, 1e-12)
	near(t, "crack in the other circuit", f.Circuit("Pump-controlled").Block("RV1").Values["crack"].SI, 210e5, 1e-12)
	if w := f.Circuit("As found").Block("V1").Word("centre"); w != "open" {
		t.Errorf("centre %q", w)
	}
}

func TestSetRefuses(t *testing.T) {
	for _, c := range [][3]string{
		{"RV1.crack", "160 bsr", `unit "bsr" is not a unit of pressure`},
		{"RV1.crack", "160", "has no unit"},
		{"RV1.crack", "160,5 bar", "use a decimal point"},
		{"RV1.crack", " ", "the value is empty"},
		{"RV1.crck", "160 bar", `relief valve (relief) has no parameter "crck"; did you mean cracks at (crack)?`},
		{"RV1", "160 bar", "write block.parameter"},
		{"RV1.kind", "tank", `no parameter "kind"`},
		{"RV9.crack", "160 bar", `no circuit has a block "RV9"`},
		{"As foud/RV1.crack", "160 bar", `there is no circuit "As foud"; did you mean "As found"?`},
		{"Pump-controlled/V1.centre", "open", `has no block "V1"`},
		{"V1.centre", "tandm", `"tandm" is not one of closed, open, tandem, float`},
		{"V1.follows", "arm", `there is no axis "arm"`},
		{"V1.centre.origin", "measured", `"origin" is not known of centre`},
		{"V1.nominal_drop.low", "4 bar", "set its value first"},
		{"RV1.crack.origin", "guess", "known here: measured, name plate, data sheet, assumed"},
		{"As found/RV1.override.low", "11", "must lie between its low and high"},
		{"T1.turn", "4", "whole number from 0 to 3"},
		{"energy.price", "0.2 USD/kWh", "the audit in EUR"},
		{"energy.tax", "1", "energy has price, co2"},
		{"oil.grade", "ISO VG 47", "ISO VG 47 is not in the list"},
		{"As found/hold", "x", "besides blocks it has role, note, pump_at_rest"},
		{"As found/pump_at_rest", "sleep", "keep turning (keep), turn unloaded (unload), switched off (stop)"},
	} {
		f := full(t)
		before := f.Bytes()
		err := f.Set(c[0], c[1])
		if err == nil || !strings.Contains(err.Error(), c[2]) {
			t.Errorf("%s = %s: got %v, want %q", c[0], c[1], err, c[2])
		}
		if !bytes.Equal(f.Bytes(), before) {
			t.Errorf("%s = %s: refused, but the text changed", c[0], c[1])
		}
	}
}

func setAt(f *File, circuit, block string, at [2]float64) error {
	return f.Place(circuit, map[string][2]float64{block: at}, nil)
}

func TestPlace(t *testing.T) {
	for _, c := range []struct {
		circuit, block string
		at             [2]float64
		pairs          []string
	}{
		{"As found", "RV1", [2]float64{-1.5, 7}, []string{"at: [12, 30]", "at: [-1.5, 7]"}},
		{"As found", "M1", [2]float64{1, 2}, []string{"efficiency: 0.93}", "efficiency: 0.93, at: [1, 2]}"}},
		{"As found", "P1", [2]float64{1, 2}, []string{"# name plate\n", "# name plate\n      at: [1, 2]\n"}},
	} {
		f := full(t)
		if err := setAt(f, c.circuit, c.block, c.at); err != nil {
			t.Error(err)
		} else if got, want := string(f.Bytes()), swapped(t, c.pairs...); got != want {
			t.Errorf("%s: got\n%s", c.block, got)
		}
	}
	f := full(t)
	if err := setAt(f, "As found", "X9", [2]float64{}); err == nil {
		t.Error("moved a block that is not there")
	}
	got := edited(t, block("\n      kind: relief\n      at:\n      - 1 # x\n      - 2"), "RV1.turn", "1")
	f, _ = Parse([]byte(got), nil, "")
	if err := setAt(f, "As found", "RV1", [2]float64{10, 20}); err != nil || !strings.Contains(string(f.Bytes()), "at:\n      - 10 # x\n      - 20\n      turn: 1") {
		t.Errorf("%v\n%s", err, f.Bytes())
	}
}

func TestSetPoint(t *testing.T) {
	for _, c := range []struct {
		track    string
		row      int
		quantity string
		pairs    []string
	}{
		{"t", 4, "4.5 s", []string{"2.1 s, 4 s]", "2.1 s, 4.5 s]"}},
		{"ram.speed", 3, "-0.12", []string{"0.15, -0.1, 0]", "0.15, -0.12, 0]"}},
		{"ram.speed", 3, "-120 mm/s", []string{"0.15, -0.1, 0]", "0.15, -0.12, 0]"}}, // into the unit of the key
		{"ram.load", 2, "260 kN", []string{"0.25 MN", "260 kN"}},
		{"drum.load", 2, "900 N m", []string{"1 kN m", "900"}},
	} {
		f := full(t)
		if err := f.SetPoint("day shift", c.track, c.row, c.quantity); err != nil {
			t.Error(err)
		} else if got, want := string(f.Bytes()), swapped(t, c.pairs...); got != want {
			t.Errorf("%s: got\n%s", c.track, got)
		}
	}
	for _, c := range []struct {
		duty, track string
		row         int
		quantity    string
		want        string
	}{
		{"day shift", "ram.speed", 5, "1", "has 5"},
		{"day shift", "ram.speed", 0, "1 bar", "not a unit of velocity"},
		{"day shift", "ram.command", 0, "1", "no such track"},
		{"day shift", "t", 0, "9 s", "time runs backwards"},
		{"night", "t", 0, "0 s", `there is no duty "night"`},
		{"Spätschicht", "t", 0, "0 s", "taken from press.csv"},
	} {
		f := full(t)
		if err := f.SetPoint(c.duty, c.track, c.row, c.quantity); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%v: got %v", c, err)
		}
	}
}

// A file with faults can be mended by an edit, and undone by its former text.
func TestSetMendsAndReplaceUndoes(t *testing.T) {
	f, _ := Read("testdata/wrong/wrong_unit.yaml")
	before := f.Bytes()
	if err := f.Set("RV1.crack", "160 bar"); err != nil || len(f.Findings()) != 0 {
		t.Errorf("%v, %v", err, f.Findings())
	}
	if found := f.Replace(before); len(found) != 1 || !bytes.Equal(f.Bytes(), before) {
		t.Errorf("got %v", found)
	}
	if found := f.Replace([]byte("a: [")); len(found) == 0 || !bytes.Equal(f.Bytes(), before) {
		t.Error("a text that is no audit file took the place of one")
	}
}

// A value that leaves its own low and high takes them along, in the same proportion.
func TestSetTakesTheBandAlong(t *testing.T) {
	f := readTest(t, "full.yaml")
	v := f.Circuit("As found").Block("RV1").Values["override"]
	if err := f.Set("As found/RV1.override", "40 bar per 100 L/min"); err != nil {
		t.Fatal(err)
	}
	w := f.Circuit("As found").Block("RV1").Values["override"]
	for _, x := range [][2]float64{{w.Low / w.SI, v.Low / v.SI}, {w.High / w.SI, v.High / v.SI}} {
		if math.Abs(x[0]-x[1]) > 1e-3 {
			t.Errorf("the band is %g of the value, was %g", x[0], x[1])
		}
	}
}
