package sheet

import (
	"bytes"
	"image"
	"testing"
	"time"
)

// rolled waits until no drawing is made behind the window.
func (b *bench) rolled(e *editor) {
	b.t.Helper()
	for until := time.Now().Add(20 * time.Second); e.film.made != nil; b.pump() {
		if time.Now().After(until) {
			b.t.Fatal("waited in vain for a drawing")
		}
		time.Sleep(time.Millisecond)
	}
}

// When the clock moves, a large sheet shows what it would show if it were drawn as it is painted.
func TestFilmShowsWhatIsDrawn(t *testing.T) {
	b := openLarge(t, 90)
	e := b.s.editors[0]
	w, h := int(e.Size().Width), int(e.Size().Height)
	pixels := func() []byte { return bytes.Clone(e.paint(w, h).(*image.RGBA).Pix) }
	first := pixels()
	for _, comma := range []bool{false, true} {
		b.comma = comma
		for _, ts := range [][]float64{{12.3}, {20, 21, 22, 26.7}, {3}} {
			for _, at := range ts { // those that come meanwhile are passed over, but for the last
				b.SetClock(at)
			}
			b.rolled(e)
			if e.film.shown == nil || e.state.T != ts[len(ts)-1] {
				t.Fatalf("no drawing of %g s", ts)
			}
			behind := pixels()
			e.redraw()
			if e.film.shown != nil {
				t.Error("a change of something else leaves the drawing that was made behind the window")
			}
			if now := pixels(); !bytes.Equal(behind, now) || bytes.Equal(now, first) {
				t.Errorf("at %g s the drawing made behind the window is another", ts)
			}
		}
	}
}

// A drawing under way is of no use once something else than the clock has changed.
func TestFilmIsCut(t *testing.T) {
	b := openLarge(t, 90)
	e := b.s.editors[0]
	w, h := int(e.Size().Width), int(e.Size().Height)
	e.paint(w, h)
	if b.SetClock(5); e.film.made == nil {
		t.Fatal("no drawing was begun with the first step of the clock")
	}
	e.redraw()
	b.rolled(e)
	if e.film.shown != nil {
		t.Error("shown all the same")
	}
	b.SetClock(6)
	e.redraw()
	b.SetClock(7)
	b.rolled(e)
	if e.film.shown == nil || e.state.T != 7 {
		t.Error("the clock that moved on after the change is not shown")
	}
	b.s.single, b.s.active = true, 1
	if b.SetClock(8); e.film.made != nil {
		t.Error("a sheet that is not shown is drawn")
	}
	b.s.single, b.s.active = true, 0
	b.SetClock(9)
	b.rolled(e)
	if e.paint(w-1, h); e.film.shown != nil {
		t.Error("a drawing of another size is kept")
	}
}
