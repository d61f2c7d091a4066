package sheet

import (
	"fyne.io/fyne/v2"

	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/circuit"
)

// manyBlocks is from how many blocks on lines and labels are laid behind the window. Until
// they are, the sheet has plain elbows where lines must change, soon followed by these lines
// laid alone; one that was just opened has no lines and says so.
const manyBlocks = 80

// laying is what is laid behind the window.
type laying struct {
	busy  bool
	bare  *figures.Sheet // what is shown of a circuit of which nothing was laid yet
	exact *figures.Sheet // the last one that was laid in full, without results
	ready func()         // what was laid while a gesture was under way
}

// post runs a function on the UI goroutine; tests keep a queue of their own.
var post = fyne.Do

// large tells whether laying a circuit would keep the window waiting.
func large(c *circuit.Circuit) bool { return c != nil && len(c.Blocks) >= manyBlocks }

// layBehind lays the lines of what is drawn and the labels for its results, one at a time.
func (e *editor) layBehind() {
	l := &e.laying
	if l.busy {
		return // when that is done, it is compared with what is then wanted
	}
	l.busy = true
	c, run, before, rough := e.drawn, e.labels, l.exact, e.sheet
	go func() {
		if near, ok := rough.Near(); ok {
			post(func() { e.showNear(c, rough, near) })
		}
		exact := before
		if before == nil || before.Circuit() != c {
			exact = before.Next(c)
		}
		full := exact
		if run != nil {
			full = exact.Labelled(run.Duties...)
		}
		post(func() { e.laidBehind(c, run, exact, full) })
	}()
}

// laidBehind shows what was laid, unless something else is wanted by now.
func (e *editor) laidBehind(c *circuit.Circuit, run *audit.CircuitRun, exact, full *figures.Sheet) {
	l := &e.laying
	l.busy, l.exact = false, exact
	if e.drawn != c || e.labels != run {
		if e.drawn == c && l.bare != nil {
			e.showLaid(c, exact, exact) // the lines; labels for the results follow
		}
		if large(e.drawn) {
			e.layBehind()
		}
		return
	}
	if l.ready = func() { e.showLaid(c, exact, full) }; e.gesture.kind == idle || e.gesture.kind == cancelled {
		e.takeLaid()
	}
}

// showNear shows the lines at what was moved, while all are being laid.
func (e *editor) showNear(c *circuit.Circuit, rough, near *figures.Sheet) {
	if e.sheet == rough && (e.gesture.kind == idle || e.gesture.kind == cancelled) {
		e.showLaid(c, near, near)
	}
}

// takeLaid shows what was laid during a gesture.
func (e *editor) takeLaid() {
	if f := e.laying.ready; f != nil {
		e.laying.ready = nil
		f()
	}
}

// showLaid puts the full sheet in the place of a rough one.
func (e *editor) showLaid(c *circuit.Circuit, exact, full *figures.Sheet) {
	if e.drawn != c {
		return
	}
	kept := e.keep(c)
	e.laying.bare = nil
	e.selectLine(-1)
	e.plain, e.sheet = exact, full
	e.boxes, e.ports = boxesOf(full), full.Ports()
	kept()
	if e.fitted {
		e.s.fitAll()
	}
	e.redraw()
}
