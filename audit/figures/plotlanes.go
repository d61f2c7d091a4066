package figures

import (
	"image/color"

	"barlitre/audit/pen"
)

// lane draws one lane.
func (d *plotLayout) lane(i int) {
	l, in, a := d.area.Lanes[i], d.Lanes[i], d.area
	at, dec := d.laneTicks(i, l.H)
	for _, v := range at {
		y := a.YAt(i, v*pow10(d.exps[i]))
		hairline(d.p, a.X, y, a.X+a.W, y, faded(d.pal.Edge, 150))
		d.p.Text(pen.Pt{X: a.X - 6, Y: y + capHalf*smallSize}, number(v, dec), smallSize, d.pal.Secondary, pen.Right, false)
	}
	d.boundaries(l)
	if l.Lo < 0 && l.Hi > 0 {
		y := a.YAt(i, 0)
		hairline(d.p, a.X, y, a.X+a.W, y, d.pal.Secondary)
	}
	d.laneTitle(i, l)
	d.legend(i)
	d.p.ClipRect(a.X-2, l.Y-2, a.W+4, l.H+4)
	for n, s := range in.Series {
		d.series(i, n, s)
	}
	d.p.Unclip()
}

// laneTitle writes name and unit left of the numbers.
func (d *plotLayout) laneTitle(i int, l LaneArea) {
	width := d.titles - 10
	if width <= 0 {
		return
	}
	top := l.Y + l.H/2 - (textSize+smallSize+3)/2
	d.p.Text(pen.Pt{Y: top + textSize*0.85}, pen.Shorten(d.Lanes[i].Title, textSize, false, width), textSize, d.pal.Ink, pen.Left, false)
	d.p.Text(pen.Pt{Y: top + textSize + 3 + smallSize*0.9}, pen.Shorten(d.unit(i), smallSize, false, width), smallSize, d.pal.Secondary, pen.Left, false)
}

// series draws one line of a lane.
func (d *plotLayout) series(i, n int, s Series) {
	if s.Base != nil {
		d.band(i, s)
		return
	}
	a, l := d.area, d.area.Lanes[i]
	c := d.pal.Color(s.Role)
	st := pen.Stroke{W: 1.6, C: c, Dash: d.Lanes[i].dash(n)}
	base := max(l.Y, min(l.Y+l.H, a.YAt(i, 0)))
	if s.Long != nil && s.Long.dense(a.From, a.To, int(a.W)) {
		d.columns(i, s)
		return
	}
	var pieces [][]pen.Pt
	if s.Long != nil {
		pieces = s.Long.runs(a.From, a.To, int(2*a.W))
	} else {
		pieces = runs(s.X, s.Y, a.From, a.To, int(2*a.W))
	}
	for _, run := range pieces {
		pts := make([]pen.Pt, len(run))
		for j, q := range run {
			y := a.YAt(i, q.Y)
			pts[j] = pen.Pt{X: a.XAt(q.X), Y: max(l.Y-1e4, min(l.Y+l.H+1e4, y))}
		}
		if len(pts) == 1 {
			d.p.Circle(pts[0], 2.2, c, pen.Stroke{})
			continue
		}
		if s.Fill {
			under := append([]pen.Pt{{X: pts[0].X, Y: base}}, pts...)
			under = append(under, pen.Pt{X: pts[len(pts)-1].X, Y: base})
			d.p.Polyline(under, true, faded(c, 70), pen.Stroke{})
		}
		d.p.Polyline(pts, false, color.NRGBA{}, st)
	}
}

// columns draws a series that has more points than the picture has columns: as one area from the lowest to the highest value of
// each, at least as thick as a line.
func (d *plotLayout) columns(i int, s Series) {
	a, l := d.area, d.area.Lanes[i]
	const half = 0.8
	n := int(a.W)
	wide := (a.To - a.From) / float64(n) / 2
	for _, run := range s.Long.columns(a.From, a.To, n) {
		for k := 1; k < len(run); k++ { // a line leads from each column to the next
			run[k-1].high = max(run[k-1].high, run[k].low)
			run[k-1].low = min(run[k-1].low, run[k].high)
		}
		pts := make([]pen.Pt, 4*len(run))
		for k, c := range run {
			x0, x1 := a.XAt(c.x-wide), a.XAt(c.x+wide)
			top := max(l.Y-2, min(l.Y+l.H+2, a.YAt(i, c.high)-half))
			low := max(l.Y-2, min(l.Y+l.H+2, a.YAt(i, c.low)+half))
			pts[2*k], pts[2*k+1] = pen.Pt{X: x0, Y: top}, pen.Pt{X: x1, Y: top}
			pts[len(pts)-1-2*k], pts[len(pts)-2-2*k] = pen.Pt{X: x0, Y: low}, pen.Pt{X: x1, Y: low}
		}
		d.p.Polyline(pts, true, d.pal.Color(s.Role), pen.Stroke{})
	}
}

// band tints the area between the two courses of a series; it breaks where either is missing.
func (d *plotLayout) band(i int, s Series) {
	l := d.area.Lanes[i]
	at := func(x, v float64) pen.Pt {
		return pen.Pt{X: d.area.XAt(x), Y: max(l.Y, min(l.Y+l.H, d.area.YAt(i, v)))}
	}
	var upper, lower []pen.Pt
	flush := func() {
		if len(upper) > 1 {
			for j := len(lower) - 1; j >= 0; j-- {
				upper = append(upper, lower[j])
			}
			d.p.Polyline(upper, true, faded(d.pal.Color(s.Role), bandTint), pen.Stroke{})
		}
		upper, lower = nil, nil
	}
	for j := range min(len(s.X), len(s.Y), len(s.Base)) {
		if x := s.X[j]; !finite(x) || !finite(s.Y[j]) || !finite(s.Base[j]) || x < d.area.From || x > d.area.To {
			flush()
			continue
		}
		upper, lower = append(upper, at(s.X[j], s.Y[j])), append(lower, at(s.X[j], s.Base[j]))
	}
	flush()
}

// bandTint is how strongly a band is tinted, of 255.
const bandTint = 80

// dash returns the pattern of series n: the one asked for, else, if several
// share the lane and none asks, one by its position.
func (l Lane) dash(n int) []float64 {
	for _, s := range l.Series {
		if s.Dash {
			if l.Series[n].Dash {
				return dashes[1]
			}
			return nil
		}
	}
	return dashes[n%len(dashes)]
}

// timeAxis draws the numbers below the lowest lane and the name of the axis left
// of them; where that finds no room, the unit follows the last number.
func (d *plotLayout) timeAxis() {
	a, last := d.area, d.area.Lanes[len(d.area.Lanes)-1]
	y, side := last.Y+last.H+8, min(12, d.w-d.area.X-d.area.W)
	title, unit := d.Axis, d.AxisUnit
	if unit = scaledUnit(thousands(max(-a.From, a.To)), unit); unit != "" {
		title += " in " + unit
	}
	if d.p.TextWidth(title, smallSize, false) <= a.X-side-6 {
		d.p.Text(pen.Pt{X: 0, Y: y + 15}, title, smallSize, d.pal.Secondary, pen.Left, false)
		unit = ""
	}
	axis(d.p, a.X, a.X+a.W, y, side, a.From, a.To, unit, d.pal)
}
