package figures

import (
	"image/color"
	"math"
	"slices"
	"strings"

	"barlitre/audit/pen"
)

// points draws the states, the large ones first.
func (d *mapLayout) points() {
	top := 0.0
	for _, q := range d.Points {
		top = max(top, zero(q.Weight))
	}
	d.p.ClipRect(d.x, d.y, d.w, d.h)
	defer d.p.Unclip()
	for _, q := range d.Points {
		if !finite(q.X) || !finite(q.Y) || top == 0 || !(q.Weight > 1e-4*top) {
			continue
		}
		r := max(1.2, mapDisc*math.Sqrt(q.Weight/top))
		if len(d.Points) > 1 && d.alike() {
			r = 2
		}
		fill := faded(d.pal.Heat, 110)
		if q.Off {
			fill.A = 0
		}
		d.p.Circle(pen.Pt{X: d.px(q.X), Y: d.py(q.Y)}, r, fill, pen.Stroke{W: 1.2, C: d.pal.Heat})
	}
}

// alike reports whether all points have one weight, as measured ones do.
func (d *mapLayout) alike() bool {
	for _, q := range d.Points {
		if q.Weight != d.Points[0].Weight {
			return false
		}
	}
	return true
}

// limits draws the lines that the machine should not pass.
func (d *mapLayout) limits() {
	st := pen.Stroke{W: 1.4, C: d.pal.Danger, Dash: dashes[1]}
	for _, l := range d.LimitsX {
		if l >= d.FromX && l <= d.ToX {
			x := d.px(l)
			pen.Line(d.p, pen.Pt{X: x, Y: d.y}, pen.Pt{X: x, Y: d.y + d.h}, st)
		}
	}
	for _, l := range d.LimitsY {
		if l >= 0 && l <= d.ToY {
			y := d.py(l)
			pen.Line(d.p, pen.Pt{X: d.x, Y: y}, pen.Pt{X: d.x + d.w, Y: y}, st)
		}
	}
}

// frame draws title, axes and legend.
func (d *mapLayout) frame() {
	title(d.p, d.Title, d.x+d.w, d.pal.Ink)
	d.p.Text(pen.Pt{Y: headSize + textSize + 3}, pen.Shorten(d.Subtitle, smallSize, false, d.x+d.w), smallSize, d.pal.Secondary, pen.Left, false)
	k := pow10(thousands(d.ToY))
	at, dec := ticks(0, d.ToY/k, int(max(2, min(8, d.h/32))))
	for _, v := range at {
		y := d.py(v * k)
		hairline(d.p, d.x-4, y, d.x, y, d.pal.Secondary)
		d.p.Text(pen.Pt{X: d.x - 6, Y: y + capHalf*smallSize}, number(v, dec), smallSize, d.pal.Secondary, pen.Right, false)
	}
	axis(d.p, d.x, d.x+d.w, d.y+d.h, 12, d.FromX, d.ToX, scaledUnit(thousands(d.ToX), d.XUnit), d.pal)
	d.legend()
}

// legend says what the axes and signs are.
func (d *mapLayout) legend() {
	y := d.y + d.h + axisHeight + 12
	for _, text := range d.legendLines(d.x + d.w) {
		d.p.Text(pen.Pt{Y: y}, text, smallSize, d.pal.Secondary, pen.Left, false)
		y += legendStep
	}
}

// legendStep is from one line of a legend to the next.
const legendStep = smallSize + 3

// legendLines are the lines of the legend in a width.
func (f EfficiencyMap) legendLines(w float64) []string {
	out := pen.Wrap(f.Y+inUnit(scaledUnit(thousands(f.ToY), f.YUnit))+" over "+f.X+"; contours: overall efficiency in %", smallSize, w)
	var signs []string
	if len(f.Points) > 0 && f.PointsAre != "" {
		signs = append(signs, "discs: "+f.PointsAre)
	}
	if slices.ContainsFunc(f.Points, func(q MapPoint) bool { return q.Off }) {
		signs = append(signs, "hollow: "+f.OffAre)
	}
	if slices.ContainsFunc(slices.Concat(f.LimitsX, f.LimitsY), finite) {
		signs = append(signs, "dashes: its limits")
	}
	if f.Inside != nil {
		signs = append(signs, "pale: extrapolated")
	}
	return append(out, pen.Wrap(strings.Join(signs, "; "), smallSize, w)...)
}

// title writes the title of a map, a little smaller where it would not fit.
func title(p pen.Pen, text string, w float64, c color.NRGBA) {
	size := headSize
	for _, smaller := range []float64{textSize, smallSize} {
		if pen.TextWidth(text, size, true) > w {
			size = smaller
		}
	}
	p.Text(pen.Pt{Y: headSize}, pen.Shorten(text, size, true, w), size, c, pen.Left, true)
}

func inUnit(unit string) string {
	if unit == "" {
		return ""
	}
	return " in " + unit
}
