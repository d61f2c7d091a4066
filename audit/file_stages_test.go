package audit

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"barlitre/circuit/duty"
)

const staged = `format: barlitre/1
oil: {grade: ISO VG 46, temperature: 50 C}
axes: {ram: linear, drum: rotary}
duties:
- name: cycle
  hours: 300 h # h
  phases:
  # out
  - {name: approach, lasts: 2 s, ramp: 0.2 s, ram.stroke: 300 mm, ram.load: 5 kN}
  - {name: press, lasts: 3 s, ram.speed: 30 mm/s, ram.load: 20 kN, ram.load_end: 60 kN} # slow
  - {name: dwell, lasts: 1 s, drum.stroke: 2 rev, drum.load: 10 N m}
  - {name: return, lasts: 2.5 s, ram.stroke: -0.387 m}
circuits: [{name: a}]
`

func stagedBecomes(t *testing.T, f *File, err error, old, new string) {
	t.Helper()
	if err != nil {
		t.Error(err)
		return
	}
	want := strings.Replace(staged, old, new, 1)
	if strings.Contains(string(f.Bytes()), "coil") {
		want = strings.Replace(want, "drum: rotary", "coil: rotary", 1)
	}
	if got := string(f.Bytes()); got != want {
		t.Errorf("got\n%s\nwant\n%s", got, want)
	}
}

func TestReadStages(t *testing.T) {
	f := mustParse(t, staged)
	d := f.Duties[0]
	if len(f.Stages[0]) != 4 || d.Cycle() != 8.5 || len(d.Tracks) != 4 || len(d.Phases) != 4 || d.Phases[3].From != 6 {
		t.Fatalf("%+v", d)
	}
	if drift, way, ok := StrokeDrift(d, "drum"); !ok || math.Abs(drift-4*math.Pi) > 1e-9 || math.Abs(way-4*math.Pi) > 1e-9 {
		t.Errorf("the drum turns %g", drift)
	}
	if top, _ := d.TopSpeed("ram"); top < 0.15 || top > 0.2 {
		t.Errorf("top speed %g", top)
	}
	for text, want := range map[string]string{
		"lasts: 2 s, ramp: 0.2 s":      "",
		"lasts: 0 s, ramp: 0.2 s":      `duty "cycle", phase 1, lasts: is 0 s`,
		"ramp: 0.2 s":                  "lasts: is missing",
		"lasts: 2 s, ramp: 1.2 s":      "ramp: is 1.2 s; it lies between 0 s and half",
		"lasts: 2 s, ram.speed: 1 m/s": "ram.speed: and ram.stroke are both given",
		"lasts: 2 s, arm.load: 1 kN":   "unknown key",
		"lasts: 2 s, drum.load: 1 kN":  "phase 1, drum.load",
	} {
		_, found := Parse([]byte(strings.Replace(staged, "lasts: 2 s, ramp: 0.2 s", text, 1)), nil, "")
		all := fmt.Sprint(found)
		if want != "" && !strings.Contains(all, want) {
			t.Errorf("%s: no %q in %s", text, want, all)
		}
	}
	_, found := Parse([]byte(strings.Replace(staged, "  hours:", "  points: {t: [0 s, 1 s]}\n  hours:", 1)), nil, "")
	if !strings.Contains(fmt.Sprint(found), "points: and a list of phases are both given") {
		t.Error(found)
	}
}

func TestEditStages(t *testing.T) {
	f := mustParse(t, staged)
	stagedBecomes(t, f, f.SetStage("cycle", 0, "ram.stroke", "250 mm"), "300 mm", "250 mm")
	stagedBecomes(t, f, f.SetStage("cycle", 0, "ram.stroke", "300 mm"), "", "")
	stagedBecomes(t, f, f.SetStage("cycle", 0, "ramp", ""), ", ramp: 0.2 s", "")
	f = mustParse(t, staged)
	stagedBecomes(t, f, f.SetStage("cycle", 1, "ram.stroke", "90 mm"), "ram.speed: 30 mm/s, ram.load: 20 kN, ram.load_end: 60 kN", "ram.load: 20 kN, ram.load_end: 60 kN, ram.stroke: 90 mm")
	f = mustParse(t, staged)
	stagedBecomes(t, f, f.AddStage("cycle", 2, "hold"), "  - {name: dwell", "  - {name: hold, lasts: 1 s}\n  - {name: dwell")
	stagedBecomes(t, f, f.RemoveStage("cycle", 2), "", "")
	stagedBecomes(t, f, f.RenameAxis("drum", "coil"), "dwell, lasts: 1 s, drum.stroke: 2 rev, drum.load", "dwell, lasts: 1 s, coil.stroke: 2 rev, coil.load")
}

func TestStagesToPoints(t *testing.T) {
	f := mustParse(t, staged)
	before := f.Duties[0]
	if err := f.SetPoint("cycle", "t", 1, "1 s"); err == nil || !strings.Contains(err.Error(), "computed from its phases") {
		t.Error(err)
	}
	if err := f.AddTrack("cycle", "drum.position", ""); err == nil || !strings.Contains(err.Error(), "computed from its phases") {
		t.Error(err)
	}
	if err := f.StagesToPoints("cycle"); err != nil {
		t.Fatal(err)
	}
	after := f.Duties[0]
	if f.Stages[0] != nil || fmt.Sprint(after.Phases) != fmt.Sprint(before.Phases) || !strings.Contains(string(f.Bytes()), "hours: 300 h # h") {
		t.Errorf("%s", f.Bytes())
	}
	for k, tr := range before.Tracks {
		for i, v := range tr.Values {
			if got := after.Tracks[k].Values[i]; math.Abs(got-v) > 1e-8*(1+math.Abs(v)) {
				t.Errorf("%s.%s, row %d: %g, was %g", tr.Of, tr.What, i, got, v)
			}
		}
	}
	if err := f.SetPoint("cycle", "t", 1, "0.1 s"); err != nil {
		t.Error(err)
	}
}

func TestAddStagedDuty(t *testing.T) {
	f := mustParse(t, staged)
	phases := [][]string{{"name", "up", "lasts", "3 s", "ram.stroke", "1 m", "ram.load", "20 kN"}, {"name", "down: slow", "lasts", "4 s", "ram.stroke", "-1 m"}}
	if err := f.AddStagedDuty("lift", phases); err != nil {
		t.Fatal(err)
	}
	if !strings.Contains(string(f.Bytes()), "- name: lift\n  phases:\n  - {name: up, lasts: 3 s, ram.stroke: 1 m, ram.load: 20 kN}\n  - {name: \"down: slow\", lasts: 4 s, ram.stroke: -1 m}\n") {
		t.Errorf("%s", f.Bytes())
	}
	if got := f.StageTexts("lift", 1)["name"]; got != "down: slow" {
		t.Error(got)
	}
}

// The way back is scaled until the axis ends where it began, in phases and in points.
func TestCloseStrokes(t *testing.T) {
	f := mustParse(t, staged)
	for _, asPoints := range []bool{false, true} {
		g := *f
		if asPoints {
			if err := g.StagesToPoints("cycle"); err != nil {
				t.Fatal(err)
			}
		}
		before, _, _ := StrokeDrift(g.Duties[0], "ram")
		top := g.Duties[0].Track("ram", 0).Values[1]
		if err := g.CloseStrokes("cycle", "ram"); err != nil {
			t.Fatal(err)
		}
		drift, way, _ := StrokeDrift(g.Duties[0], "ram")
		if math.Abs(before) < 1e-3 || math.Abs(drift) > 1e-9*way || g.Duties[0].Track("ram", 0).Values[1] != top {
			t.Errorf("points %v: the drift was %g and is %g of %g; the way out was %g", asPoints, before, drift, way, top)
		}
		if err := g.CloseStrokes("cycle", "drum"); err == nil || !strings.Contains(err.Error(), "does not go back") {
			t.Error(err)
		}
	}
}

// An axis that is given by its position ends where it began, its way out unchanged: 0, 300, 120
// and 20 mm go back 280 mm, of which each step is taken 300/280 times, by hand 107.142857 mm and 0.
func TestCloseStrokesOfPositions(t *testing.T) {
	text := strings.Replace(intakeHead, "duties: []", "duties:\n- {name: cycle, points: {t: [0 s, 1 s, 2 s, 3 s], ram.position: [0 mm, 300 mm, 120 mm, 20 mm], ram.load: [5 kN, 5 kN, 5 kN, 5 kN]}}", 1)
	f := mustParse(t, text)
	if err := f.CloseStrokes("cycle", "ram"); err != nil {
		t.Fatal(err)
	}
	for r, want := range []float64{0, 0.3, 0.107142857, 0} {
		if got := f.Duties[0].Track("ram", duty.Position).Values[r]; math.Abs(got-want) > 1e-6 {
			t.Errorf("row %d: %g m, want %g", r, got, want)
		}
	}
	g := mustParse(t, strings.Replace(text, "ram.position: [0 mm, 300 mm, 120 mm, 20 mm], ", "", 1))
	if err := g.CloseStrokes("cycle", "ram"); err == nil || !strings.Contains(err.Error(), "neither speed nor position") {
		t.Error(err)
	}
}
