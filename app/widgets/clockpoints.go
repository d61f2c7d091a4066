package widgets

import (
	"image/color"
	"math"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/driver/desktop"

	"barlitre/audit/pen"
)

// PlotPoints are the points of a plot that can be dragged, added and taken out. Places
// are in the units of the plot; errors are shown by who implements it.
type PlotPoints interface {
	Points(lane int) (x, y []float64) // x rises; nil where nothing can be moved
	Move(lane, row int, x, y float64)
	Add(lane int, x, y float64)
	Remove(row int)
	Say(lane int, x, y float64) string // a place in words
}

// held is the point that was touched last.
type heldPoint struct {
	lane, row int
	x, y      float64 // where a drag has brought it
	at        fyne.Position
	dragged   bool
}

// Sizes at scale 1.
const (
	pointSize  = 3.2
	pointReach = 8.0
)

// pointAt finds the point under the pointer.
func (c *ClockPlot) pointAt(at fyne.Position) *heldPoint {
	if c.Points == nil {
		return nil
	}
	k := float64(Scale())
	px, py := float64(at.X)/k, float64(at.Y)/k
	var best *heldPoint
	least := pointReach
	for lane := range c.area.Lanes {
		xs, ys := c.Points.Points(lane)
		for i := range min(len(xs), len(ys)) {
			if xs[i] < c.area.From || xs[i] > c.area.To {
				continue
			}
			if d := math.Hypot(c.area.XAt(xs[i])-px, c.area.YAt(lane, ys[i])-py); d < least {
				least, best = d, &heldPoint{lane: lane, row: i, x: xs[i], y: ys[i], at: at}
			}
		}
	}
	return best
}

// dragPoint moves the touched point to the pointer, on neat numbers, between its
// neighbours; with Shift in the direction of the larger way only.
func (c *ClockPlot) dragPoint(to fyne.Position) {
	h := c.touched
	xs, ys := c.Points.Points(h.lane)
	if h.row >= len(xs) || h.row >= len(ys) {
		c.touched = nil
		return
	}
	k := float64(Scale())
	l := c.area.Lanes[h.lane]
	x := neat(c.area.At(float64(to.X)/k), (c.area.To-c.area.From)/c.area.W)
	y := neat(l.Hi-(float64(to.Y)/k-l.Y)/l.H*(l.Hi-l.Lo), (l.Hi-l.Lo)/l.H)
	if d, ok := fyne.CurrentApp().Driver().(desktop.Driver); ok && d.CurrentKeyModifiers()&fyne.KeyModifierShift != 0 {
		if math.Abs(float64(to.X-h.at.X)) > math.Abs(float64(to.Y-h.at.Y)) {
			y = ys[h.row]
		} else {
			x = xs[h.row]
		}
	}
	if h.row == 0 {
		x = xs[0] // the cycle begins there
	} else {
		x = math.Max(x, xs[h.row-1])
	}
	if h.row+1 < len(xs) {
		x = math.Min(x, xs[h.row+1])
	}
	h.x, h.y, h.dragged = x, y, true
	c.showHeld()
	c.raster.Refresh()
}

// neat is the roundest number within about a pixel: a multiple of 1, 2 or 5 by a power of ten.
func neat(v, pixel float64) float64 {
	if !(pixel > 0) || math.IsInf(pixel, 0) {
		return v
	}
	step := math.Pow(10, math.Floor(math.Log10(pixel)))
	for _, m := range []float64{2, 5, 10} {
		if step*m <= pixel*2 {
			step = math.Max(step, m*math.Pow(10, math.Floor(math.Log10(pixel))))
		}
	}
	n := math.Round(v / step)
	if step < 1 {
		return n / math.Round(1/step)
	}
	return n * step
}

// endPoint hands over where a drag has ended.
func (c *ClockPlot) endPoint() {
	if h := c.touched; h != nil && h.dragged {
		h.dragged = false
		c.Points.Move(h.lane, h.row, h.x, h.y)
	}
	c.hint.hide()
	c.raster.Refresh()
}

// showHeld writes where the dragged point is.
func (c *ClockPlot) showHeld() {
	h, k := c.touched, Scale()
	x, y := float32(c.area.XAt(h.x))*k, float32(c.area.YAt(h.lane, h.y))*k
	c.hint.place(c.Points.Say(h.lane, h.x, h.y), c.Palette(), c.Palette().Ink, x, float32(c.area.X+c.area.W)*k, max(0, y-22*k))
	canvas.Refresh(c)
}

// DoubleTapped adds a point.
func (c *ClockPlot) DoubleTapped(ev *fyne.PointEvent) {
	if c.Points == nil || c.pointAt(ev.Position) != nil {
		return
	}
	k := float64(Scale())
	px, py := float64(ev.Position.X)/k, float64(ev.Position.Y)/k
	for lane, l := range c.area.Lanes {
		if py < l.Y || py > l.Y+l.H || px < c.area.X || px > c.area.X+c.area.W {
			continue
		}
		if xs, _ := c.Points.Points(lane); xs != nil {
			c.Points.Add(lane, neat(c.area.At(px), (c.area.To-c.area.From)/c.area.W),
				neat(l.Hi-(py-l.Y)/l.H*(l.Hi-l.Lo), (l.Hi-l.Lo)/l.H))
		}
		return
	}
}

// removePoint takes the touched point out and reports whether there was one.
func (c *ClockPlot) removePoint() bool {
	h := c.touched
	if h == nil || c.Points == nil {
		return false
	}
	c.touched = nil
	c.Points.Remove(h.row)
	return true
}

// paintPoints draws the points, and the way of the one that is dragged.
func (c *ClockPlot) paintPoints(g pen.Pen) {
	if c.Points == nil {
		return
	}
	pal := c.Palette()
	for lane := range c.area.Lanes {
		xs, ys := c.Points.Points(lane)
		n := min(len(xs), len(ys))
		place := func(i int) pen.Pt { return pen.Pt{X: c.area.XAt(xs[i]), Y: c.area.YAt(lane, ys[i])} }
		for i := range n {
			if xs[i] >= c.area.From && xs[i] <= c.area.To {
				on := c.touched != nil && c.touched.lane == lane && c.touched.row == i
				g.Circle(place(i), pointSize, pick(on, pal.Gain, pal.Card), pen.Stroke{W: 1.2, C: pick(on, pal.Gain, pal.Ink)})
			}
		}
		if h := c.touched; h != nil && h.dragged && h.lane == lane && h.row < n {
			var way []pen.Pt
			if h.row > 0 {
				way = append(way, place(h.row-1))
			}
			at := pen.Pt{X: c.area.XAt(h.x), Y: c.area.YAt(lane, h.y)}
			way = append(way, at)
			if h.row+1 < n {
				way = append(way, place(h.row+1))
			}
			l := c.area.Lanes[lane]
			g.ClipRect(c.area.X-2*pointSize, l.Y-2*pointSize, c.area.W+4*pointSize, l.H+4*pointSize)
			g.Polyline(way, false, color.NRGBA{}, pen.Stroke{W: 1.6, C: pal.Gain, Dash: []float64{4, 3}})
			g.Circle(at, pointSize+1, pal.Gain, pen.Stroke{})
			g.Unclip()
		}
	}
}

func pick(on bool, a, b color.NRGBA) color.NRGBA {
	if on {
		return a
	}
	return b
}
