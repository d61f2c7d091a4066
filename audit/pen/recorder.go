package pen

import (
	"fmt"
	"image/color"
	"math"
	"strings"
)

// Box is where a text lies: the rectangle about it (about the turned text, if
// it is turned) in the units of the recorder, before clipping.
type Box struct {
	Text       string
	X, Y, W, H float64
	Size       float64
	Bold       bool
	Color      color.NRGBA
	Cut        bool // a clip in force hides part of it
}

// Overlaps reports whether the two boxes share more than slack across and down.
func (b Box) Overlaps(o Box, slack float64) bool {
	return math.Min(b.X+b.W, o.X+o.W)-math.Max(b.X, o.X) > slack &&
		math.Min(b.Y+b.H, o.Y+o.H)-math.Max(b.Y, o.Y) > slack
}

// Inside reports whether the box lies in the rectangle, give or take slack.
func (b Box) Inside(x, y, w, h, slack float64) bool {
	return b.X >= x-slack && b.Y >= y-slack && b.X+b.W <= x+w+slack && b.Y+b.H <= y+h+slack
}

// Shape is a recorded outline: "line", "curve" (with its control points),
// "circle" (centre, and the point at angle 0) or "arc" (centre, start, end).
type Shape struct {
	Kind   string
	Points []Pt
	Closed bool
	Fill   color.NRGBA
	Stroke Stroke
}

// Bounds returns the smallest and largest coordinates of the points.
func (s Shape) Bounds() (lo, hi Pt) {
	for i, p := range s.Points {
		if i == 0 {
			lo, hi = p, p
		}
		lo = Pt{math.Min(lo.X, p.X), math.Min(lo.Y, p.Y)}
		hi = Pt{math.Max(hi.X, p.X), math.Max(hi.Y, p.Y)}
	}
	return lo, hi
}

// Recorder draws nothing and remembers everything, for tests of layout that
// depend neither on pixels nor on a PDF reader.
type Recorder struct {
	base
	lines  []string
	boxes  []Box
	shapes []Shape
	clips  []Box // only X, Y, W, H; each already cut by the one before
}

var _ Pen = (*Recorder)(nil)

// NewRecorder returns an empty recorder.
func NewRecorder() *Recorder { return &Recorder{base: newBase()} }

// Boxes returns where the texts lie, in the order of drawing.
func (r *Recorder) Boxes() []Box { return r.boxes }

// Shapes returns the outlines in the order of drawing.
func (r *Recorder) Shapes() []Shape { return r.shapes }

// String returns the calls, one a line, with coordinates to 0.01 unit.
func (r *Recorder) String() string { return strings.Join(r.lines, "\n") }

func (r *Recorder) note(format string, args ...any) {
	r.lines = append(r.lines, fmt.Sprintf(format, args...))
}

func (r *Recorder) shape(kind string, pts []Pt, closed bool, fill color.NRGBA, st Stroke) {
	r.shapes = append(r.shapes, Shape{kind, pts, closed, fill, st})
	var b strings.Builder
	b.WriteString(kind)
	for _, p := range pts {
		fmt.Fprintf(&b, " %.2f,%.2f", p.X, p.Y)
	}
	if closed {
		b.WriteString(" closed")
	}
	if fill.A > 0 {
		b.WriteString(" fill " + hex(fill))
	}
	if st.W > 0 {
		fmt.Fprintf(&b, " stroke %.2f %s", st.W, hex(st.C))
	}
	if len(st.Dash) > 0 {
		fmt.Fprintf(&b, " dash %.2f", st.Dash)
	}
	r.lines = append(r.lines, b.String())
}

func hex(c color.NRGBA) string { return fmt.Sprintf("#%02x%02x%02x%02x", c.R, c.G, c.B, c.A) }

// Polyline implements Pen.
func (r *Recorder) Polyline(p []Pt, closed bool, fill color.NRGBA, s Stroke) {
	pts, st := r.all(p), r.stroke(s)
	if r.okPts(st.W, pts...) && len(pts) > 0 {
		r.shape("line", pts, closed, fill, st)
	}
}

// Bezier implements Pen.
func (r *Recorder) Bezier(start Pt, pieces []Cubic, closed bool, fill color.NRGBA, s Stroke) {
	a, c, st := r.at(start), r.curve(pieces), r.stroke(s)
	if !r.okCurve(st.W, a, c) {
		return
	}
	pts := []Pt{a}
	for _, q := range c {
		pts = append(pts, q.C1, q.C2, q.To)
	}
	r.shape("curve", pts, closed, fill, st)
}

// Circle implements Pen.
func (r *Recorder) Circle(c Pt, radius float64, fill color.NRGBA, s Stroke) {
	m, rad, st := r.at(c), radius*r.cur.s, r.stroke(s)
	if r.okPts(st.W, m) && r.ok(rad) && rad >= 0 {
		r.shape("circle", []Pt{m, {m.X + rad, m.Y}}, true, fill, st)
	}
}

// Arc implements Pen.
func (r *Recorder) Arc(c Pt, radius, a0, a1 float64, s Stroke) {
	m, rad, st := r.at(c), radius*r.cur.s, r.stroke(s)
	if !r.okPts(st.W, m) || !r.ok(rad, a0, a1) || rad < 0 {
		return
	}
	on := func(deg float64) Pt {
		sin, cos := math.Sincos(deg * math.Pi / 180)
		return Pt{m.X + rad*cos, m.Y + rad*sin}
	}
	r.shape("arc", []Pt{m, on(a0), on(a0 + sweep(a0, a1))}, false, color.NRGBA{}, st)
}

// Text implements Pen.
func (r *Recorder) Text(p Pt, s string, size float64, c color.NRGBA, al Align, bold bool) {
	r.RotatedText(p, s, size, 0, c, al, bold)
}

// RotatedText implements Pen.
func (r *Recorder) RotatedText(p Pt, s string, size, deg float64, c color.NRGBA, al Align, bold bool) {
	q, em := r.at(p), size*r.cur.s
	if !r.okPts(em, q) || !r.ok(deg) || em <= 0 {
		return
	}
	s = Clean(s)
	w := TextWidth(s, em, bold)
	x0, x1 := al.shift()*w, (1+al.shift())*w
	sin, cos := math.Sincos(deg * math.Pi / 180)
	corners := Shape{}
	for _, k := range []Pt{{x0, -Ascent * em}, {x1, -Ascent * em}, {x1, Descent * em}, {x0, Descent * em}} {
		corners.Points = append(corners.Points, Pt{q.X + k.X*cos - k.Y*sin, q.Y + k.X*sin + k.Y*cos})
	}
	lo, hi := corners.Bounds()
	b := Box{Text: s, X: lo.X, Y: lo.Y, W: hi.X - lo.X, H: hi.Y - lo.Y, Size: em, Bold: bold, Color: c}
	if n := len(r.clips); n > 0 {
		k := r.clips[n-1]
		b.Cut = !b.Inside(k.X, k.Y, k.W, k.H, 1e-9)
	}
	r.boxes = append(r.boxes, b)
	r.note("text %.2f,%.2f size %.2f turn %.1f bold %v align %d %s %q", q.X, q.Y, em, deg, bold, al, hex(c), s)
}

// TextWidth returns the width of s in user units.
func (r *Recorder) TextWidth(s string, size float64, bold bool) float64 {
	return TextWidth(s, size, bold)
}

// ClipRect implements Pen.
func (r *Recorder) ClipRect(x, y, w, h float64) {
	a, b := r.at(Pt{x, y}), r.at(Pt{x + w, y + h})
	all := Box{X: -limit, Y: -limit, W: 2 * limit, H: 2 * limit}
	if n := len(r.clips); n > 0 {
		all = r.clips[n-1]
	}
	if r.okPts(0, a, b) {
		x0, y0 := math.Max(a.X, all.X), math.Max(a.Y, all.Y)
		x1, y1 := math.Min(b.X, all.X+all.W), math.Min(b.Y, all.Y+all.H)
		all = Box{X: x0, Y: y0, W: math.Max(0, x1-x0), H: math.Max(0, y1-y0)}
		r.note("clip %.2f,%.2f %.2f,%.2f", a.X, a.Y, b.X, b.Y)
	}
	r.clips = append(r.clips, all)
}

// Unclip implements Pen.
func (r *Recorder) Unclip() {
	if len(r.clips) == 0 {
		r.skipped++
		return
	}
	r.clips = r.clips[:len(r.clips)-1]
	r.note("unclip")
}
