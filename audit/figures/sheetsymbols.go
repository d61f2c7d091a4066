package figures

import (
	"image/color"
	"math"
	"slices"

	"barlitre/audit/pen"
	"barlitre/circuit/drawing"
)

// symbols draws the blocks: at rest as the standard draws them, with the square of a
// valve that is in force tinted and the piston of a cylinder where it is.
func (d *sheetDrawing) symbols() {
	for i := range d.parts {
		p := &d.parts[i]
		if d.veil.part(i) {
			continue
		}
		shift := d.pistonShift(p)
		square, tint := d.square(p)
		for k, q := range p.symbol.Prims {
			if q.Part == square && q.Kind == drawing.Poly && !q.Filled {
				d.p.Polyline(d.points(q.Pts), true, tint, pen.Stroke{})
			}
			if d.fixed.drawnAsLine(i, k) {
				continue
			}
			if q.Part == "piston" || q.Part == "rod" {
				q = movedPrim(q, shift)
			}
			if q.Part == square && square != "" && (q.Kind != drawing.Poly || q.Filled) {
				d.inForce(q)
				continue
			}
			d.prim(q)
		}
		d.motion(p)
		if level := d.opt.Findings[p.id]; level != "" && !p.copied {
			at := d.markPlace(p)
			d.mark(level, at.X, at.Y, 1)
		}
	}
}

// prim draws one piece of a symbol.
func (d *sheetDrawing) prim(q drawing.Prim) {
	line := dashed(symbolLine*max(1, d.bold), d.pal.Ink, q.Style)
	fill := color.NRGBA{}
	if q.Filled {
		fill = d.pal.Ink
		line.W /= 2
	}
	switch q.Kind {
	case drawing.Line:
		d.p.Polyline(d.points(q.Pts), false, color.NRGBA{}, line)
	case drawing.Poly:
		if q.Part == "piston" {
			fill = d.pal.Ink
		}
		d.p.Polyline(d.points(q.Pts), true, fill, line)
	case drawing.Circle:
		d.p.Circle(penPt(q.C), q.R, fill, line)
	case drawing.Arc:
		d.p.Arc(penPt(q.C), q.R, q.A0, q.A1, line)
	case drawing.Text:
		al := [...]pen.Align{drawing.Middle: pen.Center, drawing.Start: pen.Left, drawing.End: pen.Right}[q.Align]
		d.p.Text(pen.Pt{X: q.C.X, Y: q.C.Y + capHalf*q.H}, q.Text, q.H, d.pal.Ink, al, false)
	}
}

// markPlace is where the mark of a finding stands at a block: at the first corner, or
// middle of a side, where it covers no label.
func (s *Sheet) markPlace(p *part) drawing.Pt {
	lo, hi, mid := p.body.Min, p.body.Max, mid(p.body)
	places := []drawing.Pt{{X: lo.X - 0.1, Y: lo.Y - 0.1}, {X: hi.X + 0.1, Y: lo.Y - 0.1}, {X: lo.X - 0.1, Y: hi.Y + 0.1},
		{X: hi.X + 0.1, Y: hi.Y + 0.1}, {X: lo.X - 1.2, Y: mid.Y}, {X: hi.X + 1.2, Y: mid.Y}, {X: mid.X, Y: hi.Y + 1.2}, {X: mid.X, Y: lo.Y - 1.2}}
	for _, at := range places {
		box := grown(drawing.Box{Min: at, Max: at}, 1)
		if !slices.ContainsFunc(s.labels, func(l sheetLabel) bool { return shared(l.box, box) > 0 }) {
			return at
		}
	}
	return places[0]
}

// inForce draws a way through a valve in its present position: bold, in the colour of
// its square.
func (d *sheetDrawing) inForce(q drawing.Prim) {
	bold := sheetDrawing{p: d.p, pal: d.pal, bold: 1.7, room: d.room}
	bold.pal.Ink = d.pal.Gain
	bold.prim(q)
}

// square names the position of a valve that is in force, and its tint: the further open,
// the stronger. "" for blocks without positions and while nothing is known.
func (d *sheetDrawing) square(p *part) (name string, tint color.NRGBA) {
	u, ok := d.st.Signal(p.id + ".u")
	if p.block.Kind != "valve" || !ok || !finite(u) {
		return "", tint
	}
	open := math.Min(1, math.Abs(u))
	tint = faded(d.pal.Gain, uint8(45+120*open))
	switch {
	case u > 0:
		return "square:left", tint
	case u < 0:
		return "square:right", tint
	}
	return "square:middle", tint
}

// The way of the piston in its barrel [M]: the place of its left edge when drawn in,
// and how far it goes. Where it is drawn at rest is the symbol's own choice.
const (
	pistonIn   = -5.7
	pistonWay  = 10.4
	pistonRest = -2.5
)

// pistonShift is how far piston and rod stand from where the symbol has them. The
// lowest place of the cycle counts as drawn in; the way is the stroke if that is given,
// else what the cycle uses.
func (d *sheetDrawing) pistonShift(p *part) drawing.Pt {
	if d.st == nil || p.base.Name != "cylinder" || p.kind == nil {
		return drawing.Pt{}
	}
	tr, ok := d.st.travel[p.id]
	span := tr.span
	if v, _, given := p.kind.Value(p.block, "stroke"); given {
		span = math.Max(span, v.SI)
	}
	share := ratio(tr.at, span)
	if !ok || span <= 0 {
		return drawing.Pt{}
	}
	dir := p.rodDir()
	by := pistonIn + pistonWay*math.Min(1, math.Max(0, share)) - pistonRest
	return drawing.Pt{X: dir.X * by, Y: dir.Y * by}
}

// rodDir is the direction in which the rod comes out.
func (p *part) rodDir() drawing.Pt {
	rod, _ := p.symbol.Port("rod")
	return rod.Dir
}

func movedPrim(q drawing.Prim, by drawing.Pt) drawing.Prim {
	pts := make([]drawing.Pt, len(q.Pts))
	for i, p := range q.Pts {
		pts[i] = drawing.Pt{X: p.X + by.X, Y: p.Y + by.Y}
	}
	q.Pts = pts
	return q
}

// motion draws an arrow beside the rod of a cylinder that moves.
func (d *sheetDrawing) motion(p *part) {
	v, ok := d.st.Signal(p.id + ".v")
	if p.base.Name != "cylinder" || !ok || math.Abs(v) < atRest || !finite(v) {
		return
	}
	dir := p.rodDir()
	aside := drawing.Pt{X: -math.Abs(dir.Y), Y: -math.Abs(dir.X)} // above a lying rod, left of an upright one
	at := func(along float64) pen.Pt {
		return pen.Pt{X: p.at.X + dir.X*along + 1.5*aside.X, Y: p.at.Y + dir.Y*along + 1.5*aside.Y}
	}
	a, b, sign := at(7.4), at(11), 1.0
	if v < 0 {
		a, b, sign = b, a, -1
	}
	pen.Line(d.p, a, b, pen.Stroke{W: 0.3, C: d.pal.Gain})
	foot := pen.Pt{X: b.X - sign*1.1*dir.X, Y: b.Y - sign*1.1*dir.Y}
	d.p.Polyline([]pen.Pt{{X: b.X + sign*0.2*dir.X, Y: b.Y + sign*0.2*dir.Y}, {X: foot.X + 0.55*aside.X, Y: foot.Y + 0.55*aside.Y}, {X: foot.X - 0.55*aside.X, Y: foot.Y - 0.55*aside.Y}},
		true, d.pal.Gain, pen.Stroke{})
}
