package duty

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/test"

	"barlitre/app/station/stationtest"
	"barlitre/app/widgets"
	cycle "barlitre/circuit/duty"
)

const emptyAudit = "format: barlitre/1\noil: {grade: ISO VG 46, temperature: 50 C}\naxes: {}\nduties: []\ncircuits: []\n"

// fieldTo types into a named field and presses Enter.
func fieldTo(t *testing.T, f *stationtest.Frame, name, text string) {
	t.Helper()
	field, ok := widgets.Named(name).(*widgets.Field)
	if !ok {
		t.Fatalf("there is no field %s", name)
	}
	f.Win.Canvas().Focus(field)
	field.SetText(text)
	field.TypedKey(&fyne.KeyEvent{Name: fyne.KeyReturn})
}

func tap(t *testing.T, name string) {
	t.Helper()
	switch o := widgets.Named(name).(type) {
	case *widgets.Check:
		o.SetChecked(!o.Checked)
	case fyne.Tappable:
		test.Tap(o)
	default:
		t.Fatalf("nothing to click is named %s", name)
	}
}

// column types values into a column of the table, from its first row on.
func column(t *testing.T, f *stationtest.Frame, s *Station, name string, values ...string) {
	t.Helper()
	press(t, f, s.table, "last."+name)
	key(f, fyne.KeyHome)
	for _, v := range values {
		typed(f, v)
		key(f, fyne.KeyReturn)
		if s.table.Refused() {
			t.Fatalf("%s := %s: %s", name, v, s.refusal.Text)
		}
	}
}

// TestDutyFromNothing builds the axis and duty of trial circuit C1 from an empty audit by
// keys and clicks, then takes all of it back.
func TestDutyFromNothing(t *testing.T) {
	f, s := shown(t, emptyAudit, nil)
	fieldTo(t, f, "duty.axis.new", "ram")
	fieldTo(t, f, "duty.axis.ram.load", "platen")
	tap(t, "duty.new")
	f.Settle(1190, 590)
	if f.Win.Canvas().Focused() != s.panel.name {
		t.Error("the name of a new duty has not got the keys")
	}
	fieldTo(t, f, "duty.name", "cycle")
	fieldTo(t, f, "duty.hours", "3000")
	fieldTo(t, f, "duty.step", "10")
	if s.shown.Track("ram", cycle.Speed) == nil || s.shown.Track("ram", cycle.Load) == nil {
		t.Fatal("a new duty has not speed and load of the axis")
	}
	f.Settle(1190, 590)
	column(t, f, s, "t", "0", "0.1", "2", "2,1", "5", "5.1", "7", "7.1", "9", "9.1", "12")
	column(t, f, s, "ram.speed", "0", "0.15", "150 mm/s", "0.03", "0.03", "0", "0", "-0.2", "-0.2", "0", "0")
	column(t, f, s, "ram.load", "5", "5", "5", "20", "60", "60", "60", "5", "5", "5", "5")
	want := `axes: {ram: {kind: linear, load: platen}}
duties:
- name: cycle
  points:
    t: [0 s, 0.1 s, 2 s, 2.1 s, 5 s, 5.1 s, 7 s, 7.1 s, 9 s, 9.1 s, 12 s]
    "ram.speed [m/s]": [0, 0.15, 0.15, 0.03, 0.03, 0, 0, -0.2, -0.2, 0, 0]
    "ram.load [kN]": [5, 5, 5, 20, 60, 60, 60, 5, 5, 5, 5]
  hours: 3000 h
  step: 10 ms
`
	if got := f.FileText(); !strings.Contains(got, want) {
		t.Errorf("got\n%s\nwant in it\n%s", got, want)
	}
	d := f.Document.File().Duties[0]
	if len(d.Time) != 11 || d.Track("ram", 0).Values[2] != 0.15 || d.Track("ram", 2).Values[4] != 60e3 || d.Step != 0.01 {
		t.Errorf("got %+v", d)
	}
	f.Picture("duty-built", 1190, 590)
	for f.Document.UndoName() != "" {
		f.Document.Undo()
	}
	if f.FileText() != emptyAudit {
		t.Errorf("undone to the start the file is\n%s", f.FileText())
	}
	f.Edited()
	if s.filled.Visible() {
		t.Error("the duty that was undone still shows")
	}
}

func TestRowsComeAndGo(t *testing.T) {
	before := sample(t, "baling-press.yaml")
	f, s := shown(t, before, nil)
	press(t, f, s.table, "1.t")
	key(f, fyne.KeyInsert)
	d := f.Document.File().Duties[0]
	if len(d.Time) != 15 || math.Abs(d.Time[2]-16.25) > 1e-9 || math.Abs(d.Tracks[0].Values[2]-0.065) > 1e-9 {
		t.Errorf("%v %v", d.Time, d.Tracks[0].Values)
	}
	if row, _ := s.table.Selection(); row != 2 {
		t.Errorf("row %d is selected", row)
	}
	key(f, fyne.KeyDelete)
	if f.FileText() != before {
		t.Errorf("a row put in and taken out leaves another file: %s", firstDifference(f.FileText(), before))
	}
	press(t, f, s.table, "0.t")
	s.table.Select(14, 2) // the empty row
	typed(f, "7")
	key(f, fyne.KeyReturn)
	d = f.Document.File().Duties[0]
	if n := len(d.Time); n != 15 || math.Abs(d.Time[14]-(40+40-30.225)) > 1e-6 || d.Tracks[1].Values[14] != 7000 {
		t.Errorf("%v %v", d.Time, d.Tracks[1].Values)
	}
}

// TestPasteAddsRows pastes a block longer than the table, in one step of undo.
func TestPasteAddsRows(t *testing.T) {
	before := sample(t, "baling-press.yaml")
	f, s := shown(t, before, nil)
	s.table.Select(13, 0)
	fyne.CurrentApp().Clipboard().SetContent("40\t0,01\t4\r\n41\t0\t5 N\n42\t0\t6\n")
	f.Win.Canvas().Focus(s.table)
	s.table.TypedShortcut(&fyne.ShortcutPaste{})
	d := f.Document.File().Duties[0]
	if n := len(d.Time); n != 16 || d.Time[15] != 42 || d.Tracks[0].Values[13] != 0.01 || d.Tracks[1].Values[14] != 5 {
		t.Errorf("%v %v %v", d.Time, d.Tracks, f.Failed)
	}
	f.Document.Undo()
	if f.FileText() != before {
		t.Error("undo did not bring the file back")
	}
	for block, why := range map[string]string{"1\t2\t3\t4": "4 columns", "50\tx": "row 14, ram.speed", "39\t0\t0\n38\t0\t0": "time runs backwards"} {
		s.reload()
		s.table.Select(13, 0)
		fyne.CurrentApp().Clipboard().SetContent(block)
		s.table.TypedShortcut(&fyne.ShortcutPaste{})
		if err := f.LastError(); err == nil || !strings.Contains(err.Error(), why) || f.FileText() != before {
			t.Errorf("%q: %v, want %q", block, err, why)
		}
	}
}

// dragTo presses a point of the plot and drags it.
func dragTo(t *testing.T, s *Station, name string, dx, dy float32) {
	t.Helper()
	for _, p := range s.plot.Parts() {
		if p.Name == name {
			at := fyne.NewPos(float32(p.X+p.W/2), float32(p.Y+p.H/2))
			s.plot.MouseDown(&desktop.MouseEvent{PointEvent: fyne.PointEvent{Position: at}, Button: desktop.MouseButtonPrimary})
			s.plot.Dragged(&fyne.DragEvent{PointEvent: fyne.PointEvent{Position: at.AddXY(dx, dy)}})
			s.plot.DragEnd()
			s.plot.MouseUp(nil)
			return
		}
	}
	t.Fatalf("no point %s", name)
}

func TestPointsAreDragged(t *testing.T) {
	before := sample(t, "baling-press.yaml")
	f, s := shown(t, before, nil)
	clock := f.Time
	dragTo(t, s, "ram load/7", 0, 20)
	d := f.Document.File().Duties[0]
	v := d.Tracks[1].Values[7]
	if v >= 215e3 || v < 100e3 || math.Mod(v, 500) != 0 || math.Abs(d.Time[7]-23.6) > 0.11 {
		t.Errorf("the load is %g N at %g s after a drag downwards", v, d.Time[7])
	}
	if f.Time != clock {
		t.Error("a drag of a point moved the clock")
	}
	dragTo(t, s, "ram speed/2", 900, 0) // stops at its neighbour
	if d = f.Document.File().Duties[0]; d.Time[2] != d.Time[3] {
		t.Errorf("time %v", d.Time)
	}
	f.Document.Undo()
	f.Document.Undo()
	if f.FileText() != before {
		t.Errorf("two undos do not take two drags back: %s", firstDifference(f.FileText(), before))
	}
	s.reload()
	lane := s.plot.Parts()[0]
	s.plot.DoubleTapped(&fyne.PointEvent{Position: fyne.NewPos(float32(lane.X+lane.W/4), float32(lane.Y+10))})
	if d = f.Document.File().Duties[0]; len(d.Time) != 15 || math.Abs(d.Time[1]-10) > 0.11 || d.Tracks[0].Values[1] <= 0 || d.Tracks[1].Values[1] != 0 {
		t.Errorf("after a double click: %v %v", d.Time, d.Tracks[0].Values)
	}
	dragTo(t, s, "ram speed/1", 0, 0)
	f.Win.Canvas().Focus(s.plot)
	key(f, fyne.KeyDelete)
	f.Document.Undo()
	f.Document.Undo()
	f.Document.Undo()
	if n := len(f.Document.File().Duties[0].Time); n != 14 && f.FileText() != before {
		t.Errorf("%d rows", n)
	}
}

func TestDutiesAndAxesOfTheMachine(t *testing.T) {
	before := sample(t, "baling-press.yaml")
	f, s := shown(t, before, nil)
	tap(t, "duty.duplicate")
	d := f.Document.File().Duties
	if n := len(d) - 1; d[n].Name != "baling 2" || d[n].Hours != 0 || f.At != n {
		t.Errorf("the copy is %q with %g hours; shown is %d", d[n].Name, d[n].Hours, f.At)
	}
	tap(t, "duty.repeats")
	if s.shown.Repeats {
		t.Error("it still repeats")
	}
	fieldTo(t, f, "duty.axis.ram", "press")
	if got := fmt.Sprint(f.Document.File().Axes[0].Name); got != "press" || widgets.Named("duty.axis.press") == nil {
		t.Errorf("the axis is %s", got)
	}
	tap(t, "duty.axis.press.remove")
	if err := f.LastError(); err == nil || !strings.Contains(err.Error(), "named by") {
		t.Errorf("an axis that a cylinder moves was taken out: %v", err)
	}
	fieldTo(t, f, "duty.axis.new", "no good")
	if !s.panel.added.Bad() {
		t.Error("an axis of two words was taken")
	}
	fieldTo(t, f, "duty.axis.new", "drum")
	tap(t, "duty.axis.drum.rotary")
	tap(t, "duty.track.drum.speed")
	if tr := s.shown.Track("drum", 0); tr == nil {
		t.Error("no track of the drum")
	}
	tap(t, "duty.axis.drum.remove")
	tap(t, "duty.remove")
	for f.Document.UndoName() != "" {
		f.Document.Undo()
	}
	if f.FileText() != before {
		t.Errorf("undone: %s", firstDifference(f.FileText(), before))
	}
}
