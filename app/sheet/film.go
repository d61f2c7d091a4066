package sheet

import (
	"image"

	"barlitre/app/station"
	"barlitre/audit/pen"
)

// film draws a large sheet behind the window when the clock moves, so that the window can paint
// the drawing before meanwhile. What is shown is behind the clock by a frame.
type film struct {
	reel  *reel         // nil until a drawing is made
	shown *image.RGBA   // nil = the sheet is drawn as it is painted
	made  chan finished // not nil while one is being made, which comes out of it
	again bool          // the clock has moved on meanwhile
	edits int           // counts what makes a drawing under way useless
}

// reel is what drawings are made with and on, one at a time.
type reel struct {
	pen    *pen.Mosaic
	frames [2]*image.RGBA // by turns: one may be shown while the other is made
}

// draw makes a drawing of a size in pixels while another is shown.
func (r *reel) draw(p picture, w, h int, pixels float64, shown *image.RGBA) *image.RGBA {
	if r.pen == nil || r.pen.Image().Rect.Dx() != w || r.pen.Image().Rect.Dy() != h {
		r.pen = pen.NewMosaic(w, h)
		r.frames = [2]*image.RGBA{image.NewRGBA(r.pen.Image().Rect), image.NewRGBA(r.pen.Image().Rect)}
	}
	to := r.frames[0]
	if to == shown {
		to = r.frames[1]
	}
	r.pen.Begin(p.opt.Palette.Card)
	p.draw(r.pen, pixels)
	r.pen.Flush()
	copy(to.Pix, r.pen.Image().Pix)
	return to
}

// finished is a drawing that was made.
type finished struct {
	img   *image.RGBA
	edits int // count when it was begun
}

// shows is the drawing for a size in pixels, nil if there is none.
func (f *film) shows(w, h int) image.Image {
	switch {
	case f.shown == nil:
		return nil
	case f.shown.Rect.Dx() != w || f.shown.Rect.Dy() != h:
		f.stop()
		return nil
	}
	return f.shown
}

// stop has the sheet drawn as it is painted: something else than the clock has changed.
func (f *film) stop() {
	f.shown, f.again = nil, false
	f.edits++
}

// release gives its pictures up, unless one is being made.
func (f *film) release() {
	if f.stop(); f.made == nil {
		f.reel = nil
	}
}

// roll shows the drawing that is ready and begins that of the instant of the clock. It reports
// false for a sheet that is drawn quickly, is not shown or painted yet or is being changed.
func (e *editor) roll() bool {
	f := &e.film
	if !e.s.sheetShown(e.index) || !large(e.drawn) || e.pen == nil || e.moved != nil || e.laying.bare != nil || e.sheet == nil || e.Size().Width <= 0 {
		return false
	}
	e.takeFrame()
	if f.again = f.made != nil; f.again {
		return true
	}
	if f.reel == nil {
		f.reel = &reel{}
	}
	made := make(chan finished, 1)
	f.made = made
	size := e.pen.Image().Rect
	p, edits, r, shown, pixels := e.picture(e.sheet, true).kept(), f.edits, f.reel, f.shown, e.pixels(size.Dx())
	go func() {
		d := finished{edits: edits}
		if station.Guarded(func() error { d.img = r.draw(p, size.Dx(), size.Dy(), pixels, shown); return nil }) != nil {
			d.img = nil // then it is drawn as it is painted, where a fault is told of
		}
		made <- d
		post(e.frameMade) // the clock may be at rest by then; while it runs, the next step takes it sooner
	}()
	return true
}

// takeFrame shows the drawing that was being made, if it is ready and of use.
func (e *editor) takeFrame() {
	f := &e.film
	select {
	case d := <-f.made:
		f.made = nil
		if d.img == nil {
			f.reel = nil
		}
		if d.edits == f.edits {
			f.shown = d.img
			e.raster.Refresh()
		}
	default:
	}
}

// frameMade shows the drawing that is ready, and makes another if the clock has moved on.
func (e *editor) frameMade() {
	if e.takeFrame(); e.film.again && e.film.made == nil {
		e.redrawClock()
	}
}
