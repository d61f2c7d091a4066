package figures

import (
	"image/color"
	"slices"
	"sort"
	"strconv"

	"barlitre/audit/pen"
)

// Layer is one area of a stack. Y belongs to the X of its StackLane; negative and
// missing values count as zero.
type Layer struct {
	Name string
	Note string // beside the name in the legend: what it makes in the mean
	Y    []float64
}

// StackLane shows layers on top of each other, the first lowest.
type StackLane struct {
	Title    string
	Note     string // beside the title
	X        []float64
	Layers   []Layer
	Mean     float64 // drawn as a dashed line, with MeanNote; none when it is not above 0
	MeanNote string
}

// Stack shows lanes of stacked areas one below the other, all on one scale.
type Stack struct {
	Lanes    []StackLane
	Unit     string
	Phases   []Phase
	Axis     string
	AxisUnit string
	From, To float64 // of the axis; equal for all of the data and phases
}

const (
	stackHead   = 22.0  // title of a lane
	stackRow    = 16.0  // of the legend
	stackLegend = 0.36  // share of the width for the legend, at most
	stackMost   = 250.0 // of the legend
	stackLeast  = 56.0  // height of a lane
)

// Height returns a height [figure units] at which nothing has to get smaller.
func (f Stack) Height() float64 {
	h := 4 + 8 + axisHeight
	if len(f.Phases) > 0 {
		h += 2 * phaseRow
	}
	each := stackLeast // lanes are equally high
	for _, l := range f.Lanes {
		each = max(each, l.legendHeight())
	}
	return h + float64(len(f.Lanes))*(stackHead+laneGap/2+each)
}

func (l StackLane) legendHeight() float64 {
	n := len(l.Layers)
	if l.Mean > 0 {
		n++
	}
	return stackRow*float64(n) + 6
}

// Draw draws the figure into 0…w × 0…h and returns where its lanes lie; the zero
// PlotArea if there is nothing to draw.
func (f Stack) Draw(p pen.Pen, w, h float64, pal Palette) PlotArea {
	if len(f.Lanes) == 0 {
		if w > 0 && h > 0 && finite(w) && finite(h) {
			empty(p, w, h, "Nothing to plot yet", pal)
		}
		return PlotArea{}
	}
	k, fw, fh, ok := room(w, h, 2*plotMinWidth, f.Height())
	if !ok {
		return PlotArea{}
	}
	d := &stackLayout{Stack: f, sums: make([][][]float64, len(f.Lanes))}
	legend := min(stackMost, stackLegend*fw)
	d.plotLayout = plotLayout{Plot: d.asPlot(), p: p, pal: pal, w: fw - legend}
	d.lay(fh)
	for i := range d.area.Lanes { // room for the titles
		d.area.Lanes[i].Y += stackHead - laneGap/2
		d.area.Lanes[i].H -= stackHead - laneGap/2
	}
	p.Push(0, 0, k)
	d.phases()
	for i := range f.Lanes {
		d.stacked(i, legend)
	}
	d.timeAxis()
	p.Pop()
	return d.area.scaled(k)
}

// stackLayout is a stack with all places fixed, in figure units.
type stackLayout struct {
	plotLayout
	Stack Stack
	sums  [][][]float64 // of each lane: upper edges of the layers
}

// asPlot returns lanes with the sums of the stack, all with one range.
func (d *stackLayout) asPlot() Plot {
	top := 0.0
	for i, l := range d.Stack.Lanes {
		d.sums[i] = l.edges()
		if n := len(d.sums[i]); n > 0 {
			for _, v := range d.sums[i][n-1] {
				top = max(top, v)
			}
		}
		top = max(top, finiteOr0(l.Mean))
	}
	if top <= smallest {
		top = 1
	}
	f := Plot{Phases: d.Stack.Phases, Axis: d.Stack.Axis, AxisUnit: d.Stack.AxisUnit, From: d.Stack.From, To: d.Stack.To}
	for i, l := range d.Stack.Lanes {
		lane := Lane{Unit: d.Stack.Unit, Range: [2]float64{0, top * (1 + margin)}}
		if n := len(d.sums[i]); n > 0 {
			lane.Series = []Series{{X: l.X, Y: d.sums[i][n-1]}}
		}
		f.Lanes = append(f.Lanes, lane)
	}
	return f
}

func finiteOr0(v float64) float64 {
	if finite(v) {
		return v
	}
	return 0
}

// edges adds up the layers.
func (l StackLane) edges() [][]float64 {
	var out [][]float64
	below := make([]float64, len(l.X))
	for _, layer := range l.Layers {
		sum := slices.Clone(below)
		for i := range min(len(sum), len(layer.Y)) {
			sum[i] += max(0, finiteOr0(layer.Y[i]))
		}
		out = append(out, sum)
		below = sum
	}
	return out
}

// layerShares are how far the layers fade from heat towards the ground, from the lowest up.
var layerShares = [...]float64{0, 0.3, 0.52, 0.68, 0.8, 0.88}

func (d *stackLayout) layerColor(k int) color.NRGBA {
	return mixLab(d.pal.Heat, d.pal.Card, layerShares[min(k, len(layerShares)-1)])
}

// stacked draws one lane.
func (d *stackLayout) stacked(i int, legend float64) {
	l, in := d.area.Lanes[i], d.Stack.Lanes[i]
	title := pen.Shorten(in.Title, textSize, true, 0.7*d.w)
	d.p.Text(pen.Pt{X: 0, Y: l.Y - 7}, title, textSize, d.pal.Ink, pen.Left, true)
	x := d.p.TextWidth(title, textSize, true) + 10
	d.p.Text(pen.Pt{X: x, Y: l.Y - 7}, pen.Shorten(in.Note, smallSize, false, d.w+legend-x), smallSize, d.pal.Secondary, pen.Left, false)
	d.scale(i)
	d.boundaries(l)
	d.p.ClipRect(d.area.X, l.Y-2, d.area.W, l.H+4)
	for k := range d.sums[i] {
		d.layer(i, k)
	}
	if in.Mean > 0 && finite(in.Mean) {
		y := d.area.YAt(i, in.Mean)
		pen.Line(d.p, pen.Pt{X: d.area.X, Y: y}, pen.Pt{X: d.area.X + d.area.W, Y: y}, pen.Stroke{W: 1.4, C: d.pal.Ink, Dash: dashes[1]})
	}
	d.p.Unclip()
	d.layerLegend(i, legend)
}

// scale draws the vertical axis of a lane.
func (d *stackLayout) scale(i int) {
	l, a := d.area.Lanes[i], d.area
	at, dec := d.laneTicks(i, l.H)
	for _, v := range at {
		y := a.YAt(i, v*pow10(d.exps[i]))
		hairline(d.p, a.X, y, a.X+a.W, y, faded(d.pal.Edge, 150))
		d.p.Text(pen.Pt{X: a.X - 6, Y: y + capHalf*smallSize}, number(v, dec), smallSize, d.pal.Secondary, pen.Right, false)
	}
	d.laneTitle(i, l)
}

// layer fills the area of one layer and writes its number where it is thickest.
func (d *stackLayout) layer(i, k int) {
	in, a := d.Stack.Lanes[i], d.area
	point := func(j int, edge int) pen.Pt {
		v := 0.0
		if edge >= 0 {
			v = d.sums[i][edge][j]
		}
		return pen.Pt{X: max(-1e4, min(1e4, a.XAt(in.X[j]))), Y: a.YAt(i, v)}
	}
	var top, low []pen.Pt
	for j := range in.X {
		if finite(in.X[j]) {
			top, low = append(top, point(j, k)), append(low, point(j, k-1))
		}
	}
	if len(top) < 2 {
		return
	}
	at, room := thickest(top, low)
	slices.Reverse(low)
	fill := d.layerColor(k)
	d.p.Polyline(append(slices.Clone(top), low...), true, fill, pen.Stroke{})
	edge := d.pal.Card
	if k == len(d.sums[i])-1 {
		edge = d.pal.Ink
	}
	d.p.Polyline(top, false, color.NRGBA{}, pen.Stroke{W: 0.8, C: edge})
	if s := strconv.Itoa(k + 1); room && at.X > a.X+6 && at.X < a.X+a.W-6 {
		d.p.Text(pen.Pt{X: at.X, Y: at.Y + capHalf*smallSize}, s, smallSize, d.pal.On(fill), pen.Center, true)
	}
}

// thickest returns the middle of the longest stretch in which there is room for a number.
func thickest(top, low []pen.Pt) (at pen.Pt, ok bool) {
	const high, wide = smallSize + 3, 13.0
	best := wide
	begin := -1
	for j := range top {
		thick := low[j].Y-top[j].Y > high
		if thick && begin < 0 {
			begin = j
		}
		if begin >= 0 && (!thick || j == len(top)-1) {
			end := j
			if !thick {
				end--
			}
			if w := top[end].X - top[begin].X; w > best {
				best, ok = w, true
				at = middle(top[begin:end+1], low[begin:end+1])
			}
			begin = -1
		}
	}
	return at, ok
}

// middle returns the point half way along and half way up between two lines.
func middle(top, low []pen.Pt) pen.Pt {
	x := (top[0].X + top[len(top)-1].X) / 2
	j := max(1, sort.Search(len(top)-1, func(i int) bool { return top[i].X >= x }))
	a := pen.Pt{X: top[j-1].X, Y: (top[j-1].Y + low[j-1].Y) / 2}
	b := pen.Pt{X: top[j].X, Y: (top[j].Y + low[j].Y) / 2}
	if b.X <= a.X {
		return b
	}
	return between(a, b, x)
}

// layerLegend names the layers right of a lane, the uppermost first.
func (d *stackLayout) layerLegend(i int, width float64) {
	in := d.Stack.Lanes[i]
	x, y := d.w+2, d.area.Lanes[i].Y
	row := func(name, note string, mark func(mid float64)) {
		mid := y + stackRow/2
		mark(mid)
		nw := d.p.TextWidth(note, smallSize, false)
		d.p.Text(pen.Pt{X: x + 24, Y: mid + capHalf*smallSize}, pen.Shorten(name, smallSize, false, width-34-nw), smallSize, d.pal.Ink, pen.Left, false)
		d.p.Text(pen.Pt{X: d.w + width, Y: mid + capHalf*smallSize}, note, smallSize, d.pal.Ink, pen.Right, false)
		y += stackRow
	}
	if in.Mean > 0 && finite(in.Mean) {
		row("mean of the cycle", in.MeanNote, func(mid float64) {
			pen.Line(d.p, pen.Pt{X: x, Y: mid}, pen.Pt{X: x + 18, Y: mid}, pen.Stroke{W: 1.4, C: d.pal.Ink, Dash: dashes[1]})
		})
	}
	for k := len(in.Layers) - 1; k >= 0; k-- {
		fill := d.layerColor(k)
		row(in.Layers[k].Name, pen.Shorten(in.Layers[k].Note, smallSize, false, 0.45*width), func(mid float64) {
			pen.Rect(d.p, x, mid-6, 18, 12, fill, pen.Stroke{W: 0.6, C: d.pal.Edge})
			d.p.Text(pen.Pt{X: x + 9, Y: mid + capHalf*9.5}, strconv.Itoa(k+1), 9.5, d.pal.On(fill), pen.Center, true)
		})
	}
}
