package duty

import "fyne.io/fyne/v2"

// abreast sets objects two in a row, or one below the other where two have no room. Its height is that of the last width.
type abreast struct{ width float32 }

const abreastGap = 4

// columns is how many objects stand in a row.
func (l *abreast) columns(objects []fyne.CanvasObject) int {
	for _, o := range objects {
		if 2*o.MinSize().Width+abreastGap > l.width {
			return 1
		}
	}
	return 2
}

func (l *abreast) rowHeight(row []fyne.CanvasObject) float32 {
	h := float32(0)
	for _, o := range row {
		h = max(h, o.MinSize().Height)
	}
	return h
}

// Layout places the objects.
func (l *abreast) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	l.width = size.Width
	n, y := l.columns(objects), float32(0)
	w := (size.Width - abreastGap*float32(n-1)) / float32(n)
	for i := 0; i < len(objects); i += n {
		row := objects[i:min(i+n, len(objects))]
		h := l.rowHeight(row)
		for k, o := range row {
			o.Move(fyne.NewPos(float32(k)*(w+abreastGap), y))
			o.Resize(fyne.NewSize(w, h))
		}
		y += h + abreastGap
	}
}

// MinSize is as wide as the widest object.
func (l *abreast) MinSize(objects []fyne.CanvasObject) fyne.Size {
	out := fyne.Size{}
	n := l.columns(objects)
	for i, o := range objects {
		out.Width = max(out.Width, o.MinSize().Width)
		if i%n == 0 {
			out.Height += l.rowHeight(objects[i:min(i+n, len(objects))]) + abreastGap
		}
	}
	return out
}
