package audit

import (
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"barlitre/circuit"
)

// fault is a finding that a wrong file must give: its line, where it belongs, and
// a part of its text.
type fault struct {
	line      int
	block     string
	parameter string
	text      string
}

// wrongFiles lists what each file of testdata/wrong must be refused for, in full:
// a finding too many is a fault of the reader as well.
var wrongFiles = map[string][]fault{
	"anchor":      {{13, "", "", "anchors (&) and aliases (*)"}, {16, "", "", "write the value out"}},
	"at":          {{15, "T1", "at", "T1, place on the sheet (at): needs two numbers, as in at: [12, 30]"}},
	"axis_kind":   {{5, "", "ram", `axes, ram: is "lineal"; did you mean "linear"?`}},
	"block_id":    {{15, "T-1", "", `block "T-1": use letters, digits and _ only`}},
	"brace_open":  {{14, "", "", "a bracket or brace is not closed"}},
	"co2_year":    {{4, "", "co2_year", `energy, year of the CO2 factor (co2_year): is "24"; write a whole number from 1990 to 2100`}},
	"hours":       {{8, "", "hours", `duty "day", hours a year (hours): is 9000 h; a year has 0 h to 8784 h`}},
	"indentation": {{15, "", "", "the indentation does not fit the lines above"}},
	"low_high":    {{13, "RV1", "crack", "the value must lie between its low and high (160 bar: low 170, high 180)"}},
	"mirror":      {{15, "T1", "mirror", `is "maybe"; write yes or no`}},
	"no_duty":     {{1, "", "duties", "there is no duty"}},
	"no_format":   {{1, "", "format", `is missing; begin the file with "format: barlitre/1"`}},
	"no_kind":     {{15, "T1", "kind", "T1, kind of block (kind): is missing; write what the block is, such as kind: cylinder"}},
	"no_oil":      {{1, "", "", "oil: is missing"}},
	"no_points":   {{7, "", "points", `duty "day", points: are missing`}},
	"no_time":     {{8, "", "t", "points, t: is missing; give the time stamps"}},
	"no_unit":     {{13, "RV1", "crack", `"160" has no unit; pressure needs one: bar,`}},
	"no_value":    {{13, "RV1", "crack", "has no value; write {value: ...}"}},
	"null_value":  {{13, "RV1", "crack", "has no value; write a pressure"}},
	"oil_grade":   {{3, "", "", "oil: ISO VG 47 is not in the list"}},
	"origin":      {{13, "RV1", "crack", `RV1, cracks at (crack), origin: is "mesured"; did you mean "measured"?`}},
	"quote_open":  {{2, "", "", "a quote is not closed"}},
	"repeats":     {{8, "", "repeats", `is "daily"; write yes or no`}},
	"role":        {{11, "", "role", `is "found"; known here: as found, proposal`}},
	"tab_indent":  {{15, "", "", "indented with a tab; use spaces"}},
	"tag":         {{13, "", "", "tags (!!str) are not part of the format"}},
	"temperature": {{3, "", "temperature", `"-300 C" is below absolute zero`}},
	"turn":        {{15, "T1", "turn", `is "90"; write a whole number from 0 to 3`}},
	"empty":       {{1, "", "", "the file is empty"}},
	"not_utf8":    {{1, "", "", "save the file in UTF-8"}},

	"block_not_mapping": {{15, "T1", "", "needs a kind and its parameters"}},
	"colon_in_text":     {{2, "", "", "put text that has a colon in quotes"}},
	"comma_in_braces": {{13, "RV1", "crack", `"160" has no unit`},
		{13, "RV1", "5 bar", "a comma ends a value inside {}; write the number with a decimal point"}},
	"comma_in_list":          {{8, "", "ram.speed, value 2", `"0" has no unit; velocity needs one`}},
	"cost_as_found":          {{11, "", "retrofit_cost", "is for proposals"}},
	"cost_order":             {{12, "", "retrofit_cost", "must lie between low and high (26000 EUR: low 30000, high 35000)"}},
	"crlf":                   {{13, "RV1", "crack", `unit "bsr" is not a unit of pressure`}},
	"currency":               {{5, "", "price", "energy, price of energy (price): is in EUR, the audit in USD"}},
	"decimal_comma":          {{13, "RV1", "crack", "use a decimal point, not a comma"}},
	"duplicate_axis":         {{5, "", "ram", "axes, ram: stands here twice, in line 5"}},
	"duplicate_block":        {{16, "RV1", "", "RV1: stands here twice, in lines 13 and 16"}},
	"duplicate_circuit":      {{17, "", "", `circuit "As found" stands here twice, in lines 10 and 17; rename one`}},
	"duplicate_duty":         {{9, "", "", `duty "day" stands here twice, in lines 7 and 9; rename one`}},
	"duplicate_parameter":    {{13, "RV1", "crack", "RV1, cracks at (crack): stands here twice, in line 13"}},
	"duplicate_track":        {{8, "", "ram.speed [mm/s]", "ram.speed stands here twice; keep one"}},
	"file_faults":            {{8, "", "file", `faults.csv, line 3: column "ram.speed": "x" is not a number`}, {8, "", "file", "faults.csv, line 4: has 2 cells, the head has 3"}},
	"file_missing":           {{8, "", "file", "nowhere.csv cannot be read"}},
	"file_outside":           {{8, "", "file", "must lie beside the audit file or in a folder below it"}},
	"file_units":             {{8, "", "ram.speed", `unit "bar" is not a unit of velocity`}, {8, "", "ram.load", `unit "" is not a unit of force`}},
	"key_needs_quotes":       {{8, "", "", "a key with its unit in brackets needs quotes"}},
	"line_text":              {{16, "", "", `"C1.A RV1.P" is not a port`}},
	"list_for_quantity":      {{13, "RV1", "crack", "needs a pressure, not a list or a mapping"}},
	"newer_format":           {{1, "", "format", "barlitre/2 is newer than barlitre/1"}},
	"not_a_mapping":          {{1, "", "", "this is not an audit file"}},
	"number_for_text":        {{2, "", "title", `title: needs a text; write it in quotes, "2024"`}},
	"oil_viscosity":          {{3, "", "", "oil: give a grade such as ISO VG 46, or the viscosity"}},
	"other_format":           {{1, "", "format", `is "hydraulics 3"; this program reads "barlitre/1"`}},
	"points_and_file":        {{8, "", "file", "points and file are both given; keep one"}},
	"pump_at_rest":           {{11, "", "pump_at_rest", `pumps while every axis stands (pump_at_rest): is "unlaod"; did you mean turn unloaded (unload)?`}},
	"time_backwards":         {{8, "", "", "lasts -2 s"}, {8, "", "", "time runs backwards from 2 s to 0 s"}},
	"track_length":           {{8, "", "ram.load", "has 1 value for 2 time stamps"}},
	"track_no_quantity":      {{8, "", "ram.force", "is not a track; write t, or an axis and one of speed, position, load, command"}},
	"track_of_block":         {{8, "", "RV1.load", "a block has a command, a set pressure (set_pressure) or a set flow (set_flow)"}},
	"track_unknown_axis":     {{8, "", "arm.load", `there is no axis or block "arm"; did you mean "ram"?`}},
	"two_documents":          {{3, "", "", "a second document begins here"}},
	"unit_of_other_quantity": {{14, "C1", "bore", `unit "bar" is not a unit of length`}},
	"unknown_key_circuit":    {{11, "", "pump-at-rest", `unknown key; did you mean pumps while every axis stands (pump_at_rest)?`}},
	"unknown_key_duty":       {{8, "", "hour", `unknown key; did you mean hours a year (hours)?`}},
	"unknown_key_oil":        {{3, "", "densety", `oil, densety: unknown key; did you mean "density"?`}},
	"unknown_key_top":        {{9, "", "circuts", `circuts: unknown key; did you mean "circuits"?`}},
	"unknown_kind":           {{13, "RV1", "kind", `there is no kind "releif"; did you mean relief valve (relief)?`}},
	"unknown_parameter":      {{13, "RV1", "craks", `unknown key for this kind of block, relief valve (relief); did you mean cracks at (crack)?`}},
	"wrong_unit":             {{13, "RV1", "crack", `RV1, cracks at (crack): unit "bsr" is not a unit of pressure; use bar,`}},
	"many":                   {{3, "", "densty", `did you mean "density"?`}, {13, "RV1", "crack", `"bsr"`}, {14, "C1", "bore", `"80" has no unit`}, {15, "T1", "kind", `there is no kind "tnk"; did you mean "tank"?`}},
}

func TestWrongFiles(t *testing.T) {
	paths, err := filepath.Glob("testdata/wrong/*.yaml")
	if err != nil || len(paths) != len(wrongFiles) {
		t.Fatalf("%d files, %d in the table (%v)", len(paths), len(wrongFiles), err)
	}
	for _, path := range paths {
		name := strings.TrimSuffix(filepath.Base(path), ".yaml")
		t.Run(name, func(t *testing.T) {
			_, found := Read(path)
			want := wrongFiles[name]
			for i, n := range found {
				if i >= len(want) {
					t.Errorf("one too many: %v", n)
					continue
				}
				w := want[i]
				if n.Level != circuit.Stops || n.Line != w.line || n.Block != w.block || n.Parameter != w.parameter || !strings.Contains(n.Text, w.text) {
					t.Errorf("got %d %q %q %s\nwant %+v", n.Line, n.Block, n.Parameter, n.Text, w)
				}
			}
			if len(found) < len(want) {
				t.Errorf("%d findings, want %d: %v", len(found), len(want), found)
			}
		})
	}
}

// What stops a file from being read as one gives no File; all else does.
func TestWrongFilesKeepWhatIsRight(t *testing.T) {
	f, _ := Read("testdata/wrong/many.yaml")
	if f == nil {
		t.Fatal("no file")
	}
	if e := f.Circuit("As found"); e == nil || len(e.Blocks) != 3 || e.Block("C1").Values["rod"].SI != 0.056 || len(e.Lines) != 2 {
		t.Errorf("got %+v", e)
	}
	for _, name := range []string{"newer_format", "quote_open", "not_utf8", "empty", "anchor", "not_a_mapping"} {
		if f, _ := Read("testdata/wrong/" + name + ".yaml"); f != nil {
			t.Errorf("%s gives a file", name)
		}
	}
	if f, found := Read("testdata/wrong/no_such_file.yaml"); f != nil || len(found) != 1 {
		t.Errorf("got %v, %v", f, found)
	}
}

// A syntax fault is found in its own line wherever it stands, not at the start of
// the list or mapping around it.
func TestSyntaxLine(t *testing.T) {
	small, err := os.ReadFile("testdata/small.yaml")
	if err != nil {
		t.Fatal(err)
	}
	for _, n := range []int{1, 50, 400} {
		var b strings.Builder
		b.Write(small)
		for i := range n {
			fmt.Fprintf(&b, "# filler\n- name: c%d\n  blocks: {T1: {kind: tank,\n      at: [1, 2]}}\n  lines: []\n", i)
		}
		line := strings.Count(b.String(), "\n") + 2
		b.WriteString("- name: last\n   role: proposal\n  blocks: {}\n- name: after\n")
		_, found := Parse([]byte(b.String()), nil, "")
		if len(found) != 1 || found[0].Line != line {
			t.Errorf("%d circuits: got %v, want line %d", n, found, line)
		}
	}
}

func TestNearest(t *testing.T) {
	kinds := []string{"relief", "filter", "line", "valve", "pressure_source"}
	for word, want := range map[string]string{"releif": "relief", "Relief": "relief", "valv": "valve", "pressure source": "pressure_source",
		"line": "line", "xyzzy": "", "": ""} {
		if got := nearest(word, kinds); got != want {
			t.Errorf("nearest(%q) = %q, want %q", word, got, want)
		}
	}
}
