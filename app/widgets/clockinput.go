package widgets

import (
	"math"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"
)

// MouseDown moves the clock.
func (c *ClockPlot) MouseDown(ev *desktop.MouseEvent) {
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
func (c *ClockPlot) MouseUp(*desktop.MouseEvent) { c.held = false }

// Dragged moves the clock on.
func (c *ClockPlot) Dragged(ev *fyne.DragEvent) {
	switch {
	case c.touched != nil:
		c.dragPoint(ev.Position)
	case c.held:
		c.to(ev.Position)
	}
}

// DragEnd lets the clock go.
func (c *ClockPlot) DragEnd() {
	c.held = false
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

// TypedRune is for text; a plot takes none.
func (c *ClockPlot) TypedRune(rune) {}

// TypedKey moves the clock: arrows by 1/200 of what is shown, page keys by a twentieth.
func (c *ClockPlot) TypedKey(k *fyne.KeyEvent) {
	if (k.Name == fyne.KeyDelete || k.Name == fyne.KeyBackspace) && c.removePoint() {
		return
	}
	if passHelp(c, k) || c.Moved == nil || len(c.area.Lanes) == 0 {
		return
	}
	span := c.area.To - c.area.From
	to := map[fyne.KeyName]float64{fyne.KeyLeft: c.clock - span/200, fyne.KeyRight: c.clock + span/200,
		fyne.KeyPageUp: c.clock - span/20, fyne.KeyPageDown: c.clock + span/20, fyne.KeyHome: c.area.From, fyne.KeyEnd: c.area.To}
	if t, ok := to[k.Name]; ok {
		c.Moved(math.Max(c.area.From, math.Min(c.area.To, t)))
	}
}
