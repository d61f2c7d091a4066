package main

import (
	"encoding/json"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"barlitre/audit"
)

// The recorded duty of four axes, published with 485.63 and 208.07 kJ of work, on the command
// line: every energy is there as a row. Where the recording is and comes from:
// audit/four_axis_test.go.
func TestFourAxesOnTheCommandLine(t *testing.T) {
	from := os.Getenv("BARLITRE_DATA")
	if from == "" {
		t.Skip("set BARLITRE_DATA to the folder that holds four_axis_duty_100s.csv")
	}
	dir := t.TempDir()
	for _, path := range []string{filepath.Join(from, "four_axis_duty_100s.csv"), "../audit/testdata/recorded/four-axis.yaml"} {
		data, err := os.ReadFile(path)
		if err == nil {
			err = os.WriteFile(filepath.Join(dir, filepath.Base(path)), data, 0o644)
		}
		if err != nil {
			t.Fatal(err)
		}
	}
	result := filepath.Join(dir, "result.json")
	code, out, errs := called("audit", filepath.Join(dir, "four-axis.yaml"), "-json", result)
	if code != exitOK {
		t.Fatalf("exit %d: %s", code, errs)
	}
	for _, row := range []string{"Work by axis", "  boom ", "  arm ", "  bucket ", "  swing ", "P1: friction", "IC3: compensator", "V1: metering A-T", "drawn from the supply"} {
		if !strings.Contains(out, row) {
			t.Errorf("no row %q", row)
		}
	}
	data, err := os.ReadFile(result)
	if err != nil {
		t.Fatal(err)
	}
	var r audit.Result
	if err := json.Unmarshal(data, &r); err != nil {
		t.Fatal(err)
	}
	d := r.Circuits[0].Duties[0]
	e := d.Energy
	sum, positive, negative := e.WorkPositive+e.WorkNegative+e.Stored+e.Returned, 0.0, 0.0
	for _, l := range e.Losses {
		sum += l.J
	}
	for _, w := range e.Work {
		positive, negative = positive+w.Positive, negative+w.Negative
	}
	for _, x := range []struct {
		what           string
		got, want, rel float64
	}{
		{"sum of the rows", sum, e.SupplyIn, 1e-8},
		{"positive work, published", positive, 485.63e3, 5e-4},
		{"negative work, published", negative, -208.07e3, 5e-4},
		{"work by axis", positive, e.WorkPositive, 1e-9},
		{"shaft, published", e.SupplyIn, 1344e3, 0.2},
	} {
		if math.Abs(x.got-x.want) > x.rel*math.Abs(x.want) {
			t.Errorf("%s: %.6g J, want %.6g within %g", x.what, x.got, x.want, x.rel)
		}
	}
	if len(d.Shortfall) > 0 || d.Certificate.UnbalancedSteps > 0 {
		t.Errorf("shortfall %v, %d steps unbalanced", d.Shortfall, d.Certificate.UnbalancedSteps)
	}
}
