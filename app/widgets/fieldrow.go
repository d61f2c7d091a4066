package widgets

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
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

// rowLayout: the name in a column of fixed width, the object beside it, the note below.
type rowLayout struct{}

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
	w := rowName * Scale()
	h := max(objects[0].MinSize().Height, objects[1].MinSize().Height)
	objects[0].Move(fyne.NewPos(0, (h-objects[0].MinSize().Height)/2))
	objects[0].Resize(fyne.NewSize(w, objects[0].MinSize().Height))
	objects[1].Move(fyne.NewPos(w, 0))
	objects[1].Resize(fyne.NewSize(size.Width-w, h))
	if len(objects) < 3 {
		return
	}
	objects[2].Move(fyne.NewPos(w, h))
	objects[2].Resize(fyne.NewSize(size.Width-w, max(0, size.Height-h)))
	if l.note(objects) == nil {
		objects[2].Hide()
	} else {
		objects[2].Show()
	}
}

func (l *rowLayout) MinSize(objects []fyne.CanvasObject) fyne.Size {
	h := max(objects[0].MinSize().Height, objects[1].MinSize().Height)
	if n := l.note(objects); n != nil {
		h += n.MinSize().Height
	}
	return fyne.NewSize(rowName*Scale()+max(60*Scale(), objects[1].MinSize().Width), h)
}
