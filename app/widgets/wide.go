package widgets

import "fyne.io/fyne/v2"

// Wide is a layout that gives an object a width, at scale 1, whatever it asks for,
// and the height it asks for, in the middle.
type Wide float32

// Layout is for the toolkit.
func (w Wide) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	for _, o := range objects {
		h := o.MinSize().Height
		o.Move(fyne.NewPos(0, (size.Height-h)/2))
		o.Resize(fyne.NewSize(size.Width, h))
	}
}

// MinSize is for the toolkit.
func (w Wide) MinSize(objects []fyne.CanvasObject) fyne.Size {
	m := fyne.NewSize(float32(w)*Scale(), 0)
	for _, o := range objects {
		m.Height = max(m.Height, o.MinSize().Height)
	}
	return m
}
