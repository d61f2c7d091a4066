package audit_test

import (
	"strings"
	"testing"

	"barlitre/audit"
)

// What changes a result changes the fingerprint: a value, a table of measured points under the same name, what is asked for. A
// reading of a site check and a layout of the text do not.
func TestFingerprint(t *testing.T) {
	table := pumpTable(pumpLaw, 0.035, 700, 1200, 1800, 2600)
	worn := pumpLaw
	worn.Cs *= 3
	file := func(press, table string) *audit.File {
		f, found := parsePress(press, table)
		if f == nil {
			t.Fatal(found)
		}
		return f
	}
	f := file(measuredPress, table)
	was := f.Fingerprint("As found", 1)
	for what, other := range map[string][32]byte{
		"another table of points": file(measuredPress, pumpTable(worn, 0.035, 700, 1200, 1800, 2600)).Fingerprint("As found", 1),
		"another setting":         file(strings.Replace(measuredPress, "crack: 160 bar", "crack: 161 bar", 1), table).Fingerprint("As found", 1),
		"another question":        f.Fingerprint("As found", 2),
		"no question":             f.Fingerprint(),
	} {
		if other == was {
			t.Errorf("%s leaves the fingerprint as it was", what)
		}
	}
	for what, press := range map[string]string{
		"the same":      measuredPress,
		"a blank line":  strings.Replace(measuredPress, "duties:", "\nduties:", 1),
		"readings":      measuredPress + "site_check:\n  idling.M1.power: 5.2 kW\n",
		"other reading": measuredPress + "site_check: {idling.M1.power: 7 kW}\n",
	} {
		if file(press, table).Fingerprint("As found", 1) != was {
			t.Errorf("%s: the fingerprint differs", what)
		}
	}
	if err := f.SetReading("idling", "M1.power", "5.2 kW"); err != nil {
		t.Fatal(err)
	}
	if f.Fingerprint("As found", 1) != was {
		t.Error("a reading typed changes the fingerprint")
	}
	if !strings.Contains(string(f.Bytes()), "idling.M1.power") {
		t.Error("taking the fingerprint took the reading out")
	}
}

// A recording that was replaced under its name is another file.
func TestFingerprintOfARecording(t *testing.T) {
	sums := map[[32]byte]bool{}
	for _, load := range []string{"5", "6"} {
		text := measuredPress[:strings.Index(measuredPress, "  points: {t:")] + "  file: press.csv\n" + measuredPress[strings.Index(measuredPress, "circuits:"):]
		rows := "t [s],ram.speed [m/s],ram.load [kN]\n0,0,5\n1,0.1," + load + "\n2,0,5\n"
		f, _ := parsePress(strings.Replace(text, "points: pump.csv, points_viscosity: 35 mPa s", "slip: 1e-8", 1), rows)
		if f == nil || f.Sources[0].SHA256 == "" {
			t.Fatal("the recording was not read")
		}
		sums[f.Fingerprint()] = true
	}
	if len(sums) != 2 {
		t.Error("two recordings, one fingerprint")
	}
}
