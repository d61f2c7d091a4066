package widgets

import (
	"image/color"
	"math"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"

	"barlitre/audit/figures"
	"barlitre/audit/pen"
)

const (
	plotZoomStep = 1.5  // of a key
	plotClosest  = 1e-7 // of the whole axis
)

// takeWindow brings in a plot; what was zoomed to stays as far as the new plot reaches. Lanes keep the range of the whole axis,
// so that they do not jump while the window moves.
func (c *ClockPlot) takeWindow(p figures.Plot) {
	from, to := p.Window()
	at := [2]float64{c.plot.From, c.plot.To}
	c.plot, c.whole = p, [2]float64{from, to}
	if c.Zooms {
		c.plot.Lanes = append([]figures.Lane(nil), p.Lanes...)
		for i := range c.plot.Lanes {
			l := &c.plot.Lanes[i]
			l.Range[0], l.Range[1] = l.Span(from, to)
		}
	}
	c.plot.From, c.plot.To = from, to
	if c.zoomed && at[0] < to && at[1] > from {
		c.look(at[0], at[1])
	} else {
		c.zoomed = false
	}
}

// look moves the window, within the axis.
func (c *ClockPlot) look(from, to float64) {
	whole := c.whole[1] - c.whole[0]
	span := math.Max(plotClosest*whole, to-from)
	if !(span < whole) {
		c.zoomed, c.plot.From, c.plot.To = false, c.whole[0], c.whole[1]
		return
	}
	from = math.Max(c.whole[0], math.Min(c.whole[1]-span, from))
	c.zoomed, c.plot.From, c.plot.To = true, from, from+span
}

// Window is what is shown of the axis.
func (c *ClockPlot) Window() (from, to float64) { return c.plot.From, c.plot.To }

// Look zooms to a stretch of the axis.
func (c *ClockPlot) Look(from, to float64) {
	c.look(from, to)
	c.redraw()
}

// Fit shows the whole axis.
func (c *ClockPlot) Fit() { c.Look(c.whole[0], c.whole[1]) }

// redraw draws another window; all else is as it was.
func (c *ClockPlot) redraw() {
	c.lay()
	c.arrange()
	c.raster.Refresh()
}

// zoomAt enlarges about a place of the axis, which stays where it is.
func (c *ClockPlot) zoomAt(t, factor float64) {
	from, to := c.plot.From, c.plot.To
	c.Look(t-(t-from)/factor, t+(to-t)/factor)
}

// middle is what keys zoom about: the clock where it is seen.
func (c *ClockPlot) middle() float64 {
	if c.clock >= c.plot.From && c.clock <= c.plot.To {
		return c.clock
	}
	return (c.plot.From + c.plot.To) / 2
}

// pan moves the window along the axis.
func (c *ClockPlot) pan(dt float64) {
	if c.zoomed {
		c.Look(c.plot.From+dt, c.plot.To+dt)
	}
}

// panBy is pan by a way of the pointer.
func (c *ClockPlot) panBy(dx float64) {
	if c.area.W > 0 {
		c.pan(dx / float64(Scale()) / c.area.W * (c.area.To - c.area.From))
	}
}

// follow brings the clock into the window when it leaves it.
func (c *ClockPlot) follow() {
	span := c.plot.To - c.plot.From
	switch {
	case !c.zoomed || c.clock >= c.plot.From && c.clock <= c.plot.To || c.clock < c.whole[0] || c.clock > c.whole[1]:
	case c.clock > c.plot.To && c.clock <= c.plot.To+span: // it runs on: turn a page
		c.Look(c.clock-0.1*span, c.clock+0.9*span)
	default:
		c.Look(c.clock-span/2, c.clock+span/2)
	}
}

// Scrolled zooms at the pointer, as on the sheets; with Shift it pans, with Ctrl the page scrolls.
func (c *ClockPlot) Scrolled(ev *fyne.ScrollEvent) {
	dx, dy := limited(ev.Scrolled.DX), limited(ev.Scrolled.DY)
	mod := modifiers()
	switch {
	case c.Zooms && mod&fyne.KeyModifierShift != 0:
		c.panBy(-(dx + dy)) // some systems turn the wheel with Shift themselves
	case c.Zooms && mod&fyne.KeyModifierControl == 0 && len(c.area.Lanes) > 0:
		if dx != 0 {
			c.panBy(-dx)
		}
		if dy != 0 {
			c.zoomAt(c.area.At(float64(ev.Position.X/Scale())), math.Pow(1.006, dy))
		}
	case c.Outer != nil:
		c.Outer(ev)
	}
}

// limited is a step of the wheel; a flick arrives as a huge one.
func limited(d float32) float64 { return math.Max(-200, math.Min(200, float64(d))) }

// modifiers are the keys held now; a wheel does not tell them.
func modifiers() fyne.KeyModifier {
	if d, ok := fyne.CurrentApp().Driver().(desktop.Driver); ok {
		return d.CurrentKeyModifiers()
	}
	return 0
}

// paintWindow shows above the lanes which part of the axis is seen.
func (c *ClockPlot) paintWindow(g pen.Pen, pal figures.Palette) {
	if !c.zoomed || len(c.area.Lanes) == 0 {
		return
	}
	whole := c.whole[1] - c.whole[0]
	x0 := c.area.X + c.area.W*(c.plot.From-c.whole[0])/whole
	w := math.Max(3, c.area.W*(c.plot.To-c.plot.From)/whole)
	pen.Rect(g, c.area.X, 3, c.area.W, 3, pal.Edge, pen.Stroke{})
	pen.Rect(g, math.Min(x0, c.area.X+c.area.W-w), 3, w, 3, pal.Gain, pen.Stroke{C: color.NRGBA{}})
}
