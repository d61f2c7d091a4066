package pen

import (
	"image"
	"image/color"
	"math"
	"math/bits"
)

// opKind says which call of a pen an op repeats.
type opKind uint8

const (
	opLine opKind = iota
	opCurve
	opCircle
	opArc
	opText
	opTurned
)

// op is a call of a pen, in pixels.
type op struct {
	kind         opKind
	closed, bold bool
	align        Align
	fill, ink    color.NRGBA
	w            float64 // of the stroke
	n            [3]float64
	text         string
	pts, dash    [2]int // from and to, in the lists of the mosaic
	clip, box    image.Rectangle
	sum          uint64 // of all that tells how it looks
}

// mix takes a number into a sum, which hangs on all that was taken in and on the order.
func mix(sum, x uint64) uint64 {
	hi, lo := bits.Mul64(sum^0x9e3779b97f4a7c15, x^0xd6e8feb86659fd93)
	return hi ^ lo
}

// add notes a call; box is what it may touch.
func (m *Mosaic) add(o op, pts []Pt, dash []float64, box image.Rectangle) {
	if o.box = box.Intersect(m.clip); o.box.Empty() {
		return
	}
	o.clip = m.clip
	o.pts[0], o.dash[0] = len(m.pts), len(m.dashes)
	m.pts, m.dashes = append(m.pts, pts...), append(m.dashes, dash...)
	o.pts[1], o.dash[1] = len(m.pts), len(m.dashes)
	o.sum = m.sumOf(&o)
	m.ops = append(m.ops, o)
}

func (m *Mosaic) sumOf(o *op) uint64 {
	colour := func(c color.NRGBA) uint64 {
		return uint64(c.R) | uint64(c.G)<<8 | uint64(c.B)<<16 | uint64(c.A)<<24
	}
	flag := func(b bool) uint64 {
		if b {
			return 1
		}
		return 0
	}
	s := mix(uint64(o.kind)+1, flag(o.closed)|flag(o.bold)<<1|uint64(o.align)<<2)
	s = mix(s, colour(o.fill)|colour(o.ink)<<32)
	s = mix(s, math.Float64bits(o.w))
	for _, x := range o.n {
		s = mix(s, math.Float64bits(x))
	}
	for i := 0; i < len(o.text); i += 8 {
		var x uint64
		for k := i; k < min(i+8, len(o.text)); k++ {
			x = x<<8 | uint64(o.text[k])
		}
		s = mix(s, x)
	}
	s = mix(s, uint64(len(o.text)))
	for _, p := range m.pts[o.pts[0]:o.pts[1]] {
		s = mix(mix(s, math.Float64bits(p.X)), math.Float64bits(p.Y))
	}
	for _, x := range m.dashes[o.dash[0]:o.dash[1]] {
		s = mix(s, math.Float64bits(x))
	}
	c := o.clip
	return mix(mix(s, uint64(c.Min.X)<<32|uint64(c.Min.Y)), uint64(c.Max.X)<<32|uint64(c.Max.Y))
}

// play repeats a call on a raster.
func (m *Mosaic) play(r *Raster, o *op) {
	pts := m.pts[o.pts[0]:o.pts[1]]
	st := Stroke{W: o.w, C: o.ink, Dash: m.dashes[o.dash[0]:o.dash[1]]}
	switch o.kind {
	case opLine:
		r.path(pts, o.closed, o.fill, st)
	case opCurve:
		r.path(flatten(pts[0], cubics(pts[1:]), curveTol), o.closed, o.fill, st)
	case opCircle:
		r.Circle(pts[0], o.n[0], o.fill, st)
	case opArc:
		r.Arc(pts[0], o.n[0], o.n[1], o.n[2], st)
	case opText:
		r.Text(pts[0], o.text, o.n[0], o.ink, o.align, o.bold)
	case opTurned:
		r.RotatedText(pts[0], o.text, o.n[0], o.n[1], o.ink, o.align, o.bold)
	}
}

func cubics(pts []Pt) []Cubic {
	out := make([]Cubic, 0, len(pts)/3)
	for i := 0; i+2 < len(pts); i += 3 {
		out = append(out, Cubic{pts[i], pts[i+1], pts[i+2]})
	}
	return out
}

// fine is a size in sixteenths of a pixel, which nobody sees change.
func fine(v float64) float64 { return math.Round(v*16) / 16 }

// around is what a shape about points, wide by a stroke, may touch.
func around(pts []Pt, w float64) image.Rectangle { return bounds(pts).Inset(-int(w/2) - 2) }

// Polyline implements Pen.
func (m *Mosaic) Polyline(p []Pt, closed bool, fill color.NRGBA, s Stroke) {
	m.room = m.room[:0]
	for _, q := range p {
		m.room = append(m.room, m.at(q))
	}
	pts, st := m.room, m.stroke(s)
	if !m.okPts(st.W, pts...) || len(pts) == 0 {
		return
	}
	if fill.A == 0 && st.W > 0 && axisParallel(pts) && (!closed || axisParallel([]Pt{pts[len(pts)-1], pts[0]})) {
		pts, st.W = snap(pts, fine(st.W)) // as it will be drawn: a change of less than that is none
	}
	m.add(op{kind: opLine, closed: closed, fill: fill, ink: st.C, w: st.W}, pts, st.Dash, around(pts, st.W))
}

// Bezier implements Pen.
func (m *Mosaic) Bezier(start Pt, pieces []Cubic, closed bool, fill color.NRGBA, s Stroke) {
	a, c, st := m.at(start), m.curve(pieces), m.stroke(s)
	if !m.okCurve(st.W, a, c) {
		return
	}
	pts := []Pt{a}
	for _, q := range c {
		pts = append(pts, q.C1, q.C2, q.To)
	}
	m.add(op{kind: opCurve, closed: closed, fill: fill, ink: st.C, w: st.W}, pts, st.Dash, around(pts, st.W))
}

// disc is what a circle may touch.
func disc(c Pt, radius, w float64) image.Rectangle {
	return around([]Pt{{c.X - radius, c.Y - radius}, {c.X + radius, c.Y + radius}}, w)
}

// Circle implements Pen.
func (m *Mosaic) Circle(c Pt, radius float64, fill color.NRGBA, s Stroke) {
	a, rad, st := m.at(c), fine(radius*m.cur.s), m.stroke(s)
	if m.okPts(st.W, a) && m.ok(rad) && rad >= 0 {
		m.add(op{kind: opCircle, fill: fill, ink: st.C, w: st.W, n: [3]float64{rad}}, []Pt{a}, st.Dash, disc(a, rad, st.W))
	}
}

// Arc implements Pen.
func (m *Mosaic) Arc(c Pt, radius, a0, a1 float64, s Stroke) {
	a, rad, st := m.at(c), radius*m.cur.s, m.stroke(s)
	if m.okPts(st.W, a) && m.ok(rad, a0, a1) && rad >= 0 {
		m.add(op{kind: opArc, ink: st.C, w: st.W, n: [3]float64{rad, a0, a1}}, []Pt{a}, st.Dash, disc(a, rad, st.W))
	}
}

// Text implements Pen.
func (m *Mosaic) Text(p Pt, s string, size float64, c color.NRGBA, al Align, bold bool) {
	q, px := m.at(p), size*m.cur.s
	if !m.okPts(px, q) || px < smallest || s == "" {
		return
	}
	w := TextWidth(s, px, bold)
	x := q.X + al.shift()*w
	box := around([]Pt{{x - px/2, q.Y - 1.2*px}, {x + w + px/2, q.Y + px/2}}, 0)
	m.add(op{kind: opText, ink: c, n: [3]float64{px}, text: s, align: al, bold: bold}, []Pt{q}, nil, box)
}

// RotatedText implements Pen.
func (m *Mosaic) RotatedText(p Pt, s string, size, deg float64, c color.NRGBA, al Align, bold bool) {
	q, px := m.at(p), size*m.cur.s
	if !m.okPts(px, q) || !m.ok(deg) || px < smallest || s == "" {
		return
	}
	box := disc(q, TextWidth(s, px, bold)+1.5*px, 0)
	m.add(op{kind: opTurned, ink: c, n: [3]float64{px, deg}, text: s, align: al, bold: bold}, []Pt{q}, nil, box)
}
