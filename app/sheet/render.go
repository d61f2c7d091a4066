package sheet

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"

	"barlitre/app/widgets"
)

// MinSize is small: the sheet takes what room there is.
func (e *editor) MinSize() fyne.Size { return fyne.NewSize(160, 140) }

// Resize fits the sheet again unless the user chose a view.
func (e *editor) Resize(size fyne.Size) {
	if size == e.Size() {
		return
	}
	e.BaseWidget.Resize(size)
	if e.fitted {
		e.s.fitAll()
	}
}

// CreateRenderer is for the toolkit.
func (e *editor) CreateRenderer() fyne.WidgetRenderer { return &editorRenderer{e} }

type editorRenderer struct{ e *editor }

func (r *editorRenderer) Layout(size fyne.Size) {
	r.e.raster.Resize(size)
	r.e.clip.Resize(size)
	r.e.over.Resize(size)
	m := r.e.copied.MinSize()
	r.e.copied.Resize(m)
	r.e.copied.Move(fyne.NewPos((size.Width-m.Width)/2, size.Height/2+50*widgets.Scale()))
	r.e.ring.Move(fyne.NewPos(1, 1))
	r.e.ring.Resize(size.SubtractWidthHeight(2, 2))
}
func (r *editorRenderer) MinSize() fyne.Size { return r.e.MinSize() }
func (r *editorRenderer) Refresh() {
	r.e.film.stop()
	r.e.raster.Refresh()
	canvas.Refresh(r.e.over)
}
func (r *editorRenderer) Destroy() {}
func (r *editorRenderer) Objects() []fyne.CanvasObject {
	return []fyne.CanvasObject{r.e.raster, r.e.clip, r.e.copied}
}
