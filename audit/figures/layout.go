package figures

import (
	"image/color"

	"barlitre/audit/pen"
)

// Sizes of text in figure units.
const (
	textSize  = 12.5
	smallSize = 11.0
	headSize  = 14.0
)

// capHalf is half the height of a capital letter in em: a baseline this far
// below a line centres text on it.
const capHalf = 0.365

// Region is a place that can be pointed at, in the units the figure was drawn in.
type Region struct {
	X, Y, W, H float64
	Group      int  // index of the circuit or of the group of bars
	Kind       Kind // what lies there
	Index      int  // index of the step or bar; 0 for other kinds
}

// Contains reports whether the point lies in the region.
func (r Region) Contains(x, y float64) bool {
	return x >= r.X && x < r.X+r.W && y >= r.Y && y < r.Y+r.H
}

// Kind says what a Region shows.
type Kind int

// The kinds of regions.
const (
	KindStep Kind = iota
	KindBar
	KindSupply
	KindReturned
	KindWork
	KindFromLoad
	KindStored
	KindUnaccounted
)

// room returns the factor that makes a figure of at least minW × minH fit into
// w × h, at most 1, and the width and height it then has in its own units; ok
// is false if there is nothing to draw on.
func room(w, h, minW, minH float64) (k, fw, fh float64, ok bool) {
	if !(w > 0 && h > 0) || !finite(w) || !finite(h) {
		return 0, 0, 0, false
	}
	k = min(1, w/minW, h/minH)
	return k, w / k, h / k, true
}

// shape fills a rectangle without an outline.
func shape(p pen.Pen, x, y, w, h float64, c color.NRGBA) { pen.Rect(p, x, y, w, h, c, pen.Stroke{}) }

// hairline draws a line one unit wide.
func hairline(p pen.Pen, x0, y0, x1, y1 float64, c color.NRGBA) {
	pen.Line(p, pen.Pt{X: x0, Y: y0}, pen.Pt{X: x1, Y: y1}, pen.Stroke{W: 1, C: c})
}

// empty writes one sentence in the middle of a figure without data.
func empty(p pen.Pen, w, h float64, text string, pal Palette) {
	size := min(textSize, h)
	p.Text(pen.Pt{X: w / 2, Y: h/2 + capHalf*size}, pen.Shorten(text, size, false, w), size, pal.Secondary, pen.Center, false)
}

// axis draws a scale below a figure: a line from x0 to x1 at y with ticks and
// their numbers below, where value lo lies at x0 and hi at x1. A number that
// would leave x0−side…x1+side moves inside; one that would touch the last is left
// out. The power of ten of thousands is taken out of the numbers; unit, which
// names it (scaledUnit), follows the last number. It takes axisHeight below y.
func axis(p pen.Pen, x0, x1, y, side, lo, hi float64, unit string, pal Palette) {
	hairline(p, x0, y, x1, y, pal.Edge)
	exp := thousands(max(-lo, hi))
	n := int(max(1, min(10, (x1-x0)/80)))
	at, decimals := ticks(lo/pow10(exp), hi/pow10(exp), n)
	if len(at) < 2 { // one number tells no scale
		at, decimals = ticks(lo/pow10(exp), hi/pow10(exp), 2*n)
	}
	gap := " "
	if exp != 0 {
		gap = "·"
	}
	end := x0 - side - 6 // right end of the last number
	for i, v := range at {
		x := x0 + (x1-x0)*(v*pow10(exp)-lo)/(hi-lo)
		hairline(p, x, y, x, y+4, pal.Secondary)
		s := number(v, decimals)
		if i == len(at)-1 && unit != "" {
			s += gap + unit
		}
		w := p.TextWidth(s, smallSize, false)
		left := max(x0-side, min(x-w/2, x1+side-w))
		if left < end+6 || left+w > x1+side+0.01 {
			continue
		}
		p.Text(pen.Pt{X: left, Y: y + 15}, s, smallSize, pal.Secondary, pen.Left, false)
		end = left + w
	}
}

const axisHeight = 20.0
