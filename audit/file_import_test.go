package audit_test

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
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
	"barlitre/machines/units"
)

// loggerRows is a recording of a rod whose load is 20 kN + 5 kN·cos: position [mm] with
// decimal commas, chamber pressures [bar] by Newton's law from load, friction and damping.
func loggerRows() (text string, load, speed []float64) {
	const bore, rod = 0.080, 0.056
	a, b := math.Pi/4*bore*bore, math.Pi/4*(bore*bore-rod*rod)
	out := []string{"Press 4, shift 2", "t [s];x1 [mm];pA [bar];pB [bar];note"}
	for i := range 601 {
		s := 0.02 * float64(i)
		x, v := 0.3+0.2*math.Sin(0.8*s), 0.16*math.Cos(0.8*s)
		f := 20e3 + 5e3*math.Cos(0.5*s)
		friction := 0.0
		if math.Abs(v) > 0.00016 {
			friction = math.Copysign(800, v)
		}
		pB := 6e5
		pA := (f + friction + 1500*v + pB*b) / a
		load, speed = append(load, f), append(speed, v)
		out = append(out, strings.ReplaceAll(fmt.Sprintf("%.2f;%.5f;%.6f;%.6f;", s, x*1e3, pA/1e5, pB/1e5), ".", ","))
	}
	return strings.Join(append(out, "Max;500;60;6"), "\n") + "\n", load, speed
}

const importing = `format: barlitre/1
title: imported
oil: {temperature: 50 C, density: 870 kg/m3, viscosity: 40 mPa s}
axes: {ram: linear}
duties: []
circuits:
- name: As found
  pump_at_rest: keep
  blocks:
    TK: {kind: tank}
    M1: {kind: electric_motor, rated_power: 22 kW, efficiency: 0.92}
    P1: {kind: pump, displacement: 45 cm3/rev}
    RV1: {kind: relief, crack: 160 bar}
    V1: {kind: valve, follows: ram, nominal_flow: 60 L/min}
    C1: {kind: cylinder, axis: ram, hold: valve, bore: 80 mm, rod: 56 mm, friction: 800 N, viscous: 1500 N s/m}
    X1: {kind: pressure_point}
  lines:
  - M1.shaft - P1.shaft
  - P1.S - RV1.T - V1.T - TK.T
  - P1.P - RV1.P - V1.P
  - V1.A - C1.A - X1.P
  - V1.B - C1.B
`

func setup(t *testing.T, text string) audit.Setup {
	t.Helper()
	f, err := logger.OpenBytes("press.csv", []byte(text))
	if err != nil {
		t.Fatal(err)
	}
	sum := sha256.Sum256([]byte(text))
	return audit.Setup{File: "press.csv", SHA256: hex.EncodeToString(sum[:]), Recipe: f.Guess(), Columns: map[string]string{"X1.pressure": "pA"},
		Derived: map[string]map[string]string{
			"ram.speed": {"law": "speed of position", "position": "x1", "window": "0.2 s"},
			"ram.load":  {"law": "chamber pressures", "a": "pA", "b": "pB", "bore": "80 mm", "rod": "56 mm", "friction": "800 N", "viscous": "1500 N s/m", "position": "x1", "window": "0.2 s"},
		}}
}

// kept writes the recording into a folder and an audit file that imports it beside it.
func keptImport(t *testing.T) (f *audit.File, dir string) {
	t.Helper()
	dir = t.TempDir()
	text, _, _ := loggerRows()
	if err := os.WriteFile(filepath.Join(dir, "press.csv"), []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
	path := filepath.Join(dir, "a.yaml")
	if err := os.WriteFile(path, []byte(importing), 0o644); err != nil {
		t.Fatal(err)
	}
	f, _ = audit.Read(path)
	if err := f.ImportDuty("day", setup(t, text)); err != nil {
		t.Fatal(err)
	}
	if err := f.Save(path); err != nil {
		t.Fatal(err)
	}
	f, found := audit.Read(path)
	if f == nil || circuit.AnyStops(found) {
		t.Fatal(found)
	}
	return f, dir
}

// Load and speed of known motion come back from position and chamber pressures, with
// friction taken off once, and the same file and recipe give the same tracks when the audit is opened again.
func TestImportedDuty(t *testing.T) {
	f, _ := keptImport(t)
	d := f.Duties[0]
	_, load, speed := loggerRows()
	v, l := d.Track("ram", duty.Speed), d.Track("ram", duty.Load)
	if v == nil || l == nil || d.Track("X1", duty.MeasuredPressure) == nil || len(d.Time) != 601 || d.Step != 0 {
		t.Fatalf("%+v", d)
	}
	for i := 10; i < 590; i++ {
		near(t, fmt.Sprint("speed, row ", i), v.Values[i], speed[i], 0, 2e-4)
		if math.Abs(speed[i]) > 2e-3 { // which way friction acts is not told near the turn
			near(t, fmt.Sprint("load, row ", i), l.Values[i], load[i], 0, 20)
		}
	}
	s := solved(t, f)
	r := s.Circuits[0].Duties[0]
	if r.Balance == nil {
		t.Fatal(s.Circuits[0].Findings)
	}
	work := 0.0
	for i := 1; i < len(load); i++ {
		work += 0.01 * (load[i]*speed[i] + load[i-1]*speed[i-1])
	}
	near(t, "work at the load", r.Balance.WorkPositive().Total()+r.Balance.WorkNegative().Total(), work, 2e-3, 0)
	im := f.Imports[0]
	if len(im.Derived) != 2 || !strings.Contains(im.Derived[1].Formula+im.Derived[0].Formula, "− 800\u202fN·sgn v") {
		t.Errorf("%+v", im.Derived)
	}
	var lines []string
	for _, row := range s.Report(units.Metric).Recordings.Rows {
		lines = append(lines, row.Cells[1])
	}
	all := strings.Join(lines, "\n")
	for _, want := range []string{"imported from press.csv, 601 rows", `1 line after the last row, such as "Max;500;60;6", line 604; left out`, "ram.load is derived: F = p_A·", "fit for energy", "time steps are the rows"} {
		if !strings.Contains(all, want) {
			t.Errorf("the report does not say %q:\n%s", want, all)
		}
	}
	var b bytes.Buffer
	if err := s.Result().Write(&b); err != nil {
		t.Fatal(err)
	}
	var got audit.Result
	if err := json.Unmarshal(b.Bytes(), &got); err != nil || len(got.Recordings) != 1 || got.Recordings[0].Corrections[0].Key != "footer" || got.Recordings[0].SHA256 != im.SHA256 || len(got.Recordings[0].Derived) != 2 {
		t.Errorf("%v, %+v", err, got.Recordings)
	}
}

// A file that was changed since is told, and so is one that is not there.
func TestImportOfAnotherFile(t *testing.T) {
	f, dir := keptImport(t)
	text, _, _ := loggerRows()
	path := filepath.Join(dir, "press.csv")
	if err := os.WriteFile(path, []byte(strings.Replace(text, "0,02;", "0,02 ;", 1)), 0o644); err != nil {
		t.Fatal(err)
	}
	_, found := audit.Read(f.Path)
	says(t, found, "warns", "press.csv is not the file that this duty was made from")
	if err := os.Remove(path); err != nil {
		t.Fatal(err)
	}
	_, found = audit.Read(f.Path)
	says(t, found, "stops", "press.csv cannot be read: no such file or directory; put it beside the audit file")
}

// An import is set anew, with another choice, as the window does it; blocks and axes that are
// renamed are renamed in it.
func TestImportIsEdited(t *testing.T) {
	f, _ := keptImport(t)
	s, ok := f.SetupOf("day")
	if !ok {
		t.Fatal("no setup")
	}
	delete(s.Columns, "X1.pressure")
	s.Recipe.Choices = map[string]string{"pB: no value": "hold"}
	if err := f.SetImport("day", s); err != nil {
		t.Fatal(err)
	}
	if f.Imports[0].Recipe.Choices["pB: no value"] != "hold" || f.Duties[0].Track("X1", duty.MeasuredPressure) != nil || f.Duties[0].Track("ram", duty.Load) == nil {
		t.Errorf("%s", f.Bytes())
	}
	s.Derived["ram.load"]["bore"] = "8 bar"
	if err := f.SetImport("day", s); err == nil || !strings.Contains(err.Error(), `unit "bar" is not a unit of length`) {
		t.Errorf("%v", err)
	}
}

// An edit elsewhere reads the audit file again, but imports and derives nothing anew.
func TestEditKeepsAnImport(t *testing.T) {
	f, dir := keptImport(t)
	load := &f.Duties[0].Track("ram", duty.Load).Values[0]
	if err := os.Remove(filepath.Join(dir, "press.csv")); err != nil { // it would be missed
		t.Fatal(err)
	}
	if err := f.Set("As found/RV1.crack", "150 bar"); err != nil {
		t.Fatal(err)
	}
	if &f.Duties[0].Track("ram", duty.Load).Values[0] != load || len(f.Rates[0]) != 1 {
		t.Error("derived again")
	}
}

// What is wrong with an import is told with its key.
func TestImportsThatAreWrong(t *testing.T) {
	f, dir := keptImport(t)
	text := string(f.Bytes())
	for _, c := range []struct{ old, now, want string }{
		{"decimal: ','", "decimal: ;", `decimal sign is ";", must be one of`},
		{"separator: ;", "seperator: ;", `seperator: unknown key; did you mean "separator"?`},
		{"head: 2", "head: two", "cannot unmarshal"},
		{"X1.pressure: pA", "X1.pressure: x1", `"x1" is a length, must be a pressure`},
		{"X1.pressure: pA", "X1.pressure: pC", `press.csv has no channel "pC"; did you mean`},
		{"X1.pressure: pA", "t: pA", "the import says where the time stamps are"},
		{"law: speed of position", "law: speed of sound", "speed of sound"},
		{"law: speed of position", "law: chamber pressures", `"chamber pressures" gives a force, this track is a velocity`},
		{"rod: 56 mm", "rod: 86 mm", "as thick as the bore"},
		{"friction: 800 N", "friction: -800 N", "must be above 0"},
		{"columns: [t]", "columns: [u]", `there is no column "u"`},
	} {
		if !strings.Contains(text, c.old) {
			t.Fatalf("no %q in\n%s", c.old, text)
		}
		_, found := audit.Parse([]byte(strings.Replace(text, c.old, c.now, 1)), audit.Beside(filepath.Join(dir, "a.yaml")), "")
		says(t, found, "stops", c.want)
	}
}

// The four-axis recording goes from file to four tracks by the guess alone, and its work
// integrals are the published ones: 485.63 and -208.07 kJ (source in four_axis_test.go).
func TestFourAxesImported(t *testing.T) {
	path := fourAxisFile(t, "four-axis.yaml")
	data, err := os.ReadFile(filepath.Join(filepath.Dir(path), fourAxisRecording))
	if err != nil {
		t.Fatal(err)
	}
	file, err := logger.OpenBytes(fourAxisRecording, data)
	if err != nil {
		t.Fatal(err)
	}
	f, found := audit.Read(path)
	if len(found) > 0 {
		t.Fatal(found)
	}
	s := audit.Setup{File: fourAxisRecording, Recipe: file.Guess(), Columns: map[string]string{"boom.load": "boom_F", "boom.speed": "boom_v", "arm.load": "arm_F", "arm.speed": "arm_v",
		"bucket.load": "bucket_F", "bucket.speed": "bucket_v", "swing.load": "swing_T", "swing.speed": "swing_w"}}
	if err := f.SetImport("truck loading", s); err != nil {
		t.Fatal(err)
	}
	d := f.Duties[0]
	positive, negative := 0.0, 0.0
	for _, axis := range []string{"boom", "arm", "bucket", "swing"} {
		v, l := d.Track(axis, duty.Speed).Values, d.Track(axis, duty.Load).Values
		for i := range v {
			p := v[i] * l[i] * 0.01 / 1e3
			positive, negative = positive+math.Max(p, 0), negative+math.Min(p, 0)
		}
	}
	near(t, "positive work [kJ], published", positive, 485.63, 5e-4, 0)
	near(t, "negative work [kJ], published", negative, -208.07, 5e-4, 0)
	for _, a := range f.Rates[0] {
		t.Logf("%s: error %.2g %%, %v", a.Axis, 100*a.Error, a.Remarks)
	}
}
