package figures

import (
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
