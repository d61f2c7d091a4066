package widgets

import (
	"image"
	"image/color"
	"sync"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/widget"

	"barlitre/audit/figures"
	"barlitre/audit/pen"
)

// Picture is a figure that takes long to draw. It is drawn on a goroutine of its own, once for what it shows, its size
// and its colours; until it is ready the place says so.
type Picture struct {
	widget.BaseWidget
	Tapped  func()
	palette func() figures.Palette
	min     fyne.Size
	raster  *canvas.Raster
	draw    func(p pen.Pen, w, h float64, pal figures.Palette)

	mu    sync.Mutex
	asked pictureOf // being drawn, or done
	done  pictureOf
	img   *image.RGBA
	shows int // counts what was set
}

// pictureOf is what a picture was drawn for.
type pictureOf struct {
	shows, w, h int
	scale       float64
	ink         color.NRGBA
}

// NewPicture makes an empty picture with a least size.
func NewPicture(min fyne.Size, palette func() figures.Palette) *Picture {
	f := &Picture{min: min, palette: palette}
	f.raster = canvas.NewRaster(f.paint)
	f.raster.ScaleMode = canvas.ImageScalePixels
	f.ExtendBaseWidget(f)
	return f
}

// Set shows something else; draw is called on another goroutine, in figure units.
func (f *Picture) Set(draw func(p pen.Pen, w, h float64, pal figures.Palette)) {
	f.mu.Lock()
	f.draw = draw
	f.shows++
	f.mu.Unlock()
	f.raster.Refresh()
}

// SetMin changes the least size.
func (f *Picture) SetMin(min fyne.Size) {
	if f.min != min {
		f.min = min
		f.Refresh()
	}
}

// Ready reports whether all that was asked for is drawn.
func (f *Picture) Ready() bool {
	f.mu.Lock()
	defer f.mu.Unlock()
	return f.asked == f.done && f.done.shows == f.shows
}

// paint returns what is drawn at a pixel size, and has it drawn where it is not.
func (f *Picture) paint(w, h int) image.Image {
	f.mu.Lock()
	defer f.mu.Unlock()
	size, pal := f.Size(), f.palette()
	want := pictureOf{f.shows, w, h, float64(Scale()), pal.Ink}
	if want == f.done {
		return f.img
	}
	if size.Width > 0 && w > 0 && h > 0 && f.draw != nil && want != f.asked {
		f.asked = want
		go f.drawn(want, f.draw, float64(w)/float64(size.Width)*want.scale, pal)
	}
	return f.waiting(w, h, pal)
}

// waiting is what stands there until the picture is drawn.
func (f *Picture) waiting(w, h int, pal figures.Palette) image.Image {
	p := pen.NewRaster(image.NewRGBA(image.Rect(0, 0, max(w, 1), max(h, 1))))
	p.Clear(pal.Card)
	if f.draw != nil && f.Size().Width > 0 {
		k := float64(w) / float64(f.Size().Width) * float64(Scale())
		p.Text(pen.Pt{X: float64(w) / 2, Y: float64(h) / 2}, "drawing …", 11*k, pal.Secondary, pen.Center, false)
	}
	return p.Image()
}

// drawn draws, and shows it unless something else is wanted by then.
func (f *Picture) drawn(want pictureOf, draw func(pen.Pen, float64, float64, figures.Palette), k float64, pal figures.Palette) {
	p := pen.NewRaster(image.NewRGBA(image.Rect(0, 0, want.w, want.h)))
	p.Clear(pal.Card)
	p.Push(0, 0, k)
	draw(p, float64(want.w)/k, float64(want.h)/k, pal)
	p.Pop()
	f.mu.Lock()
	wanted := f.asked == want
	if wanted {
		f.img, f.done = p.Image(), want
	}
	f.mu.Unlock()
	if wanted {
		fyne.Do(f.raster.Refresh)
	}
}

// MouseDown and MouseUp make a click.
func (f *Picture) MouseDown(*desktop.MouseEvent) {}

// MouseUp is a click with the first button.
func (f *Picture) MouseUp(ev *desktop.MouseEvent) {
	if f.Tapped != nil && ev.Button == desktop.MouseButtonPrimary {
		f.Tapped()
	}
}

// Cursor is a hand where a click does something.
func (f *Picture) Cursor() desktop.Cursor {
	if f.Tapped != nil {
		return desktop.PointerCursor
	}
	return desktop.DefaultCursor
}

// MinSize is the least size.
func (f *Picture) MinSize() fyne.Size {
	k := Scale()
	return fyne.NewSize(f.min.Width*k, f.min.Height*k)
}

// CreateRenderer is for the toolkit.
func (f *Picture) CreateRenderer() fyne.WidgetRenderer { return widget.NewSimpleRenderer(f.raster) }
