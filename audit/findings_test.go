package audit

import (
	"context"
	"strings"
	"testing"

	"barlitre/circuit"
	"barlitre/machines/units"
)

// What shows in several duties in the same words is told once and names them; in other words, once for each with its duty.
func TestFindingsNameTheirDuties(t *testing.T) {
	f, _ := Read("../samples/baling-press.yaml")
	for _, e := range [][2]string{{"baling", "night"}, {"baling", "half"}} {
		if err := f.CopyDuty(e[0], e[1]); err != nil {
			t.Fatal(err)
		}
	}
	if err := f.Set("As found/RV1.crack", "140 bar"); err != nil {
		t.Fatal(err)
	}
	if err := f.SetPoint("half", "t", len(f.Duties[0].Time)-1, "60 s"); err != nil {
		t.Fatal(err)
	}
	s, err := Solve(context.Background(), f, Options{})
	if err != nil {
		t.Fatal(err)
	}
	told := map[string][]string{}
	for _, x := range s.Report(units.Metric).Findings {
		if x.Circuit == "As found" && x.Block == "RV1" && strings.Contains(x.Text, "open for") {
			told[x.Text] = append(told[x.Text], x.Duties())
		}
	}
	names := ""
	for text, duties := range told {
		if len(duties) != 1 {
			t.Errorf("%q is told %d times", text, len(duties))
		}
		names += duties[0] + "; "
	}
	if !strings.Contains(names, "baling and night; ") || !strings.Contains(names, "half; ") {
		t.Errorf("told of %q", names)
	}
	if got := sentence(circuit.Finding{Block: "C1", Duty: "day", Besides: "night", Text: "C1: it hits its end"}); got != "In day and night: it hits its end." {
		t.Error(got)
	}
}
