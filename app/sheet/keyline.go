package sheet

import (
	"math"
	"sort"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"

	"barlitre/audit/figures"
)

// keyLine draws a line by keys: first the port of the selected block is chosen, then the port
// that it is to lead to.
type keyLine struct {
	e     *editor
	on    bool
	from  *figures.SheetPort // once it was chosen
	ports []figures.SheetPort
	at    int
}

// begin starts at the selected block.
func (j *keyLine) begin(e *editor) {
	ids := e.ids()
	if len(ids) != 1 {
		e.s.ctx.Say("Select one block, by a click or Tab, to draw a line from it.")
		return
	}
	e.cancel()
	e.hover.hide()
	*j = keyLine{e: e, on: true}
	for _, p := range e.ports {
		if p.Block == ids[0] {
			j.ports = append(j.ports, p)
		}
	}
	switch len(j.ports) {
	case 0:
		j.on = false
		e.s.ctx.Say(ids[0] + " has no port.")
		return
	case 1:
		j.take()
		return
	}
	e.s.ctx.Say("Arrow keys or Tab choose the port of " + ids[0] + ", Enter takes it, Escape gives up.")
	j.show()
}

// take begins the line at the port at hand, and offers the others, nearest first.
func (j *keyLine) take() {
	from := j.ports[j.at]
	j.from, j.ports, j.at = &from, nil, 0
	for _, p := range j.e.ports {
		if p.Block != from.Block {
			j.ports = append(j.ports, p)
		}
	}
	far := func(p figures.SheetPort) float64 { return math.Hypot(p.X-from.X, p.Y-from.Y) }
	sort.SliceStable(j.ports, func(a, b int) bool { return far(j.ports[a]) < far(j.ports[b]) })
	if len(j.ports) == 0 {
		j.e.s.ctx.Say("There is no other block to connect " + from.String() + " to.")
		j.end()
		return
	}
	j.e.s.ctx.Say("Arrow keys go to the next port that way, Tab to the next farther one; Enter connects " + from.String() + ", Escape gives up.")
	j.show()
}

// end takes it off the sheet.
func (j *keyLine) end() {
	if !j.on {
		return
	}
	j.on = false
	j.e.wire.hide()
	j.e.hover.hide()
	canvas.Refresh(j.e.over)
}

// show shows the port at hand, and what Enter would do.
func (j *keyLine) show() {
	e, p := j.e, j.ports[j.at]
	w := &e.wire
	at := e.onScreen(p)
	e.intoView(at)
	at = e.onScreen(p)
	w.line.Hide()
	w.ring(1, nil)
	w.mark(p.Block)
	if j.from == nil {
		w.ring(0, &p)
		e.hover.tell(at, e.portLines(p.PortRef)...)
	} else {
		text, fine := e.joinSays(lineEnd{port: j.from, net: -1}, lineEnd{port: &p, net: -1})
		w.line.Position1, w.line.Position2 = e.onScreen(*j.from), at
		w.line.Show()
		w.ring(0, j.from)
		w.ring(1, &p)
		w.tint(fine)
		e.hover.tell(at, text)
	}
	canvas.Refresh(e.over)
}

// key takes a key while a line is drawn, and tells whether it did.
func (j *keyLine) key(k fyne.KeyName) bool {
	if !j.on {
		return false
	}
	switch k {
	case fyne.KeyEscape:
		j.end()
	case fyne.KeyReturn, fyne.KeyEnter:
		if j.from == nil {
			j.take()
			return true
		}
		from, to := lineEnd{port: j.from, net: -1}, lineEnd{port: &j.ports[j.at], net: -1}
		j.end()
		j.e.connect(from, to)
	case fyne.KeyTab:
		step := 1
		if j.e.keys.shift {
			step = len(j.ports) - 1
		}
		j.at = (j.at + step) % len(j.ports)
		j.show()
	case fyne.KeyLeft:
		j.goTo(-1, 0)
	case fyne.KeyRight:
		j.goTo(1, 0)
	case fyne.KeyUp:
		j.goTo(0, -1)
	case fyne.KeyDown:
		j.goTo(0, 1)
	default:
		return false
	}
	return true
}

// goTo goes to the nearest port in a direction; what lies aside counts as twice as far.
func (j *keyLine) goTo(dx, dy float64) {
	now, least, best := j.ports[j.at], math.Inf(1), -1
	for i, p := range j.ports {
		ahead := (p.X-now.X)*dx + (p.Y-now.Y)*dy
		aside := math.Abs((p.X-now.X)*dy) + math.Abs((p.Y-now.Y)*dx)
		if d := ahead + 2*aside; ahead > 0.1 && d < least {
			least, best = d, i
		}
	}
	if best >= 0 {
		j.at = best
		j.show()
	}
}

// intoView pans as far as needed to see a place on screen.
func (e *editor) intoView(at fyne.Position) {
	w, h := e.room()
	const free = 30
	dx := math.Max(0, free-float64(at.X)) - math.Max(0, float64(at.X)-(w-free))
	dy := math.Max(0, free-float64(at.Y)) - math.Max(0, float64(at.Y)-(h-free))
	if dx != 0 || dy != 0 {
		e.panBy(dx, dy)
	}
}
