package duty

import (
	"fmt"
	"math"

	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/circuit"
	cycle "barlitre/circuit/duty"
	"barlitre/machines/units"
)

// fillNotes writes what there is to know of the duty at hand.
func (s *Station) fillNotes() {
	d := s.shown
	if d == nil {
		return
	}
	s.notes.Objects = nil
	s.note("", "Notes", widget.MediumImportance, true)
	if im := s.imported(); im != nil {
		s.importNotes(im)
	} else if text := s.sourceOf(d); text != "" {
		s.source.SetText(text)
		s.notes.Add(s.source)
	}
	for i, f := range s.findings(d) {
		mark, importance := "", widget.MediumImportance
		if f.Level == circuit.Stops || f.Level == circuit.Warns || f.Level == circuit.Caution {
			mark, importance = "⚠ ", widget.DangerImportance
		}
		text := f.Text
		if f.Circuit != "" {
			text = f.Circuit + ": " + text
		}
		s.note(fmt.Sprintf("finding%d", i+1), mark+s.ctx.Local(text), importance, false)
	}
	for _, a := range s.ctx.Doc().File().Axes {
		if text := s.closure(d, a); text != "" {
			s.note("closure."+a.Name, text, widget.MediumImportance, false)
			s.offerClosing(d, a)
		}
	}
	for _, text := range s.standstill(d) {
		s.note("standstill."+text[0], text[1], widget.MediumImportance, false)
	}
	s.notes.Refresh()
}

func (s *Station) note(name, text string, importance widget.Importance, bold bool) {
	l := widgets.Wrapped("")
	l.TextStyle.Bold, l.Importance = bold, importance
	l.SetText(text)
	if name != "" {
		widgets.Name(l, "duty.note."+name)
	}
	s.notes.Add(l)
}

// offerClosing puts a button below the note on strokes that do not close.
func (s *Station) offerClosing(d *cycle.Duty, a cycle.Axis) {
	drift, way, _ := audit.StrokeDrift(d, a.Name)
	if s.recorded().File != "" || math.Abs(drift) <= 1e-6*way {
		return
	}
	name, axis := d.Name, a.Name
	s.notes.Add(container.NewHBox(widgets.Name(widgets.NewButton("Scale the way back", func() {
		s.panel.do(s.ctx.Doc().CloseStrokes(name, axis))
	}), "duty.close."+axis)))
}

// findings are those about the duty at hand. The drift of a stroke has its own note.
func (s *Station) findings(d *cycle.Duty) []circuit.Finding {
	var out []circuit.Finding
	said := map[string]bool{}
	for _, f := range s.ctx.Doc().Findings() {
		if ofDuty(f) && f.Duty == d.Name && f.Level != circuit.Note && !said[f.Text] {
			said[f.Text] = true
			out = append(out, f)
		}
	}
	return out
}

// closure says how far an axis drifts with a cycle.
func (s *Station) closure(d *cycle.Duty, a cycle.Axis) string {
	drift, way, known := audit.StrokeDrift(d, a.Name)
	length := units.Length
	if a.Kind == cycle.Rotary {
		length = units.Angle
	}
	switch {
	case !known || way == 0:
		return ""
	case math.Abs(drift) <= 1e-6*way:
		return fmt.Sprintf("Axis %s ends where it began, after %s there and back.", a.Name, s.ctx.Text(way, length, 4))
	case d.Repeats:
		return fmt.Sprintf("Axis %s ends %s from where it began; each cycle adds that much. Close the strokes.", a.Name, s.ctx.Text(drift, length, 3))
	}
	return fmt.Sprintf("Axis %s ends %s from where it began.", a.Name, s.ctx.Text(drift, length, 3))
}

// standstill says below which speed an axis counts as standing.
func (s *Station) standstill(d *cycle.Duty) [][2]string {
	if len(d.Check()) > 0 {
		return nil // said as findings
	}
	var out [][2]string
	for _, a := range s.ctx.Doc().File().Axes {
		dim := units.Velocity
		if a.Kind == cycle.Rotary {
			dim = units.AngularSpeed
		}
		if top, given := d.TopSpeed(a.Name); top > 0 {
			limit := d.StandsBelow(a.Name, top)
			share := s.ctx.Local(units.Format(limit/top, units.Percent, 2))
			out = append(out, [2]string{a.Name, fmt.Sprintf("Axis %s counts as standing below %s, %s of its highest speed %s.",
				a.Name, s.slow(limit, dim), share, s.ctx.Text(top, dim, 3))})
		} else if given {
			out = append(out, [2]string{a.Name, "Axis " + a.Name + " stands throughout."})
		}
	}
	return out
}

func (s *Station) seconds(t float64) string { return s.ctx.Text(t, units.Time, 4) }

// slow writes a speed that is too small for the user's unit.
func (s *Station) slow(v float64, dim units.Dim) string {
	if dim == units.Velocity && s.ctx.System() == units.Metric {
		u, _ := units.ParseUnit("mm/s", dim)
		return s.ctx.Local(units.Format(v, u, 2))
	}
	return s.ctx.Text(v, dim, 2)
}
