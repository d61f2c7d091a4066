package sheet

import (
	"math"
	"time"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"

	"barlitre/app/widgets"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
)

// lift is what blocks are dragged with: as long as laying all lines anew is quick, they
// are laid at each step. On larger sheets what stays is drawn once and kept, and what
// moves is drawn over it with plain elbows; the lines are laid when the button is
// released. Thin lines show what the dragged blocks are in line with.
type lift struct {
	e      *editor
	quick  bool // laying all lines is quick here
	tried  bool
	up     *figures.Lifted
	still  *pen.Mark  // the picture up to where what stays is drawn
	view   [3]float64 // zoom and place that it was drawn for
	guides [2]*canvas.Line
}

// slowLay is how long laying the lines may take while a block follows the pointer.
const slowLay = 40 * time.Millisecond

func (l *lift) build(e *editor) {
	l.e = e
	for i := range l.guides {
		l.guides[i] = canvas.NewLine(nil)
		l.guides[i].Hide()
		e.over.Add(l.guides[i])
	}
}

func (l *lift) recolour() {
	for _, g := range l.guides {
		g.StrokeColor, g.StrokeWidth = l.e.s.ctx.Palette().Danger, widgets.Scale()
	}
}

// end forgets the drag.
func (l *lift) end() {
	l.up, l.still, l.tried = nil, nil, false
	for _, g := range l.guides {
		g.Hide()
	}
}

// dragTo moves the picture of the dragged blocks by whole modules.
func (e *editor) dragTo(p fyne.Position) {
	g := &e.gesture
	dx := math.Round(float64(p.X-g.from.X) / e.zoom)
	dy := math.Round(float64(p.Y-g.from.Y) / e.zoom)
	if dx == g.dx && dy == g.dy {
		return
	}
	g.dx, g.dy = dx, dy
	l := &e.lift
	if large(e.drawn) {
		l.tried = true
	}
	if !l.tried || l.quick && len(g.notes) == 0 {
		began := time.Now()
		e.moved = e.sheet.MoveAll(g.ids, dx, dy)
		l.quick, l.tried = time.Since(began) < slowLay, true
	}
	if !l.quick || len(g.notes) > 0 {
		if l.up == nil {
			l.up = e.sheet.Lift(g.ids, g.notes...)
		}
		e.moved = l.up.At(dx, dy)
	}
	l.align(g.ids, dx, dy)
	e.redraw()
}

// endDrag puts what was dragged where it is.
func (e *editor) endDrag(g gesture) {
	e.lift.end()
	canvas.Refresh(e.over)
	e.s.move(e, g.ids, g.notes, g.dx, g.dy)
}

// align shows a line through what the dragged blocks are level or upright with: middles of
// blocks, then ports, the nearest one.
func (l *lift) align(ids []string, dx, dy float64) {
	moves := map[string]bool{}
	for _, id := range ids {
		moves[id] = true
	}
	type point struct{ x, y float64 }
	var own, others [2][]point // middles, ports
	add := func(id string, kind int, x, y float64) {
		if moves[id] {
			own[kind] = append(own[kind], point{x + dx, y + dy})
		} else {
			others[kind] = append(others[kind], point{x, y})
		}
	}
	for i := range l.e.drawn.Blocks {
		if x, y, ok := l.e.sheet.At(l.e.drawn.Blocks[i].ID); ok {
			add(l.e.drawn.Blocks[i].ID, 0, x, y)
		}
	}
	for _, p := range l.e.ports {
		add(p.Block, 1, p.X, p.Y)
	}
	for axis, g := range l.guides {
		g.Hide()
		least := math.Inf(1)
		for kind := range own {
			for _, a := range own[kind] {
				for _, b := range others[kind] {
					off, gap := math.Abs(a.x-b.x), math.Abs(a.y-b.y)
					if axis == 1 {
						off, gap = gap, off
					}
					if gap += float64(1000 * kind); off < 0.01 && gap < least {
						least = gap
						g.Position1 = l.e.onSheet(a.x, a.y)
						g.Position2 = l.e.onSheet(b.x, b.y)
						g.Show()
					}
				}
			}
		}
	}
	canvas.Refresh(l.e.over)
}

// onSheet is where a point of the circuit's coordinates is on screen.
func (e *editor) onSheet(x, y float64) fyne.Position {
	return fyne.NewPos(float32(e.x+x*e.zoom), float32(e.y+y*e.zoom))
}
