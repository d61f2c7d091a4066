package intake

import (
	"fmt"
	"strings"

	"fyne.io/fyne/v2"

	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/circuit/duty"
	"barlitre/machines/units"
)

// worksText says what the tracks come to.
func (t *tracks) worksText() string {
	p := t.p
	if len(p.out.works) == 0 {
		return "The work of an axis stands here once it has a motion and a load."
	}
	kJ, _ := units.ParseUnit("kJ", units.Energy)
	text := func(j float64) string {
		s := units.Format(j, kJ, 5)
		if j > 0 {
			s = "+" + s
		}
		return s
	}
	plus, minus := 0.0, 0.0
	var parts []string
	for _, w := range p.out.works {
		plus, minus = plus+w.Positive, minus+w.Negative
		parts = append(parts, fmt.Sprintf("%s %s / %s", w.Axis, text(w.Positive), text(w.Negative)))
	}
	whole := fmt.Sprintf("Work on the load, counted at the rows: %s / %s", text(plus), text(minus))
	if len(parts) > 1 {
		whole += "  (" + strings.Join(parts, ", ") + ")"
	}
	return whole
}

func (t *tracks) unit(k duty.Track) units.Unit {
	if k.What == duty.Command {
		return units.Percent
	}
	kind, _ := t.p.kind(k.Of)
	return units.Preferred(k.What.Dim(kind), t.p.ctx.System())
}

func (t *tracks) fillPlot() {
	p := t.p
	plot := figures.Plot{Axis: "time", AxisUnit: "s"}
	if d := p.out.shown; d != nil {
		for _, k := range d.Tracks {
			u, course, role := t.unit(k), audit.CourseOf(d, k), figures.RoleGain
			if k.What == duty.Load {
				role = figures.RoleInk
			}
			plot.Lanes = append(plot.Lanes, figures.Lane{Title: k.Of + " " + k.What.String(), Unit: u.Label(), Zero: true,
				Series: []figures.Series{{X: course.T, Y: inUnit(course.V, u), Role: role}}})
		}
	}
	t.plot.SetMin(fyne.NewSize(300, float32(60+62*len(plot.Lanes))))
	t.plot.SetPlot(plot)
}

func (t *tracks) valueAt(lane int, at float64) string {
	d := t.p.out.shown
	if d == nil || lane >= len(d.Tracks) {
		return ""
	}
	k := d.Tracks[lane]
	course := audit.Track{T: d.Time, V: k.Values}
	return t.p.ctx.Local(units.Format(course.At(at), t.unit(k), 3))
}
