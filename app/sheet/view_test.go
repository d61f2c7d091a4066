package sheet

import (
	"testing"

	"fyne.io/fyne/v2"
)

// A sheet that was drawn and moved about by hand, all of it in view, is still all in view when
// its first results take room for numbers and the legend; one that was not is left as it is.
func TestFirstResultsStayInView(t *testing.T) {
	for _, whole := range []bool{true, false} {
		b := newBench(t, press, fyne.NewSize(900, 420))
		b.s.setWide(true)
		e := b.s.editors[0]
		run := e.labels
		e.sheet, e.labels, e.state = e.plain, nil, nil
		w, h := e.room()
		sw, sh := e.sheet.Size()
		ox, oy := e.sheet.Origin()
		e.zoom, e.fitted = min(w/sw, h/sh), false // by hand
		e.x, e.y = -ox*e.zoom, -oy*e.zoom
		if !whole {
			e.x -= 40
		}
		x := e.x
		if e.seesAll() != whole {
			t.Fatalf("in view: %v", e.seesAll())
		}
		e.label(run)
		b.s.bringState()
		if e.seesAll() != whole {
			t.Errorf("before the results all in view: %v; with them: %v", whole, e.seesAll())
		}
		if !whole && e.x != x {
			t.Error("a view chosen by hand was changed")
		}
	}
}
