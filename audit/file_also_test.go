package audit_test

import (
	"context"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/circuit/duty"
	"barlitre/circuit/recording/logger"
)

// splitImport keeps the recording of loggerRows in three files beside the audit file, the
// second repeating three rows of the first.
func splitImport(t *testing.T) (f *audit.File, dir string, whole []float64) {
	t.Helper()
	dir = t.TempDir()
	text, load, _ := loggerRows()
	lines := strings.Split(strings.TrimSpace(text), "\n")
	head, rows := strings.Join(lines[:2], "\n")+"\n", lines[2:len(lines)-1]
	var paths []string
	for k, part := range [][]string{rows[:200], rows[197:400], rows[400:]} {
		p := filepath.Join(dir, fmt.Sprintf("press_%d.csv", k+9))
		if err := os.WriteFile(p, []byte(head+strings.Join(part, "\n")+"\n"), 0o644); err != nil {
			t.Fatal(err)
		}
		paths = append(paths, p)
	}
	path := filepath.Join(dir, "a.yaml")
	if err := os.WriteFile(path, []byte(importing), 0o644); err != nil {
		t.Fatal(err)
	}
	f, _ = audit.Read(path)
	s := setup(t, text)
	file, err := logger.OpenFiles(paths...)
	if err != nil {
		t.Fatal(err)
	}
	s.File, s.More, s.SHA256, s.Recipe = "press_9.csv", []string{"press_10.csv", "press_11.csv"}, "", file.Guess()
	if err := f.ImportDuty("day", s); err != nil {
		t.Fatal(err)
	}
	if err := f.Save(path); err != nil {
		t.Fatal(err)
	}
	return f, dir, load
}

// A duty that names the files that its recording was split into has all rows once, and says
// what it did at the joints; the files are part of its source, and come back from SetupOf.
func TestDutyOfSeveralFiles(t *testing.T) {
	f, _, load := splitImport(t)
	d := f.Duties[0]
	if len(d.Time) != 601 || d.Time[600] != 12 {
		t.Fatalf("%d rows to %g s: %v", len(d.Time), d.Time[len(d.Time)-1], f.Findings())
	}
	for i := 210; i < 380; i += 10 {
		near(t, fmt.Sprint("load, row ", i), d.Track("ram", duty.Load).Values[i], load[i], 0, 400)
	}
	said := ""
	for _, x := range f.Findings() {
		said += x.Text + "\n"
	}
	if !strings.Contains(said, "3 files make one recording") || !strings.Contains(said, "3 rows of a file that the one before has already") || !strings.Contains(said, "of press_10.csv") {
		t.Error(said)
	}
	if got := f.Sources[0].Files(); strings.Join(got, " ") != "press_9.csv press_10.csv press_11.csv" {
		t.Error(got)
	}
	if s, ok := f.SetupOf("day"); !ok || len(s.More) != 2 || f.SetImport("day", s) != nil || len(f.Duties[0].Time) != 601 {
		t.Errorf("set again: %+v", s)
	}
}

// A second logger, whose clock is 3.217 s behind and which has the pressure too, is aligned
// by it; its force comes to stand at the rows of the first within a hundredth of its range.
func TestSecondLogger(t *testing.T) {
	f, dir := keptImport(t)
	var b strings.Builder
	b.WriteString("t [s];P main [bar];F2 [kN]\n")
	pressure := func(s float64) float64 { // as loggerRows
		v := 0.16 * math.Cos(0.8*s)
		a, area := math.Pi/4*0.080*0.080, math.Pi/4*(0.080*0.080-0.056*0.056)
		friction := 0.0
		if math.Abs(v) > 0.00016 {
			friction = math.Copysign(800, v)
		}
		return (20e3 + 5e3*math.Cos(0.5*s) + friction + 1500*v + 6e5*area) / a / 1e5
	}
	for i := range 260 {
		s := 0.5 + 0.043*float64(i)
		b.WriteString(strings.ReplaceAll(fmt.Sprintf("%.3f;%.4f;%.3f\n", s-3.217+10, pressure(s), 30+10*math.Sin(s)), ".", ","))
	}
	if err := os.WriteFile(filepath.Join(dir, "second.csv"), []byte(b.String()), 0o644); err != nil {
		t.Fatal(err)
	}
	also := `  also: [{file: second.csv, import: {encoding: UTF-8, separator: ;, decimal: ",", head: 1, first: 2, time: {columns: [t], form: elapsed, unit: s}, channels: [{column: P main, quantity: pressure, unit: bar}, {column: F2, quantity: force, unit: kN}]}, OFFSET}]
`
	read := func(offset, load string) (*audit.File, []circuit.Finding) {
		text := string(f.Bytes())
		at := strings.Index(text, "  columns: {X1")
		text = text[:at] + strings.ReplaceAll(also, "OFFSET", offset) + text[at:]
		i, k := strings.Index(text, "ram.load: {"), 0
		k = i + strings.Index(text[i:], "}")
		text = text[:i] + load + text[k+1:]
		return audit.Parse([]byte(text), audit.Beside(f.Path), f.Path)
	}
	turned := "ram.load: {law: sign turned, column: F2}"
	g, found := read("align: {channel: pA, with: P main, within: 20 s}", turned)
	if g == nil || circuit.AnyStops(found) {
		t.Fatal(found)
	}
	d := g.Duties[0]
	for i := 100; i < 500; i += 7 {
		near(t, fmt.Sprint("force, row ", i), d.Track("ram", duty.Load).Values[i], -1e3*(30+10*math.Sin(d.Time[i])), 0, 200)
	}
	if a := g.Imports[0].Also; len(a) != 1 || math.Abs(a[0].Offset-(3.217-10)) > 0.02 || a[0].Unclear {
		t.Errorf("%+v", a)
	}
	if !strings.Contains(fmt.Sprint(found), "aligned by pA with P main, −6.7") {
		t.Error(found)
	}
	if got := g.Sources[0].Files(); len(got) != 2 || got[1] != "second.csv" {
		t.Error(got)
	}
	g, _ = read("offset: -6.783 s", turned)
	near(t, "given, row 300", g.Duties[0].Track("ram", duty.Load).Values[300], -1e3*(30+10*math.Sin(g.Duties[0].Time[300])), 0, 20)
	for _, c := range []struct{ offset, want string }{{"offset: 1 s, align: {channel: pA, with: P main}", "both given"}, {"align: {channel: pA, with: P}", "names no channel of each"}, {"offset: 900 s", "give another offset"}} {
		if _, found := read(c.offset, turned); !strings.Contains(fmt.Sprint(found), c.want) {
			t.Errorf("%s: %v", c.offset, found)
		}
	}
}

// Reading tells how far it is, ends when it is told to, and takes over what another file has
// read of the same recording; of a recording that is another by now it does not.
func TestReadingRecordings(t *testing.T) {
	f, dir := keptImport(t)
	told := int64(0)
	g, found := audit.ReadWith(f.Path, audit.Importing{Known: f, Progress: func(file string, done, total int64) {
		if told = done; file != "press.csv" || done > total {
			t.Errorf("%s: %d of %d", file, done, total)
		}
	}})
	size, err := os.Stat(filepath.Join(dir, "press.csv"))
	if g == nil || err != nil || circuit.AnyStops(found) || told != size.Size() {
		t.Fatalf("%d bytes told, %v", told, found)
	}
	if &g.Duties[0].Time[0] != &f.Duties[0].Time[0] {
		t.Error("the recording was read again")
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, found = audit.ReadWith(f.Path, audit.Importing{Context: ctx}); !strings.Contains(fmt.Sprint(found), "reading press.csv was cancelled") || !circuit.AnyStops(found) {
		t.Errorf("cancelled: %v", found)
	}
	text, _, _ := loggerRows()
	if err := os.WriteFile(filepath.Join(dir, "press.csv"), []byte(strings.Replace(text, "0,02;", "0,021;", 1)), 0o644); err != nil {
		t.Fatal(err)
	}
	g, found = audit.ReadWith(f.Path, audit.Importing{Known: f})
	if g == nil || g.Duties[0].Time[1] != 0.021 || !strings.Contains(fmt.Sprint(found), "is not the file that this duty was made from") {
		t.Errorf("changed: %v", found)
	}
}
