package duty

import (
	"math"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/test"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/duty/intake"
	"barlitre/app/station"
	"barlitre/app/station/stationtest"
	"barlitre/app/widgets"
	"barlitre/audit"
	cycle "barlitre/circuit/duty"
	"barlitre/circuit/logged"
)

const pressFile = `format: barlitre/1
title: Press
oil: {temperature: 50 C, density: 870 kg/m3, viscosity: 40 mPa s}
axes: {}
duties: []
circuits: []
`

// importing opens the station with an audit and its page with a recording, all work done at once.
func importing(t *testing.T, text, recording string) (*stationtest.Frame, *Station) {
	t.Helper()
	t.Cleanup(intake.Inline())
	f := stationtest.Open(t, New, text, nil)
	f.PickedFile = recording
	click(t, f, "duty.recording", "duty.empty.recording")
	if err := f.LastError(); err != nil {
		t.Fatal(err)
	}
	f.Settle(1190, 590)
	return f, f.Station.(*Station)
}

// click presses the first button of the names that is shown.
func click(t *testing.T, f *stationtest.Frame, names ...string) {
	t.Helper()
	for _, name := range names {
		if b, ok := widgets.Named(name).(fyne.Tappable); ok && strings.Contains(f.Dump(), name+"\t") {
			test.Tap(b)
			return
		}
	}
	t.Fatalf("no button %q in\n%s", names, f.Dump())
}

func choose(t *testing.T, name, word string) {
	t.Helper()
	s, ok := widgets.Named(name).(*widgets.Select)
	if !ok || !slices.Contains(s.Options, word) {
		t.Fatalf("%s cannot be %q, but %q", name, word, s.Options)
	}
	s.SetSelected(word)
}

func put(t *testing.T, name, text string) {
	t.Helper()
	e, ok := widgets.Named(name).(*widgets.Field)
	if !ok {
		t.Fatalf("no field %s", name)
	}
	e.SetText(text)
	e.OnSubmitted(text)
	if e.Bad() {
		t.Fatalf("%s: %q was refused: %s", name, text, e.Note.Text)
	}
}

// look draws a picture, when asked to.
func look(f *stationtest.Frame, name string) {
	if stationtest.Looking() {
		f.Picture(name, 1190, 590)
	}
}

// label is the text of a label or button.
func label(name string) string {
	switch o := widgets.Named(name).(type) {
	case *widget.Label:
		return o.Text
	case interface{ DumpText() string }:
		return o.DumpText()
	}
	return ""
}

// The messy recording of the samples, from file to duty: the signal of 4 to 20 mA is told
// what it means, the load is made of both pressures. It was made of eight strokes of 400 mm,
// out against 60 kN and back against 4 kN: 8·0.4·(60 + 4) = 204.8 kJ, by hand.
func TestRecordingBecomesDuty(t *testing.T) {
	f, s := importing(t, pressFile, "../../samples/recordings/press-shift.csv")
	look(f, "intake-tracks")
	if text := label("intake.title"); !strings.Contains(text, "1734 rows") || !strings.Contains(text, "2026-03-17") {
		t.Error(text)
	}
	click(t, f, "intake.tab.file")
	look(f, "intake-file")
	click(t, f, "intake.tab.findings")
	look(f, "intake-findings")
	if !strings.Contains(f.Dump(), "2 rows with the stamp and the values of another") {
		t.Errorf("findings:\n%s", f.Dump())
	}
	click(t, f, "intake.tab.columns")
	table := widgets.Named("intake.columns").(*widgets.Table)
	table.Selected(1, 0)
	if label("intake.column") != "Column ram p_A" {
		t.Fatal(label("intake.column"))
	}
	choose(t, "intake.column.quantity", "pressure")
	choose(t, "intake.column.signal", "4 to 20 mA")
	put(t, "intake.column.high", "250 bar")
	look(f, "intake-columns")
	click(t, f, "intake.tab.tracks")
	put(t, "intake.track.ram.load.bore", "100 mm")
	put(t, "intake.track.ram.load.rod", "70")
	look(f, "intake-derived")
	if text := label("intake.track.ram.load.formula"); !strings.Contains(text, "p_A·0.007854") {
		t.Errorf("formula %q", text)
	}
	if text := label("intake.works"); !strings.Contains(text, "+20") || !strings.Contains(text, "ram") && !strings.Contains(text, "kJ") {
		t.Errorf("works %q", text)
	}
	click(t, f, "intake.tab.cycles")
	look(f, "intake-cycles")
	put(t, "intake.name", "early shift")
	put(t, "intake.hours", "3000")
	undo := f.Document.UndoName()
	click(t, f, "intake.make")
	if err := f.LastError(); err != nil {
		t.Fatal(err)
	}
	f.Station.Changed(station.Model)
	look(f, "intake-made")
	file := f.Document.File()
	if len(file.Duties) != 1 || len(file.Axes) != 1 || file.Axes[0].Name != "ram" || f.Document.UndoName() == undo {
		t.Fatalf("%d duties, axes %v, undo %q", len(file.Duties), file.Axes, f.Document.UndoName())
	}
	w := logged.Works(file.Duties[0])
	if sum := w[0].Positive; math.Abs(sum-204.8e3) > 0.01*204.8e3 {
		t.Errorf("work %.5g kJ, want 204.8", sum/1e3)
	}
	if _, err := os.Stat(filepath.Join(filepath.Dir(f.Document.Path()), "press-shift.csv")); err != nil {
		t.Error("no copy beside the audit")
	}
	if s.recordings.open || file.Duties[0].Hours != 3000*3600 {
		t.Errorf("open %v, %g s", s.recordings.open, file.Duties[0].Hours)
	}
	if name, ok := f.Document.Undo(); !ok || len(f.Document.File().Duties) != 0 || len(f.Document.File().Axes) != 0 {
		t.Errorf("one undo (%s) leaves %d duties", name, len(f.Document.File().Duties))
	}
}

// assumedFile has a duty that was assumed, and one that does not run in the year.
const assumedFile = `format: barlitre/1
title: Press
oil: {temperature: 50 C, density: 870 kg/m3, viscosity: 40 mPa s}
axes: {ram: linear}
duties:
- name: assumed
  hours: 3000 h
  points: {t: [0 s, 1 s], ram.speed: [0.1 m/s, 0.1 m/s], ram.load: [5 kN, 5 kN]}
- name: spare
  points: {t: [0 s, 1 s], ram.speed: [0.1 m/s, 0.1 m/s], ram.load: [5 kN, 5 kN]}
circuits: []
`

// A recording stands in place of the one duty that has hours unless it is put beside the
// others: the year does not have both without being asked. Either is one step of undo.
func TestRecordingTakesHours(t *testing.T) {
	const hour = 3600.0
	for _, c := range []struct {
		word, undo   string
		old, newDuty float64
	}{{"in place of assumed", "Take in press-shift.csv in place of assumed", 0, 3000 * hour}, {"beside the others", "Take in press-shift.csv", 3000 * hour, 8 * hour}} {
		f, _ := importing(t, assumedFile, "../../samples/recordings/press-shift.csv")
		if !strings.Contains(f.Dump(), "intake.year\tin place of assumed\t") {
			t.Fatalf("in place of the one duty with hours is not what is offered:\n%s", f.Dump())
		}
		look(f, "intake-in-place-of")
		choose(t, "intake.year", c.word)
		if c.old > 0 {
			put(t, "intake.hours", "8")
			look(f, "intake-beside")
		}
		click(t, f, "intake.make")
		if err := f.LastError(); err != nil {
			t.Fatal(err)
		}
		d := f.Document.File().Duties
		if len(d) != 3 || d[0].Hours != c.old || d[2].Hours != c.newDuty || f.Document.UndoName() != c.undo {
			t.Errorf("%s: hours %g, %g, undo %q", c.word, d[0].Hours, d[2].Hours, f.Document.UndoName())
		}
		if f.Document.Undo(); len(f.Document.File().Duties) != 2 || f.Document.File().Duties[0].Hours != 3000*hour {
			t.Errorf("%s: one undo does not bring the audit back", c.word)
		}
	}
	two := strings.Replace(assumedFile, "- name: spare\n", "- name: spare\n  hours: 500 h\n", 1)
	f, _ := importing(t, two, "../../samples/recordings/press-shift.csv")
	if !strings.Contains(f.Dump(), "intake.year\tbeside the others\t") || !strings.Contains(label("intake.year.text"), "3500") {
		t.Errorf("of two duties with hours one is picked: %q", label("intake.year.text"))
	}
}

// A duty is opened again: its laws and its part are there, and are changed in one step.
func TestImportIsChanged(t *testing.T) {
	f, _ := importing(t, pressFile, "../../samples/recordings/press-shift.csv")
	click(t, f, "intake.make")
	f.Station.Changed(station.Model)
	click(t, f, "duty.import.change")
	if label("intake.make") != "Change the duty" || !strings.Contains(f.Dump(), "intake.track.ram.speed.law\tspeed of position") {
		t.Fatalf("%s", f.Dump())
	}
	choose(t, "intake.track.add", "ram.load")
	choose(t, "intake.track.ram.load.law", "constant")
	put(t, "intake.track.ram.load.value", "20 kN")
	click(t, f, "intake.tab.cycles")
	which := widgets.Named("intake.part").(*widgets.Select)
	which.SetSelectedIndex(1)
	look(f, "intake-typical")
	click(t, f, "intake.make")
	if err := f.LastError(); err != nil {
		t.Fatal(err)
	}
	d, im := f.Document.File().Duties[0], f.Document.File().Imports[0]
	if im.Part.Is != "typical cycle" || math.Abs(d.Cycle()-21) > 0.3 || d.Track("ram", cycle.Load).Values[5] != 20e3 {
		t.Errorf("part %+v, %g s", im.Part, d.Cycle())
	}
}

// A recording that changed on the disk is told, and read anew.
func TestChangedRecordingIsReadAnew(t *testing.T) {
	f, _ := importing(t, pressFile, "../../samples/recordings/press-shift.csv")
	click(t, f, "intake.make")
	if err := f.Document.Save(); err != nil {
		t.Fatal(err)
	}
	csv := filepath.Join(filepath.Dir(f.Document.Path()), "press-shift.csv")
	data, err := os.ReadFile(csv)
	if err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(csv, data[:len(data)-9000], 0o644); err != nil {
		t.Fatal(err)
	}
	if _, err := f.Document.Open(f.Document.Path()); err != nil {
		t.Fatal(err)
	}
	f.Station.Changed(station.Everything)
	f.Settle(1190, 590)
	if !f.Station.Mend() || label("duty.import.change") != "Read it anew…" {
		t.Fatalf("mend %v, button %q", f.Station.Mend(), label("duty.import.change"))
	}
	click(t, f, "duty.import.change")
	click(t, f, "intake.make")
	if im := f.Document.File().Imports[0]; im.Expected != im.SHA256 || f.LastError() != nil {
		t.Errorf("%s, %s, %v", im.Expected, im.SHA256, f.LastError())
	}
}

// What cannot be read is said, and the station stays.
func TestNoRecording(t *testing.T) {
	t.Cleanup(intake.Inline())
	f := stationtest.Open(t, New, pressFile, nil)
	f.PickedFile = filepath.Join(t.TempDir(), "gone.csv")
	click(t, f, "duty.recording", "duty.empty.recording")
	if err := f.LastError(); err == nil || !strings.Contains(err.Error(), "gone.csv") {
		t.Error(err)
	}
	if f.Station.(*Station).recordings.open {
		t.Error("the page is open")
	}
}

// The recorded duty of four axes, published with 485.63 and -208.07 kJ, through the page with
// nothing typed. Where the recording is and comes from: audit/four_axis_test.go.
func TestFourAxesThroughThePage(t *testing.T) {
	from := os.Getenv("BARLITRE_DATA")
	if from == "" {
		t.Skip("set BARLITRE_DATA to the folder that holds four_axis_duty_100s.csv")
	}
	f, _ := importing(t, pressFile, filepath.Join(from, "four_axis_duty_100s.csv"))
	look(f, "intake-four-axes")
	text := label("intake.works")
	for _, want := range []string{"+485.6", "−208.0"} {
		if !strings.Contains(text, want) {
			t.Errorf("%q has no %s", text, want)
		}
	}
	click(t, f, "intake.tab.cycles")
	look(f, "intake-four-axes-cycles")
	click(t, f, "intake.make")
	file := f.Document.File()
	if err := f.LastError(); err != nil || len(file.Duties) != 1 || len(file.Axes) != 4 {
		t.Fatalf("%v, %d duties, axes %v", err, len(file.Duties), file.Axes)
	}
	positive, negative := 0.0, 0.0
	for _, w := range logged.Works(file.Duties[0]) {
		positive, negative = positive+w.Positive, negative+w.Negative
	}
	if math.Abs(positive/485.63e3-1) > 5e-4 || math.Abs(negative/-208.07e3-1) > 5e-4 {
		t.Errorf("%.5g and %.5g kJ", positive/1e3, negative/1e3)
	}
	if again, _ := audit.Parse(file.Bytes(), audit.Beside(f.Document.Path()), f.Document.Path()); again == nil || len(again.Duties[0].Time) != 10001 {
		t.Error("it does not read back")
	}
}
