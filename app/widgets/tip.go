package widgets

import (
	"time"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/theme"
	"fyne.io/fyne/v2/widget"
)

// tipDelay is how long the pointer rests before a tooltip shows.
const tipDelay = 600 * time.Millisecond

// Tips is the layer that tooltips are drawn on, over the content of a window. It
// lies over the content without taking events.
type Tips struct {
	box    *fyne.Container // without layout
	ground *canvas.Rectangle
	text   *canvas.Text
	shown  string
}

// tips is the layer in use; a program has one window.
var tips *Tips

// NewTips makes the layer and puts it over content.
func NewTips(content fyne.CanvasObject) fyne.CanvasObject {
	t := &Tips{ground: canvas.NewRectangle(theme.Color(theme.ColorNameOverlayBackground)), text: canvas.NewText("", theme.Color(theme.ColorNameForeground))}
	t.box = container.NewWithoutLayout()
	tips = t
	return container.NewStack(content, t.box)
}

// show draws a tooltip below an object, inside the window.
func (t *Tips) show(o fyne.CanvasObject, text string) {
	driver := fyne.CurrentApp().Driver()
	at := driver.AbsolutePositionForObject(o).Subtract(driver.AbsolutePositionForObject(t.box))
	t.text.Text, t.shown = text, text
	t.text.TextSize = theme.Size(theme.SizeNameCaptionText)
	t.text.Color = theme.Color(theme.ColorNameForeground)
	t.ground.FillColor = theme.Color(theme.ColorNameOverlayBackground)
	t.ground.StrokeColor, t.ground.StrokeWidth, t.ground.CornerRadius = theme.Color(theme.ColorNameSeparator), 1, 4
	pad := theme.InnerPadding()
	size := t.text.MinSize().AddWidthHeight(2*pad, pad)
	room := t.box.Size()
	x := max(0, min(at.X, room.Width-size.Width-2))
	y := at.Y + o.Size().Height + 4
	if y+size.Height > room.Height {
		y = at.Y - size.Height - 4
	}
	t.ground.Resize(size)
	t.ground.Move(fyne.NewPos(x, y))
	t.text.Resize(t.text.MinSize())
	t.text.Move(fyne.NewPos(x+pad, y+pad/2))
	t.box.Objects = []fyne.CanvasObject{t.ground, t.text}
	t.box.Refresh()
}

func (t *Tips) hide() {
	if t.shown != "" {
		t.shown = ""
		t.box.Objects = nil
		t.box.Refresh()
	}
}

// TipButton is a button with a tooltip.
type TipButton struct {
	widget.Button
	Tip   string
	timer *time.Timer
}

// NewTipButton makes a button with a tooltip.
func NewTipButton(text, tip string, do func()) *TipButton {
	b := &TipButton{Tip: tip}
	b.Text, b.OnTapped = text, do
	b.ExtendBaseWidget(b)
	return b
}

// DumpText is for scripts.
func (b *TipButton) DumpText() string { return b.Text }

// FocusGained scrolls it into sight.
func (b *TipButton) FocusGained() {
	b.Button.FocusGained()
	reveal(b)
}

// TypedKey presses by Space.
func (b *TipButton) TypedKey(k *fyne.KeyEvent) {
	if !passHelp(b, k) {
		b.Button.TypedKey(k)
	}
}

// MouseIn starts the wait for the tooltip.
func (b *TipButton) MouseIn(ev *desktop.MouseEvent) {
	b.Button.MouseIn(ev)
	if tips == nil || b.Tip == "" {
		return
	}
	b.timer = time.AfterFunc(tipDelay, func() { fyne.Do(func() { b.showTip() }) })
}

func (b *TipButton) showTip() {
	if b.timer != nil && tips != nil {
		tips.show(b, b.Tip)
	}
}

// MouseOut ends it.
func (b *TipButton) MouseOut() {
	b.Button.MouseOut()
	b.endTip()
}

// Tapped hides the tooltip and presses.
func (b *TipButton) Tapped(ev *fyne.PointEvent) {
	b.endTip()
	b.Button.Tapped(ev)
}

func (b *TipButton) endTip() {
	if b.timer != nil {
		b.timer.Stop()
		b.timer = nil
	}
	if tips != nil {
		tips.hide()
	}
}
