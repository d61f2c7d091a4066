package frame

import (
	"fmt"
	"image"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/driver/desktop"

	"barlitre/app/widgets"
	"barlitre/audit/pen"
	"barlitre/machines/units"
)

// Sizes of the clock in the strip [units at scale 1].
const (
	stripPad  = 6  // left of the tracks
	stripFoot = 21 // height of the numbers of the axis
	flagHigh  = 17
	flagText  = 11.0
	flagSide  = 5.0
)

// view is the size at scale 1.
func (c *clockFigure) view() (w, h float64) {
	k := float64(widgets.Scale())
	return float64(c.Size().Width) / k, float64(c.Size().Height) / k
}

// Resize lays the tracks out anew.
func (c *clockFigure) Resize(size fyne.Size) {
	if size != c.Size() {
		c.Figure.Resize(size)
		c.s.lay(c.view())
		c.follow(true)
	}
}

// Refresh draws all anew.
func (c *clockFigure) Refresh() {
	c.s.lay(c.view())
	c.follow(true)
	c.Figure.Refresh()
}

// follow puts the line where the clock is, with the values beside it; they are written
// anew if they are to be read.
func (c *clockFigure) follow(read bool) {
	s, k := c.s, widgets.Scale()
	on := len(s.plot.Lanes) > 0 && s.area.W > 0
	for _, o := range c.Over {
		switch {
		case on && !o.Visible():
			o.Show()
		case !on && o.Visible():
			o.Hide()
		}
	}
	if !on {
		return
	}
	w, h := c.view()
	foot := h - stripFoot
	x := stripPad + s.area.XAt(s.f.clock)
	at := func(x, y float64) fyne.Position { return fyne.NewPos(float32(x)*k, float32(y)*k) }
	size := func(w, h float64) fyne.Size { return fyne.NewSize(float32(w)*k, float32(h)*k) }
	c.line.FillColor = s.f.Palette().Danger
	c.line.Move(at(x-0.7, 8))
	c.line.Resize(size(1.4, foot-8))
	c.head.Move(at(x-5, 1))
	c.head.Resize(size(10, 8))
	if read {
		c.text = pen.Shorten(s.f.Local(s.atClock()), flagText, true, w-s.area.X-20)
	}
	// The values stand over the numbers of the axis: there they hide no phase and no track.
	c.wide = pen.TextWidth(c.text, flagText, true) + 2*flagSide
	left := max(stripPad+s.area.X, min(w-4-c.wide, x-c.wide/2))
	c.flag.Move(at(left, foot))
	c.flag.Resize(size(c.wide, flagHigh))
	hides := s.covering(span{left, left + c.wide})
	c.cover.FillColor = s.f.Palette().Card
	c.cover.Move(at(hides.from, foot))
	c.cover.Resize(size(hides.to-hides.from, flagHigh))
	if read {
		c.flag.Refresh()
	}
	canvas.Refresh(c.line)
}

// paintHead draws the head of the line: a sign beside its colour.
func (c *clockFigure) paintHead(w, h int) image.Image {
	p := pen.NewRaster(image.NewRGBA(image.Rect(0, 0, max(w, 1), max(h, 1))))
	x, y := float64(w), float64(h)
	p.Polyline([]pen.Pt{{X: 0, Y: 0}, {X: x, Y: 0}, {X: x / 2, Y: y}}, true, c.s.f.Palette().Danger, pen.Stroke{})
	return p.Image()
}

// paintFlag writes the values.
func (c *clockFigure) paintFlag(w, h int) image.Image {
	if c.pen == nil || c.pen.Image().Rect.Dx() != w || c.pen.Image().Rect.Dy() != h {
		c.pen = pen.NewRaster(image.NewRGBA(image.Rect(0, 0, max(w, 1), max(h, 1))))
	}
	p, pal := c.pen, c.s.f.Palette()
	p.Reset(p.Image())
	p.Clear(pal.Card)
	k := min(float64(h)/flagHigh, float64(w)/max(c.wide, 1)) // both sides come in whole pixels
	p.Push(0, 0, k)
	pen.RoundRect(p, 0.5, 0.5, float64(w)/k-1, float64(h)/k-1, 3, pal.Ground, pen.Stroke{W: 1, C: pal.Danger})
	p.Text(pen.Pt{X: flagSide, Y: 12.5}, c.text, flagText, pal.Ink, pen.Left, true)
	p.Pop()
	return p.Image()
}

// Parts are the tracks, and the clock where it is.
func (c *clockFigure) Parts() []widgets.Part {
	s, k := c.s, float64(widgets.Scale())
	if len(s.plot.Lanes) == 0 || s.area.W <= 0 {
		return nil
	}
	h := float64(c.Size().Height)
	return []widgets.Part{
		{Name: "tracks", Text: fmt.Sprint(len(s.plot.Lanes)), X: (stripPad + s.area.X) * k, W: s.area.W * k, H: h},
		{Name: "clock", Text: s.f.Local(units.Number(s.f.clock, 4)) + " s", X: (stripPad + s.area.XAt(s.f.clock) - 6) * k, W: 12 * k, H: h, Click: true},
	}
}

// MouseMoved keeps where the pointer is.
func (c *clockFigure) MouseMoved(ev *desktop.MouseEvent) { c.pointer = ev.Position }

// MouseIn is MouseMoved.
func (c *clockFigure) MouseIn(ev *desktop.MouseEvent) { c.MouseMoved(ev) }

// Cursor is a hand over the clock.
func (c *clockFigure) Cursor() desktop.Cursor {
	for _, p := range c.Parts() {
		if x := float64(c.pointer.X); p.Click && x >= p.X && x <= p.X+p.W {
			return desktop.PointerCursor
		}
	}
	return desktop.DefaultCursor
}
