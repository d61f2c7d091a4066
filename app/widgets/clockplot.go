package widgets

import (
	"fmt"
	"image"
	"image/color"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/widget"

	"barlitre/audit/figures"
	"barlitre/audit/pen"
)

// ClockPlot is a plot over time with the clock on it: a line that a click or a drag
// moves, and the values at it. Only the line is redrawn when the clock moves.
type ClockPlot struct {
	widget.BaseWidget
	Palette func() figures.Palette
	Moved   func(t float64)                  // the user moved the clock
	Value   func(lane int, t float64) string // what stands beside the line; nil = nothing
	Format  func(t float64) string           // the clock in words, above the line; nil = none
	Points  PlotPoints                       // that can be dragged; nil = none
	Zooms   bool                             // wheel and keys zoom and pan
	Outer   func(*fyne.ScrollEvent)          // takes the wheel where it does not zoom; may be nil
	plot    figures.Plot                     // as it is shown: the window is what was zoomed to
	whole   [2]float64                       // of the axis
	zoomed  bool
	panned  *float32         // where a drag that pans has come to
	area    figures.PlotArea // at scale 1
	clock   float64
	min     fyne.Size
	raster  *canvas.Raster
	line    *canvas.Rectangle
	mark    *canvas.Raster
	flags   []*flag
	drawn   *pen.Raster
	reads   bool // the values beside the line are of where it is
	held    bool
	focused bool
	touched *heldPoint
	hint    *flag // beside the point that is dragged
}

// flag is a value beside the clock line: its ground, so that lines of the plot do
// not strike it through, and its text.
type flag struct {
	ground *canvas.Rectangle
	text   *canvas.Text
}

// NewClockPlot makes an empty plot with a least size.
func NewClockPlot(min fyne.Size, palette func() figures.Palette) *ClockPlot {
	c := &ClockPlot{Palette: palette, min: min, line: canvas.NewRectangle(color.Black), hint: newFlag()}
	c.hint.hide()
	c.raster = canvas.NewRaster(c.paint)
	c.raster.ScaleMode = canvas.ImageScalePixels
	c.mark = canvas.NewRaster(c.paintMark)
	c.ExtendBaseWidget(c)
	return c
}

// SetPlot brings in a plot.
func (c *ClockPlot) SetPlot(p figures.Plot) {
	c.flags = nil
	c.takeWindow(p)
	if c.touched != nil && c.touched.lane >= len(p.Lanes) {
		c.touched = nil
	}
	for range p.Lanes {
		c.flags = append(c.flags, newFlag())
	}
	c.flags = append(c.flags, newFlag()) // of the clock
	c.Refresh()
}

func newFlag() *flag {
	return &flag{canvas.NewRectangle(color.Transparent), canvas.NewText("", color.Black)}
}

// SetClock moves the clock.
func (c *ClockPlot) SetClock(t float64) {
	if t != c.clock || !c.reads {
		c.clock, c.reads = t, true
		c.follow()
		c.arrange()
	}
}

// MoveClock moves the line of the clock, and takes the values beside it along as they are.
func (c *ClockPlot) MoveClock(t float64) {
	if t != c.clock {
		c.clock, c.reads = t, false
		c.follow()
		c.arrange()
	}
}

// Height is the height at which the plot looks well at a width, in units of the widget.
func (c *ClockPlot) Height(width float32) float32 {
	k := Scale()
	return float32(c.plot.Height(float64(width/k))) * k
}

// SetMin changes the least size, at scale 1.
func (c *ClockPlot) SetMin(min fyne.Size) {
	if c.min != min {
		c.min = min
		c.BaseWidget.Refresh()
	}
}

// view is the size at scale 1.
func (c *ClockPlot) view() (w, h float64) {
	k := float64(Scale())
	return float64(c.Size().Width) / k, float64(c.Size().Height) / k
}

// lay finds where the lanes lie.
func (c *ClockPlot) lay() {
	w, h := c.view()
	c.area = c.plot.Draw(figures.Measure{}, w, h, c.Palette())
}

func (c *ClockPlot) paint(w, h int) image.Image {
	PlotFrames.Add(1)
	if c.drawn == nil || c.drawn.Image().Rect.Dx() != w || c.drawn.Image().Rect.Dy() != h {
		c.drawn = pen.NewRaster(image.NewRGBA(image.Rect(0, 0, max(w, 1), max(h, 1))))
	}
	c.drawn.Reset(c.drawn.Image())
	p := c.Palette()
	c.drawn.Clear(p.Card)
	if vw, vh := c.view(); vw > 0 && vh > 0 {
		c.drawn.Push(0, 0, float64(w)/vw)
		c.plot.Draw(c.drawn, vw, vh, p)
		c.paintPoints(c.drawn)
		c.paintWindow(c.drawn, p)
		if c.focused {
			focusFrame(c.drawn, p, vw, vh)
		}
		c.drawn.Pop()
	}
	return c.drawn.Image()
}

// paintMark draws the head of the clock line: a sign beside its colour.
func (c *ClockPlot) paintMark(w, h int) image.Image {
	img := pen.NewRaster(image.NewRGBA(image.Rect(0, 0, max(w, 1), max(h, 1))))
	x, y := float64(w), float64(h)
	img.Polyline([]pen.Pt{{X: 0, Y: 0}, {X: x, Y: 0}, {X: x / 2, Y: y}}, true, c.Palette().Danger, pen.Stroke{})
	return img.Image()
}

// arrange puts the line and its values where the clock is.
func (c *ClockPlot) arrange() {
	p := c.Palette()
	k := Scale()
	a := c.area
	on := len(a.Lanes) > 0 && c.clock >= a.From && c.clock <= a.To
	Show(c.line, on)
	Show(c.mark, on)
	if !on {
		for _, f := range c.flags {
			f.hide()
		}
		return
	}
	x := float32(a.XAt(c.clock)) * k
	top, last := float32(a.Lanes[0].Y)*k, a.Lanes[len(a.Lanes)-1]
	bottom := float32(last.Y+last.H) * k
	c.line.FillColor = p.Danger
	c.line.Move(fyne.NewPos(x-0.75, top-2*k))
	c.line.Resize(fyne.NewSize(1.5, bottom-top+6*k))
	c.mark.Move(fyne.NewPos(x-4*k, top-3*k)) // in the lane: above it stand the names of its lines
	c.mark.Resize(fyne.NewSize(8*k, 6*k))
	right := float32(a.X+a.W) * k
	for i := range a.Lanes {
		f := c.flags[i]
		text := f.text.Text
		if c.reads {
			text = ""
			if c.Value != nil {
				text = c.Value(i, c.clock)
			}
		}
		f.place(text, p, p.Ink, x, right, float32(a.Lanes[i].Y+2)*k)
	}
	f := c.flags[len(c.flags)-1]
	text := f.text.Text
	if c.reads {
		text = ""
		if c.Format != nil {
			text = c.Format(c.clock)
		}
	}
	f.place(text, p, p.Danger, x, right, bottom+9*k)
}

func (f *flag) hide() {
	Show(f.text, false)
	Show(f.ground, false)
}

// place writes a value right of the line, or left where there is no room.
func (f *flag) place(text string, p figures.Palette, ink color.Color, x, right, y float32) {
	if text == "" {
		f.hide()
		return
	}
	k := Scale()
	if size := tableSmall * k; f.text.Text != text || f.text.TextSize != size || f.text.Color != ink {
		f.text.Text, f.text.TextSize, f.text.Color, f.text.TextStyle = text, size, ink, fyne.TextStyle{Bold: true}
		canvas.Refresh(f.text)
	}
	if ground := faint(p.Card, 225); f.ground.FillColor != ground {
		f.ground.FillColor = ground
		canvas.Refresh(f.ground)
	}
	size := f.text.MinSize()
	at := x + 5*k
	if at+size.Width > right {
		at = max(2*k, x-5*k-size.Width)
	}
	f.text.Move(fyne.NewPos(at, y))
	f.text.Resize(size)
	f.ground.Move(fyne.NewPos(at-2*k, y))
	f.ground.Resize(fyne.NewSize(size.Width+4*k, size.Height))
	Show(f.text, true)
	Show(f.ground, true)
}

// Parts are the lanes, each with its value at the clock, for scripts.
func (c *ClockPlot) Parts() []Part {
	var out []Part
	k := float64(Scale())
	for i, l := range c.area.Lanes {
		text := ""
		if c.Value != nil {
			text = c.Value(i, c.clock)
		}
		out = append(out, Part{Name: c.plot.Lanes[i].Title, Text: text, X: c.area.X * k, Y: l.Y * k, W: c.area.W * k, H: l.H * k, Click: true})
	}
	if c.Points == nil {
		return out
	}
	for i := range c.area.Lanes { // points as "lane/row"
		xs, ys := c.Points.Points(i)
		for r := range min(len(xs), len(ys)) {
			if xs[r] >= c.area.From && xs[r] <= c.area.To {
				out = append(out, Part{Name: fmt.Sprintf("%s/%d", c.plot.Lanes[i].Title, r), Text: c.Points.Say(i, xs[r], ys[r]),
					X: (c.area.XAt(xs[r]) - pointSize) * k, Y: (c.area.YAt(i, ys[r]) - pointSize) * k, W: 2 * pointSize * k, H: 2 * pointSize * k})
			}
		}
	}
	return out
}

// DumpText is the clock, for scripts.
func (c *ClockPlot) DumpText() string {
	if c.Format == nil {
		return ""
	}
	return c.Format(c.clock)
}

// MinSize is the least size.
func (c *ClockPlot) MinSize() fyne.Size {
	return fyne.NewSize(c.min.Width*Scale(), c.min.Height*Scale())
}

// Resize lays the plot out anew.
func (c *ClockPlot) Resize(s fyne.Size) {
	if s != c.Size() {
		c.BaseWidget.Resize(s)
		c.reads = true
		c.lay()
		c.arrange()
	}
}

// Refresh draws anew.
func (c *ClockPlot) Refresh() {
	c.reads = true
	c.lay()
	c.arrange()
	c.raster.Refresh()
	c.mark.Refresh()
	c.BaseWidget.Refresh()
}

// CreateRenderer is for the toolkit.
func (c *ClockPlot) CreateRenderer() fyne.WidgetRenderer { return &clockRenderer{c} }

type clockRenderer struct{ c *ClockPlot }

func (r *clockRenderer) Layout(size fyne.Size) { r.c.raster.Resize(size); r.c.arrange() }
func (r *clockRenderer) MinSize() fyne.Size    { return r.c.MinSize() }
func (r *clockRenderer) Refresh()              {}
func (r *clockRenderer) Destroy()              {}
func (r *clockRenderer) Objects() []fyne.CanvasObject {
	out := []fyne.CanvasObject{r.c.raster, r.c.line, r.c.mark}
	for _, f := range r.c.flags {
		out = append(out, f.ground, f.text)
	}
	return append(out, r.c.hint.ground, r.c.hint.text)
}
