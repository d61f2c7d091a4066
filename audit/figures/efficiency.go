package figures

import (
	"image/color"
	"math"

	"barlitre/audit/pen"
)

// MapPoint is a state in a map; its disc has an area by its weight. One that lies off the map, at another setting or speed,
// is hollow.
type MapPoint struct {
	X, Y, Weight float64
	Off          bool
}

// EfficiencyMap shows the efficiency of a machine over two quantities as contours, with the states it is in drawn on it.
type EfficiencyMap struct {
	Title, Subtitle  string
	X, Y             string                     // "speed"
	XUnit, YUnit     string                     // "rpm"
	FromX, ToX, ToY  float64                    // in these units; Y begins at 0
	At               func(x, y float64) float64 // efficiency 0…1, NaN where there is none
	Inside           func(x, y float64) bool    // whether it was measured there; nil where nothing was
	Points           []MapPoint
	PointsAre        string    // for the legend: "duty, area by energy"
	OffAre           string    // "at another setting"
	LimitsX, LimitsY []float64 // of the machine; NaN for none
}

const (
	mapMinWidth  = 280.0
	mapMinHeight = 220.0
	mapHead      = 40.0 // title and subtitle
	mapFoot      = 34.0 // legend below the axis, two lines
	mapColumns   = 64   // cells of the grid
	mapRows      = 48
	mapDisc      = 13.0 // radius of the largest disc
)

// mapLevels are the contours, in percent.
var mapLevels = []float64{20, 40, 50, 60, 70, 75, 80, 84, 86, 88, 90, 91, 92, 93, 94, 95, 96, 97}

// mapLayout is a map with its places.
type mapLayout struct {
	EfficiencyMap
	p          pen.Pen
	pal        Palette
	x, y, w, h float64
	grid       [][]float64 // percent, by row and column, from the lower left corner
	top        float64     // best efficiency, percent
	low        float64     // where the tint begins
	labels     [][4]float64
}

// Height returns a height [figure units] at which a map of width w looks well.
func (f EfficiencyMap) Height(w float64) float64 {
	return max(mapMinHeight, mapHead+axisHeight+mapFoot+0.6*w)
}

// Draw draws the map into 0…w × 0…h and returns where its axes lie; the zero PlotArea if there is nothing to draw. The one
// lane of the area is the vertical axis.
func (f EfficiencyMap) Draw(p pen.Pen, w, h float64, pal Palette) PlotArea {
	k, fw, fh, ok := room(w, h, mapMinWidth, mapMinHeight)
	if !ok {
		return PlotArea{}
	}
	if f.At == nil || !(f.ToX > f.FromX && f.ToY > 0) || !finite(f.ToX) || !finite(f.ToY) {
		empty(p, w, h, "No map of this machine yet", pal)
		return PlotArea{}
	}
	d := &mapLayout{EfficiencyMap: f, p: p, pal: pal}
	p.Push(0, 0, k)
	d.lay(fw, fh)
	d.tint()
	for _, level := range mapLevels {
		if level > d.low && level < d.top {
			d.contour(level)
		}
	}
	d.limits()
	d.points()
	d.frame()
	p.Pop()
	area := PlotArea{X: d.x, W: d.w, From: f.FromX, To: f.ToX, Lanes: []LaneArea{{Y: d.y, H: d.h, Lo: 0, Hi: f.ToY}}}
	return area.scaled(k)
}

// lay fixes the places and samples the map.
func (d *mapLayout) lay(w, h float64) {
	d.x, d.y = 44, mapHead
	d.w = w - d.x - 14
	d.h = h - mapHead - axisHeight - mapFoot - 4 - legendStep*float64(max(0, len(d.legendLines(d.x+d.w))-2))
	d.grid = make([][]float64, mapRows+1)
	for j := range d.grid {
		d.grid[j] = make([]float64, mapColumns+1)
		for i := range d.grid[j] {
			x := d.FromX + (d.ToX-d.FromX)*float64(i)/mapColumns
			y := d.ToY * float64(j) / mapRows
			v := 100 * d.At(x, y)
			d.grid[j][i] = v
			if v > d.top {
				d.top = v
			}
		}
	}
	d.low = max(0, d.top-60)
}

func (d *mapLayout) px(x float64) float64 { return d.x + (x-d.FromX)/(d.ToX-d.FromX)*d.w }
func (d *mapLayout) py(y float64) float64 { return d.y + d.h - y/d.ToY*d.h }

// place returns the point of a grid index that need not be whole.
func (d *mapLayout) place(i, j float64) pen.Pt {
	return pen.Pt{X: d.x + i/mapColumns*d.w, Y: d.y + d.h - j/mapRows*d.h}
}

// tint fills the cells: the better, the stronger. Cells of one row and tint are one shape, so that no seams show.
func (d *mapLayout) tint() {
	shape(d.p, d.x, d.y, d.w, d.h, faded(d.pal.Edge, 60))
	for j := range mapRows {
		for i := 0; i < mapColumns; {
			c, ok := d.cell(i, j)
			k := i + 1
			for k < mapColumns {
				if next, also := d.cell(k, j); next != c || also != ok {
					break
				}
				k++
			}
			if ok {
				a, b := d.place(float64(i), float64(j+1)), d.place(float64(k), float64(j))
				shape(d.p, a.X, a.Y, b.X-a.X, b.Y-a.Y, c)
			}
			i = k
		}
	}
}

// cell is the tint of a cell in steps of 2 points; ok is false where the machine gives no power.
func (d *mapLayout) cell(i, j int) (color.NRGBA, bool) {
	v := (d.grid[j][i] + d.grid[j+1][i] + d.grid[j][i+1] + d.grid[j+1][i+1]) / 4
	if math.IsNaN(v) {
		return color.NRGBA{}, false
	}
	share := math.Floor(max(0, v-d.low)/2) * 2 / max(1, d.top-d.low)
	depth := 0.05 + 0.5*share*share
	if d.Inside != nil && !d.Inside(d.FromX+(d.ToX-d.FromX)*(float64(i)+0.5)/mapColumns, d.ToY*(float64(j)+0.5)/mapRows) {
		depth *= 0.35
	}
	return mixLab(d.pal.Card, d.pal.Gain, depth), true
}

// contour draws the line of one efficiency, cell by cell, and writes it once.
func (d *mapLayout) contour(level float64) {
	st := pen.Stroke{W: 1, C: d.pal.Ink}
	var best pen.Pt
	found := math.Inf(-1)
	for j := range mapRows {
		for i := range mapColumns {
			for _, s := range d.crossings(i, j, level) {
				pen.Line(d.p, s[0], s[1], st)
				// its number goes where the line is highest and still well inside
				m := pen.Pt{X: (s[0].X + s[1].X) / 2, Y: (s[0].Y + s[1].Y) / 2}
				if score := m.X - d.x + (d.y + d.h - m.Y); score > found && m.X < d.x+d.w-24 && m.X > d.x+24 && m.Y > d.y+14 && m.Y < d.y+d.h-14 && d.clear(m) {
					found, best = score, m
				}
			}
		}
	}
	if !math.IsInf(found, -1) {
		d.write(level, best)
	}
}

const levelGap = 26.0

// clear reports whether a number finds room at a point.
func (d *mapLayout) clear(m pen.Pt) bool {
	for _, l := range d.labels {
		if math.Abs(l[0]-m.X) < levelGap && math.Abs(l[1]-m.Y) < smallSize+3 {
			return false
		}
	}
	return true
}

func (d *mapLayout) write(level float64, m pen.Pt) {
	s := number(level, 0)
	w := d.p.TextWidth(s, smallSize, false)
	shape(d.p, m.X-w/2-2, m.Y-smallSize/2-1, w+4, smallSize+2, d.pal.Card)
	d.p.Text(pen.Pt{X: m.X, Y: m.Y + capHalf*smallSize}, s, smallSize, d.pal.Ink, pen.Center, false)
	d.labels = append(d.labels, [4]float64{m.X, m.Y})
}

// crossings are the pieces of a contour in a cell: marching squares.
func (d *mapLayout) crossings(i, j int, level float64) [][2]pen.Pt {
	v := [4]float64{d.grid[j][i], d.grid[j][i+1], d.grid[j+1][i+1], d.grid[j+1][i]}
	at := [4][2]float64{{0, 0}, {1, 0}, {1, 1}, {0, 1}}
	var pts []pen.Pt
	for k := range 4 {
		a, b := v[k], v[(k+1)%4]
		if math.IsNaN(a) || math.IsNaN(b) {
			return nil
		}
		if (a < level) == (b < level) {
			continue
		}
		t := (level - a) / (b - a)
		p, q := at[k], at[(k+1)%4]
		pts = append(pts, d.place(float64(i)+p[0]+t*(q[0]-p[0]), float64(j)+p[1]+t*(q[1]-p[1])))
	}
	var out [][2]pen.Pt
	for k := 0; k+1 < len(pts); k += 2 {
		out = append(out, [2]pen.Pt{pts[k], pts[k+1]})
	}
	return out
}
