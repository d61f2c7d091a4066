package figures

import (
	"image/color"
	"math"

	"barlitre/audit/pen"
)

// Series is one line of a lane. X rises; where it does not, or a value is NaN
// or infinite, the line breaks. A point without neighbours is drawn as a dot.
type Series struct {
	Name string
	X, Y []float64 // same length; the longer is cut
	Role Role
	Dash bool // drawn with dashes, the second sign beside the colour
	Fill bool // the area between line and zero is tinted

	Long *Long // in place of X and Y: very many points

	// Base makes a band instead of a line: the area between Y and Base is tinted. As long as X and Y.
	Base []float64
}

// Lane is one track of a plot with its own vertical axis.
type Lane struct {
	Title, Unit string
	Series      []Series
	Zero        bool       // the axis reaches to zero
	Range       [2]float64 // the axis; equal ends for one that fits the data
}

// Phase names a part of the time axis.
type Phase struct {
	Name     string
	From, To float64
}

// Plot shows lanes one below the other over one horizontal axis.
type Plot struct {
	Lanes    []Lane
	Phases   []Phase
	Axis     string // what runs to the right: "time"
	AxisUnit string
	From, To float64 // of the axis; equal for all of the data and phases
}

// LaneArea is where the values of a lane lie: Lo at the lower edge, Hi at the upper.
type LaneArea struct {
	Y, H   float64
	Lo, Hi float64
}

// PlotArea tells where a plot was drawn, for a clock that runs over it, in the
// units the figure was drawn in.
type PlotArea struct {
	X, W     float64
	From, To float64
	Lanes    []LaneArea
}

// XAt returns where the time t lies; it may be outside the plot.
func (a PlotArea) XAt(t float64) float64 { return a.X + (t-a.From)/(a.To-a.From)*a.W }

// At returns the time at x, limited to the axis.
func (a PlotArea) At(x float64) float64 {
	return a.From + max(0, min(1, (x-a.X)/a.W))*(a.To-a.From)
}

// YAt returns where the value v of a lane lies; it may be outside the lane.
func (a PlotArea) YAt(lane int, v float64) float64 {
	l := a.Lanes[lane]
	return l.Y + (l.Hi-v)/(l.Hi-l.Lo)*l.H
}

const (
	plotMinWidth = 240.0
	laneMin      = 42.0 // height of a lane
	laneDefault  = 74.0
	laneGap      = 14.0 // between lanes: room for half a number of each
	phaseRow     = 17.0
	legendRow    = 16.0
	legendSwatch = 20.0
	titleMost    = 120.0
	margin       = 0.04 // free share of the value range above and below
)

// dashes tells series of one lane apart without colour.
var dashes = [4][]float64{nil, {7, 3}, {2, 2.5}, {8, 3, 2, 3}}

// plotLayout is a plot with all places fixed, in figure units.
type plotLayout struct {
	Plot
	p       pen.Pen
	pal     Palette
	w       float64
	titles  float64 // width of the lane titles
	area    PlotArea
	exps    []int        // power of ten taken out of each lane
	legends [][]legendAt // of each lane
	bands   []phaseAt
	bandH   float64
}

// Height returns a height [figure units] at which a plot of width w looks well.
func (f Plot) Height(w float64) float64 {
	return f.fixed(w) + laneDefault*float64(len(f.Lanes))
}

// fixed returns the height that is not lanes, at most.
func (f Plot) fixed(w float64) float64 {
	h := 4 + 8 + axisHeight + laneGap*float64(len(f.Lanes))
	if len(f.Phases) > 0 {
		h += 2 * phaseRow
	}
	for _, l := range f.Lanes {
		h += legendRow * float64(legendRows(layLegend(l, max(40, w-2*titleMost-20))))
	}
	return h
}

// Draw draws the plot into 0…w × 0…h and returns where its lanes lie; the zero
// PlotArea if there is nothing to draw.
func (f Plot) Draw(p pen.Pen, w, h float64, pal Palette) PlotArea {
	_, only := p.(Measure)
	if len(f.Lanes) == 0 {
		if !only && w > 0 && h > 0 && finite(w) && finite(h) {
			empty(p, w, h, "Nothing to plot yet", pal)
		}
		return PlotArea{}
	}
	k, fw, fh, ok := room(w, h, plotMinWidth, f.fixed(max(plotMinWidth, w))+laneMin*float64(len(f.Lanes)))
	if !ok {
		return PlotArea{}
	}
	d := &plotLayout{Plot: f, p: p, pal: pal, w: fw}
	d.lay(fh)
	if only {
		return d.area.scaled(k)
	}
	p.Push(0, 0, k)
	d.phases()
	for i := range f.Lanes {
		d.lane(i)
	}
	d.timeAxis()
	p.Pop()
	return d.area.scaled(k)
}

func (a PlotArea) scaled(k float64) PlotArea {
	a.X, a.W = a.X*k, a.W*k
	for i := range a.Lanes {
		a.Lanes[i].Y *= k
		a.Lanes[i].H *= k
	}
	return a
}

// lay fixes all places for the height h.
func (d *plotLayout) lay(h float64) {
	a := &d.area
	a.From, a.To = d.window()
	d.exps = make([]int, len(d.Lanes))
	a.Lanes = make([]LaneArea, len(d.Lanes))
	for i, l := range d.Lanes {
		a.Lanes[i].Lo, a.Lanes[i].Hi = l.span(a.From, a.To)
		d.exps[i] = thousands(max(math.Abs(a.Lanes[i].Lo), math.Abs(a.Lanes[i].Hi)))
	}
	d.titleColumn()
	// The lanes will be lower than this, so have no more ticks and digits.
	numbers, most := 0.0, max(laneMin, h/float64(len(d.Lanes)))
	for i := range a.Lanes {
		at, dec := d.laneTicks(i, most)
		for _, v := range at {
			numbers = max(numbers, d.p.TextWidth(number(v, dec), smallSize, false))
		}
	}
	a.X = d.titles + numbers + 8
	a.W = max(40, d.w-a.X-12)
	d.layPhases()
	d.layLanes(h)
}

// layLanes shares the height that is left among the lanes.
func (d *plotLayout) layLanes(h float64) {
	free := h - 4 - d.bandH - 8 - axisHeight - laneGap*float64(len(d.Lanes))
	for _, l := range d.Lanes {
		d.legends = append(d.legends, layLegend(l, d.area.W))
		free -= legendRow * float64(legendRows(d.legends[len(d.legends)-1]))
	}
	each := max(laneMin/2, free/float64(len(d.Lanes)))
	y := 4 + d.bandH
	for i := range d.Lanes {
		y += laneGap/2 + legendRow*float64(legendRows(d.legends[i]))
		d.area.Lanes[i].Y, d.area.Lanes[i].H = y, each
		y += each + laneGap/2
	}
}

// titleColumn fixes the width of the titles left of the numbers.
func (d *plotLayout) titleColumn() {
	for i, l := range d.Lanes {
		d.titles = max(d.titles, d.p.TextWidth(l.Title, textSize, false), d.p.TextWidth(d.unit(i), smallSize, false))
	}
	d.titles = min(d.titles, titleMost, 0.22*d.w)
	if d.titles > 0 {
		d.titles += 10
	}
}

// unit returns the unit of a lane with the power of ten taken out.
func (d *plotLayout) unit(i int) string { return scaledUnit(d.exps[i], d.Lanes[i].Unit) }

// Measure is a pen that draws nothing: a plot is only laid out with it.
type Measure struct{ pen.Pen }

// TextWidth is the width of a text.
func (Measure) TextWidth(s string, size float64, bold bool) float64 {
	return pen.TextWidth(s, size, bold)
}

// Window is the range of the horizontal axis, and Span that of a lane over it.
func (f Plot) Window() (from, to float64) { return f.window() }

// Span returns the vertical range of a lane over a window.
func (l Lane) Span(from, to float64) (lo, hi float64) { return l.span(from, to) }

// window returns the range of the horizontal axis, never empty.
func (f Plot) window() (from, to float64) {
	if finite(f.From) && finite(f.To) && f.From < f.To {
		return f.From, f.To
	}
	from, to = math.Inf(1), math.Inf(-1)
	take := func(v float64) {
		if finite(v) {
			from, to = min(from, v), max(to, v)
		}
	}
	for _, ph := range f.Phases {
		take(ph.From)
		take(ph.To)
	}
	for _, l := range f.Lanes {
		for _, s := range l.Series {
			if s.Long != nil && s.Long.Len() > 0 {
				take(s.Long.X.FromSI(s.Long.x[0]))
				take(s.Long.X.FromSI(s.Long.x[s.Long.Len()-1]))
			}
			for i := range min(len(s.X), len(s.Y)) {
				take(s.X[i])
			}
		}
	}
	return widened(from, to, 0)
}

// span returns the range of the vertical axis, never empty.
func (l Lane) span(from, to float64) (lo, hi float64) {
	if a, b := l.Range[0], l.Range[1]; finite(a) && finite(b) && a < b {
		return a, b
	}
	lo, hi = math.Inf(1), math.Inf(-1)
	zero := l.Zero
	for _, s := range l.Series {
		zero = zero || s.Fill
		if s.Long != nil {
			if a, b, ok := s.Long.span(from, to); ok {
				lo, hi = min(lo, a), max(hi, b)
			}
		}
		for i := range min(len(s.X), len(s.Y)) {
			if v := s.Y[i]; finite(v) && s.X[i] >= from && s.X[i] <= to {
				lo, hi = min(lo, v), max(hi, v)
			}
		}
		for i := range min(len(s.X), len(s.Base)) {
			if v := s.Base[i]; finite(v) && s.X[i] >= from && s.X[i] <= to {
				lo, hi = min(lo, v), max(hi, v)
			}
		}
	}
	if zero && lo <= hi {
		lo, hi = min(lo, 0), max(hi, 0)
	}
	return widened(lo, hi, margin)
}

// widened adds a share of the range at both ends. A range without extent, or so
// small beside its values that digits run out, is opened by a tenth of them (by 1
// about zero); no range at all is 0…1.
func widened(lo, hi, share float64) (float64, float64) {
	if !(lo <= hi) {
		return 0, 1
	}
	most := max(math.Abs(lo), math.Abs(hi))
	if most < smallest {
		return -1, 1
	}
	if hi-lo <= 1e-7*most {
		return lo - 0.1*most, hi + 0.1*most
	}
	d := share * (hi - lo)
	return lo - d, hi + d
}

// laneTicks returns the ticks of a lane of height h in labelled numbers.
func (d *plotLayout) laneTicks(i int, h float64) ([]float64, int) {
	l, k := d.area.Lanes[i], pow10(d.exps[i])
	n := int(max(2, min(6, h/20)))
	at, dec := ticks(l.Lo/k, l.Hi/k, n)
	for more := n + 1; len(at) < 2 && more <= 3*n; more++ { // one number gives no scale
		finer, d := ticks(l.Lo/k, l.Hi/k, more)
		if len(finer) > 1 && (finer[1]-finer[0])*k/(l.Hi-l.Lo)*h < smallSize+3 {
			break // they would touch
		}
		at, dec = finer, d
	}
	return at, dec
}

// lane draws one lane.
func (d *plotLayout) lane(i int) {
	l, in, a := d.area.Lanes[i], d.Lanes[i], d.area
	at, dec := d.laneTicks(i, l.H)
	for _, v := range at {
		y := a.YAt(i, v*pow10(d.exps[i]))
		hairline(d.p, a.X, y, a.X+a.W, y, faded(d.pal.Edge, 150))
		d.p.Text(pen.Pt{X: a.X - 6, Y: y + capHalf*smallSize}, number(v, dec), smallSize, d.pal.Secondary, pen.Right, false)
	}
	d.boundaries(l)
	if l.Lo < 0 && l.Hi > 0 {
		y := a.YAt(i, 0)
		hairline(d.p, a.X, y, a.X+a.W, y, d.pal.Secondary)
	}
	d.laneTitle(i, l)
	d.legend(i)
	d.p.ClipRect(a.X-2, l.Y-2, a.W+4, l.H+4)
	for n, s := range in.Series {
		d.series(i, n, s)
	}
	d.p.Unclip()
}

// laneTitle writes name and unit left of the numbers.
func (d *plotLayout) laneTitle(i int, l LaneArea) {
	width := d.titles - 10
	if width <= 0 {
		return
	}
	top := l.Y + l.H/2 - (textSize+smallSize+3)/2
	d.p.Text(pen.Pt{Y: top + textSize*0.85}, pen.Shorten(d.Lanes[i].Title, textSize, false, width), textSize, d.pal.Ink, pen.Left, false)
	d.p.Text(pen.Pt{Y: top + textSize + 3 + smallSize*0.9}, pen.Shorten(d.unit(i), smallSize, false, width), smallSize, d.pal.Secondary, pen.Left, false)
}

// series draws one line of a lane.
func (d *plotLayout) series(i, n int, s Series) {
	if s.Base != nil {
		d.band(i, s)
		return
	}
	a, l := d.area, d.area.Lanes[i]
	c := d.pal.Color(s.Role)
	st := pen.Stroke{W: 1.6, C: c, Dash: d.Lanes[i].dash(n)}
	base := max(l.Y, min(l.Y+l.H, a.YAt(i, 0)))
	if s.Long != nil && s.Long.dense(a.From, a.To, int(a.W)) {
		d.columns(i, s)
		return
	}
	var pieces [][]pen.Pt
	if s.Long != nil {
		pieces = s.Long.runs(a.From, a.To, int(2*a.W))
	} else {
		pieces = runs(s.X, s.Y, a.From, a.To, int(2*a.W))
	}
	for _, run := range pieces {
		pts := make([]pen.Pt, len(run))
		for j, q := range run {
			y := a.YAt(i, q.Y)
			pts[j] = pen.Pt{X: a.XAt(q.X), Y: max(l.Y-1e4, min(l.Y+l.H+1e4, y))}
		}
		if len(pts) == 1 {
			d.p.Circle(pts[0], 2.2, c, pen.Stroke{})
			continue
		}
		if s.Fill {
			under := append([]pen.Pt{{X: pts[0].X, Y: base}}, pts...)
			under = append(under, pen.Pt{X: pts[len(pts)-1].X, Y: base})
			d.p.Polyline(under, true, faded(c, 70), pen.Stroke{})
		}
		d.p.Polyline(pts, false, color.NRGBA{}, st)
	}
}

// columns draws a series that has more points than the picture has columns: as one area from the lowest to the highest value of
// each, at least as thick as a line.
func (d *plotLayout) columns(i int, s Series) {
	a, l := d.area, d.area.Lanes[i]
	const half = 0.8
	n := int(a.W)
	wide := (a.To - a.From) / float64(n) / 2
	for _, run := range s.Long.columns(a.From, a.To, n) {
		for k := 1; k < len(run); k++ { // a line leads from each column to the next
			run[k-1].high = max(run[k-1].high, run[k].low)
			run[k-1].low = min(run[k-1].low, run[k].high)
		}
		pts := make([]pen.Pt, 4*len(run))
		for k, c := range run {
			x0, x1 := a.XAt(c.x-wide), a.XAt(c.x+wide)
			top := max(l.Y-2, min(l.Y+l.H+2, a.YAt(i, c.high)-half))
			low := max(l.Y-2, min(l.Y+l.H+2, a.YAt(i, c.low)+half))
			pts[2*k], pts[2*k+1] = pen.Pt{X: x0, Y: top}, pen.Pt{X: x1, Y: top}
			pts[len(pts)-1-2*k], pts[len(pts)-2-2*k] = pen.Pt{X: x0, Y: low}, pen.Pt{X: x1, Y: low}
		}
		d.p.Polyline(pts, true, d.pal.Color(s.Role), pen.Stroke{})
	}
}

// band tints the area between the two courses of a series; it breaks where either is missing.
func (d *plotLayout) band(i int, s Series) {
	l := d.area.Lanes[i]
	at := func(x, v float64) pen.Pt {
		return pen.Pt{X: d.area.XAt(x), Y: max(l.Y, min(l.Y+l.H, d.area.YAt(i, v)))}
	}
	var upper, lower []pen.Pt
	flush := func() {
		if len(upper) > 1 {
			for j := len(lower) - 1; j >= 0; j-- {
				upper = append(upper, lower[j])
			}
			d.p.Polyline(upper, true, faded(d.pal.Color(s.Role), bandTint), pen.Stroke{})
		}
		upper, lower = nil, nil
	}
	for j := range min(len(s.X), len(s.Y), len(s.Base)) {
		if x := s.X[j]; !finite(x) || !finite(s.Y[j]) || !finite(s.Base[j]) || x < d.area.From || x > d.area.To {
			flush()
			continue
		}
		upper, lower = append(upper, at(s.X[j], s.Y[j])), append(lower, at(s.X[j], s.Base[j]))
	}
	flush()
}

// bandTint is how strongly a band is tinted, of 255.
const bandTint = 80

// dash returns the pattern of series n: the one asked for, else, if several
// share the lane and none asks, one by its position.
func (l Lane) dash(n int) []float64 {
	for _, s := range l.Series {
		if s.Dash {
			if l.Series[n].Dash {
				return dashes[1]
			}
			return nil
		}
	}
	return dashes[n%len(dashes)]
}

// timeAxis draws the numbers below the lowest lane and the name of the axis left
// of them; where that finds no room, the unit follows the last number.
func (d *plotLayout) timeAxis() {
	a, last := d.area, d.area.Lanes[len(d.area.Lanes)-1]
	y, side := last.Y+last.H+8, min(12, d.w-d.area.X-d.area.W)
	title, unit := d.Axis, d.AxisUnit
	if unit = scaledUnit(thousands(max(-a.From, a.To)), unit); unit != "" {
		title += " in " + unit
	}
	if d.p.TextWidth(title, smallSize, false) <= a.X-side-6 {
		d.p.Text(pen.Pt{X: 0, Y: y + 15}, title, smallSize, d.pal.Secondary, pen.Left, false)
		unit = ""
	}
	axis(d.p, a.X, a.X+a.W, y, side, a.From, a.To, unit, d.pal)
}
