package sheet

import (
	"fmt"
	"image/color"
	"time"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
	"barlitre/circuit"
)

// editor is one sheet: a raster with the drawing, and over it what follows the
// pointer.
type editor struct {
	widget.BaseWidget
	s       *Station
	index   int
	circuit int // in the file, −1 for none
	name    string
	drawn   *circuit.Circuit
	plain   *figures.Sheet    // of the file
	sheet   *figures.Sheet    // plain, with labels laid for the results
	labels  *audit.CircuitRun // the results
	moved   *figures.Sheet    // while blocks are dragged, and until the file follows
	ports   []figures.SheetPort
	nets    map[circuit.PortRef]int // lines by the ports that stand on them
	netsOn  *figures.Sheet          // that nets holds for
	boxes   []blockBox              // of sheet, in the circuit's coordinates
	state   *figures.SheetState
	opt     figures.SheetOptions

	selected map[string]bool
	notes    map[int]bool        // selected notes, by place in the circuit
	group    int                 // the selected group, −1 for none
	line     int                 // the selected line, by its number on the sheet, −1 for none
	lineOf   string              // the block whose lines the keys go through, "" for all
	piece    *figures.SheetPiece // of it, once it was chosen
	bentBy   [2]float64          // how far an edit under way moves that piece [M]
	pointer  fyne.Position       // where it was last
	inside   bool                // the pointer is over the sheet
	zoom     float64             // units of the toolkit a module
	x, y     float64             // where the origin of the circuit's coordinates lies [units]
	fitted   bool                // the user has not zoomed or panned since it was fitted

	gesture gesture
	keys    struct{ shift, space, quiet bool } // held; quiet: the focus came without a key
	hover   hover
	wire    wire
	lift    lift
	laying  laying
	join    keyLine

	frames  int // drawn so far
	clicked struct {
		mark figures.SheetMark
		at   time.Time
	}
	raster *canvas.Raster
	pen    *pen.Mosaic
	film   film
	over   *fyne.Container
	band   *canvas.Rectangle
	ring   *widgets.Rim
	clip   *container.Clip
	copied *widgets.Button // begins a proposal, on the empty second sheet
}

// blockBox is where a symbol of a block lies, in the circuit's coordinates [M].
type blockBox struct {
	id         string
	x, y, w, h float64
}

func newEditor(s *Station, index int) *editor {
	e := &editor{s: s, index: index, circuit: -1, line: -1, group: -1, zoom: legendAt, selected: map[string]bool{}, notes: map[int]bool{}, fitted: true}
	e.raster = canvas.NewRaster(e.paint)
	e.raster.ScaleMode = canvas.ImageScalePixels
	e.band, e.ring = canvas.NewRectangle(nil), widgets.NewRim()
	e.band.Hide()
	e.ring.Hide()
	e.over = container.NewWithoutLayout(e.band, e.ring)
	e.wire.build(e)
	e.lift.build(e)
	e.hover.build(e)
	e.clip = container.NewClip(e.over)
	e.copied = widgets.Name(widgets.NewButton("Copy as found to a proposal", s.copyAsFound), fmt.Sprintf("sheet.copy.%d", index))
	e.copied.Hide()
	e.ExtendBaseWidget(e)
	widgets.Name(e, fmt.Sprintf("sheet.%d", index))
	return e
}

// show takes a circuit on the sheet.
func (e *editor) show(at int, c *circuit.Circuit) {
	e.cancel()
	e.hover.hide()
	kept, before, rough := e.keep(c), e.plain, e.sheet
	e.selectLine(-1)
	e.selectMarks(nil, -1)
	if !large(c) {
		e.film.release()
	}
	other := c == nil || e.name != c.Name
	e.circuit, e.drawn, e.moved, e.plain, e.sheet, e.labels, e.boxes, e.ports, e.name = at, c, nil, nil, nil, nil, nil, nil, ""
	if c == nil {
		e.laying.bare = nil
		e.zoom, e.x, e.y, e.fitted = fitMost*float64(widgets.Scale()), 0, 0, true // where a first block goes
		return
	}
	e.name, e.laying.ready = c.Name, nil
	unlaid := large(c) && (other || e.laying.bare != nil)
	if e.laying.bare = nil; large(c) {
		if other {
			rough = nil
		}
		if e.plain = rough.Rough(c); unlaid {
			e.laying.bare = e.plain.Bare()
		}
	} else {
		e.plain = before.Next(c)
		e.laying.exact = nil
	}
	e.sheet = e.plain
	e.label(e.s.solved(c.Name))
	e.boxes, e.ports = boxesOf(e.sheet), e.sheet.Ports()
	if large(c) {
		e.layBehind()
	}
	for id := range e.selected {
		if c.Block(id) == nil {
			delete(e.selected, id)
		}
	}
	if other {
		e.selected = map[string]bool{}
		e.fitted = true
	} else {
		kept()
	}
	if e.fitted {
		e.s.fitAll()
	}
}

// label lays the labels for the results of the circuit, once for each.
func (e *editor) label(run *audit.CircuitRun) {
	if e.plain == nil || run == nil || run == e.labels {
		return
	}
	if large(e.drawn) {
		e.labels = run
		e.layBehind()
		return
	}
	saw := e.labels == nil && e.seesAll()
	e.labels = run
	e.sheet = e.plain.Labelled(run.Duties...)
	if e.fitted {
		e.s.fitAll()
	}
	e.stillSeesAll(saw)
}

// boxesOf asks a sheet where its blocks lie.
func boxesOf(sh *figures.Sheet) []blockBox {
	ox, oy := sh.Origin()
	var out []blockBox
	for _, r := range sh.Regions(0, 0, 1, true) {
		if r.Kind == figures.SheetBlock {
			out = append(out, blockBox{r.Block, r.X + ox, r.Y + oy, r.W, r.H})
		}
	}
	return out
}

func (e *editor) redraw() {
	e.film.stop()
	if e.s.panel != nil {
		e.s.panel.follow()
	}
	e.raster.Refresh()
	e.hover.place()
}

// redrawClock is redraw where only the clock has moved.
func (e *editor) redrawClock() {
	if !e.roll() {
		e.redraw()
		return
	}
	e.hover.place()
}

// recolour takes the colours of the theme.
func (e *editor) recolour() {
	pal := e.s.ctx.Palette()
	fill := pal.Gain
	fill.A = 30
	e.band.FillColor, e.band.StrokeColor, e.band.StrokeWidth = fill, pal.Gain, 1
	e.ring.Dress(color.Transparent, pal.Gain, 2, 4, false)
	e.hover.recolour()
	e.wire.recolour()
	e.lift.recolour()
	canvas.Refresh(e.over)
}
