package sheet

import (
	"os"
	"path/filepath"
	"strings"
	"testing"

	"barlitre/samples"
)

// What the duty says was measured at a point is drawn beside what is computed there.
func TestMeasuredCourseStandsBeside(t *testing.T) {
	data, err := samples.ReadStarter("throttled-constant-flow.yaml")
	if err != nil {
		t.Fatal(err)
	}
	text := string(data)
	for _, c := range [][2]string{
		{"  blocks:\n", "  blocks:\n    X1: {kind: pressure_point, at: [60, 4]}\n"},
		{"- P1.P", "- X1.P - P1.P"},
		{"  points:\n", "  points:\n    \"X1.pressure [bar]\": [" + measuredRow(t, text) + "]\n"},
	} {
		if !strings.Contains(text, c[0]) {
			t.Fatalf("the starter has no %q", c[0])
		}
		text = strings.Replace(text, c[0], c[1], 1)
	}
	path := filepath.Join(t.TempDir(), "measured.yaml")
	if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
	b := newBench(t, "", window)
	if found, err := b.doc.Open(path); err != nil || len(found) > 0 {
		t.Fatal(err, found)
	}
	b.solved()
	b.Select(0, "X1")
	l := b.s.panel.live
	l.choose("pressures")
	if len(l.drawn) != 2 || l.drawn[0].name != "P" || l.drawn[1].name != "measured" {
		t.Fatalf("drawn: %+v", l.drawn)
	}
	if at := l.drawn[1].at(1); at != 150e5 {
		t.Errorf("measured at 1 s: %g Pa, the duty has 150 bar", at)
	}
}

// measuredRow writes 150 bar for every time stamp of the first duty.
func measuredRow(t *testing.T, text string) string {
	t.Helper()
	_, rest, found := strings.Cut(text, "    t:")
	line, _, _ := strings.Cut(rest, "\n")
	if !found {
		t.Fatal("no time stamps")
	}
	return strings.TrimSuffix(strings.Repeat("150, ", strings.Count(line, ",")+1), ", ")
}
