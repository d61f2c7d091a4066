// Package widgets holds the program's own widgets: figures drawn by a pen,
// fields with units, tables, tooltips, and names by which scripts find them.
package widgets

import (
	"image"
	"image/color"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/widget"

	"barlitre/audit/pen"
)

// Part is a place in a figure that can be pointed at. Draw gives it in figure
// units; afterwards it is in units of the widget.
type Part struct {
	Name       string // for scripts and for the callbacks
	Text       string // for scripts: what it shows
	X, Y, W, H float64
	Click      bool // a hand shows over it
}

// Draw draws a figure of size w × h on p and says what can be pointed at. The size
// is that of the widget divided by the scale of the theme.
type Draw func(p pen.Pen, w, h float64) []Part

// Figure is a widget drawn by a pen: the same figures that the report prints.
type Figure struct {
	widget.BaseWidget
	Tapped   func(part Part, x, y float64) // part.Name == "" beside all parts
	Hover    func(part Part, inside bool)
	Ground   func() color.Color
	Over     []fyne.CanvasObject // lie on the figure; set before it is shown
	draw     Draw
	min      fyne.Size
	raster   *canvas.Raster
	pen      *pen.Raster
	parts    []Part
	over     string
	overPart Part
}

// NewFigure makes a figure with a least size.
func NewFigure(min fyne.Size, draw Draw) *Figure {
	f := &Figure{draw: draw, min: min}
	f.raster = canvas.NewRaster(f.paint)
	f.raster.ScaleMode = canvas.ImageScalePixels
	f.ExtendBaseWidget(f)
	return f
}

// SetMin changes the least size, such as when a figure grows with its content.
func (f *Figure) SetMin(min fyne.Size) {
	if f.min != min {
		f.min = min
		f.Refresh()
	}
}

// paint draws at the pixel size asked for. It runs on the UI goroutine.
func (f *Figure) paint(w, h int) image.Image {
	if f.pen == nil || f.pen.Image().Rect.Dx() != w || f.pen.Image().Rect.Dy() != h {
		f.pen = pen.NewRaster(image.NewRGBA(image.Rect(0, 0, max(w, 1), max(h, 1))))
	}
	f.pen.Reset(f.pen.Image())
	size := f.Size()
	f.clear()
	if size.Width <= 0 || size.Height <= 0 {
		return f.pen.Image()
	}
	// Figures have text of their own sizes: at a larger scale they are drawn as if
	// on a smaller sheet, and enlarged.
	scale := float64(Scale())
	f.pen.Push(0, 0, float64(w)/float64(size.Width)*scale)
	f.parts = f.draw(f.pen, float64(size.Width)/scale, float64(size.Height)/scale)
	f.pen.Pop()
	for i := range f.parts {
		p := &f.parts[i]
		p.X, p.Y, p.W, p.H = p.X*scale, p.Y*scale, p.W*scale, p.H*scale
	}
	return f.pen.Image()
}

func (f *Figure) clear() {
	var ground color.Color = color.Transparent
	if f.Ground != nil {
		ground = f.Ground()
	}
	f.pen.Clear(color.NRGBAModel.Convert(ground).(color.NRGBA))
}

// At returns the topmost part at a point.
func (f *Figure) At(x, y float64) Part {
	for i := len(f.parts) - 1; i >= 0; i-- {
		p := f.parts[i]
		if x >= p.X && x <= p.X+p.W && y >= p.Y && y <= p.Y+p.H {
			return p
		}
	}
	return Part{}
}

// Parts returns what the last drawing said can be pointed at.
func (f *Figure) Parts() []Part { return f.parts }

// MouseDown and MouseUp make a click; Tapped of the toolkit would hide drags.
func (f *Figure) MouseDown(*desktop.MouseEvent) {}

// MouseUp is a click with the first button.
func (f *Figure) MouseUp(ev *desktop.MouseEvent) {
	if f.Tapped != nil && ev.Button == desktop.MouseButtonPrimary {
		x, y := float64(ev.Position.X), float64(ev.Position.Y)
		f.Tapped(f.At(x, y), x, y)
	}
}

// MouseIn, MouseMoved and MouseOut follow the pointer.
func (f *Figure) MouseIn(ev *desktop.MouseEvent) { f.MouseMoved(ev) }
func (f *Figure) MouseMoved(ev *desktop.MouseEvent) {
	f.hover(f.At(float64(ev.Position.X), float64(ev.Position.Y)))
}
func (f *Figure) MouseOut() { f.hover(Part{}) }

func (f *Figure) hover(p Part) {
	if p.Name == f.over {
		return
	}
	old := f.overPart
	f.over, f.overPart = p.Name, p
	if f.Hover == nil {
		return
	}
	if old.Name != "" {
		f.Hover(old, false)
	}
	if p.Name != "" {
		f.Hover(p, true)
	}
}

// Cursor is a hand over parts that can be clicked.
func (f *Figure) Cursor() desktop.Cursor {
	if f.overPart.Click {
		return desktop.PointerCursor
	}
	return desktop.DefaultCursor
}

// MinSize is the least size.
func (f *Figure) MinSize() fyne.Size {
	k := Scale()
	return fyne.NewSize(f.min.Width*k, f.min.Height*k)
}

// Refresh draws anew.
func (f *Figure) Refresh() {
	f.raster.Refresh()
	f.BaseWidget.Refresh()
}

// CreateRenderer is for the toolkit.
func (f *Figure) CreateRenderer() fyne.WidgetRenderer { return &figureRenderer{f} }

type figureRenderer struct{ f *Figure }

func (r *figureRenderer) Layout(size fyne.Size) { r.f.raster.Resize(size) }
func (r *figureRenderer) MinSize() fyne.Size    { return r.f.MinSize() }
func (r *figureRenderer) Refresh()              {}
func (r *figureRenderer) Destroy()              {}
func (r *figureRenderer) Objects() []fyne.CanvasObject {
	return append([]fyne.CanvasObject{r.f.raster}, r.f.Over...)
}
