package figures

import (
	"math"

	"barlitre/audit/pen"
)

// Bar is one value of a comparison.
type Bar struct {
	Label string
	Value float64
	Role  Role
}

// BarGroup compares values of one kind on a scale of its own.
type BarGroup struct {
	Title  string
	Unit   string
	Bars   []Bar                // as found first
	Format func(float64) string // writes a value without its unit; nil for 3 significant digits
}

// Bars shows groups of horizontal bars, such as energy, heat and money before
// and after, with each value at the end of its bar. Values below zero run left
// from a zero line.
type Bars struct{ Groups []BarGroup }

const (
	barRow      = 24.0
	barHeight   = 15.0
	barHead     = 24.0
	barGap      = 12.0
	barMinWidth = 260.0
	barLeast    = 60.0  // room for the longest bar
	barLabel    = 120.0 // room for the labels, more if there is some
	valueMost   = 200.0 // wider values are shortened
)

// Height returns the height [figure units] at which nothing has to get smaller.
func (f Bars) Height() float64 {
	h := 2.0
	for i, g := range f.Groups {
		h += barHead + barRow*float64(len(g.Bars))
		if i > 0 {
			h += barGap
		}
	}
	return h
}

// Draw draws the figure into 0…w × 0…h and returns where its bars lie. All bars
// of a group have the same scale.
func (f Bars) Draw(p pen.Pen, w, h float64, pal Palette) []Region {
	values := 0.0
	for _, g := range f.Groups {
		lw, hw := g.valueWidths(p)
		values = max(values, lw+hw)
	}
	k, fw, _, ok := room(w, h, max(barMinWidth, barLabel+12+values+barLeast), f.Height())
	if !ok {
		return nil
	}
	if len(f.Groups) == 0 {
		empty(p, w, h, "Nothing to compare yet", pal)
		return nil
	}
	labels := 0.0
	for _, g := range f.Groups {
		for _, b := range g.Bars {
			labels = max(labels, p.TextWidth(b.Label, textSize, false))
		}
	}
	labels = min(labels, max(barLabel, min(0.3*fw, fw-12-values-barLeast)))
	p.Push(0, 0, k)
	defer p.Pop()
	var out []Region
	y := 0.0
	for i, g := range f.Groups {
		if i > 0 {
			y += barGap
		}
		p.Text(pen.Pt{Y: y + 15}, pen.Shorten(g.Title, textSize, true, fw), textSize, pal.Ink, pen.Left, true)
		y += barHead
		g.rows(p, y, fw, labels, pal)
		for n := range g.Bars {
			out = append(out, Region{0, y * k, fw * k, barRow * k, i, KindBar, n})
			y += barRow
		}
	}
	return out
}

// value writes a value with its unit.
func (g BarGroup) value(v float64) string {
	return pen.Shorten(withUnit(v, g.Format, g.Unit), textSize, true, valueMost)
}

// valueWidths returns the room the values need left of the bars below zero and
// right of the others.
func (g BarGroup) valueWidths(p pen.Pen) (left, right float64) {
	for _, b := range g.Bars {
		text := p.TextWidth(g.value(b.Value), textSize, true) + 8
		if zero(b.Value) < 0 {
			left = max(left, text)
		} else {
			right = max(right, text)
		}
	}
	return left, right
}

// scale returns the horizontal place of zero and the width of one unit, so that
// the longest bars and the values at their ends fit between x0 and w.
func (g BarGroup) scale(p pen.Pen, x0, w float64) (at, k float64) {
	lo, hi := 0.0, 0.0
	for _, b := range g.Bars {
		lo, hi = min(lo, zero(b.Value)), max(hi, zero(b.Value))
	}
	left, right := g.valueWidths(p)
	if hi-lo > smallest {
		k = (w - x0 - left - right) / (hi - lo)
	}
	return x0 + left - lo*k, k
}

// rows draws the bars of a group from y down.
func (g BarGroup) rows(p pen.Pen, y, w, labels float64, pal Palette) {
	x0 := labels + 12
	at, k := g.scale(p, x0, w)
	hairline(p, at, y-2, at, y+barRow*float64(len(g.Bars))-barRow+barHeight+2, pal.Edge)
	for _, b := range g.Bars {
		mid := y + barHeight/2
		p.Text(pen.Pt{X: labels, Y: mid + capHalf*textSize}, pen.Shorten(b.Label, textSize, false, labels), textSize, pal.Ink, pen.Right, false)
		c := pal.Color(b.Role)
		v := zero(b.Value)
		end := at + v*k
		if v != 0 && k != 0 {
			shape(p, min(at, end), y, math.Abs(end-at), barHeight, c)
		}
		text := c
		if b.Role != RoleGain && b.Role != RoleDanger { // amber and grey are no colours for text
			text = pal.Ink
		}
		al, x := pen.Left, end+6
		if v < 0 {
			al, x = pen.Right, end-6
		}
		p.Text(pen.Pt{X: x, Y: mid + capHalf*textSize}, g.value(b.Value), textSize, text, al, true)
		y += barRow
	}
}
