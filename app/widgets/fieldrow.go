package widgets

import (
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/theme"
	"fyne.io/fyne/v2/widget"
)

// FieldRow puts a name before a field and room for its note under it, which is taken
// only when there is a note.
func FieldRow(name string, f *Field) fyne.CanvasObject {
	f.Note = Wrapped("")
	return Row(name, f, f.Note)
}

// Row is FieldRow for any object; note may be nil.
func Row(name string, o fyne.CanvasObject, note *Text) fyne.CanvasObject {
	label := widget.NewLabel(name)
	label.Wrapping = fyne.TextWrapWord
	label.Resize(fyne.NewSize(rowName*Scale(), label.MinSize().Height))
	if note == nil {
		return container.New(&rowLayout{}, label, o)
	}
	return container.New(&rowLayout{}, label, o, note)
}

// rowLayout: the name in a column of fixed width, over several lines where it is long, and the object beside it, so
// that the objects of a list stand below each other; or below it where a word of the name or the object have too
// little room. The note stands under the object.
type rowLayout struct{ stacked bool }

const rowName = 128 // width of the names, at scale 1

func (l *rowLayout) note(objects []fyne.CanvasObject) *Text {
	if len(objects) < 3 {
		return nil
	}
	if n := objects[2].(*Text); n.Text != "" {
		return n
	}
	return nil
}

func (l *rowLayout) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	h := objects[1].MinSize().Height
	x, y := rowName*Scale(), float32(0)
	if l.stacked = wordWidth(objects[0]) > x || size.Width < max(2*x, x+objects[1].MinSize().Width); l.stacked {
		name := nameHeight(objects[0], size.Width)
		objects[0].Move(fyne.NewPos(0, 0))
		x, y = 0, name
	} else if name := nameHeight(objects[0], x); nameWidth(objects[0]) > x {
		objects[0].Move(fyne.NewPos(0, 0))
	} else {
		h = max(h, name)
		objects[0].Move(fyne.NewPos(0, (h-name)/2))
	}
	objects[1].Move(fyne.NewPos(x, y))
	objects[1].Resize(fyne.NewSize(size.Width-x, h))
	if len(objects) < 3 {
		return
	}
	objects[2].Move(fyne.NewPos(x, y+h))
	objects[2].Resize(fyne.NewSize(size.Width-x, max(0, size.Height-y-h)))
	if l.note(objects) == nil {
		objects[2].Hide()
	} else {
		objects[2].Show()
	}
}

// nameHeight gives a name a width, and returns the height that it then takes.
func nameHeight(o fyne.CanvasObject, width float32) float32 {
	o.Resize(fyne.NewSize(width, o.Size().Height))
	h := o.MinSize().Height
	o.Resize(fyne.NewSize(width, h))
	return h
}

// wordWidth is what the longest word of a name asks for.
func wordWidth(o fyne.CanvasObject) float32 {
	w := float32(0)
	for _, word := range strings.Fields(o.(*widget.Label).Text) {
		w = max(w, textWidth(word))
	}
	return w
}

// nameWidth is what a name asks for to be read whole.
func nameWidth(o fyne.CanvasObject) float32 {
	return textWidth(o.(*widget.Label).Text)
}

// textWidth is the width of a label with a text on one line.
func textWidth(text string) float32 {
	return fyne.MeasureText(text, theme.TextSize(), fyne.TextStyle{}).Width + 2*theme.InnerPadding()
}

// MinSize is as high as the last layout asked for.
func (l *rowLayout) MinSize(objects []fyne.CanvasObject) fyne.Size {
	name, object := objects[0].MinSize().Height, objects[1].MinSize()
	note := float32(0)
	if n := l.note(objects); n != nil {
		note = n.MinSize().Height
	}
	h := max(name, object.Height+note)
	switch {
	case l.stacked:
		h = name + object.Height + note
	case nameWidth(objects[0]) <= rowName*Scale():
		h = max(name, object.Height) + note
	}
	return fyne.NewSize(max(60*Scale(), object.Width), h)
}
