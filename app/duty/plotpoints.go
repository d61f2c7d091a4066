package duty

import (
	"fmt"

	"barlitre/app/station"
	"barlitre/audit"
	"barlitre/machines/units"
)

// plotPoints are the points of the duty at hand as the plot shows and moves them.
type plotPoints struct{ s *Station }

// mostPoints is how many rows are still shown as dots.
const mostPoints = 120

// Points are those of a lane, in the units of the plot.
func (p plotPoints) Points(lane int) (x, y []float64) {
	s := p.s
	if s.shown == nil || s.locked() != "" || lane+1 >= len(s.tracks) || len(s.shown.Time) > mostPoints {
		return nil, nil
	}
	t, k := s.tracks[0], s.tracks[lane+1]
	return inUnit(t.values, t.unit), inUnit(k.values, k.unit)
}

// Move brings a point to a place. The time is that of its whole row.
func (p plotPoints) Move(lane, row int, x, y float64) {
	s := p.s
	t, k, name := s.tracks[0], s.tracks[lane+1], s.shown.Name
	s.panel.do(s.ctx.Doc().Edit(fmt.Sprintf("Move point %d of %s", row+1, k.name), func(f *audit.File) error {
		for _, v := range []struct {
			of track
			at float64
		}{{t, x}, {k, y}} {
			if si := v.of.unit.ToSI(v.at); v.of.unit.FromSI(v.of.values[row]) != v.at {
				if err := f.SetPoint(name, v.of.name, row, units.FileText(si, v.of.unit)); err != nil {
					return err
				}
			}
		}
		return nil
	}))
	s.table.Select(row, lane+1)
}

// Add puts a row at a time. The other tracks go on as they did.
func (p plotPoints) Add(lane int, x, y float64) {
	s := p.s
	t := s.tracks[0].unit.ToSI(x)
	row := 0
	for row < len(s.shown.Time) && s.shown.Time[row] <= t {
		row++
	}
	values := map[string]string{"t": units.FileText(t, s.tracks[0].unit)}
	for i, k := range s.tracks[1:] {
		si := k.unit.ToSI(y)
		if i != lane {
			course := audit.Track{T: s.shown.Time, V: k.values}
			si = course.At(t)
		}
		values[k.name] = s.text(k.name, si)
	}
	s.panel.do(s.ctx.Doc().AddRow(s.shown.Name, row, values))
	s.table.Select(row, lane+1)
}

// Remove takes a row out.
func (p plotPoints) Remove(row int) {
	p.s.panel.do(p.s.ctx.Doc().RemoveRow(p.s.shown.Name, row))
}

// Say writes a place.
func (p plotPoints) Say(lane int, x, y float64) string {
	s := p.s
	if lane+1 >= len(s.tracks) {
		return ""
	}
	t, k := s.tracks[0].unit, s.tracks[lane+1].unit
	at := func(v float64, u units.Unit) string { return station.TrimZeros(units.Format(u.ToSI(v), u, 4)) }
	return s.ctx.Local(at(x, t) + ", " + at(y, k))
}
