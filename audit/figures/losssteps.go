package figures

import (
	"image/color"
	"math"

	"barlitre/audit/pen"
)

// Step is one loss between supply and load.
type Step struct {
	Label string
	Value float64 // energy lost, ≥ 0; one below 0 is drawn as a step up
	Heat  bool    // it heats the oil
}

// StepsCircuit is the energy balance of one circuit over one cycle, all in the
// unit of the figure:
//
//	Supply + WorkNegative = sum of Steps + Stored + Returned + WorkPositive
//
// What is missing from that by more than 0.5 % of the left side is shown as a
// step of its own.
type StepsCircuit struct {
	Title, Subtitle string
	Supply          float64 // drawn from the mains or by the engine, ≥ 0
	Returned        float64 // fed back to the supply, ≥ 0
	WorkPositive    float64 // done on the load, ≥ 0
	WorkNegative    float64 // received from the load (lowering, braking), magnitude ≥ 0
	Stored          float64 // more in accumulators and flywheels at the end than at the start; may be < 0
	Steps           []Step  // in the order of drawing
}

// LossSteps shows circuits on one scale: each begins at the full width of what
// it draws from the supply and steps down, loss by loss, to the useful work.
type LossSteps struct {
	Circuits []StepsCircuit
	Unit     string
	Format   func(float64) string // writes a value without its unit; nil for 3 significant digits
}

const (
	stepRow      = 22.0  // height of a row
	stepBar      = 17.0  // height of a bar in it
	stepHead     = 26.0  // title line of a circuit
	stepGap      = 16.0  // between circuits
	stepLegend   = 20.0  // line below the axis
	stepMinWidth = 260.0 // below that everything gets smaller
	discRoom     = 11.0  // the disc before the label of a heating loss
)

// stepLine is a row of the figure: a bar from…to on the energy scale.
type stepLine struct {
	label    string
	value    float64
	from, to float64
	kind     Kind
	index    int
	heat     bool
}

// zero replaces what cannot be drawn.
func zero(v float64) float64 {
	if !finite(v) {
		return 0
	}
	return v
}

// lines returns the rows of a circuit, and where its scale must reach.
func (c StepsCircuit) lines() (rows []stepLine, lo, hi float64) {
	at := 0.0 // energy still in the circuit
	add := func(label string, v, change float64, kind Kind, index int, heat bool) {
		rows = append(rows, stepLine{label, v, at, at + change, kind, index, heat})
		at += change
		lo, hi = min(lo, at), max(hi, at)
	}
	supply, returned, stored := zero(c.Supply), math.Abs(zero(c.Returned)), zero(c.Stored)
	work, fromLoad := zero(c.WorkPositive), math.Abs(zero(c.WorkNegative))
	add("drawn from the supply", c.Supply, supply, KindSupply, 0, false)
	if fromLoad > 0 {
		add("received from the load", fromLoad, fromLoad, KindFromLoad, 0, false)
	}
	if stored < 0 {
		add("taken from stores", -stored, -stored, KindStored, 0, false)
	}
	input := at
	for i, s := range c.Steps {
		add(s.Label, s.Value, -zero(s.Value), KindStep, i, s.Heat)
	}
	if stored > 0 {
		add("left in stores", stored, -stored, KindStored, 0, false)
	}
	if returned > 0 {
		add("returned to the supply", returned, -returned, KindReturned, 0, false)
	}
	if rest := at - work; math.Abs(rest) > 0.005*math.Abs(input) {
		add("not accounted for", rest, -rest, KindUnaccounted, 0, false)
	}
	rows = append(rows, stepLine{"work at the load", c.WorkPositive, 0, work, KindWork, 0, false})
	return rows, min(lo, work), max(hi, work)
}

// Height returns the height [figure units] at which nothing has to get smaller.
func (f LossSteps) Height() float64 {
	h := 4 + axisHeight
	for i, c := range f.Circuits {
		rows, _, _ := c.lines()
		h += stepHead + stepRow*float64(len(rows))
		if i > 0 {
			h += stepGap
		}
	}
	if f.heats() {
		h += stepLegend
	}
	return h
}

func (f LossSteps) heats() bool {
	for _, c := range f.Circuits {
		for _, s := range c.Steps {
			if s.Heat {
				return true
			}
		}
	}
	return false
}

// stepsDrawing is what the rows of one figure share.
type stepsDrawing struct {
	LossSteps
	p      pen.Pen
	pal    Palette
	w      float64
	lo, hi float64 // energy at x = 0 and x = w
	out    []Region
}

func (d *stepsDrawing) x(e float64) float64 { return (e - d.lo) / (d.hi - d.lo) * d.w }

// Draw draws the figure into 0…w × 0…h and returns where its rows lie. The bars
// of all circuits have the same scale: the largest energy in any of them is as
// wide as the figure.
func (f LossSteps) Draw(p pen.Pen, w, h float64, pal Palette) []Region {
	k, fw, _, ok := room(w, h, stepMinWidth, f.Height())
	if !ok {
		return nil
	}
	if len(f.Circuits) == 0 {
		empty(p, w, h, "No circuit has been solved yet", pal)
		return nil
	}
	d := &stepsDrawing{LossSteps: f, p: p, pal: pal, w: fw}
	for _, c := range f.Circuits {
		_, lo, hi := c.lines()
		d.lo, d.hi = min(d.lo, lo), max(d.hi, hi)
	}
	if d.hi-d.lo < smallest {
		d.hi = d.lo + 1 // nothing has a width
	}
	p.Push(0, 0, k)
	y := 0.0
	for i, c := range f.Circuits {
		if i > 0 {
			y += stepGap
		}
		y = d.circuit(i, c, y)
	}
	axis(p, 0, fw, y+4, 0, d.lo, d.hi, scaledUnit(thousands(max(-d.lo, d.hi)), f.Unit), pal)
	if f.heats() {
		d.legend(y + 4 + axisHeight)
	}
	p.Pop()
	for i := range d.out {
		r := &d.out[i]
		r.X, r.Y, r.W, r.H = r.X*k, r.Y*k, r.W*k, r.H*k
	}
	return d.out
}

// circuit draws head and rows from y down and returns where they end.
func (d *stepsDrawing) circuit(i int, c StepsCircuit, y float64) float64 {
	base := y + 16
	title := pen.Shorten(c.Title, headSize, true, d.w)
	d.p.Text(pen.Pt{Y: base}, title, headSize, d.pal.Ink, pen.Left, true)
	if left := d.p.TextWidth(title, headSize, true) + 12; c.Subtitle != "" && d.w-left > 40 {
		d.p.Text(pen.Pt{X: left, Y: base}, pen.Shorten(c.Subtitle, smallSize, false, d.w-left), smallSize, d.pal.Secondary, pen.Left, false)
	}
	y += stepHead
	rows, _, _ := c.lines()
	for n, r := range rows {
		d.row(r, y)
		if n+1 < len(rows) { // where the next row begins
			x := max(0.5, min(d.w-0.5, d.x(r.to)))
			hairline(d.p, x, y, x, y+2*stepRow-(stepRow-stepBar), d.pal.Edge)
		}
		d.out = append(d.out, Region{X: 0, Y: y, W: d.w, H: stepRow, Group: i, Kind: r.kind, Index: r.index})
		y += stepRow
	}
	return y
}

// look returns fill and outline of a row.
func (d *stepsDrawing) look(r stepLine) (fill, edge color.NRGBA) {
	switch r.kind {
	case KindSupply:
		return d.pal.Pale, color.NRGBA{}
	case KindWork:
		return d.pal.Gain, color.NRGBA{}
	case KindReturned, KindFromLoad:
		return faded(d.pal.Gain, 40), d.pal.Gain
	case KindStored:
		return faded(d.pal.Bar, 60), d.pal.Bar
	case KindUnaccounted:
		return faded(d.pal.Danger, 40), d.pal.Danger
	}
	if r.heat {
		return d.pal.Heat, color.NRGBA{}
	}
	return d.pal.Bar, color.NRGBA{}
}

// row draws the bar of a row and its label.
func (d *stepsDrawing) row(r stepLine, y float64) {
	x0, x1 := d.x(min(r.from, r.to)), d.x(max(r.from, r.to))
	fill, edge := d.look(r)
	mark := edge
	if edge.A == 0 {
		mark = fill
	}
	if x1 > x0 {
		shape(d.p, x0, y, x1-x0, stepBar, fill)
	}
	switch {
	case x1-x0 < 1: // a step too small for its width still shows where it is
		x := max(0.5, min(d.w-0.5, x0))
		hairline(d.p, x, y, x, y+stepBar, mark)
	case edge.A > 0 && x1-x0 > 2:
		pen.Rect(d.p, x0+0.5, y+0.5, x1-x0-1, stepBar-1, color.NRGBA{}, pen.Stroke{W: 1, C: edge})
		if r.kind == KindReturned || r.kind == KindFromLoad {
			d.arrow(x0, x1, y, r.kind == KindReturned)
		}
	}
	d.label(r, x0, x1, y, fill)
}

// arrow marks what flows back (to the right, where the supply is) and what
// comes in from the load.
func (d *stepsDrawing) arrow(x0, x1, y float64, back bool) {
	if x1-x0 < 18 {
		return
	}
	m, c, dir := (x0+x1)/2, y+stepBar/2, -1.0
	if back {
		dir = 1
	}
	d.p.Polyline([]pen.Pt{{X: m - 4*dir, Y: c - 4}, {X: m + 4*dir, Y: c}, {X: m - 4*dir, Y: c + 4}}, true, d.pal.Gain, pen.Stroke{})
}

// label writes name and value where there is room: left of the bar (inside
// first, for what is drawn from the supply), right of it, in it, the value in it
// and the name beside, or shortened on the wider side.
func (d *stepsDrawing) label(r stepLine, x0, x1, y float64, fill color.NRGBA) {
	const gap = 6
	bold, c := r.kind == KindWork, d.pal.Ink
	if bold {
		c = d.pal.Gain
	}
	lead := 0.0
	if r.heat {
		lead = discRoom
	}
	value := d.value(r.value)
	full := pen.Clean(r.label) + " " + value
	need := d.p.TextWidth(full, textSize, bold) + lead
	left, right, inside := x0-gap, d.w-x1-gap, x1-x0-2*gap
	at := 0.0
	switch {
	case r.kind == KindSupply && inside >= need:
		at, c = x0+gap, d.pal.On(fill)
	case left >= need && r.kind != KindSupply:
		at = x0 - gap - need
	case right >= need:
		at = x1 + gap
	case inside >= need && fill.A == 255:
		at, c = x0+gap, d.pal.On(fill)
		lead = 0 // the bar itself shows that it is heat; no disc on its own colour
	case fill.A == 255 && inside >= d.p.TextWidth(value, textSize, bold) && max(left, right) >= need-d.p.TextWidth(" "+value, textSize, bold):
		d.p.Text(pen.Pt{X: x0 + gap, Y: y + stepBar/2 + capHalf*textSize}, value, textSize, d.pal.On(fill), pen.Left, bold)
		full, need = pen.Clean(r.label), need-d.p.TextWidth(" "+value, textSize, bold)
		if at = x1 + gap; left >= need {
			at = x0 - gap - need
		}
	default:
		full, need = d.short(r.label, value, max(left, right)-lead, bold)
		if at = x1 + gap; left > right {
			at = x0 - gap - need - lead
		}
	}
	mid := y + stepBar/2
	if lead > 0 && full != "" {
		d.p.Circle(pen.Pt{X: at + 3.5, Y: mid}, 3.5, d.pal.Heat, pen.Stroke{})
	}
	d.p.Text(pen.Pt{X: at + lead, Y: mid + capHalf*textSize}, full, textSize, c, pen.Left, bold)
}

// short returns as much of the label as fits before the value, and its width;
// if not even the value fits, as much as fits of both.
func (d *stepsDrawing) short(label, value string, width float64, bold bool) (string, float64) {
	s := pen.Shorten(label, textSize, bold, width-d.p.TextWidth(" "+value, textSize, bold))
	if s = s + " " + value; d.p.TextWidth(s, textSize, bold) > width {
		s = pen.Shorten(value, textSize, bold, width)
	}
	return s, d.p.TextWidth(s, textSize, bold)
}

// value writes a value with its unit.
func (d *stepsDrawing) value(v float64) string { return withUnit(v, d.Format, d.Unit) }

// withUnit writes a value with its unit, "–" for one that is not a number.
func withUnit(v float64, format func(float64) string, unit string) string {
	if !finite(v) {
		return "–"
	}
	if format == nil {
		format = threeDigits
	}
	s := format(v)
	if unit != "" {
		s += " " + unit
	}
	return pen.Clean(s)
}

// threeDigits writes v with three significant digits, but no fewer than its
// whole digits.
func threeDigits(v float64) string {
	if math.Abs(v) < smallest {
		return "0"
	}
	exp := 0
	if a := math.Abs(v); a >= 1e6 || a < 1e-3 {
		exp = 3 * int(math.Floor(math.Log10(a)/3))
		return threeDigits(v/pow10(exp)) + "·" + power(exp)
	}
	return number(v, max(0, 2-int(math.Floor(math.Log10(math.Abs(v))))))
}

// legend says what the disc means.
func (d *stepsDrawing) legend(y float64) {
	s := pen.Shorten("heats the oil", smallSize, false, d.w-14)
	d.p.Circle(pen.Pt{X: 4, Y: y + 9}, 3.5, d.pal.Heat, pen.Stroke{})
	d.p.Text(pen.Pt{X: 14, Y: y + 9 + capHalf*smallSize}, s, smallSize, d.pal.Secondary, pen.Left, false)
}
