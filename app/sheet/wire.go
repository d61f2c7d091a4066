package sheet

import (
	"math"
	"slices"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"

	"barlitre/app/widgets"
	"barlitre/audit/figures"
	"barlitre/circuit"
)

// wire shows what a line is drawn with: a ring round the port under the pointer, dots on
// the ports of the block there, and a line from port to pointer while it is dragged.
type wire struct {
	e     *editor
	line  *canvas.Line
	rings [2]*canvas.Circle // at the port that it begins at, and the one it would end at
	dots  []*canvas.Circle

	tried   string // the last pair of ends that was tried
	triedOn int    // on this revision
	refusal error
}

// Sizes of rings and dots [units at scale 1].
const (
	portRing = 6
	portDot  = 2.5
)

func (w *wire) build(e *editor) {
	w.e, w.line = e, canvas.NewLine(nil)
	w.line.Hide()
	e.over.Add(w.line)
	for i := range w.rings {
		w.rings[i] = canvas.NewCircle(nil)
		w.rings[i].Hide()
		e.over.Add(w.rings[i])
	}
}

func (w *wire) recolour() {
	pal, stroke := w.e.s.ctx.Palette(), 2*widgets.Scale()
	w.line.StrokeColor, w.line.StrokeWidth = pal.Gain, stroke
	for _, r := range w.rings {
		r.StrokeColor, r.StrokeWidth = pal.Gain, stroke
	}
	for _, d := range w.dots {
		d.FillColor = pal.Gain
	}
}

// tint draws the line in the colour of danger where it would be refused.
func (w *wire) tint(fine bool) {
	pal := w.e.s.ctx.Palette()
	c := pal.Gain
	if !fine {
		c = pal.Danger
	}
	w.line.StrokeColor, w.rings[1].StrokeColor = c, c
}

// hide takes all of it off the sheet.
func (w *wire) hide() {
	w.line.Hide()
	for _, r := range w.rings {
		r.Hide()
	}
	w.mark("")
}

// mark puts a dot on each port of a block, "" for none.
func (w *wire) mark(block string) {
	n := 0
	for _, p := range w.e.ports {
		if block == "" || p.Block != block {
			continue
		}
		if n == len(w.dots) {
			d := canvas.NewCircle(w.e.s.ctx.Palette().Gain)
			w.dots = append(w.dots, d)
			w.e.over.Objects = slices.Insert(w.e.over.Objects, 0, fyne.CanvasObject(d)) // under what is read of a block
		}
		w.round(w.dots[n], p, portDot)
		n++
	}
	for _, d := range w.dots[n:] {
		d.Hide()
	}
}

// round shows a circle about a port.
func (w *wire) round(c *canvas.Circle, p figures.SheetPort, radius float32) {
	radius *= widgets.Scale()
	at := w.e.onScreen(p)
	c.Move(at.SubtractXY(radius, radius))
	c.Resize(fyne.NewSquareSize(2 * radius))
	c.Show()
}

// ring shows a ring about a port, or none with nil.
func (w *wire) ring(i int, p *figures.SheetPort) {
	if p == nil {
		w.rings[i].Hide()
		return
	}
	w.round(w.rings[i], *p, portRing)
}

// onScreen is where a port is, in units of the widget.
func (e *editor) onScreen(p figures.SheetPort) fyne.Position {
	return fyne.NewPos(float32(e.x+p.X*e.zoom), float32(e.y+p.Y*e.zoom))
}

// portAt finds the port nearest to a place on screen, nil when none is near. The ports
// of a junction are all at its dot: it can be dragged once it is selected.
func (e *editor) portAt(at fyne.Position) *figures.SheetPort {
	if _, h := e.room(); e.sheet == nil || float64(at.Y) > h {
		return nil
	}
	x, y := e.at(at)
	least := math.Max(0.7, math.Min(1.2, portRing*float64(widgets.Scale())/e.zoom)) // [M]
	var found *figures.SheetPort
	for i := range e.ports {
		p := &e.ports[i]
		d := math.Hypot(p.X-x, p.Y-y)
		if b := e.drawn.Block(p.Block); d < least && b != nil && !(b.Kind == "junction" && e.selected[p.Block]) {
			least, found = d, p
		}
	}
	return found
}

// portLines tells of a port under the pointer.
func (e *editor) portLines(p circuit.PortRef) []string {
	out := []string{p.String()}
	if b := e.drawn.Block(p.Block); b != nil {
		if k := circuit.KindNamed(b.Kind); k != nil && k.Port(p.Port) != nil {
			out[0] += " · " + k.Port(p.Port).Text
		}
	}
	if e.joined(p) {
		return append(out, e.lineLines(e.netOf(p))...)
	}
	return append(out, "not connected; drag to a port or a line")
}

// netOf returns the drawn line that a port stands on, −1 for none.
func (e *editor) netOf(p circuit.PortRef) int {
	if e.netsOn != e.sheet {
		e.netsOn, e.nets = e.sheet, map[circuit.PortRef]int{}
		for n := e.sheet.Nets() - 1; n >= 0; n-- {
			for _, q := range e.sheet.Net(n) {
				e.nets[q] = n
			}
		}
	}
	if n, ok := e.nets[p]; ok {
		return n
	}
	return -1
}

// joined tells whether a port stands on a line.
func (e *editor) joined(p circuit.PortRef) bool { return e.netOf(p) >= 0 }

// wireTo draws the line from where it began to the pointer, and tells what a release there
// would do.
func (e *editor) wireTo(at fyne.Position) {
	g := &e.gesture
	g.at = at
	w := &e.wire
	from, to := e.wireEnds(*g)
	w.line.Position1, w.line.Position2 = g.from, at
	switch {
	case g.port != nil:
		w.line.Position1 = e.onScreen(*g.port)
	case from.net >= 0:
		w.line.Position1 = e.onSheet(from.at[0], from.at[1])
	}
	switch {
	case to.port != nil:
		w.line.Position2 = e.onScreen(*to.port)
	case to.net >= 0 && !from.is(to):
		w.line.Position2 = e.onSheet(to.at[0], to.at[1])
	}
	w.line.Show()
	w.ring(0, g.port)
	w.ring(1, to.port)
	block, _, _ := e.hit(at)
	w.mark(block)
	text, fine := e.joinSays(from, to)
	w.tint(fine)
	e.hover.tell(at, text)
	canvas.Refresh(e.over)
}

// wireEnds are what a drawn line begins at, and would end at where it is now.
func (e *editor) wireEnds(g gesture) (from, to lineEnd) {
	from, to = lineEnd{port: g.port, net: g.net}, lineEnd{port: e.portAt(g.at), net: -1}
	if g.port != nil {
		from.net = -1
	}
	if to.port == nil {
		_, to.net, _ = e.hit(g.at)
	}
	from.at, to.at = e.onLine(from.net, g.from), e.onLine(to.net, g.at)
	return from, to
}

// onLine is the point of a drawn line nearest to a place on screen, on the grid [M].
func (e *editor) onLine(net int, p fyne.Position) [2]float64 {
	if e.sheet == nil || net < 0 {
		return [2]float64{}
	}
	x, y := e.at(p)
	at, _ := e.sheet.OnLine(net, x, y)
	return at
}

// endWire joins what a line began at with what is under the pointer.
func (e *editor) endWire(g gesture) {
	e.wire.hide()
	e.hover.hide()
	canvas.Refresh(e.over)
	from, to := e.wireEnds(g)
	if from.is(to) {
		return
	}
	if !to.any() {
		e.s.ctx.Say("Nothing connected: release on a port or on a line to connect " + e.endName(from) + ".")
		return
	}
	e.connect(from, to)
}
