package widgets

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/theme"
	"fyne.io/fyne/v2/widget"
)

// FieldRow puts a name before a field and room for its note under it, which is taken
// only when there is a note.
func FieldRow(name string, f *Field) fyne.CanvasObject {
	f.Note = widget.NewLabel("")
	f.Note.Wrapping = fyne.TextWrapWord
	return Row(name, f, f.Note)
}

// Row is FieldRow for any object; note may be nil.
func Row(name string, o fyne.CanvasObject, note *widget.Label) fyne.CanvasObject {
	label := widget.NewLabel(name)
	label.Truncation = fyne.TextTruncateEllipsis
	if note == nil {
		return container.New(&rowLayout{}, label, o)
	}
	return container.New(&rowLayout{}, label, o, note)
}

// rowLayout: the name in a column of fixed width and the object beside it, or below it
// where name or object have too little room; the note under the object.
type rowLayout struct{ stacked bool }

const rowName = 128 // width of the names, at scale 1

func (l *rowLayout) note(objects []fyne.CanvasObject) *widget.Label {
	if len(objects) < 3 {
		return nil
	}
	if n := objects[2].(*widget.Label); n.Text != "" {
		return n
	}
	return nil
}

func (l *rowLayout) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	name := objects[0].MinSize().Height
	h := objects[1].MinSize().Height
	x, y := rowName*Scale(), float32(0)
	if l.stacked = nameWidth(objects[0]) > x || size.Width < max(2*x, x+objects[1].MinSize().Width); l.stacked {
		objects[0].Move(fyne.NewPos(0, 0))
		objects[0].Resize(fyne.NewSize(size.Width, name))
		x, y = 0, name
	} else {
		h = max(h, name)
		objects[0].Move(fyne.NewPos(0, (h-name)/2))
		objects[0].Resize(fyne.NewSize(x, name))
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

// nameWidth is what a name asks for to be read whole.
func nameWidth(o fyne.CanvasObject) float32 {
	return fyne.MeasureText(o.(*widget.Label).Text, theme.TextSize(), fyne.TextStyle{}).Width + 2*theme.InnerPadding()
}

// MinSize is as high as the last layout asked for.
func (l *rowLayout) MinSize(objects []fyne.CanvasObject) fyne.Size {
	name, object := objects[0].MinSize().Height, objects[1].MinSize()
	h := max(name, object.Height)
	if l.stacked {
		h = name + object.Height
	}
	if n := l.note(objects); n != nil {
		h += n.MinSize().Height
	}
	return fyne.NewSize(max(60*Scale(), object.Width), h)
}
