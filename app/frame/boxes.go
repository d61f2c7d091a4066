package frame

import (
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/dialog"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/widgets"
)

// box is a dialog whose first button can be pressed with Enter and that Escape closes.
type box struct {
	d *dialog.CustomDialog
}

// asking reports whether a dialog is open: the menu then waits.
func (f *Frame) asking() bool {
	if f.working != nil { // its box comes in a moment
		return true
	}
	for _, b := range f.boxes {
		if b.shown() {
			return true
		}
	}
	return false
}

// closable is a dialog that Escape closes.
type closable struct {
	dialog.Dialog
	open bool
}

func (c *closable) shown() bool { return c.open }

// Keep remembers an open dialog, for Escape and for the menu.
func (f *Frame) Keep(d dialog.Dialog) {
	c := &closable{d, true}
	d.SetOnClosed(func() { c.open = false })
	f.boxes = append(f.boxes[:0:0], append(f.openBoxes(), c)...)
}

func (f *Frame) openBoxes() []*closable {
	var out []*closable
	for _, b := range f.boxes {
		if b.open {
			out = append(out, b)
		}
	}
	return out
}

// escape closes the dialog on top and reports whether there was one. That of work on files ends the work.
func (f *Frame) escape() bool {
	if f.working != nil {
		f.working.stop()
		return true
	}
	open := f.openBoxes()
	if len(open) == 0 {
		pop, ok := f.win.Canvas().Overlays().Top().(*widget.PopUp)
		if ok {
			pop.Hide()
		}
		return ok
	}
	open[len(open)-1].Hide()
	return true
}

// answer is a button of a box.
type answer struct {
	verb   string
	danger bool
	do     func()
}

// ask shows text with buttons. The first answer is the one Enter gives.
func (f *Frame) ask(title string, content fyne.CanvasObject, answers ...answer) *box {
	b := &box{d: dialog.NewCustomWithoutButtons(title, content, f.win)}
	var buttons []fyne.CanvasObject
	for i, a := range answers {
		button := newBoxButton(a.verb, func() {
			b.d.Hide()
			if a.do != nil {
				a.do()
			}
		}, func() { f.escape() })
		switch {
		case a.danger:
			button.Importance = widget.DangerImportance
		case i == 0:
			button.Importance = widget.HighImportance
		}
		widgets.Name(button, "ask."+strings.ToLower(a.verb))
		buttons = append(buttons, button)
	}
	b.d.SetButtons(buttons)
	b.d.Show()
	f.Keep(b.d)
	first := buttons[0].(fyne.Focusable)
	f.win.Canvas().Focus(first)
	post(func() { // a click that led here takes the focus away once it is over
		if f.win.Canvas().Focused() == nil {
			f.win.Canvas().Focus(first)
		}
	})
	return b
}

// boxButton takes Enter and Escape, which the toolkit's dialogs do not.
type boxButton struct {
	widget.Button
	close func()
}

func newBoxButton(text string, do, close func()) *boxButton {
	b := &boxButton{close: close}
	b.Text, b.OnTapped = text, do
	b.ExtendBaseWidget(b)
	return b
}

// TypedKey presses or closes.
func (b *boxButton) TypedKey(k *fyne.KeyEvent) {
	switch k.Name {
	case fyne.KeyEscape:
		b.close()
	case fyne.KeyReturn, fyne.KeyEnter:
		b.OnTapped()
	default:
		b.Button.TypedKey(k)
	}
}

// DumpText is for scripts.
func (b *boxButton) DumpText() string { return b.Text }

func paragraph(text string, width float32) fyne.CanvasObject {
	l := widget.NewLabel(text)
	l.Wrapping = fyne.TextWrapWord
	return container.New(fixedWidth{width * widgets.Scale()}, l)
}

// fixedWidth gives text a width to wrap to.
type fixedWidth struct{ w float32 }

func (l fixedWidth) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	for _, o := range objects {
		o.Resize(size)
	}
}

func (l fixedWidth) MinSize(objects []fyne.CanvasObject) fyne.Size {
	m := fyne.NewSize(l.w, 0)
	for _, o := range objects {
		o.Resize(fyne.NewSize(l.w, o.MinSize().Height))
		m.Height += o.MinSize().Height
	}
	return m
}
