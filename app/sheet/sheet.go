package sheet

import (
	"slices"

	"fyne.io/fyne/v2"

	"barlitre/app/station"
	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/circuit"
)

// Station is the page with the circuits.
type Station struct {
	ctx      station.Context
	content  *fyne.Container
	editors  [2]*editor
	cards    [2]*card
	bar      *bar
	panel    *panel
	findings *findings
	edge     *widgets.Figure

	wide   bool // one sheet in full width, as asked for
	single bool // one sheet is shown, asked for or for want of room
	active int  // the sheet worked on last
	fold   fold
	scales figures.SheetScales
}

// New makes the station.
func New(ctx station.Context) station.Station {
	s := &Station{ctx: ctx}
	s.build()
	return s
}

// build makes all objects once.
func (s *Station) build() {
	for i := range s.editors {
		s.editors[i] = newEditor(s, i)
		s.cards[i] = newCard(s, i)
	}
	s.bar = newBar(s)
	s.panel = newPanel(s)
	s.findings = newFindings(s)
	s.edge = newEdge(s)
	s.content = s.layOut()
}

// Name is the word on the job rail.
func (s *Station) Name() string { return "Circuit" }

// Content is made once.
func (s *Station) Content() fyne.CanvasObject { return s.content }

// Help is the short help of the station.
func (s *Station) Help() string { return helpText }

// Changed brings in what changed.
func (s *Station) Changed(w station.What) {
	s.findings.opened = s.findings.opened || w&station.Everything == station.Everything
	if w == station.Advice {
		s.findings.reload()
		return
	}
	if w.Has(station.Model | station.Selection) {
		s.bringCircuits(w.Has(station.Model))
	}
	if w.Has(station.Model | station.Solution | station.Settings | station.Selection) {
		for _, e := range s.editors {
			e.label(s.solved(e.name))
		}
		s.findings.reload()
		s.scales = figures.ScalesOf(s.run(0), s.run(1))
		s.bringOptions()
	}
	if w.Has(station.Model | station.Solution | station.Clock | station.Selection) {
		s.bringState()
	}
	if w.Has(station.Settings) {
		s.recolour()
	}
	s.panel.changed(w)
	if w.Has(station.Selection) {
		s.revealSelected()
		s.findings.follow()
	}
	if w&^(station.Clock|station.Reading) != 0 {
		s.bar.reload()
	}
	if w.Has(station.Model | station.Settings | station.Selection) {
		s.edge.Refresh()
		s.content.Refresh()
	}
	for _, e := range s.editors {
		switch {
		case w&^(station.Clock|station.Reading) != 0:
			e.redraw()
		case w.Has(station.Clock) && e.state != nil:
			e.redrawClock()
		}
	}
	if w&station.Everything == station.Everything {
		s.takeFocus()
	}
}

// Mend reports a finding that keeps a circuit from being solved or is likely an
// error, and a value that was refused and still stands in its field.
func (s *Station) Mend() bool {
	if len(s.panel.drafts) > 0 {
		return true
	}
	list, _ := s.ctx.Doc().Listed(s.ctx.System())
	return slices.ContainsFunc(list, func(f circuit.Finding) bool { return f.Circuit != "" && f.ToMend() })
}

// bringCircuits gives each sheet its circuit. A sheet is laid out anew only when the
// file has changed.
func (s *Station) bringCircuits(model bool) {
	left, right := s.shown()
	for i, c := range [2]int{left, right} {
		e := s.editors[i]
		var drawn *circuit.Circuit
		if c >= 0 {
			drawn = s.ctx.Doc().File().Circuits[c].Circuit
		}
		if model || e.circuit != c || e.drawn != drawn {
			e.show(c, drawn)
		}
		s.cards[i].reload()
	}
	show(s.editors[1].copied, left >= 0 && right < 0)
	at, block := s.ctx.Selected()
	for i, e := range s.editors {
		if e.circuit >= 0 && e.circuit == at {
			s.active = i
			e.selectOnly(block)
		} else {
			e.selectOnly("")
		}
	}
	if s.editors[s.active].circuit < 0 {
		s.active = 0
	}
}

// shown returns the circuits of the two sheets, −1 for none: the first as found, else
// the first of all, and the one picked beside it.
func (s *Station) shown() (left, right int) {
	file := s.ctx.Doc().File()
	left, right = -1, -1
	if file == nil || len(file.Circuits) == 0 {
		return
	}
	left = 0
	if base := file.Base(); base != nil {
		left = slices.IndexFunc(file.Circuits, func(c audit.CircuitEntry) bool { return c.Name == base.Name })
	}
	if name := s.ctx.Beside(); name != "" {
		right = slices.IndexFunc(file.Circuits, func(c audit.CircuitEntry) bool { return c.Name == name })
	}
	return
}

// run is the solved duty at hand of the circuit on a sheet, nil when there is none.
func (s *Station) run(i int) *audit.DutyRun {
	return s.runOf(s.editors[i].name)
}

func (s *Station) runOf(name string) *audit.DutyRun {
	c := s.solved(name)
	if c == nil || s.ctx.Duty() < 0 || s.ctx.Duty() >= len(c.Duties) {
		return nil
	}
	return c.Duties[s.ctx.Duty()]
}

// solved is the solution of a circuit by name, nil when there is none.
func (s *Station) solved(name string) *audit.CircuitRun {
	sol := s.ctx.Solution()
	if sol == nil || name == "" {
		return nil
	}
	for _, c := range sol.Circuits {
		if c.Circuit.Name == name {
			return c
		}
	}
	return nil
}

// bringState gives both sheets the state at the clock.
func (s *Station) bringState() {
	fit := false
	for i, e := range s.editors {
		had, saw := e.state != nil, e.seesAll()
		if run := s.run(i); s.ctx.View().Cycle {
			e.state = figures.OverCycle(run, s.ctx.Clock())
		} else {
			e.state = figures.StateAt(run, s.ctx.Clock())
		}
		fit = fit || e.fitted && had != (e.state != nil) // the legend takes room, or gives it back
		e.stillSeesAll(saw && !had)
		e.hover.stale()
	}
	if fit {
		s.fitAll()
	}
}

// bringOptions gives both sheets one set of scales, colours and units.
func (s *Station) bringOptions() {
	marks := figures.Marks(s.findings.list)
	for _, e := range s.editors {
		e.opt.Palette, e.opt.System, e.opt.Scales = s.ctx.Palette(), s.ctx.System(), s.scales
		e.opt.Findings = marks[e.name]
		e.opt.Selected, e.opt.Hide = e.selected, s.ctx.View().Hide
	}
}

func (s *Station) recolour() {
	for i := range s.editors {
		s.editors[i].recolour()
		s.cards[i].recolour()
	}
	s.panel.recolour()
	s.findings.recolour()
	s.bar.recolour()
}

// revealSelected makes sure the selected block can be seen.
func (s *Station) revealSelected() {
	if e := s.editors[s.active]; len(e.selected) > 0 {
		e.reveal()
	}
	s.arrange()
}

// takeFocus gives the keys to the sheet worked on last, when the page is shown and
// nothing else has them: so W, F and the arrows work at once.
func (s *Station) takeFocus() {
	w := s.ctx.Window()
	e := s.editors[s.active]
	if w == nil || w.Canvas() == nil || w.Canvas().Focused() != nil || !s.content.Visible() {
		return
	}
	e.keys.quiet = true
	w.Canvas().Focus(e)
}

// setWide shows one sheet in full width, or both.
func (s *Station) setWide(on bool) {
	s.wide = on
	s.arrange()
	s.bar.reload()
	s.fitAll()
}

// setEnergy switches the discs between the instant and the cycle.
func (s *Station) setEnergy(on bool) {
	s.ctx.View().Cycle = on
	s.bringState()
	s.bar.reload()
	for _, e := range s.editors {
		e.redraw()
	}
}

// fitAll shows each sheet whole, both at one zoom, so that widths and discs compare.
func (s *Station) fitAll() {
	zoom := 0.0
	for i, e := range s.editors {
		if z := e.fitZoom(); s.sheetShown(i) && z > 0 && (zoom == 0 || z < zoom) {
			zoom = z
		}
	}
	for _, e := range s.editors {
		e.fit(zoom)
	}
}

// sheetShown tells whether a sheet is on screen and has a circuit.
func (s *Station) sheetShown(i int) bool {
	return s.editors[i].circuit >= 0 && (!s.single || i == s.active)
}

const helpText = `Two circuits, one duty, one clock: the circuit as found on the left, a proposal on the right. Move the clock below, and both show that instant.

The tint of a line is its pressure, its width the flow; the amber disc at a block is the power it turns to heat, or over a cycle its energy. Both sheets have the same scales. “Results shown” switches each of these signs, and the numbers, off and on.

The pointer reads: at a line pressure, flow, power, and velocity where it touches a line whose inner diameter is known; at a valve its position and each way that is open, which is also drawn bold.

Click a block to see and change its values on the right; type a value with any unit, as in 2300 psi. The values of machines and drives stand in sections; “more” on a section shows those left at their defaults, “more” on a value lets it be dropped, so that its default holds again. Below stand what it does now, what the duty asks of it against what is permitted, its year beside that of the same machine in the other circuit, and pictures; the words on top lead there. With nothing selected the panel has the oil. Several selected blocks of a kind are edited together: a field shows what they have in common, or “several”, and one change is one step for all. “Compare” sets the values of the same block in the other circuit beside these; ≠ marks what differs, and “take this” takes it over.

Circuits… makes a further proposal, from a copy or empty, picks the one that stands beside the circuit as found, renames, duplicates and deletes it, or swaps the sides. The verdict and all stations follow the one picked; the report has all of them.

Shift adds to the selection, dragging over the ground selects with a box, Ctrl+A selects all, Escape nothing. Tab goes from block to block, then to notes and groups.

Add a block with / or the button above: type a part of its name, Enter puts it at the pointer. Drag from a port (a ring shows it), or from anywhere on a line, to a port or a line to connect them; the label at the pointer says what a release will do, or why it is refused. By keys: C, choose the port of the selected block, Enter, choose the other port, Enter. The ports of a junction lie at its dot: select it to drag it.

Lines find their way by themselves. To lay one by hand, click it and drag a piece of it sideways; S lets it find its way again. A second click chooses one branch of a line. By keys: L goes through the lines, B through the pieces of one, arrow keys move the piece.

Del removes the selected block, and the lines on both sides become one; it removes the selected line, or the chosen branch of it. R rotates, M mirrors, F2 renames, Ctrl+D duplicates, Ctrl+C, Ctrl+X and Ctrl+V go through the clipboard, also to the other sheet and to another window of the program. Ctrl+Z takes back each of these.

Ctrl+G draws a box with a label around the selected blocks; its label moves all in it. N writes a note at the pointer (Enter begins a line, Ctrl+Enter ends it). F2 or Enter changes either, Del removes it; both are printed with the circuit.

Drag a block to move it, or nudge it with the arrow keys (Shift: 5 modules); thin lines show what it is in line with. Escape cancels. The wheel zooms to the pointer, with Shift or Ctrl it pans, as does the middle button, Space with a drag, or the arrow and page keys with nothing selected. F fits, Z shows the selection, W one sheet in full width.

The findings say what is wrong, likely wrong, or worth knowing; a click goes to the block and the time, and blocks are marked. Where there is one sensible cure, a button below the finding does it (M in the list): it draws what is missing or sets what does not fit, with values that are marked as assumed and are yours to check. File > Sheets as PDF prints the circuits as they are seen.`
