package sheet

import (
	"fmt"
	"image"
	"math"
	"sort"

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
	boxes   []blockBox // of sheet, in the circuit's coordinates
	state   *figures.SheetState
	opt     figures.SheetOptions

	selected map[string]bool
	line     int           // the selected line, by its number on the sheet, −1 for none
	pointer  fyne.Position // where it was last
	inside   bool          // the pointer is over the sheet
	zoom     float64       // units of the toolkit a module
	x, y     float64       // where the origin of the circuit's coordinates lies [units]
	fitted   bool          // the user has not zoomed or panned since it was fitted

	gesture gesture
	keys    struct{ shift, space, quiet bool } // held; quiet: the focus came without a key
	hover   hover
	wire    wire

	raster *canvas.Raster
	pen    *pen.Raster
	over   *fyne.Container
	band   *canvas.Rectangle
	ring   *canvas.Rectangle
	clip   *container.Clip
	copied *widgets.Button // begins a proposal, on the empty second sheet
}

// blockBox is where a symbol of a block lies, in the circuit's coordinates [M].
type blockBox struct {
	id         string
	x, y, w, h float64
}

// Limits of the zoom [units a module].
const (
	leastZoom = 1.5
	mostZoom  = 60
	fitMost   = 10 // a small circuit is not blown up
	legendAt  = 5.4
)

func newEditor(s *Station, index int) *editor {
	e := &editor{s: s, index: index, circuit: -1, line: -1, zoom: legendAt, selected: map[string]bool{}, fitted: true}
	e.raster = canvas.NewRaster(e.paint)
	e.raster.ScaleMode = canvas.ImageScalePixels
	e.band, e.ring = canvas.NewRectangle(nil), canvas.NewRectangle(nil)
	e.band.Hide()
	e.ring.Hide()
	e.over = container.NewWithoutLayout(e.band, e.ring)
	e.wire.build(e)
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
	e.selectLine(-1)
	other := c == nil || e.name != c.Name
	e.circuit, e.drawn, e.moved, e.plain, e.sheet, e.labels, e.boxes, e.ports, e.name = at, c, nil, nil, nil, nil, nil, nil, ""
	if c == nil {
		return
	}
	e.name, e.plain = c.Name, figures.NewSheet(c)
	e.sheet = e.plain
	e.label(e.s.solved(c.Name))
	e.boxes, e.ports = boxesOf(e.sheet), e.sheet.Ports()
	for id := range e.selected {
		if c.Block(id) == nil {
			delete(e.selected, id)
		}
	}
	if other {
		e.selected = map[string]bool{}
		e.fitted = true
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
	e.labels, e.sheet = run, e.plain.Labelled(run.Duties...)
	if e.fitted {
		e.s.fitAll()
	}
}

// boxesOf asks a sheet where its blocks lie, by drawing it without ink.
func boxesOf(sh *figures.Sheet) []blockBox {
	ox, oy := sh.Origin()
	var out []blockBox
	for _, r := range sh.Draw(pen.NewRaster(image.NewRGBA(image.Rect(0, 0, 1, 1))), 0, 0, 1, nil, figures.SheetOptions{HideLabels: true}) {
		if r.Kind == figures.SheetBlock {
			out = append(out, blockBox{r.Block, r.X + ox, r.Y + oy, r.W, r.H})
		}
	}
	return out
}

// selectOnly selects one block, or none with "". A block that is selected together
// with others keeps them.
func (e *editor) selectOnly(block string) {
	if block != "" && e.selected[block] {
		return
	}
	e.selected = map[string]bool{}
	if block != "" {
		e.selectLine(-1)
	}
	if block != "" && e.drawn != nil && e.drawn.Block(block) != nil {
		e.selected[block] = true
	}
	e.opt.Selected = e.selected
}

// selectLine selects a line by its number on the sheet, or none with −1.
func (e *editor) selectLine(net int) {
	e.line, e.opt.Lines = net, nil
	if net >= 0 {
		e.opt.Lines = map[int]bool{net: true}
	}
}

// ids lists the selected blocks, sorted.
func (e *editor) ids() []string {
	var out []string
	for id := range e.selected {
		out = append(out, id)
	}
	sort.Strings(out)
	return out
}

// legendFrom is the height of a sheet under which it needs all room for the drawing [units at scale 1].
const legendFrom = 130

// legendFoot is the room below the legend [units at scale 1].
const legendFoot = 5

// legendHeight is the strip at the lower edge [units].
func (e *editor) legendHeight() float64 {
	if e.Size().Height < legendFrom*widgets.Scale() {
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

// hit finds what lies at a place on screen.
func (e *editor) hit(p fyne.Position) (block string, net int, ok bool) {
	if _, h := e.room(); e.sheet == nil || float64(p.Y) > h {
		return "", -1, false
	}
	x, y := e.at(p)
	ox, oy := e.sheet.Origin()
	return e.sheet.Hit(x-ox, y-oy)
}

func (e *editor) redraw() {
	if e.s.panel != nil {
		e.s.panel.follow()
	}
	e.raster.Refresh()
	e.hover.place()
}

// recolour takes the colours of the theme.
func (e *editor) recolour() {
	pal := e.s.ctx.Palette()
	fill := pal.Gain
	fill.A = 30
	e.band.FillColor, e.band.StrokeColor, e.band.StrokeWidth = fill, pal.Gain, 1
	e.ring.StrokeColor, e.ring.StrokeWidth, e.ring.CornerRadius = pal.Gain, 2, 4
	e.hover.recolour()
	e.wire.recolour()
	canvas.Refresh(e.over)
}

// Parts tells scripts where the blocks and their ports are, in units of the widget.
func (e *editor) Parts() []widgets.Part {
	var out []widgets.Part
	for _, b := range e.boxes {
		out = append(out, widgets.Part{Name: b.id, Text: e.blockText(b.id), Click: true,
			X: e.x + b.x*e.zoom, Y: e.y + b.y*e.zoom, W: b.w * e.zoom, H: b.h * e.zoom})
	}
	const half = 3
	for _, p := range e.ports {
		at := e.onScreen(p)
		out = append(out, widgets.Part{Name: p.String(), Text: pick(e.joined(p.PortRef), "connected", "free"), Click: true,
			X: float64(at.X) - half, Y: float64(at.Y) - half, W: 2 * half, H: 2 * half})
	}
	return out
}

// DumpText tells scripts what the sheet shows.
func (e *editor) DumpText() string {
	if e.sheet == nil {
		return "empty"
	}
	text := e.name
	for _, id := range e.ids() {
		text += " [" + id + "]"
	}
	if e.line >= 0 {
		text += " line " + e.lineName(e.line)
	}
	return text
}

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
func (r *editorRenderer) Refresh()           { r.e.raster.Refresh(); canvas.Refresh(r.e.over) }
func (r *editorRenderer) Destroy()           {}
func (r *editorRenderer) Objects() []fyne.CanvasObject {
	return []fyne.CanvasObject{r.e.raster, r.e.clip, r.e.copied}
}
