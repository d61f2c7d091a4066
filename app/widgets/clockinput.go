package widgets

import (
	"math"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"
)

// MouseDown moves the clock.
func (c *ClockPlot) MouseDown(ev *desktop.MouseEvent) {
	if ev.Button == desktop.MouseButtonTertiary && c.zoomed {
		c.panned = &ev.Position.X
		return
	}
	if ev.Button != desktop.MouseButtonPrimary {
		return
	}
	if cv := fyne.CurrentApp().Driver().CanvasForObject(c); cv != nil {
		cv.Focus(c)
	}
	if c.touched = c.pointAt(ev.Position); c.touched != nil {
		c.raster.Refresh()
		return
	}
	c.held = true
	c.to(ev.Position)
}

// MouseUp lets the clock go.
func (c *ClockPlot) MouseUp(*desktop.MouseEvent) { c.held, c.panned = false, nil }

// Dragged moves the clock on.
func (c *ClockPlot) Dragged(ev *fyne.DragEvent) {
	switch {
	case c.panned != nil:
		x := ev.Position.X
		c.panBy(float64(*c.panned - x))
		c.panned = &x
	case c.touched != nil:
		c.dragPoint(ev.Position)
	case c.held:
		c.to(ev.Position)
	}
}

// DragEnd lets the clock go.
func (c *ClockPlot) DragEnd() {
	c.held, c.panned = false, nil
	c.endPoint()
}

func (c *ClockPlot) to(at fyne.Position) {
	if c.Moved != nil && len(c.area.Lanes) > 0 {
		c.Moved(c.area.At(float64(at.X / Scale())))
	}
}

// Cursor tells that the clock can be moved sideways.
func (c *ClockPlot) Cursor() desktop.Cursor { return desktop.HResizeCursor }

// FocusGained and FocusLost show where the keys go.
func (c *ClockPlot) FocusGained() { c.focused = true; c.raster.Refresh() }

// FocusLost is the end of it.
func (c *ClockPlot) FocusLost() { c.focused = false; c.raster.Refresh() }

// TypedRune zooms: + and − about the clock, F or 0 shows all.
func (c *ClockPlot) TypedRune(r rune) {
	switch {
	case !c.Zooms:
	case r == '+':
		c.zoomAt(c.middle(), plotZoomStep)
	case r == '-':
		c.zoomAt(c.middle(), 1/plotZoomStep)
	case r == 'f' || r == 'F' || r == '0':
		c.Fit()
	}
}

// TypedKey moves the clock: arrows by 1/200 of what is shown, page keys by a twentieth; with Shift the arrows pan.
func (c *ClockPlot) TypedKey(k *fyne.KeyEvent) {
	if (k.Name == fyne.KeyDelete || k.Name == fyne.KeyBackspace) && c.removePoint() {
		return
	}
	if passHelp(c, k) || c.Moved == nil || len(c.area.Lanes) == 0 {
		return
	}
	span := c.area.To - c.area.From
	if shift := modifiers()&fyne.KeyModifierShift != 0; shift && c.zoomed && (k.Name == fyne.KeyLeft || k.Name == fyne.KeyRight) {
		c.pan(map[fyne.KeyName]float64{fyne.KeyLeft: -span / 10, fyne.KeyRight: span / 10}[k.Name])
		return
	}
	to := map[fyne.KeyName]float64{fyne.KeyLeft: c.clock - span/200, fyne.KeyRight: c.clock + span/200,
		fyne.KeyPageUp: c.clock - span/20, fyne.KeyPageDown: c.clock + span/20, fyne.KeyHome: c.whole[0], fyne.KeyEnd: c.whole[1]}
	if t, ok := to[k.Name]; ok {
		c.Moved(math.Max(c.whole[0], math.Min(c.whole[1], t)))
	}
}
