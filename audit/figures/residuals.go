package figures

import (
	"math"

	"barlitre/audit/pen"
	"barlitre/machines/units"
)

// ResidualPoint is what a fit leaves at a point, in efficiency points.
type ResidualPoint struct{ X, Y, Group float64 }

// Residuals shows what a fit leaves at each point, over one quantity, tinted by another.
type Residuals struct {
	Title            string
	X, XUnit         string
	Group, GroupUnit string
	RMS              float64 // efficiency points
	Points           []ResidualPoint
}

// Draw draws the residuals into 0…w × 0…h.
func (f Residuals) Draw(p pen.Pen, w, h float64, pal Palette) {
	k, fw, fh, ok := room(w, h, mapMinWidth, mapMinHeight)
	if !ok {
		return
	}
	var pts []ResidualPoint
	most, toX, lo, hi := 1.0, 0.0, math.Inf(1), 0.0
	for _, q := range f.Points {
		if finite(q.X) && finite(q.Y) && finite(q.Group) {
			pts = append(pts, q)
			most, toX, lo, hi = max(most, math.Abs(q.Y)), max(toX, q.X), min(lo, q.Group), max(hi, q.Group)
		}
	}
	if len(pts) == 0 || toX <= 0 {
		empty(p, w, h, "No measured points", pal)
		return
	}
	p.Push(0, 0, k)
	defer p.Pop()
	x0, y0 := 44.0, mapHead
	pw, ph := fw-x0-14, fh-mapHead-axisHeight-mapFoot-4
	px := func(x float64) float64 { return x0 + x/(1.05*toX)*pw }
	py := func(y float64) float64 { return y0 + ph/2 - y/(1.1*most)*ph/2 }
	shape(p, x0, py(f.RMS), pw, py(-f.RMS)-py(f.RMS), faded(pal.Gain, 40))
	at, dec := ticks(-most, most, int(max(2, min(8, ph/28))))
	for _, v := range at {
		hairline(p, x0, py(v), x0+pw, py(v), faded(pal.Edge, 150))
		p.Text(pen.Pt{X: x0 - 6, Y: py(v) + capHalf*smallSize}, number(v, dec), smallSize, pal.Secondary, pen.Right, false)
	}
	hairline(p, x0, py(0), x0+pw, py(0), pal.Secondary)
	for _, q := range pts {
		share := 0.5
		if hi > lo {
			share = (q.Group - lo) / (hi - lo)
		}
		p.Circle(pen.Pt{X: px(q.X), Y: py(q.Y)}, 2.6, pal.Pressure(share), pen.Stroke{})
	}
	title(p, f.Title, fw, pal.Ink)
	p.Text(pen.Pt{Y: headSize + textSize + 3}, pen.Shorten("law less measured, efficiency points; band: rms "+number(f.RMS, 2), smallSize, false, fw), smallSize, pal.Secondary, pen.Left, false)
	axis(p, x0, x0+pw, y0+ph, 12, 0, 1.05*toX, scaledUnit(thousands(1.05*toX), f.XUnit), pal)
	text := "over " + f.X + "; tint: " + f.Group + " " + units.Range(number(lo, 0), number(hi, 0)) + " " + f.GroupUnit
	p.Text(pen.Pt{Y: y0 + ph + axisHeight + 12}, pen.Shorten(text, smallSize, false, fw), smallSize, pal.Secondary, pen.Left, false)
}
