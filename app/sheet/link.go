package sheet

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/theme"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/widgets"
)

// link is a word that does something: smaller than a button, and reached by Tab.
type link struct {
	widget.BaseWidget
	Text    string
	do      func()
	text    *canvas.Text
	ring    *canvas.Rectangle
	lead    bool // the word stands at the left
	focused bool
	over    bool
}

var (
	_ fyne.Focusable    = (*link)(nil)
	_ fyne.Tappable     = (*link)(nil)
	_ desktop.Hoverable = (*link)(nil)
)

func newLink(text string, do func()) *link {
	l := &link{Text: text, do: do, text: canvas.NewText(text, nil), ring: canvas.NewRectangle(nil)}
	l.ExtendBaseWidget(l)
	return l
}

// SetText changes the word.
func (l *link) SetText(text string) {
	if l.Text != text {
		l.Text = text
		l.Refresh()
	}
}

// DumpText is for scripts.
func (l *link) DumpText() string { return l.Text }

// Tapped does it.
func (l *link) Tapped(*fyne.PointEvent) { l.do() }

// TypedKey does it by Enter or Space.
func (l *link) TypedKey(k *fyne.KeyEvent) {
	switch k.Name {
	case fyne.KeyReturn, fyne.KeyEnter, fyne.KeySpace:
		l.do()
	default:
		widgets.PassKey(l, k)
	}
}

// TypedRune takes nothing.
func (l *link) TypedRune(rune) {}

// FocusGained and FocusLost show the frame of the focus.
func (l *link) FocusGained() { l.focused = true; l.Refresh() }
func (l *link) FocusLost()   { l.focused = false; l.Refresh() }

// MouseIn, MouseMoved and MouseOut underline the word.
func (l *link) MouseIn(*desktop.MouseEvent)    { l.over = true; l.Refresh() }
func (l *link) MouseMoved(*desktop.MouseEvent) {}
func (l *link) MouseOut()                      { l.over = false; l.Refresh() }

// Cursor is a hand.
func (l *link) Cursor() desktop.Cursor { return desktop.PointerCursor }

// CreateRenderer is for the toolkit.
func (l *link) CreateRenderer() fyne.WidgetRenderer {
	r := &linkRenderer{l}
	r.dress()
	return r
}

type linkRenderer struct{ l *link }

func (r *linkRenderer) dress() {
	l := r.l
	l.text.Text, l.text.TextSize = l.Text, theme.CaptionTextSize()
	l.text.Color = theme.Color(theme.ColorNamePrimary)
	l.text.TextStyle.Underline = l.over
	l.ring.StrokeColor, l.ring.StrokeWidth, l.ring.CornerRadius = theme.Color(theme.ColorNamePrimary), 1.5, 3
	show(l.ring, l.focused)
}

func (r *linkRenderer) Layout(size fyne.Size) {
	m := r.l.text.MinSize()
	x := size.Width - m.Width - 4
	if r.l.lead {
		x = 0
	}
	r.l.text.Move(fyne.NewPos(x, (size.Height-m.Height)/2))
	r.l.text.Resize(m)
	r.l.ring.Resize(size)
}

func (r *linkRenderer) MinSize() fyne.Size { return r.l.text.MinSize().AddWidthHeight(8, 4) }
func (r *linkRenderer) Refresh() {
	r.dress()
	r.Layout(r.l.Size())
	canvas.Refresh(r.l)
}
func (r *linkRenderer) Destroy() {}
func (r *linkRenderer) Objects() []fyne.CanvasObject {
	return []fyne.CanvasObject{r.l.ring, r.l.text}
}
