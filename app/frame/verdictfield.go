package frame

import (
	"slices"
	"strings"

	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
)

// verdictField is one field: a figure before and after, or alone.
type verdictField struct {
	name, title           string
	before, after, beside string
	figure                audit.Figure
}

// fittingFields are the fields, as the user reads them, that a width has room for; energy, saving
// and payback are the last to go.
func (f *Frame) fittingFields(p pen.Pen, room, gap float64) []verdictField {
	fields := f.verdictFields()
	need := -gap
	for i := range fields {
		v := &fields[i]
		v.before, v.after, v.beside = f.Local(v.before), f.Local(v.after), f.Local(v.beside)
		if v.before != "" {
			v.before = withoutUnit(v.before, v.after)
		}
		need += v.width(p) + gap
	}
	for _, name := range []string{"cooler", "heat", "payback", "saving", "energy"} {
		fields = slices.DeleteFunc(fields, func(v verdictField) bool {
			if v.name != name || need <= room {
				return false
			}
			need -= v.width(p) + gap
			return true
		})
	}
	return fields
}

// Sizes of a field of the verdict [figure units].
const (
	verdictSmall, verdictLarge = 11.0, 16.0 // texts
	besideGap                  = 8.0
	arrowRoom                  = 26.0
)

// width is that of a field.
func (v verdictField) width(p pen.Pen) float64 {
	width := p.TextWidth(v.after, verdictLarge, true)
	if v.before != "" {
		width += p.TextWidth(v.before, verdictLarge, false) + arrowRoom
	}
	if v.beside != "" {
		width += p.TextWidth(v.beside, verdictSmall, false) + besideGap
	}
	return max(width, p.TextWidth(v.title, verdictSmall, false))
}

// draw draws a field at x and returns its width.
func (v verdictField) draw(p pen.Pen, x float64, pal figures.Palette) float64 {
	const top, base = 19, 41
	p.Text(pen.Pt{X: x, Y: top}, v.title, verdictSmall, pal.Secondary, pen.Left, false)
	at := x
	if v.before != "" {
		wb := p.TextWidth(v.before, verdictLarge, false)
		p.Text(pen.Pt{X: at, Y: base}, v.before, verdictLarge, pal.Secondary, pen.Left, false)
		p.Text(pen.Pt{X: at + wb + 7, Y: base}, "→", 12, pal.Secondary, pen.Left, false)
		at += wb + arrowRoom
	}
	p.Text(pen.Pt{X: at, Y: base}, v.after, verdictLarge, pal.Gain, pen.Left, true)
	if v.beside != "" {
		p.Text(pen.Pt{X: at + p.TextWidth(v.after, verdictLarge, true) + besideGap, Y: base}, v.beside, verdictSmall, pal.Secondary, pen.Left, false)
	}
	return v.width(p)
}

// withoutUnit drops the unit of a number that stands before another in the same unit.
func withoutUnit(before, after string) string {
	i, j := strings.LastIndexAny(before, "\u202f\u00a0 "), strings.LastIndexAny(after, "\u202f\u00a0 ")
	if i > 0 && j > 0 && strings.TrimLeft(before[i:], "\u202f\u00a0 ") == strings.TrimLeft(after[j:], "\u202f\u00a0 ") {
		return strings.TrimRight(before[:i], "\u202f\u00a0 ")
	}
	return before
}
