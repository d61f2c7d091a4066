package figures

import (
	"image/color"
	"math"

	"barlitre/audit/pen"
	"barlitre/circuit/drawing"
)

// widthOf is the width of a line with flow q: in proportion to its root, so that the
// area of the line is to the flow as with round pipes of one velocity.
func (d *sheetDrawing) widthOf(q float64) float64 {
	if d.st == nil || d.opt.hides(Width) {
		return symbolLine
	}
	return math.Max(lineThin, lineWidest*math.Sqrt(math.Min(1, ratio(math.Abs(q), d.scales.Flow))))
}

// tint is the colour of a line: that of its pressure, ink without a state.
func (d *sheetDrawing) tint(n netNow) color.NRGBA {
	if !n.known || d.opt.hides(Tint) {
		return d.pal.Ink
	}
	if math.IsNaN(n.pressure) {
		return d.pal.Pressure(math.NaN())
	}
	return d.pal.Pressure(ratio(n.pressure, d.scales.Pressure))
}

// lines draws lines, the gaps where they cross, dots and chevrons.
func (d *sheetDrawing) lines() {
	for i := range d.stretches {
		if st := &d.stretches[i]; d.opt.Lines[st.net] && !d.veil.net(st.net) {
			d.p.Polyline(d.points(st.pts), false, color.NRGBA{}, pen.Stroke{W: lineWidest + 1, C: faded(d.pal.Gain, 90)})
		}
	}
	if st := d.piece(d.opt.Piece); st != nil && !d.veil.net(st.net) {
		d.p.Polyline(d.points(st.pts), false, color.NRGBA{}, pen.Stroke{W: lineWidest + 1.2, C: faded(d.pal.Gain, 170)})
	}
	for i := range d.stretches {
		if !d.veil.net(d.stretches[i].net) {
			d.line(i)
		}
	}
	d.drawStubs()
	for i := range d.crossings {
		d.crossing(i)
	}
	for i := range d.nets {
		d.dots(i)
	}
	for i := range d.stretches {
		st := &d.stretches[i]
		if d.veil.net(st.net) || d.opt.hides(Chevrons) {
			continue
		}
		if q := st.along(d.now[st.net]); d.flowing(q) {
			for _, c := range d.fixed.tipsFor(i, q) {
				d.chevron(c, d.widthOf(q), d.tints[st.net])
			}
		}
	}
}

// flowing tells whether a flow is large enough to be shown.
func (d *sheetDrawing) flowing(q float64) bool {
	return d.st != nil && ratio(math.Abs(q), d.scales.Flow) >= flowShown
}

// line draws a stretch.
func (d *sheetDrawing) line(i int) {
	st := &d.stretches[i]
	switch d.nets[st.net].kind {
	case drawing.Shaft, drawing.Rod:
		d.shaft(st.pts)
	case drawing.Electric:
		d.electric(st)
	default:
		d.p.Polyline(d.fixed.stretches[i].pts, false, color.NRGBA{}, d.stroke(st))
	}
}

func (d *sheetDrawing) stroke(st *stretch) pen.Stroke {
	return dashed(d.strokeWidth(st), d.tints[st.net], st.style)
}

func (d *sheetDrawing) strokeWidth(st *stretch) float64 {
	if st.pilot {
		return lineThin
	}
	return d.widthOf(st.along(d.now[st.net]))
}

// dashed is a stroke of a style; the dashes of a wide line are longer.
func dashed(w float64, c color.NRGBA, style drawing.Style) pen.Stroke {
	out := pen.Stroke{W: w, C: c}
	for _, l := range style.Dashes() {
		out.Dash = append(out.Dash, l*math.Max(1, w/0.35))
	}
	return out
}

// shaft draws a double line.
func (d *sheetDrawing) shaft(pts []drawing.Pt) {
	ink := pen.Stroke{W: symbolLine, C: d.pal.Ink}
	if len(pts) > 2 { // round corners: a wide line with a narrower one on it
		d.p.Polyline(d.points(pts), false, color.NRGBA{}, pen.Stroke{W: 1 + symbolLine, C: d.pal.Ink})
		d.p.Polyline(d.points(pts), false, color.NRGBA{}, pen.Stroke{W: 1 - symbolLine, C: d.pal.Card})
		return
	}
	a, b := pts[0], pts[1]
	nx, ny := 0.5, 0.0
	if a.Y == b.Y {
		nx, ny = 0, 0.5
	}
	pen.Line(d.p, pen.Pt{X: a.X + nx, Y: a.Y + ny}, pen.Pt{X: b.X + nx, Y: b.Y + ny}, ink)
	pen.Line(d.p, pen.Pt{X: a.X - nx, Y: a.Y - ny}, pen.Pt{X: b.X - nx, Y: b.Y - ny}, ink)
}

// electric draws a thin line with three strokes across it, for three phases.
func (d *sheetDrawing) electric(st *stretch) {
	thin := pen.Stroke{W: 0.16, C: d.pal.Ink}
	d.p.Polyline(d.points(st.pts), false, color.NRGBA{}, thin)
	best := 1
	for i := 1; i < len(st.pts); i++ {
		if distance(st.pts[i-1], st.pts[i]) > distance(st.pts[best-1], st.pts[best]) {
			best = i
		}
	}
	a, b := st.pts[best-1], st.pts[best]
	length := distance(a, b)
	if length == 0 {
		return
	}
	ux, uy := (b.X-a.X)/length, (b.Y-a.Y)/length
	for k := -1.0; k <= 1; k++ {
		x, y := (a.X+b.X)/2+0.5*k*ux, (a.Y+b.Y)/2+0.5*k*uy
		pen.Line(d.p, pen.Pt{X: x - 0.35*ux + 0.6*uy, Y: y - 0.35*uy - 0.6*ux}, pen.Pt{X: x + 0.35*ux - 0.6*uy, Y: y + 0.35*uy + 0.6*ux}, thin)
	}
}

// drawStubs carries the lines on to the bodies of the symbols.
func (d *sheetDrawing) drawStubs() {
	for i := range d.fixed.stubs {
		sb := &d.fixed.stubs[i]
		if d.veil.net(sb.net) {
			continue
		}
		n := d.now[sb.net]
		w := d.widthOf(n.into[sb.end])
		if sb.pilot {
			w = lineThin
		}
		pts := d.points(sb.pts)
		if out := distance(sb.pts[0], sb.pts[1]); sb.style == drawing.Solid && out > 0 { // lap over the line, or a seam shows
			pts[0].X -= 0.2 / out * (pts[1].X - pts[0].X)
			pts[0].Y -= 0.2 / out * (pts[1].Y - pts[0].Y)
		}
		d.p.Polyline(pts, false, color.NRGBA{}, dashed(w, d.tints[sb.net], sb.style))
	}
}

// crossing leaves a gap in the line that passes below.
func (d *sheetDrawing) crossing(i int) {
	c, over, under := d.crossings[i], d.fixed.over[i][0], d.fixed.over[i][1]
	if over == nil || under == nil {
		return
	}
	along := drawing.Pt{Y: 1}
	if d.rank(under) > d.rank(over) { // the lesser line passes below
		over, under, along = under, over, drawing.Pt{X: 1}
	}
	if !d.nets[over.net].kind.Fluid() {
		return
	}
	top := d.stroke(over)
	top.Dash = nil
	half := d.strokeWidth(under)/2 + 0.5
	piece := func(half float64) []pen.Pt {
		return []pen.Pt{{X: c.At.X - along.X*half, Y: c.At.Y - along.Y*half}, {X: c.At.X + along.X*half, Y: c.At.Y + along.Y*half}}
	}
	d.p.Polyline(piece(half), false, color.NRGBA{}, pen.Stroke{W: top.W + 0.9, C: d.pal.Card})
	d.p.Polyline(piece(half+0.25), false, color.NRGBA{}, top) // laps over the line, or a seam shows
}

// rank orders lines that cross: wide before narrow, full before dashed, oil before
// shafts.
func (d *sheetDrawing) rank(st *stretch) float64 {
	if !d.nets[st.net].kind.Fluid() {
		return -1
	}
	r := d.strokeWidth(st)
	if st.style == drawing.Solid {
		r += lineThin
	}
	return r
}

// dots marks where lines of a net meet, no narrower than the lines.
func (d *sheetDrawing) dots(i int) {
	for _, dot := range d.fixed.dots[i] {
		d.p.Circle(dot.at, math.Max(0.42, d.widest(dot)/2+0.12), d.tints[i], pen.Stroke{})
	}
}

// chevron draws a mark of direction: cut out of a wide line, on a thin one laid over it.
func (d *sheetDrawing) chevron(c chevron, width float64, tint color.NRGBA) {
	half, stroke := 0.62, pen.Stroke{W: 0.26, C: tint}
	if width >= 0.55 {
		half, stroke = width/2+0.08, pen.Stroke{W: 0.26, C: d.pal.Card}
	}
	back := math.Min(0.62, half)
	foot := drawing.Pt{X: c.tip.X - c.dir.X*back, Y: c.tip.Y - c.dir.Y*back}
	side := drawing.Pt{X: -c.dir.Y * half, Y: c.dir.X * half}
	d.p.Polyline([]pen.Pt{{X: foot.X + side.X, Y: foot.Y + side.Y}, penPt(c.tip), {X: foot.X - side.X, Y: foot.Y - side.Y}}, false, color.NRGBA{}, stroke)
}
