package widgets

import (
	"image/color"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"
)

// Rim is a rectangle with round corners whose inside is left out, or filled plainly. With
// software graphics every pixel of a round rectangle is dear, and all are drawn in each
// frame: a large one drawn whole costs more than what lies on it.
type Rim struct {
	widget.BaseWidget
	hole   fyne.Position // where what covers the inside begins
	size   fyne.Size     // and its size; zero: all but a narrow rim
	plain  *canvas.Rectangle
	rects  [4]*canvas.Rectangle
	strips [4]*container.Clip
}

// NewRim makes a rim without colours.
func NewRim() *Rim {
	r := &Rim{plain: canvas.NewRectangle(nil)}
	for i := range r.strips {
		r.rects[i] = canvas.NewRectangle(nil)
		r.strips[i] = container.NewClip(container.NewWithoutLayout(r.rects[i]))
	}
	r.plain.Hide()
	r.ExtendBaseWidget(r)
	return r
}

// Dress sets the colours; plain fills the inside as well.
func (r *Rim) Dress(fill, stroke color.Color, width, radius float32, plain bool) {
	r.plain.FillColor = fill
	r.plain.Hidden = !plain
	for _, q := range r.rects {
		q.FillColor, q.StrokeColor, q.StrokeWidth, q.CornerRadius = fill, stroke, width, radius
	}
	r.arrange()
	canvas.Refresh(r)
}

// SetHole leaves out what something that is not seen through covers.
func (r *Rim) SetHole(at fyne.Position, size fyne.Size) {
	if r.hole != at || r.size != size {
		r.hole, r.size = at, size
		r.arrange()
	}
}

// arrange places the four strips of the rim.
func (r *Rim) arrange() {
	all := r.Size()
	corner := max(r.rects[0].CornerRadius, r.rects[0].StrokeWidth)
	left, top, right, bottom := corner, corner, all.Width-corner, all.Height-corner
	if r.size.Width > 0 && r.size.Height > 0 {
		left, top = max(r.hole.X, corner), max(r.hole.Y, corner)
		right, bottom = min(r.hole.X+r.size.Width, right), min(r.hole.Y+r.size.Height, bottom)
	}
	place := func(i int, x, y, w, h float32) {
		r.strips[i].Move(fyne.NewPos(x, y))
		r.strips[i].Resize(fyne.NewSize(max(0, w), max(0, h)))
		r.rects[i].Move(fyne.NewPos(-x, -y))
		r.rects[i].Resize(all)
	}
	place(0, 0, 0, all.Width, top)
	place(1, 0, bottom, all.Width, all.Height-bottom)
	place(2, 0, top, left, bottom-top)
	place(3, right, top, all.Width-right, bottom-top)
	r.plain.Move(fyne.NewPos(left, top))
	r.plain.Resize(fyne.NewSize(max(0, right-left), max(0, bottom-top)))
}

// CreateRenderer is for the toolkit.
func (r *Rim) CreateRenderer() fyne.WidgetRenderer { return &rimRenderer{r} }

type rimRenderer struct{ r *Rim }

func (x *rimRenderer) Layout(fyne.Size)   { x.r.arrange() }
func (x *rimRenderer) MinSize() fyne.Size { return fyne.Size{} }
func (x *rimRenderer) Refresh()           { x.r.arrange() }
func (x *rimRenderer) Destroy()           {}
func (x *rimRenderer) Objects() []fyne.CanvasObject {
	return []fyne.CanvasObject{x.r.plain, x.r.strips[0], x.r.strips[1], x.r.strips[2], x.r.strips[3]}
}
