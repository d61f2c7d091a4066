package duty

import (
	"math"
	"strings"
	"testing"

	"fyne.io/fyne/v2"

	"barlitre/app/widgets"
	"barlitre/machines/units"
)

// A calendar is begun from typed hours, a night shift added, breaks and shares typed, what does not fit refused in words, and all
// of it taken back step by step.
func TestYearInTheWindow(t *testing.T) {
	before := sample(t, "baling-press.yaml")
	f, s := shown(t, before, nil)
	tap(t, "duty.page.year")
	f.Settle(1190, 590)
	if s.upper.Visible() || !strings.Contains(s.year.told.Text, "5400") {
		t.Fatalf("the page without a calendar: %q", s.year.told.Text)
	}
	f.Picture("duty-year-typed", 1190, 590)
	tap(t, "duty.year.begin")
	f.Settle(1190, 900)
	c := f.Document.File().Calendar
	if c == nil || c.Hours == nil || math.Abs(c.IdleTime.Share-1200.0/5400) > 1e-9 {
		t.Fatalf("no calendar from the typed hours:\n%s", f.FileText())
	}
	tap(t, "duty.shift.add")
	f.Settle(1190, 900)
	press(t, f, s.year.shifts, "1.to")
	typed(f, "22:30")
	key(f, fyne.KeyReturn)
	press(t, f, s.year.shifts, "0.breaks")
	typed(f, "09:00 - 09:15, 12:00 - 12:30")
	key(f, fyne.KeyReturn)
	if text := f.FileText(); !strings.Contains(text, "to: 22:30") || !strings.Contains(text, "breaks: [09:00 - 09:15, 12:00 - 12:30]") {
		t.Errorf("shifts:\n%s", text)
	}
	for cell, says := range map[string]string{"0.to": "overlaps", "0.from": "no time of day", "1.days": "are no days"} {
		press(t, f, s.year.shifts, cell)
		typed(f, map[string]string{"0.to": "15:00", "0.from": "dawn", "1.days": "Mo-We"}[cell])
		key(f, fyne.KeyReturn)
		if !s.year.shifts.Refused() || !strings.Contains(s.year.shifts.Note.Text, says) {
			t.Errorf("%s: %q", cell, s.year.shifts.Note.Text)
		}
		key(f, fyne.KeyEscape)
	}
	press(t, f, s.year.shifts, "0.breaks")
	typed(f, "9 h")
	key(f, fyne.KeyReturn)
	if !s.year.shifts.Refused() || !strings.Contains(s.year.shifts.Note.Text, "its breaks last 9 h, the shift only 8 h") {
		t.Errorf("breaks longer than the shift: %q", s.year.shifts.Note.Text)
	}
	key(f, fyne.KeyEscape)
	fieldTo(t, f, "duty.year.weeks", "46")
	fieldTo(t, f, "duty.year.stops", "maintenance 40, rebuild 60 h")
	fieldTo(t, f, "duty.year.standby", "80")
	fieldTo(t, f, "duty.year.standby2", "25")
	if c := f.Document.File().Circuits; c[0].HasStandby || !c[1].HasStandby || c[1].Standby != 25 {
		t.Errorf("standby of the circuits: %v %g", c[1].HasStandby, c[1].Standby)
	}
	fieldTo(t, f, "duty.year.idle_time", "12,5")
	h := f.Document.File().Calendar.Hours
	worked := (7.25+8.5)*5*46 - 100.0
	for name, x := range map[string][2]float64{"work": {h.Work, 0.875 * worked}, "idle": {h.Idle, 0.125*worked + 0.75*5*46}, "off": {h.Off, 8760 - worked - 0.75*5*46}, "baling": {f.Document.File().Duties[0].Hours, 0.875 * worked}} {
		if math.Abs(x[0]/units.Hour-x[1]) > 1e-6 {
			t.Errorf("%s %g h, by hand %g h\n%s", name, x[0]/units.Hour, x[1], f.FileText())
		}
	}
	sum := 0.0
	for _, p := range s.year.states.Parts() {
		if strings.HasSuffix(p.Name, "the year.hours") {
			sum++
			if p.Text != "8760" {
				t.Errorf("the year has %s h", p.Text)
			}
		}
	}
	if sum != 1 {
		t.Errorf("no sum in %v", s.year.states.Parts())
	}
	fieldTo(t, f, "duty.hours", "300")
	if !strings.Contains(s.panel.hours.Note.Text, "take one of the two out") {
		t.Errorf("hours typed beside the calendar: %q", s.panel.hours.Note.Text)
	}
	s.panel.hours.TypedKey(&fyne.KeyEvent{Name: fyne.KeyEscape})
	press(t, f, s.year.duties, "waiting, pump running.state")
	typed(f, "hold")
	key(f, fyne.KeyReturn)
	if !s.year.duties.Refused() {
		t.Error("idle has hours and no duty, and that was taken")
	}
	key(f, fyne.KeyEscape)
	for _, v := range []struct {
		name string
		dark bool
		k, w float32
		h    float32
	}{{"duty-year", false, 1, 1190, 640}, {"duty-year-dark", true, 1, 930, 560}, {"duty-year-150", false, 1.5, 1190, 640}, {"duty-year-dark-150", true, 1.5, 930, 560}} {
		f.Theme(v.dark, v.k)
		f.Picture(v.name, v.w, v.h)
	}
	f.Theme(false, 1)
	tap(t, "duty.year.remove")
	if f.Document.File().Calendar != nil || !strings.Contains(f.FileText(), "hours: ") {
		t.Errorf("hours are gone:\n%s", f.FileText())
	}
	for f.Document.UndoName() != "" {
		f.Document.Undo()
	}
	if f.FileText() != before {
		t.Error("undo does not bring the file back")
	}
	tap(t, "duty.page.points")
	if !s.upper.Visible() || widgets.Named("duty.year.begin") == nil {
		t.Error("the plot did not come back")
	}
}
