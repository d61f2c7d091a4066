package sheet

import (
	"image"

	"barlitre/app/widgets"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
)

// paint draws the sheet at the pixel size asked for, or takes the drawing that was made of it
// behind the window. It runs on the UI goroutine.
func (e *editor) paint(w, h int) image.Image {
	e.frames++
	if e.index == e.s.active {
		widgets.Frames.Add(1)
	}
	if img := e.film.shows(w, h); img != nil {
		return img
	}
	if e.pen == nil || e.pen.Image().Rect.Dx() != w || e.pen.Image().Rect.Dy() != h {
		e.pen = pen.NewMosaic(w, h)
		e.lift.still = nil
	}
	l, card := &e.lift, e.s.ctx.Palette().Card
	switch {
	case e.moved == nil:
		e.pen.Begin(card)
		e.ink(e.sheet, true)
	case l.up == nil:
		e.pen.Begin(card)
		e.ink(e.moved, true)
	default:
		if view := [3]float64{e.zoom, e.x, e.y}; l.still == nil || l.view != view {
			e.pen.Begin(card)
			e.ink(l.up.Still, true)
			mark := e.pen.Mark()
			l.still, l.view = &mark, view
		}
		e.pen.Rewind(*l.still)
		e.ink(e.moved, false)
	}
	e.pen.Flush()
	return e.pen.Image()
}

// ink draws a sheet over what is drawn already.
func (e *editor) ink(sh *figures.Sheet, legend bool) {
	if size := e.Size(); size.Width > 0 && size.Height > 0 {
		e.picture(sh, legend).draw(e.pen, e.pixels(e.pen.Image().Rect.Dx()))
	}
}

// pixels is how many pixels a unit has in a picture so wide.
func (e *editor) pixels(width int) float64 { return float64(width) / float64(e.Size().Width) }
