package main

import (
	"bytes"
	"encoding/json"
	"fmt"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"

	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/circuit/duty"
	"barlitre/machines"
	"barlitre/machines/units"
)

const press, winch = "../samples/baling-press.yaml", "../samples/quayside-winch.yaml"

// called runs the program as from a shell.
func called(args ...string) (code int, out, errs string) {
	var o, e bytes.Buffer
	code = run(args, &o, &e)
	return code, o.String(), e.String()
}

func write(t *testing.T, text string) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), "test.yaml")
	if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
	return path
}

func edited(t *testing.T, path, old, new string) string {
	t.Helper()
	data, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	if !strings.Contains(string(data), old) {
		t.Fatalf("%s does not contain %q", path, old)
	}
	return write(t, strings.Replace(string(data), old, new, 1))
}

// pumpTable is an invented table of points of a pump of 45 cm³/rev.
func pumpTable() string {
	law := machines.NewDisplacement(45 * units.CubicCentimetrePerRev)
	text := "n_rpm,V_cm3,dp_bar,q_Lmin,T_Nm\n"
	for _, n := range []float64{600, 1200, 1800} {
		for _, e := range []float64{0.3, 1} {
			for _, bar := range []float64{50, 150, 250} {
				w, dp := n*units.RPM, bar*units.Bar
				text += fmt.Sprintf("%g,%g,%g,%.9g,%.9g\n", n, 45*e, bar, law.Flow(e, w, dp, 0.035, 870, 1.4e9)/units.LitrePerMinute, law.Torque(e, w, dp, 0.035, 870))
			}
		}
	}
	return text
}

func TestExitCodes(t *testing.T) {
	window := openWindow // a build may have one; here it must stay shut
	openWindow = nil
	defer func() { openWindow = window }()
	missing := filepath.Join(t.TempDir(), "none.yaml")
	points := write(t, pumpTable())
	noRest := edited(t, press, "pump_at_rest:", "note2:")
	for _, c := range []struct {
		name string
		args []string
		want int
		says string // in either output
	}{
		{"no command", nil, exitUnreadable, "barlitre audit"},
		{"help", []string{"help"}, exitOK, "barlitre blocks"},
		{"unknown command", []string{"simulate"}, exitUnreadable, `no file "simulate"`},
		{"check a sample", []string{"check", press, winch}, exitOK, "can be solved"},
		{"check a faulty file", []string{"check", noRest}, exitUnsolvable, "cannot be solved"},
		{"check a missing file", []string{"check", missing}, exitUnreadable, "none.yaml"},
		{"check other text", []string{"check", write(t, "hello: [")}, exitUnreadable, "test.yaml"},
		{"check without files", []string{"check"}, exitUnreadable, "name at least one"},
		{"audit a faulty file", []string{"audit", noRest}, exitUnsolvable, "note2"},
		{"audit without files", []string{"audit", "-json", "-"}, exitUnreadable, "name at least one"},
		{"audit, set without =", []string{"audit", press, "-set", "RV1.crack"}, exitUnreadable, "has no ="},
		{"audit, set of a block that is not there", []string{"audit", press, "-set", "XX.crack=1 bar"}, exitUnreadable, "XX"},
		{"audit, set in a wrong unit", []string{"audit", press, "-set", "P1.displacement=30 bar"}, exitUnreadable, "displacement"},
		{"audit, folder that cannot be", []string{"audit", press, "-pdf", filepath.Join(press, "x.pdf")}, exitUnreadable, "baling-press.yaml"},
		{"audit, units", []string{"audit", press, "-units", "imperial"}, exitUnreadable, "metric, us or si"},
		{"fit", []string{"fit", points, "-viscosity", "35 mPa s", "-png", t.TempDir()}, exitOK, "rms 0.00 efficiency points"},
		{"fit, displacement too small", []string{"fit", "-displacement", "20 cm3/rev", points}, exitUnreadable, "above 110 %"},
		{"fit, wrong unit", []string{"fit", points, "-viscosity", "35 bar"}, exitUnreadable, "viscosity"},
		{"fit of an audit file", []string{"fit", press}, exitUnreadable, "baling-press.yaml"},
		{"fit of a missing file", []string{"fit", missing}, exitUnreadable, "none.yaml"},
		{"fit without a file", []string{"fit"}, exitUnreadable, "name a CSV file"},
		{"blocks", []string{"blocks"}, exitOK, "counterbalance"},
		{"one kind", []string{"blocks", "relief"}, exitOK, "10 bar per 100 L/min"},
		{"no such kind", []string{"blocks", "turbine"}, exitUnreadable, "turbine"},
	} {
		code, out, errs := called(c.args...)
		if code != c.want || !strings.Contains(out+errs, c.says) {
			t.Errorf("%s: exit %d, want %d; want %q in\n%s%s", c.name, code, c.want, c.says, out, errs)
		}
	}
}

// A circuit that cannot be balanced at some step must end with its own code: here
// one whose sample is marked by the certificate.
func TestUnbalancedCode(t *testing.T) {
	s := &audit.Solution{Circuits: []*audit.CircuitRun{{Circuit: &circuit.Circuit{Name: "A"}, Duties: []*audit.DutyRun{{
		Certificate: circuit.Certificate{Unbalanced: 1, Unsolved: []circuit.Unsolved{{T: 1.5, Where: "V1", Residual: "2 bar"}}}}}}}}
	s.Circuits[0].Duties[0].Duty = dutyNamed("day")
	var errs bytes.Buffer
	if code := exitOf(s, "x.yaml", &errs); code != exitUnbalanced || !strings.Contains(errs.String(), "1.500 s") {
		t.Errorf("exit %d, says %q", code, errs.String())
	}
}

// JSON stands alone on standard output, has the promised keys, and closes.
func TestJSONAlone(t *testing.T) {
	code, out, _ := called("audit", "-json", "-", press)
	if code != exitOK {
		t.Fatalf("exit %d", code)
	}
	var r audit.Result
	d := json.NewDecoder(strings.NewReader(out))
	if err := d.Decode(&r); err != nil {
		t.Fatal(err)
	}
	if d.More() {
		t.Error("something stands after the JSON")
	}
	for _, c := range r.Circuits {
		for _, d := range c.Duties {
			e := d.Energy
			sum := e.WorkPositive + e.WorkNegative + e.Stored
			for _, l := range e.Losses {
				if l.J < -1e-9*e.SupplyIn {
					t.Errorf("%s: %s %s loses %g J", c.Name, l.Block, l.Kind, l.J)
				}
				sum += l.J
			}
			if gap := e.SupplyIn - e.Returned - sum; gap > 1e-6*e.SupplyIn || gap < -1e-6*e.SupplyIn {
				t.Errorf("%s, %s: %g J are missing", c.Name, d.Name, gap)
			}
		}
	}
	_, both, _ := called("audit", press, winch, "-json", "-")
	var list []audit.Result
	if err := json.Unmarshal([]byte(both), &list); err != nil || len(list) != 2 {
		t.Errorf("two files: %v, %d results", err, len(list))
	}
}

// The report, the text and the JSON show the same digits.
func TestWritesWhatItPrints(t *testing.T) {
	dir := t.TempDir()
	code, out, errs := called("audit", press, "-pdf", filepath.Join(dir, "r.pdf"), "-csv", filepath.Join(dir, "csv"), "-json", filepath.Join(dir, "r.json"))
	if code != exitOK {
		t.Fatalf("exit %d: %s", code, errs)
	}
	var r audit.Result
	data, err := os.ReadFile(filepath.Join(dir, "r.json"))
	if err == nil {
		err = json.Unmarshal(data, &r)
	}
	if err != nil {
		t.Fatal(err)
	}
	if pdf, err := os.ReadFile(filepath.Join(dir, "r.pdf")); err != nil || !bytes.HasPrefix(pdf, []byte("%PDF-")) {
		t.Errorf("report: %v", err)
	}
	tables, _ := filepath.Glob(filepath.Join(dir, "csv", "*.csv"))
	if len(tables) != 4 {
		t.Errorf("%d tables, want one for each of two circuits and two duties", len(tables))
	}
	head, _, _ := strings.Cut(readAll(t, tables[0]), "\n")
	for _, want := range []string{"t [s]", "RV1.P.p [Pa]", "RV1.P.q [m3/s]", "C1.v [m/s]", "P1.shaft [W]"} {
		if !strings.Contains(head, want) {
			t.Errorf("no column %s in %s", want, head)
		}
	}
	if !strings.Contains(out, "simple payback") {
		t.Errorf("no payback in\n%s", out)
	}
}

func readAll(t *testing.T, path string) string {
	t.Helper()
	data, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	return string(data)
}

// A setting changes the result as physics says: a relief valve set lower burns less.
func TestSetChangesTheResult(t *testing.T) {
	drawn := func(args ...string) float64 {
		code, out, errs := called(append([]string{"audit", press, "-json", "-"}, args...)...)
		if code != exitOK {
			t.Fatalf("exit %d: %s", code, errs)
		}
		var r audit.Result
		if err := json.Unmarshal([]byte(out), &r); err != nil {
			t.Fatal(err)
		}
		return r.Circuits[0].Duties[0].Energy.SupplyIn
	}
	base := drawn()
	for _, c := range []struct {
		set  string
		more bool
	}{
		{"As found/RV1.crack=200 bar", false},
		{"As found/RV1.crack=240 bar", true},
		{"As found/M1.efficiency=0.85", true},
		{"As found/P1.friction=0.01", false},
		{"oil.temperature=35 C", true}, // thicker oil
	} {
		if got := drawn("-set", c.set); (got > base) != c.more || got == base {
			t.Errorf("%s: %g J, was %g J", c.set, got, base)
		}
	}
}

// The block of the README is what the program prints.
func TestReadmeNumbers(t *testing.T) {
	_, out, _ := called("audit", press)
	blocks := regexp.MustCompile("(?s)```text\n(.*?)```").FindAllStringSubmatch(readAll(t, "../README.md"), -1)
	if len(blocks) == 0 {
		t.Fatal("the README shows no result")
	}
	for _, b := range blocks {
		if !strings.Contains(out, strings.TrimRight(b[1], "\n")) {
			t.Errorf("the README shows\n%s\nwhich the program does not print", b[1])
		}
	}
}

// Every kind prints its ports, parameters with range or choices, losses and sources.
func TestBlocksTellAll(t *testing.T) {
	for _, k := range circuit.Catalog() {
		_, out, _ := called("blocks", k.Name)
		for _, p := range k.Ports {
			if !strings.Contains(out, p.Text) {
				t.Errorf("%s: port %s is not told", k.Name, p.Name)
			}
		}
		for _, p := range k.Params {
			if !strings.Contains(out, p.Key) || !strings.Contains(out, p.Default) {
				t.Errorf("%s: parameter %s is not told", k.Name, p.Key)
			}
		}
		for _, l := range k.Losses {
			if !strings.Contains(out, l.Name) || !strings.Contains(out, string(l.Sink)) {
				t.Errorf("%s: loss %s is not told", k.Name, l.Name)
			}
		}
	}
}

func dutyNamed(name string) *duty.Duty { return &duty.Duty{Name: name} }

// Each wrong circuit is refused by check, with its line and the level.
func TestCheckRefusesWrongCircuits(t *testing.T) {
	paths, err := filepath.Glob("../audit/testdata/wrong_circuits/*.yaml")
	if err != nil || len(paths) < 20 {
		t.Fatalf("%d files, %v", len(paths), err)
	}
	for _, path := range paths {
		code, out, _ := called("check", path)
		if code != exitUnsolvable || !strings.Contains(out, path+": cannot be solved") || !strings.Contains(out, ": stops: ") {
			t.Errorf("%s: code %d\n%s", path, code, out)
		}
	}
}
