package duty

import (
	"crypto/sha256"
	"fmt"
	"math"
	"strings"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"

	"barlitre/app/station"
	"barlitre/app/station/stationtest"
	"barlitre/app/widgets"
	"barlitre/machines/units"
	"barlitre/samples"
)

func sample(t *testing.T, name string) string {
	t.Helper()
	data, err := samples.Read(name)
	if err != nil {
		t.Fatal(err)
	}
	return string(data)
}

func shown(t *testing.T, text string, files map[string]string) (*stationtest.Frame, *Station) {
	t.Helper()
	f := stationtest.Open(t, New, text, files)
	return f, f.Station.(*Station)
}

// press clicks a cell of the table as a mouse does.
func press(t *testing.T, f *stationtest.Frame, table *widgets.Table, name string) {
	t.Helper()
	parts := table.Parts()
	for i, p := range parts {
		if p.Name == name || strings.HasPrefix(name, "last.") && i >= len(parts)-3 && strings.HasSuffix(p.Name, name[4:]) {
			at := fyne.NewPos(float32(p.X+p.W/2), float32(p.Y+p.H/2))
			table.MouseDown(&desktop.MouseEvent{PointEvent: fyne.PointEvent{Position: at}, Button: desktop.MouseButtonPrimary})
			table.MouseUp(nil)
			return
		}
	}
	t.Fatalf("no cell %s in %v", name, table.Parts())
}

// typed replaces what stands in the selected cell.
func typed(f *stationtest.Frame, text string) {
	runes := []rune(text)
	f.Win.Canvas().Focused().TypedRune(runes[0])
	for _, r := range runes[1:] {
		f.Win.Canvas().Focused().TypedRune(r)
	}
}

func key(f *stationtest.Frame, name fyne.KeyName) {
	f.Win.Canvas().Focused().TypedKey(&fyne.KeyEvent{Name: name})
}

// TestCellChangesTheFileAndNothingElse types into a cell: the text of the file then
// differs in that value alone.
func TestCellChangesTheFileAndNothingElse(t *testing.T) {
	before := sample(t, "baling-press.yaml")
	for _, c := range []struct{ cell, typed, old, new string }{
		{"3.ram.speed", "0,14", "16.5 s,   17.6 s", ""},
		{"5.ram.load", "90", "30 kN,    85 kN", "30 kN,    90 kN"},
		{"5.ram.load", "86500 N", "30 kN,    85 kN", "30 kN,    86500 N"},
		{"1.t", "15,5", "[0 s,   16 s,", "[0 s,   15.5 s,"},
	} {
		f, s := shown(t, before, nil)
		press(t, f, s.table, c.cell)
		typed(f, c.typed)
		key(f, fyne.KeyReturn)
		want := before
		if c.new != "" {
			want = strings.Replace(before, c.old, c.new, 1)
		} else {
			want = strings.Replace(before, "0.13 m/s, 0.13 m/s", "0.13 m/s, 0.14 m/s", 1)
		}
		if want == before {
			t.Fatalf("%s: the test replaces nothing", c.cell)
		}
		if got := f.FileText(); got != want {
			t.Errorf("%s := %s: the file is not what it was but for the value:\n%s", c.cell, c.typed, firstDifference(got, want))
		}
		f.Edited()
		if s.table.Refused() {
			t.Errorf("%s := %s: refused: %s", c.cell, c.typed, s.refusal.Text)
		}
		if row, _ := s.table.Selection(); fmt.Sprint(row) != fmt.Sprint(int(c.cell[0]-'0')+1) {
			t.Errorf("%s: Enter went to row %d", c.cell, row)
		}
		f.Document.Undo()
		if f.FileText() != before {
			t.Errorf("%s: undo did not bring the file back", c.cell)
		}
	}
}

func firstDifference(a, b string) string {
	la, lb := strings.Split(a, "\n"), strings.Split(b, "\n")
	for i := range la {
		if i >= len(lb) || la[i] != lb[i] {
			return fmt.Sprintf("line %d: %q, want %q", i+1, la[i], lb[min(i, len(lb)-1)])
		}
	}
	return ""
}

// TestRefusalsStay types what cannot be taken: the file stays, the cell keeps what was
// typed with the reason, and Escape brings the old value back.
func TestRefusalsStay(t *testing.T) {
	before := sample(t, "baling-press.yaml")
	for _, c := range []struct{ cell, typed, reason string }{
		{"3.ram.speed", "5 bar", "not a unit of velocity"},
		{"3.ram.speed", "x", "does not start with a number"},
		{"3.t", "99", "time runs backwards"},
		{"3.ram.load", "1.2.3", "do not form a number"},
	} {
		f, s := shown(t, before, nil)
		old := cellText(t, s.table, c.cell)
		press(t, f, s.table, c.cell)
		typed(f, c.typed)
		key(f, fyne.KeyReturn)
		if f.FileText() != before {
			t.Fatalf("%s := %s was taken", c.cell, c.typed)
		}
		if !strings.Contains(s.refusal.Text, c.reason) {
			t.Errorf("%s := %s: the reason is %q, want %q in it", c.cell, c.typed, s.refusal.Text, c.reason)
		}
		f.Win.Canvas().Focus(s.plot) // away
		f.Station.Changed(station.Model)
		if got := cellText(t, s.table, c.cell); got != "⚠ "+c.typed {
			t.Errorf("%s: %q stands in the cell, want what was typed", c.cell, got)
		}
		press(t, f, s.table, "0.t")
		press(t, f, s.table, c.cell)
		if !strings.Contains(s.refusal.Text, c.reason) {
			t.Errorf("%s: selected again, the reason is %q", c.cell, s.refusal.Text)
		}
		key(f, fyne.KeyEscape)
		if got := cellText(t, s.table, c.cell); got != old || s.table.Refused() {
			t.Errorf("%s: after Escape %q, want %q", c.cell, got, old)
		}
	}
}

func cellText(t *testing.T, table *widgets.Table, name string) string {
	t.Helper()
	parts := table.Parts()
	for i, p := range parts {
		if p.Name == name || strings.HasPrefix(name, "last.") && i >= len(parts)-3 && strings.HasSuffix(p.Name, name[4:]) {
			return p.Text
		}
	}
	t.Fatalf("no cell %s", name)
	return ""
}

func TestPasteIsOneStep(t *testing.T) {
	before := sample(t, "baling-press.yaml")
	f, s := shown(t, before, nil)
	fyne.CurrentApp().Clipboard().SetContent("0,11\t9\r\n0,12\t11\n")
	press(t, f, s.table, "2.ram.speed")
	f.Win.Canvas().Focused().(fyne.Shortcutable).TypedShortcut(&fyne.ShortcutPaste{})
	if f.LastError() != nil {
		t.Fatal(f.LastError())
	}
	d := f.Document.File().Duties[0]
	for _, c := range []struct{ got, want float64 }{{d.Tracks[0].Values[2], 0.11}, {d.Tracks[0].Values[3], 0.12}, {d.Tracks[1].Values[2], 9e3}, {d.Tracks[1].Values[3], 11e3}} {
		if math.Abs(c.got-c.want) > 1e-9*c.want {
			t.Errorf("pasted %g, want %g", c.got, c.want)
		}
	}
	f.Document.Undo()
	if f.FileText() != before {
		t.Error("one undo did not take the whole block back")
	}
	fyne.CurrentApp().Clipboard().SetContent("0.2\t8\nfast\t9")
	f.Win.Canvas().Focused().(fyne.Shortcutable).TypedShortcut(&fyne.ShortcutPaste{})
	if f.LastError() == nil || f.FileText() != before {
		t.Errorf("a block with a fault: error %v, file changed %v", f.LastError(), f.FileText() != before)
	}
}

const recordedFile = `format: barlitre/1
oil: {temperature: 50 C, density: 870 kg/m3, viscosity: 40 mPa s}
axes: {ram: linear}
duties:
- name: logged
  hours: 100 h
  file: log.csv
circuits:
- name: Bench
  pump_at_rest: keep
  blocks:
    T1: {kind: tank}
    M1: {kind: electric_motor, rated_power: 22 kW, speed: 1500 rpm, efficiency: 92 %}
    P1: {kind: pump, displacement: 40 cm3/rev}
    RV1: {kind: relief, crack: 100 bar}
    V1: {kind: valve, follows: ram, nominal_flow: 60 L/min}
    C1: {kind: cylinder, axis: ram, bore: 50 mm, rod: 30 mm, hold: valve}
  lines:
  - M1.shaft - P1.shaft
  - T1.T - P1.S - RV1.T - V1.T
  - P1.P - RV1.P - V1.P
  - V1.A - C1.A
  - V1.B - C1.B
`

func TestRecordedDutyIsReadOnly(t *testing.T) {
	csv := "t [s]; ram.speed [m/s]; ram.load [kN]\n0; 0.1; 5\n1; 0.1; 5\n2; 0; 5\n"
	f, s := shown(t, recordedFile, map[string]string{"log.csv": csv})
	for _, want := range []string{"log.csv", "3 rows", fmt.Sprintf("%x", sha256.Sum256([]byte(csv))), "not changed"} {
		if !strings.Contains(s.source.Text, want) {
			t.Errorf("the source says %q, want %q in it", s.source.Text, want)
		}
	}
	press(t, f, s.table, "1.ram.speed")
	typed(f, "7")
	key(f, fyne.KeyReturn)
	if f.FileText() != recordedFile {
		t.Error("a recorded duty was changed")
	}
	if !strings.Contains(s.refusal.Text, "log.csv") {
		t.Errorf("hint %q", s.refusal.Text)
	}
	f.Picture("duty-recorded", 930, 480)
	// By hand: ∫v dt = 0.1·1 + 0.1/2·1 = 0.15 m; standstill 0.001·0.1 m/s.
	notes := f.Dump()
	for _, want := range []string{"ends 150\u202fmm from where it began", "standing below 0.10\u202fmm/s, 0.10\u202f% of its highest speed 0.100\u202fm/s"} {
		if !strings.Contains(notes, want) {
			t.Errorf("notes lack %q:\n%s", want, notes)
		}
	}
}

func TestClockFollows(t *testing.T) {
	f, s := shown(t, sample(t, "baling-press.yaml"), nil)
	parts := s.plot.Parts()
	if len(parts) != 2+2*14 || parts[0].Name != "ram speed" || parts[1].Name != "ram load" {
		t.Fatalf("lanes %v", parts)
	}
	mid := parts[0]
	at := fyne.NewPos(float32(mid.X+mid.W/2), float32(mid.Y+5))
	s.plot.MouseDown(&desktop.MouseEvent{PointEvent: fyne.PointEvent{Position: at}, Button: desktop.MouseButtonPrimary})
	if math.Abs(f.Time-20) > 0.05 {
		t.Errorf("a click in the middle of 40 s sets the clock to %g s", f.Time)
	}
	at.X += float32(mid.W / 10)
	s.plot.Dragged(&fyne.DragEvent{PointEvent: fyne.PointEvent{Position: at}})
	if math.Abs(f.Time-24) > 0.05 {
		t.Errorf("a drag by a tenth leads to %g s", f.Time)
	}
	s.plot.DragEnd()
	f.SetClock(17)
	if got := s.plot.Parts()[0].Text; got != "0.130\u202fm/s" {
		t.Errorf("speed at 17 s: %q", got)
	}
	f.Win.Canvas().Focus(s.plot)
	key(f, fyne.KeyRight)
	if math.Abs(f.Time-17.2) > 1e-9 {
		t.Errorf("the arrow key leads to %g s, want 17.2", f.Time)
	}
	f.Comma = true
	f.Station.Changed(station.Settings)
	f.SetClock(17)
	if got := s.plot.Parts()[0].Text; got != "0,130\u202fm/s" {
		t.Errorf("with a comma: %q", got)
	}
	f.Units = units.US
	f.Station.Changed(station.Settings)
	if got := s.plot.Parts()[1].Text; !strings.HasSuffix(got, "lbf") {
		t.Errorf("load in US units: %q", got)
	}
}

func TestPickerAndMend(t *testing.T) {
	f, s := shown(t, sample(t, "baling-press.yaml"), nil)
	if f.Station.Mend() {
		t.Errorf("the sample has a duty to mend: %v", f.Document.Findings())
	}
	s.picker.SetSelectedIndex(1)
	if f.At != 1 || s.table.Rows() != 3 || !strings.Contains(s.facts.Text, "1200\u202fh a year") {
		t.Errorf("duty %d, %d rows, %q", f.At, s.table.Rows(), s.facts.Text)
	}
	bad := strings.Replace(sample(t, "baling-press.yaml"), "ram.load: [0 kN, 0 kN]}", "ram.load: [0 kN]}", 1)
	f, s = shown(t, bad, nil)
	f.SetDuty(1)
	if !f.Station.Mend() {
		t.Error("a track that is too short needs no mending")
	}
	if dump := f.Dump(); !strings.Contains(dump, "duty.note.finding1") || !strings.Contains(dump, "ram.load") {
		t.Errorf("the finding is not shown:\n%s", dump)
	}
	if got := cellText(t, s.table, "1.ram.load"); got != "–" {
		t.Errorf("the missing cell shows %q", got)
	}
}

func TestEmpty(t *testing.T) {
	f, s := shown(t, "format: barlitre/1\noil: {temperature: 50 C, density: 870 kg/m3, viscosity: 40 mPa s}\naxes: {}\nduties: []\ncircuits: []\n", nil)
	if s.filled.Visible() || !strings.Contains(f.Dump(), "No duty yet") {
		t.Error("the empty state is not shown")
	}
	f.SetDuty(3)
	f.SetClock(2)
}

func TestFitsSmallWindows(t *testing.T) {
	f, s := shown(t, sample(t, "quayside-winch.yaml"), nil)
	if m := s.Content().MinSize(); m.Width > 900 || m.Height > 480 {
		t.Errorf("the least size is %v", m)
	}
	f.Theme(false, 2)
	if m := s.Content().MinSize(); m.Width > 1800 || m.Height > 960 {
		t.Errorf("at twice the scale the least size is %v", m)
	}
}

func TestPictures(t *testing.T) {
	f, s := shown(t, sample(t, "baling-press.yaml"), nil)
	f.SetClock(21.5)
	press(t, f, s.table, "5.ram.load")
	typed(f, "5 bar")
	key(f, fyne.KeyReturn)
	f.Picture("duty-light", 1190, 590)
	key(f, fyne.KeyEscape)
	f.Theme(true, 1)
	f.Picture("duty-dark", 1190, 590)
	f.Picture("duty-dark-small", 930, 480)
	f.Theme(false, 1.5)
	f.Picture("duty-light-150", 1190, 590)
}
