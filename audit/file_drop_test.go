package audit_test

import (
	"strings"
	"testing"

	"barlitre/audit"
	"barlitre/circuit"
)

// A dropped value leaves everything else byte for byte, and its default holds again.
func TestDrop(t *testing.T) {
	f, found := parsePress(measuredPress, pumpTable(pumpLaw, 0.035, 700, 1200, 1800, 2600))
	if f == nil || circuit.AnyStops(found) {
		t.Fatal(found)
	}
	text := string(f.Bytes())
	for _, c := range []struct{ target, gone string }{
		{"As found/P1.points_viscosity", ", points_viscosity: 35 mPa s"},
		{"P1.points", ", points: pump.csv"},
		{"oil.density", ""},
	} {
		err := f.Drop(c.target)
		if c.gone == "" { // a viscosity needs its density
			if err == nil || string(f.Bytes()) != text {
				t.Errorf("%s: taken out, though the oil is then not known", c.target)
			}
			continue
		}
		if err != nil {
			t.Fatal(err)
		}
		text = strings.Replace(text, c.gone, "", 1)
		if got := string(f.Bytes()); got != text {
			t.Errorf("%s: the file reads\n%s", c.target, got)
		}
	}
	b := f.Circuits[0].Block("P1")
	if v, byDefault, _ := circuit.KindNamed("pump").Value(b, "slip"); b.Fit != nil || !byDefault || v.SI != 1.5e-8 {
		t.Errorf("without its points the pump slips %+v", v)
	}
	for target, why := range map[string]string{"P1.displacement": "must be given", "P9.slip": "no circuit has a block", "P1.nothing": "no parameter"} {
		if err := f.Drop(target); err == nil || !strings.Contains(err.Error(), why) {
			t.Errorf("%s: %v", target, err)
		}
	}
	if err := f.Drop("P1.slip"); err != nil || string(f.Bytes()) != text {
		t.Errorf("dropping what is not given: %v", err)
	}
}

// Entries on lines of their own go with their lines, those within braces with one comma, first or last.
func TestDropLayouts(t *testing.T) {
	loose := strings.Replace(measuredPress, "    RV1: {kind: relief, crack: 160 bar}\n",
		"    RV1:\n      vented: {value: 5 bar, origin: measured} # seen\n      kind: relief # of the press\n      crack: 160 bar\n      override: 10 bar per 100 L/min # last\n", 1)
	loose = strings.Replace(loose, "{kind: tank}", "{turn: 1, kind: tank}", 1)
	for target, gone := range map[string]string{
		"RV1.vented":        "      vented: {value: 5 bar, origin: measured} # seen\n",
		"RV1.override":      "      override: 10 bar per 100 L/min # last\n",
		"RV1.vented.origin": ", origin: measured",
		"T1.turn":           "turn: 1, ",
	} {
		f, found := audit.Parse([]byte(loose), audit.FromBytes(func(string) ([]byte, error) {
			return []byte(pumpTable(pumpLaw, 0.035, 700, 1200, 1800, 2600)), nil
		}), "press.yaml")
		if f == nil || circuit.AnyStops(found) {
			t.Fatal(found)
		}
		if err := f.Drop(target); err != nil {
			t.Errorf("%s: %v", target, err)
		}
		if got, want := string(f.Bytes()), strings.Replace(loose, gone, "", 1); got != want {
			t.Errorf("%s: the file reads\n%s", target, got)
		}
	}
}
