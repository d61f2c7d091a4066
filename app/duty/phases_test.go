package duty

import (
	"math"
	"strings"
	"testing"

	"fyne.io/fyne/v2"

	"barlitre/audit"
	cycle "barlitre/circuit/duty"
)

// Every usual duty is a sound one, ends where it began where it goes both ways, and is
// taken for an axis of its kind.
func TestPresetsAreSound(t *testing.T) {
	for _, x := range presets {
		f, found := audit.Parse([]byte(strings.Replace(emptyAudit, "axes: {}", "axes: {ram: "+x.kind.String()+"}", 1)), nil, "")
		if f == nil {
			t.Fatal(found)
		}
		if err := f.AddStagedDuty(x.name, x.phasesFor("ram")); err != nil {
			t.Errorf("%s: %v", x.name, err)
			continue
		}
		d := f.Duties[0]
		drift, way, _ := audit.StrokeDrift(d, "ram")
		if len(d.Check()) > 0 || way == 0 || d.Track("ram", cycle.Load) == nil {
			t.Errorf("%s: %v, way %g", x.name, d.Check(), way)
		}
		if x.kind == cycle.Linear && math.Abs(drift) > 1e-9*way {
			t.Errorf("%s drifts %g a cycle", x.name, drift)
		}
	}
}

// A usual duty is begun, a phase changed and added in the table, its strokes closed, and
// the phases turned into points; each is one step of undo.
func TestPhasesInTheWindow(t *testing.T) {
	f, s := shown(t, strings.Replace(emptyAudit, "axes: {}", "axes: {ram: linear}", 1), nil)
	s.phases.begin("winch")
	if err := f.LastError(); err == nil || !strings.Contains(err.Error(), "rotary axis") {
		t.Errorf("a winch without a rotary axis: %v", err)
	}
	s.phases.begin("press")
	s.pages.open(1)
	f.Settle(1190, 590)
	if !s.staged() || s.table.Editable(1, 1) || s.phases.table.Rows() != 6 {
		t.Fatalf("%d rows", s.phases.table.Rows())
	}
	press(t, f, s.phases.table, "0.lasts")
	typed(f, "2,5")
	key(f, fyne.KeyReturn)
	press(t, f, s.phases.table, "0.ram.stroke")
	typed(f, "500")
	key(f, fyne.KeyReturn)
	d := s.shown
	if drift, _, _ := audit.StrokeDrift(d, "ram"); math.Abs(drift-0.1) > 1e-9 || d.Phases[1].From != 2.5 {
		t.Errorf("drift %g, second phase at %g\n%s", drift, d.Phases[1].From, f.FileText())
	}
	f.Picture("duty-phases", 1190, 590)
	tap(t, "duty.close.ram")
	if drift, way, _ := audit.StrokeDrift(s.shown, "ram"); math.Abs(drift) > 1e-9*way || !strings.Contains(f.FileText(), "ram.stroke: -560 mm") {
		t.Errorf("drift %g\n%s", drift, f.FileText())
	}
	press(t, f, s.phases.table, "0.ramp")
	typed(f, "3")
	key(f, fyne.KeyReturn)
	if !s.phases.table.Refused() || !strings.Contains(s.phases.note.Text, "half of the phase") {
		t.Errorf("a ramp longer than half of the phase: %q", s.phases.note.Text)
	}
	key(f, fyne.KeyEscape)
	s.phases.table.Select(5, 0)
	f.Win.Canvas().Focus(s.phases.table)
	typed(f, "wait")
	key(f, fyne.KeyReturn)
	if n := len(s.shown.Phases); n != 6 || s.shown.Phases[5].Name != "wait" {
		t.Errorf("%v", s.shown.Phases)
	}
	s.phases.table.Select(5, 0)
	s.phases.table.TypedKey(&fyne.KeyEvent{Name: fyne.KeyDelete})
	if n := len(s.shown.Phases); n != 5 {
		t.Errorf("%d phases after one was deleted", n)
	}
	tap(t, "duty.phase.convert")
	if s.staged() || s.pages.at != 0 || !s.table.Editable(1, 1) {
		t.Errorf("not turned into points:\n%s", f.FileText())
	}
	f.Theme(true, 1.5)
	f.Picture("duty-phases-dark-150", 1190, 590)
	for f.Document.UndoName() != "" {
		f.Document.Undo()
	}
	if f.FileText() != strings.Replace(emptyAudit, "axes: {}", "axes: {ram: linear}", 1) {
		t.Errorf("undone:\n%s", f.FileText())
	}
}
