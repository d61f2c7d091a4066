package sheet

import (
	"image"
	"time"

	"barlitre/audit/pen"
)

// film draws a large sheet behind the window while the clock runs, so that the window can
// paint the drawing before meanwhile. What is shown is behind the clock by a frame.
type film struct {
	pen    *pen.Mosaic
	frames [2]*image.RGBA // by turns: one may be shown while the other is made
	shown  *image.RGBA    // nil = the sheet is drawn as it is painted
	made   chan finished  // not nil while one is being made, which comes out of it
	again  bool           // the clock has moved on meanwhile
	edits  int            // counts what makes a drawing under way useless
	last   time.Time      // when the clock last moved
}

// pause is after how long the clock does not run any more: what was drawn by then may be old.
const pause = 500 * time.Millisecond

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
		f.pen, f.frames = nil, [2]*image.RGBA{}
	}
}

// roll shows the drawing that is ready and begins that of the instant of the clock. It reports
// false for a sheet that is drawn quickly, is not shown or painted yet or is being changed, and
// for the first step of the clock after a pause.
func (e *editor) roll() bool {
	f, now := &e.film, time.Now()
	runs := now.Sub(f.last) < pause
	if f.last = now; !runs || !e.s.sheetShown(e.index) || !large(e.drawn) || e.pen == nil || e.moved != nil || e.laying.bare != nil || e.sheet == nil || e.Size().Width <= 0 {
		return false
	}
	e.takeFrame()
	if f.again = f.made != nil; f.again {
		return true
	}
	size := e.pen.Image().Rect
	if f.pen == nil || f.pen.Image().Rect != size {
		f.pen = pen.NewMosaic(size.Dx(), size.Dy())
		f.frames = [2]*image.RGBA{image.NewRGBA(size), image.NewRGBA(size)}
	}
	to := f.frames[0]
	if to == f.shown {
		to = f.frames[1]
	}
	made := make(chan finished, 1)
	f.made = made
	p, edits, m, pixels := e.picture(e.sheet, true).kept(), f.edits, f.pen, e.pixels(size.Dx())
	go func() {
		m.Begin(p.opt.Palette.Card)
		p.draw(m, pixels)
		m.Flush()
		copy(to.Pix, m.Image().Pix)
		made <- finished{to, edits}
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
