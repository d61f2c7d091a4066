package audit

import (
	"fmt"
	"slices"
	"strings"
	"testing"

	"barlitre/circuit"
)

const bentText = `format: barlitre/1
oil: {grade: ISO VG 46, temperature: 50 C}
circuits:
- name: As found # c1
  pump_at_rest: keep
  blocks:
    T1: {kind: tank, at: [0, 20]}
    P1: {kind: pump, displacement: 45 cm3/rev, at: [10, 10]} # c2
    RV1: {kind: relief, crack: 160 bar, at: [20, 14]}
    J1: {kind: junction, at: [24, 8]}
    F1: {kind: filter, nominal_flow: 60 L/min, at: [30, 10]}
  lines: # c3
  - P1.P - RV1.P - J1.1
  - J1.2 - F1.A # c4
  - RV1.T - T1.T
  bends: # c5
  - {port: P1.P, runs: [[10, 6, 24, 6]]} # c6
`

func bent(t *testing.T) *File {
	t.Helper()
	f, found := Parse([]byte(bentText), nil, "")
	for _, x := range found {
		if !strings.Contains(x.Text, "there is no duty") {
			t.Fatal(found)
		}
	}
	return f
}

// bends prints the bends of the circuit.
func bendsOf(f *File) string {
	var out []string
	for _, b := range f.Circuits[0].Bends {
		out = append(out, fmt.Sprint(b.Port.String(), b.Runs))
	}
	return strings.Join(out, "; ")
}

func TestBendsFollowTheirLines(t *testing.T) {
	const was = "[[10, 6, 24, 6]]"
	for name, c := range map[string]struct {
		do   func(f *File) error
		want string
	}{
		"bend again":          {func(f *File) error { return f.Bend("As found", []int{0, 1}, [][2][2]float64{{{10, 5}, {24, 5}}}) }, "P1.P[[[10 5] [24 5]]]"},
		"bend another":        {func(f *File) error { return f.Bend("As found", []int{2}, [][2][2]float64{{{10, 5}, {10, 9}}}) }, "P1.P[[[10 6] [24 6]]]; RV1.T[[[10 5] [10 9]]]"},
		"straighten":          {func(f *File) error { return f.Bend("As found", []int{0, 1}, nil) }, ""},
		"rename":              {func(f *File) error { return f.Rename("As found", "P1", "MP") }, "MP.P[[[10 6] [24 6]]]"},
		"delete its block":    {func(f *File) error { return f.Delete("As found", false, "P1") }, "RV1.P[[[10 6] [24 6]]]"},
		"delete the line":     {func(f *File) error { return f.DeleteLine("As found", 0) }, ""},
		"disconnect":          {func(f *File) error { return f.Disconnect("As found", "P1.P") }, "RV1.P[[[10 6] [24 6]]]"},
		"move a block":        {func(f *File) error { return f.Place("As found", map[string][2]float64{"P1": {12, 10}}, nil) }, "P1.P[[[10 6] [24 6]]]"},
		"move all by arrows":  {func(f *File) error { return f.MoveBy("As found", [2]float64{2, 3}, "P1", "RV1", "J1", "F1") }, "P1.P[[[12 9] [26 9]]]"},
		"move but the filter": {func(f *File) error { return f.MoveBy("As found", [2]float64{2, 3}, "P1", "RV1", "J1") }, "P1.P[[[10 6] [24 6]]]"},
		"move all to a place": {func(f *File) error {
			return f.Place("As found", map[string][2]float64{"P1": {11, 9}, "RV1": {21, 13}, "J1": {25, 7}, "F1": {31, 9}}, nil)
		}, "P1.P[[[11 5] [25 5]]]"},
		"duplicate all": {func(f *File) error {
			_, err := f.Duplicate("As found", [2]float64{100, 0}, "P1", "RV1", "J1", "F1")
			return err
		}, "P1.P[[[10 6] [24 6]]]; P2.P[[[110 6] [124 6]]]"},
		"duplicate one":        {func(f *File) error { _, err := f.Duplicate("As found", [2]float64{100, 0}, "P1"); return err }, "P1.P[[[10 6] [24 6]]]"},
		"half of it off":       {func(f *File) error { return f.SplitLine("As found", 0, circuit.PortRef{Block: "P1", Port: "P"}) }, "RV1.P[[[10 6] [24 6]]]"},
		"mirrored all at once": {func(f *File) error { return f.Mirror("As found", "P1", "RV1", "J1", "F1") }, "P1.P[[[30 6] [16 6]]]"},
	} {
		f := bent(t)
		if err := c.do(f); err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		if got := bendsOf(f); got != c.want {
			t.Errorf("%s: bends are %s, want %s", name, got, c.want)
		}
		for _, mark := range []string{"# c1", "# c3", "# c5"} {
			if !strings.Contains(string(f.Bytes()), mark) {
				t.Errorf("%s: comment %s is lost", name, mark)
			}
		}
		if c.want == "" && strings.Contains(string(f.Bytes()), was) {
			t.Errorf("%s: the text keeps %s", name, was)
		}
	}
}

// Only the bend changes in the text, and it comes and goes without a trace where there was one.
func TestBendChangesNothingElse(t *testing.T) {
	f := bent(t)
	if err := f.Bend("As found", []int{0, 1}, [][2][2]float64{{{10, 5}, {24, 5}}, {{24, 5}, {24, 9}}}); err != nil {
		t.Fatal(err)
	}
	if want := strings.Replace(bentText, "[[10, 6, 24, 6]]", "[[10, 5, 24, 5], [24, 5, 24, 9]]", 1); string(f.Bytes()) != want {
		t.Errorf("got\n%s", f.Bytes())
	}
}

func TestBendsRefused(t *testing.T) {
	for text, want := range map[string]string{
		"{port: P1.P, runs: [[10, 6, 24, 7]]}": "upright or level",
		"{port: P1.P, runs: [[10, 6, 24]]}":    "four numbers",
		"{port: P1.P}":                         "runs: are missing",
		"{port: P1, runs: [[10, 6, 24, 6]]}":   "must name a port",
		"{port: F1.B, runs: [[10, 6, 24, 6]]}": "stands on no line",
	} {
		_, found := Parse([]byte(strings.Replace(bentText, "{port: P1.P, runs: [[10, 6, 24, 6]]}", text, 1)), nil, "")
		if !slices.ContainsFunc(found, func(x circuit.Finding) bool {
			return strings.Contains(x.Text, want) && x.Line == 17
		}) {
			t.Errorf("%s: %v", text, found)
		}
	}
	f := bent(t)
	if err := f.Bend("As found", []int{0}, [][2][2]float64{{{1, 2}, {3, 4}}}); err == nil {
		t.Error("a slanting run is taken")
	}
	if err := f.SplitLine("As found", 0, f.Circuits[0].Lines[0].Ports...); err == nil {
		t.Error("a line is cut with all on one side")
	}
	if string(f.Bytes()) != bentText {
		t.Error("a refused edit changed the text")
	}
}
