package report

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/theme"
)

// buttonRow sets buttons side by side as long as they fit, else one below the other.
type buttonRow struct{ rows int }

func (l *buttonRow) least(objects []fyne.CanvasObject) fyne.Size {
	var m fyne.Size
	for _, o := range objects {
		m = m.Max(o.MinSize())
	}
	return m
}

func (l *buttonRow) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	least, gap := l.least(objects), theme.Padding()
	columns := max(1, min(len(objects), int((size.Width+gap)/(least.Width+gap))))
	l.rows = (len(objects) + columns - 1) / columns
	w := (size.Width - gap*float32(columns-1)) / float32(columns)
	for i, o := range objects {
		o.Resize(fyne.NewSize(w, least.Height))
		o.Move(fyne.NewPos(float32(i%columns)*(w+gap), float32(i/columns)*(least.Height+gap)))
	}
}

// MinSize has as many rows as the last layout.
func (l *buttonRow) MinSize(objects []fyne.CanvasObject) fyne.Size {
	least, rows := l.least(objects), float32(max(1, l.rows))
	return fyne.NewSize(least.Width, rows*least.Height+(rows-1)*theme.Padding())
}
