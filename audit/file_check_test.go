package audit

import (
	"os"
	"strings"
	"testing"
)

// What is read well but drawn wrongly is found by the check of the circuit, with
// the line of the file; what could not be read is not said again by it.
func TestCheckFile(t *testing.T) {
	data, err := os.ReadFile("testdata/small.yaml")
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		old, new  string
		line      int
		block     string
		parameter string
		text      string
		alone     bool // no other finding names the block and the parameter
	}{
		{"C1.A - RV1.P", "C1.A - RV9.P", 16, "", "", "no block RV9", false},
		{"C1.A - RV1.P", "C1.X - RV1.P", 16, "C1", "", "the ports A and B", false},
		{"bore: 80 mm, ", "", 14, "C1", "bore", "missing", true},
		{"axis: ram", "axis: arm", 14, "C1", "axis", `axis is "arm", but there is no axis of that name; the only one is ram`, true},
		{"hold: valve", "hold: vavle", 14, "C1", "hold", `"vavle"`, true},
		{"crack: 160 bar", "crack: 1600 bar", 13, "RV1", "crack", "at most", true},
		{"bore: 80 mm", "bore: 80", 14, "C1", "bore", "has no unit", true},
		{"kind: cylinder", "kind: cilinder", 14, "C1", "kind", `did you mean cylinder, differential (cylinder)?`, true},
		{"crack: 160 bar", "crack: {value: 160 bar, low: 170}", 13, "RV1", "crack", "between its low and high", true},
		{"pump_at_rest: keep", "pump_at_rest: kepp", 11, "", "pump_at_rest", `did you mean keep turning (keep)?`, true},
	} {
		text := strings.Replace(string(data), c.old, c.new, 1)
		f, _ := Parse([]byte(text), nil, "")
		hits, others := 0, 0
		for _, n := range f.Check() {
			switch {
			case n.Line == c.line && n.Block == c.block && n.Parameter == c.parameter && strings.Contains(n.Text, c.text):
				hits++
			case c.alone && n.Block == c.block && n.Parameter == c.parameter:
				others++
			}
		}
		if hits != 1 || others != 0 {
			t.Errorf("%s: %d hits, %d others in %v", c.new, hits, others, f.Check())
		}
	}
}

// A duty whose numbers cannot be read is not measured against the circuits.
func TestCheckUnreadDuty(t *testing.T) {
	f, found := Read("testdata/wrong/track_length.yaml")
	n := 0
	for _, c := range f.Check() {
		if c.Duty != "" {
			n++
		}
	}
	if len(found) != 1 || n != 1 {
		t.Errorf("%d findings of the duty, %d of reading", n, len(found))
	}
}
