package widgets

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/theme"
	"fyne.io/fyne/v2/widget"
)

// Reading is a printed number, aligned right, that opens something when it is
// clicked, or with Enter or the space bar when it has the focus. Without Open it is a text.
type Reading struct {
	widget.BaseWidget
	Open func()
	text *canvas.Text
	back *canvas.Rectangle
	rule *canvas.Line
	over bool
	held bool // the focus
}

// NewReading makes a reading.
func NewReading(text string, open func()) *Reading {
	r := &Reading{Open: open, text: canvas.NewText(text, nil), back: canvas.NewRectangle(nil), rule: canvas.NewLine(nil)}
	r.text.Alignment = fyne.TextAlignTrailing
	r.ExtendBaseWidget(r)
	r.colour()
	return r
}

// Set changes what it shows and opens.
func (r *Reading) Set(text string, bold bool, open func()) {
	r.Open = open
	if r.text.Text != text || r.text.TextStyle.Bold != bold {
		r.text.Text, r.text.TextStyle.Bold = text, bold
		r.Refresh()
	}
}

// DumpText is what scripts read.
func (r *Reading) DumpText() string { return r.text.Text }

func (r *Reading) colour() {
	r.text.Color, r.text.TextSize = theme.Color(theme.ColorNameForeground), theme.TextSize()
	r.rule.StrokeColor, r.rule.StrokeWidth = theme.Color(theme.ColorNamePrimary), 1
	r.back.CornerRadius = theme.InputRadiusSize()
	r.back.FillColor = theme.Color(theme.ColorNameHover)
	if r.held {
		r.back.FillColor = theme.Color(theme.ColorNameFocus)
	}
	lit := r.Open != nil && (r.over || r.held)
	if r.back.Hidden = !lit; lit {
		r.text.Color = theme.Color(theme.ColorNamePrimary)
	}
	r.rule.Hidden = !lit
}

// Tapped opens.
func (r *Reading) Tapped(*fyne.PointEvent) {
	if r.Open != nil {
		r.Open()
	}
}

// MouseIn, MouseMoved and MouseOut show that there is something to open.
func (r *Reading) MouseIn(*desktop.MouseEvent)    { r.over = true; r.Refresh() }
func (r *Reading) MouseMoved(*desktop.MouseEvent) {}
func (r *Reading) MouseOut()                      { r.over = false; r.Refresh() }

// FocusGained and FocusLost show the focus.
func (r *Reading) FocusGained() { r.held = true; r.Refresh() }
func (r *Reading) FocusLost()   { r.held = false; r.Refresh() }

// TypedRune is for the toolkit.
func (r *Reading) TypedRune(rune) {}

// TypedKey opens with Enter and the space bar.
func (r *Reading) TypedKey(k *fyne.KeyEvent) {
	switch k.Name {
	case fyne.KeyReturn, fyne.KeyEnter, fyne.KeySpace:
		r.Tapped(nil)
	}
}

// Cursor is a hand where there is something to open.
func (r *Reading) Cursor() desktop.Cursor {
	if r.Open == nil {
		return desktop.DefaultCursor
	}
	return desktop.PointerCursor
}

// CreateRenderer is for the toolkit.
func (r *Reading) CreateRenderer() fyne.WidgetRenderer { return &readingRenderer{r} }

type readingRenderer struct{ r *Reading }

func (x *readingRenderer) Layout(size fyne.Size) {
	pad := theme.InnerPadding()
	x.r.back.Resize(size)
	min := x.r.text.MinSize()
	x.r.text.Resize(fyne.NewSize(size.Width-2*pad, min.Height))
	x.r.text.Move(fyne.NewPos(pad, (size.Height-min.Height)/2))
	y := (size.Height + min.Height) / 2
	x.r.rule.Position1, x.r.rule.Position2 = fyne.NewPos(size.Width-pad-min.Width, y), fyne.NewPos(size.Width-pad, y)
}

func (x *readingRenderer) MinSize() fyne.Size {
	return x.r.text.MinSize().AddWidthHeight(2*theme.InnerPadding(), theme.InnerPadding())
}

func (x *readingRenderer) Refresh() {
	x.r.colour()
	x.Layout(x.r.Size())
	canvas.Refresh(x.r)
}

func (x *readingRenderer) Objects() []fyne.CanvasObject {
	return []fyne.CanvasObject{x.r.back, x.r.rule, x.r.text}
}

func (x *readingRenderer) Destroy() {}
