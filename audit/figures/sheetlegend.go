package figures

import (
	"image/color"
	"math"

	"barlitre/audit/pen"
	"barlitre/circuit/drawing"
	"barlitre/machines/units"
)

// LegendHeight is the height of a legend [M].
const LegendHeight = 6.0

// legendGap lies between the entries of a legend [M].
const legendGap = 3.0

// DrawLegend draws, from the origin of p on and in modules, what tint, width and discs
// mean, as far as it fits into width w: pressure, flow, heat, and the kinds of lines.
// Scales that are zero are left out. It takes LegendHeight.
func DrawLegend(p pen.Pen, w float64, sc SheetScales, energy bool, opt SheetOptions) {
	l := legendPen{p: p, pal: opt.Palette, sys: opt.System, end: w}
	if sc.Pressure > 0 && !opt.hides(Tint) {
		l.pressure(sc.Pressure)
	}
	if sc.Flow > 0 && !opt.hides(Width) {
		l.flow(sc.Flow)
	}
	switch {
	case opt.hides(Discs):
	case energy:
		l.heat(sc.Energy, true)
	case sc.Heat > 0:
		l.heat(sc.Heat, false)
	}
	l.sample("pilot", drawing.Pilot)
	l.sample("drain", drawing.Drain)
}

type legendPen struct {
	p   pen.Pen
	pal Palette
	sys units.System
	x   float64
	end float64
}

const legendMid = LegendHeight / 2

// need tells whether w more fits, and begins the entry.
func (l *legendPen) need(w float64) bool { return l.x+w <= l.end }

func (l *legendPen) text(s string, x, y float64, al pen.Align) {
	l.p.Text(pen.Pt{X: x, Y: y + capHalf*noteSize}, s, noteSize, l.pal.Secondary, al, false)
}

// pressure draws the tint from zero to the largest pressure.
func (l *legendPen) pressure(most float64) {
	const length, steps = 12.0, 48
	text := units.Format(most, units.Preferred(units.Pressure, l.sys), 3)
	w := 2 + length + 1 + pen.TextWidth(text, noteSize, false)
	if !l.need(w) {
		return
	}
	l.text("0", l.x, legendMid, pen.Left)
	x := l.x + 2
	for i := range steps {
		// Each step a little wider than its share, so that no ground shows between them.
		shape(l.p, x+length*float64(i)/steps, legendMid-0.7, math.Min(length/steps*1.5, length*(1-float64(i)/steps)), 1.4, l.pal.Pressure((float64(i)+0.5)/steps))
	}
	l.text(text, x+length+1, legendMid, pen.Left)
	l.x += w + legendGap
}

// flow draws lines of two round flows, as wide as on the sheet.
func (l *legendPen) flow(most float64) {
	u := units.Preferred(units.Flow, l.sys)
	large := roundBelow(u.FromSI(most))
	small := roundBelow(large / 5)
	texts := [2]string{units.Number(small, 2), units.Number(large, 2) + "\u202f" + u.Label()}
	w := 0.0
	for _, t := range texts {
		w += 5 + 0.8 + pen.TextWidth(t, noteSize, false) + 1.5
	}
	if !l.need(w) {
		return
	}
	x := l.x
	for i, v := range [2]float64{small, large} {
		width := math.Max(lineThin, lineWidest*math.Sqrt(ratio(u.ToSI(v), most)))
		pen.Line(l.p, pen.Pt{X: x, Y: legendMid}, pen.Pt{X: x + 5, Y: legendMid}, pen.Stroke{W: width, C: l.pal.Pressure(0.4)})
		l.text(texts[i], x+5.8, legendMid, pen.Left)
		x += 5.8 + pen.TextWidth(texts[i], noteSize, false) + 1.5
	}
	l.x += w + legendGap - 1.5
}

// heat draws the disc of a round power or energy.
func (l *legendPen) heat(most float64, energy bool) {
	dim := units.Power
	if energy {
		dim = units.Energy
	}
	u := units.Preferred(dim, l.sys)
	v := roundBelow(u.FromSI(most))
	r := discOf(ratio(u.ToSI(v), most))
	for r > LegendHeight/2-0.3 && v > 0 {
		v = roundBelow(v * 0.6)
		r = discOf(ratio(u.ToSI(v), most))
	}
	text := units.Number(v, 2) + "\u202f" + u.Label() + " of heat"
	w := 2*r + 0.8 + pen.TextWidth(text, noteSize, false)
	if v <= 0 || !l.need(w) {
		return
	}
	l.p.Circle(pen.Pt{X: l.x + r, Y: legendMid}, r, faded(l.pal.Heat, 84), pen.Stroke{W: 0.16, C: faded(l.pal.Heat, 190)})
	l.text(text, l.x+2*r+0.8, legendMid, pen.Left)
	l.x += w + legendGap
}

// sample draws a kind of line.
func (l *legendPen) sample(name string, style drawing.Style) {
	w := 5 + 0.8 + pen.TextWidth(name, noteSize, false)
	if !l.need(w) {
		return
	}
	l.p.Polyline([]pen.Pt{{X: l.x, Y: legendMid}, {X: l.x + 5, Y: legendMid}}, false, color.NRGBA{}, dashed(lineThin, l.pal.Ink, style))
	l.text(name, l.x+5.8, legendMid, pen.Left)
	l.x += w + legendGap
}

// roundBelow is the largest 1, 2 or 5 times a power of ten that is not above v; 0 for
// what is not above zero.
func roundBelow(v float64) float64 {
	if !(v > 0) || !finite(v) {
		return 0
	}
	unit := math.Pow(10, math.Floor(math.Log10(v)))
	for _, m := range []float64{5, 2} {
		if m*unit <= v*(1+1e-9) {
			return m * unit
		}
	}
	return unit
}
