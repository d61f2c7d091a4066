package figures

import (
	"math"

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
		d.p.Circle(pen.Pt{X: d.px(q.X), Y: d.py(q.Y)}, r, faded(d.pal.Heat, 110), pen.Stroke{W: 1, C: d.pal.Heat})
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
		if l.At >= d.FromX && l.At <= d.ToX {
			x := d.px(l.At)
			pen.Line(d.p, pen.Pt{X: x, Y: d.y}, pen.Pt{X: x, Y: d.y + d.h}, st)
		}
	}
	for _, l := range d.LimitsY {
		if l.At >= 0 && l.At <= d.ToY {
			y := d.py(l.At)
			pen.Line(d.p, pen.Pt{X: d.x, Y: y}, pen.Pt{X: d.x + d.w, Y: y}, st)
		}
	}
}

// frame draws title, axes and legend.
func (d *mapLayout) frame() {
	d.p.Text(pen.Pt{Y: headSize}, pen.Shorten(d.Title, headSize, true, d.x+d.w), headSize, d.pal.Ink, pen.Left, true)
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
	text := d.Y + inUnit(scaledUnit(thousands(d.ToY), d.YUnit)) + " over " + d.X + "; contours: overall efficiency in %"
	if len(d.Points) > 0 && d.PointsAre != "" {
		text += "; ○ " + d.PointsAre
	}
	for _, l := range append(append([]Limit(nil), d.LimitsX...), d.LimitsY...) {
		if !math.IsNaN(l.At) {
			text += "; – – " + l.Name
		}
	}
	d.p.Text(pen.Pt{Y: y}, pen.Shorten(text, smallSize, false, d.x+d.w), smallSize, d.pal.Secondary, pen.Left, false)
}

func inUnit(unit string) string {
	if unit == "" {
		return ""
	}
	return " in " + unit
}
