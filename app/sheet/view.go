package sheet

import (
	"math"

	"fyne.io/fyne/v2"

	"barlitre/app/widgets"
	"barlitre/audit/figures"
)

// Limits of the zoom [units a module].
const (
	leastZoom = 1.5
	mostZoom  = 60
	fitMost   = 10 // a small circuit is not blown up
	legendAt  = 5.4
)

// legendFrom is the height of a sheet under which it needs all room for the drawing [units at scale 1].
const legendFrom = 130

// legendFoot is the room below the legend [units at scale 1].
const legendFoot = 5

// legendHeight is the strip at the lower edge [units].
func (e *editor) legendHeight() float64 {
	if e.state == nil || e.Size().Height < legendFrom*widgets.Scale() {
		return 0
	}
	return (figures.LegendHeight*legendAt + legendFoot) * float64(widgets.Scale())
}

// room is the size of the part of the widget that shows the drawing [units].
func (e *editor) room() (w, h float64) {
	size := e.Size()
	return float64(size.Width), math.Max(0, float64(size.Height)-e.legendHeight())
}

// fitZoom is the zoom at which the sheet is seen whole, 0 when there is nothing to see.
func (e *editor) fitZoom() float64 {
	w, h := e.room()
	if e.sheet == nil || w <= 0 || h <= 0 {
		return 0
	}
	sw, sh := e.sheet.Size()
	return math.Max(leastZoom, math.Min(fitMost*float64(widgets.Scale()), math.Min(w/sw, h/sh)))
}

// seesAll tells whether all of the sheet is in view.
func (e *editor) seesAll() bool {
	if e.sheet == nil {
		return false
	}
	w, h := e.room()
	sw, sh := e.sheet.Size()
	ox, oy := e.sheet.Origin()
	x, y := e.x+ox*e.zoom, e.y+oy*e.zoom
	return x > -1 && y > -1 && x+sw*e.zoom < w+1 && y+sh*e.zoom < h+1
}

// stillSeesAll brings a sheet into view again that was all in view before its first results took
// room on it; with it the other, if both were at one zoom. It counts as placed by hand as before.
func (e *editor) stillSeesAll(before bool) {
	if !before || e.fitted || e.seesAll() {
		return
	}
	together, fitted := true, [2]bool{}
	for i, o := range e.s.editors {
		together, fitted[i] = together && (!e.s.sheetShown(i) || o.zoom == e.zoom), o.fitted
	}
	if together {
		e.s.fitAll()
	} else {
		e.fit(e.fitZoom())
	}
	for i, o := range e.s.editors {
		o.fitted = fitted[i]
	}
}

// fit shows the sheet whole, in the middle, at a zoom.
func (e *editor) fit(zoom float64) {
	if e.sheet == nil || zoom <= 0 {
		return
	}
	w, h := e.room()
	sw, sh := e.sheet.Size()
	ox, oy := e.sheet.Origin()
	e.zoom, e.fitted = zoom, true
	e.x, e.y = (w-sw*zoom)/2-ox*zoom, (h-sh*zoom)/2-oy*zoom
	e.redraw()
}

// zoomAt changes the zoom by a factor; the point at (px, py) stays where it is.
func (e *editor) zoomAt(px, py, factor float64) {
	z := math.Max(leastZoom, math.Min(mostZoom, e.zoom*factor))
	factor = z / e.zoom
	e.x, e.y = px-(px-e.x)*factor, py-(py-e.y)*factor
	e.zoom, e.fitted = z, false
	e.redraw()
}

// panBy moves the picture.
func (e *editor) panBy(dx, dy float64) {
	e.x, e.y, e.fitted = e.x+dx, e.y+dy, false
	e.redraw()
}

// reveal pans as far as needed to see the selected blocks.
func (e *editor) reveal() {
	w, h := e.room()
	const free = 24.0
	for _, b := range e.boxes {
		if !e.selected[b.id] || w <= 0 || h <= 0 {
			continue
		}
		x0, y0 := e.x+b.x*e.zoom, e.y+b.y*e.zoom
		x1, y1 := x0+b.w*e.zoom, y0+b.h*e.zoom
		dx, dy := 0.0, 0.0
		if x1 < free || x0 > w-free {
			dx = w/2 - (x0+x1)/2
		}
		if y1 < free || y0 > h-free {
			dy = h/2 - (y0+y1)/2
		}
		if dx != 0 || dy != 0 {
			e.panBy(dx, dy)
		}
		return
	}
}

// at turns a place on screen into the circuit's coordinates [M].
func (e *editor) at(p fyne.Position) (x, y float64) {
	return (float64(p.X) - e.x) / e.zoom, (float64(p.Y) - e.y) / e.zoom
}

// fitSelection shows what is selected as large as there is room for it.
func (e *editor) fitSelection() {
	x0, y0, x1, y1 := math.Inf(1), math.Inf(1), math.Inf(-1), math.Inf(-1)
	add := func(x, y, w, h float64) {
		x0, y0, x1, y1 = math.Min(x0, x), math.Min(y0, y), math.Max(x1, x+w), math.Max(y1, y+h)
	}
	for _, b := range e.boxes {
		if e.selected[b.id] {
			add(b.x, b.y, b.w, b.h)
			if x, y, w, h, ok := e.sheet.LabelBox(b.id); ok {
				add(x, y, w, h)
			}
		}
	}
	marks := []figures.SheetMark{{Note: -1, Group: e.group}}
	for i := range e.notes {
		marks = append(marks, figures.SheetMark{Note: i, Group: -1})
	}
	if e.sheet != nil {
		for _, m := range marks {
			if x, y, w, h, ok := e.sheet.MarkBox(m); ok {
				add(x, y, w, h)
			}
		}
		for _, p := range e.sheet.Pieces(e.line) {
			a, b, _ := e.sheet.PieceEnds(p)
			add(a[0], a[1], 0, 0)
			add(b[0], b[1], 0, 0)
		}
	}
	w, h := e.room()
	if x0 > x1 || w <= 0 || h <= 0 {
		e.s.ctx.Say("Select blocks or a line first, to see them large; F shows the whole sheet.")
		return
	}
	const free = 4 // [M] round the selection
	e.zoom = math.Max(leastZoom, math.Min(fitMost*2*float64(widgets.Scale()), math.Min(w/(x1-x0+2*free), h/(y1-y0+2*free))))
	e.x, e.y, e.fitted = w/2-e.zoom*(x0+x1)/2, h/2-e.zoom*(y0+y1)/2, false
	e.redraw()
}
