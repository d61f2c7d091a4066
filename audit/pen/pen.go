package pen

import "image/color"

// Pt is a point in user units, y down.
type Pt struct{ X, Y float64 }

// Align says which point of a text lies at the given position.
type Align int

// The three alignments of a text about its base point.
const (
	Left Align = iota
	Center
	Right
)

// shift returns how far the left end of a text lies from its base point, as a
// share of the width of the text: 0, -0.5 or -1.
func (a Align) shift() float64 {
	switch a {
	case Center:
		return -0.5
	case Right:
		return -1
	}
	return 0
}

// Stroke is the outline of a shape. W is the width in user units, ≤ 0 for no
// outline. Dash holds the lengths of strokes and gaps in turn, in user units;
// empty, all zero or negative for a solid line. Joins are round, ends are cut square.
type Stroke struct {
	W    float64
	C    color.NRGBA
	Dash []float64
}

// Cubic is one piece of a curve: from the point before it to To, with the
// control points C1 and C2.
type Cubic struct{ C1, C2, To Pt }

// Pen draws. A fill with alpha 0 and a stroke with width 0 draw nothing. Shapes
// cover what was drawn before them. Pens keep none of the slices they are given.
type Pen interface {
	// Polyline draws straight lines through the points; closed adds the line
	// back to the first. The fill closes the shape in any case.
	Polyline(p []Pt, closed bool, fill color.NRGBA, s Stroke)
	// Bezier draws a curve from start through the pieces.
	Bezier(start Pt, pieces []Cubic, closed bool, fill color.NRGBA, s Stroke)
	// Circle draws a circle about c with radius r ≥ 0.
	Circle(c Pt, r float64, fill color.NRGBA, s Stroke)
	// Arc draws the arc about c with radius r from angle a0 to a1 in degrees
	// clockwise from +x; a1 < a0 runs the other way. More than a turn is one turn.
	Arc(c Pt, r, a0, a1 float64, s Stroke)
	// Text writes one line with its baseline at p. size is the em height.
	Text(p Pt, s string, size float64, c color.NRGBA, al Align, bold bool)
	// RotatedText is Text turned about p by deg degrees clockwise; -90 reads upwards.
	RotatedText(p Pt, s string, size, deg float64, c color.NRGBA, al Align, bold bool)
	// TextWidth returns the width of s in user units, the same on every pen.
	TextWidth(s string, size float64, bold bool) float64
	// Push moves the origin to (dx, dy) and scales by scale > 0, both in the
	// units in force; Pop ends it. They nest.
	Push(dx, dy, scale float64)
	Pop()
	// ClipRect limits drawing to a rectangle (and to those in force) until
	// Unclip. They nest.
	ClipRect(x, y, w, h float64)
	Unclip()
}

// Line draws one straight line.
func Line(p Pen, a, b Pt, s Stroke) {
	p.Polyline([]Pt{a, b}, false, color.NRGBA{}, s)
}

// Rect draws a rectangle with its upper left corner at (x, y).
func Rect(p Pen, x, y, w, h float64, fill color.NRGBA, s Stroke) {
	p.Polyline([]Pt{{x, y}, {x + w, y}, {x + w, y + h}, {x, y + h}}, true, fill, s)
}

// arcShare is the length of the control arms of a cubic quarter circle in
// radii, 4/3·(√2−1); the curve leaves the circle by 0.03 % of the radius.
const arcShare = 0.5522847498307936

// RoundRect draws a rectangle with corners of radius r, at most half the
// shorter side.
func RoundRect(p Pen, x, y, w, h, r float64, fill color.NRGBA, s Stroke) {
	r = max(0, min(r, w/2, h/2))
	k := r * (1 - arcShare)
	x1, y1 := x+w, y+h
	edge := func(a, b Pt) Cubic { return Cubic{a, b, b} }
	p.Bezier(Pt{x + r, y}, []Cubic{
		edge(Pt{x + r, y}, Pt{x1 - r, y}), {Pt{x1 - k, y}, Pt{x1, y + k}, Pt{x1, y + r}},
		edge(Pt{x1, y + r}, Pt{x1, y1 - r}), {Pt{x1, y1 - k}, Pt{x1 - k, y1}, Pt{x1 - r, y1}},
		edge(Pt{x1 - r, y1}, Pt{x + r, y1}), {Pt{x + k, y1}, Pt{x, y1 - k}, Pt{x, y1 - r}},
		edge(Pt{x, y1 - r}, Pt{x, y + r}), {Pt{x, y + k}, Pt{x + k, y}, Pt{x + r, y}},
	}, true, fill, s)
}
