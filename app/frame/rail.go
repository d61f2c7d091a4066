package frame

import (
	"fmt"
	"image/color"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/widgets"
)

// rail holds the stations in the order of the job.
type rail struct {
	f       *Frame
	items   []*railItem
	content *fyne.Container
}

func newRail(f *Frame) *rail {
	r := &rail{f: f}
	box := container.New(column{})
	for i, s := range f.stations {
		item := newRailItem(f, i, s.Name())
		widgets.Name(item, "rail."+s.Name())
		r.items = append(r.items, item)
		box.Add(item)
	}
	r.content = container.NewStack(container.NewVScroll(box)) // on the ground of the window
	return r
}

func (r *rail) refresh() {
	if r == nil {
		return
	}
	for i, item := range r.items {
		item.set(i == r.f.current, r.f.stations[i].Mend())
	}
}

// railItem is the word of a station: a tab that can be focused and pressed by keys.
type railItem struct {
	widget.BaseWidget
	f            *Frame
	index        int
	name         string
	shown, mend  bool
	hover, focus bool
	ground, bar  *canvas.Rectangle
	dot          *canvas.Circle
	text         *canvas.Text
}

func newRailItem(f *Frame, index int, name string) *railItem {
	r := &railItem{f: f, index: index, name: name, ground: canvas.NewRectangle(color.Transparent), bar: canvas.NewRectangle(color.Transparent),
		dot: canvas.NewCircle(color.Transparent), text: canvas.NewText(name, color.Black)}
	r.text.Alignment = fyne.TextAlignCenter
	r.ExtendBaseWidget(r)
	return r
}

func (r *railItem) set(shown, mend bool) {
	r.shown, r.mend = shown, mend
	r.Refresh()
}

// DumpText is for scripts.
func (r *railItem) DumpText() string {
	text := r.name
	if r.mend {
		text += " (to mend)"
	}
	if r.shown {
		text += " (shown)"
	}
	return text
}

func (r *railItem) Tapped(*fyne.PointEvent)        { r.f.show(r.index) }
func (r *railItem) MouseIn(*desktop.MouseEvent)    { r.hover = true; r.Refresh() }
func (r *railItem) MouseMoved(*desktop.MouseEvent) {}
func (r *railItem) MouseOut()                      { r.hover = false; r.Refresh() }
func (r *railItem) FocusGained()                   { r.focus = true; r.Refresh() }
func (r *railItem) FocusLost()                     { r.focus = false; r.Refresh() }
func (r *railItem) TypedRune(rune)                 {}
func (r *railItem) TypedKey(k *fyne.KeyEvent) {
	if k.Name == fyne.KeySpace || k.Name == fyne.KeyReturn || k.Name == fyne.KeyEnter {
		r.f.show(r.index)
	}
}
func (r *railItem) Cursor() desktop.Cursor { return desktop.PointerCursor }

func (r *railItem) CreateRenderer() fyne.WidgetRenderer { return &railRenderer{r} }

type railRenderer struct{ r *railItem }

func (x *railRenderer) MinSize() fyne.Size {
	k := widgets.Scale()
	return fyne.NewSize(78*k, railLow*k)
}

func (x *railRenderer) Layout(size fyne.Size) {
	k := widgets.Scale()
	r := x.r
	r.ground.Resize(size)
	r.bar.Resize(fyne.NewSize(4*k, size.Height))
	r.dot.Resize(fyne.NewSize(7*k, 7*k))
	r.dot.Move(fyne.NewPos(size.Width-16*k, 10*k))
	r.text.Resize(size)
}

func (x *railRenderer) Refresh() {
	r, pal := x.r, x.r.f.Palette()
	r.ground.FillColor, r.bar.FillColor, r.dot.FillColor = color.Transparent, color.Transparent, color.Transparent
	r.ground.StrokeWidth = 0
	r.text.Color, r.text.TextStyle = pal.Secondary, fyne.TextStyle{}
	r.text.TextSize = 12.5 * widgets.Scale()
	if r.hover {
		c := pal.Ink
		c.A = 14
		r.ground.FillColor = c
	}
	if r.shown {
		r.ground.FillColor, r.bar.FillColor = pal.Card, pal.Gain
		r.text.Color, r.text.TextStyle = pal.Ink, fyne.TextStyle{Bold: true}
	}
	if r.focus {
		r.ground.StrokeColor, r.ground.StrokeWidth = pal.Gain, 2
	}
	if r.mend {
		r.dot.FillColor = pal.Danger
	}
	for _, o := range x.Objects() {
		o.Refresh()
	}
}

func (x *railRenderer) Objects() []fyne.CanvasObject {
	return []fyne.CanvasObject{x.r.ground, x.r.bar, x.r.text, x.r.dot}
}
func (x *railRenderer) Destroy() {}

// stationKey is the key of a station on the job rail.
func stationKey(i int) fyne.KeyName { return fyne.KeyName(fmt.Sprint(i + 1)) }
