// Package duty is the Duty station: what the axes must do over time, as plots under
// the clock and as a table that can be typed into.
package duty

import (
	"fmt"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/duty/intake"
	"barlitre/app/station"
	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/circuit"
	cycle "barlitre/circuit/duty"
	"barlitre/machines/units"
)

// Station is the Duty station.
type Station struct {
	ctx     station.Context
	content fyne.CanvasObject
	filled  fyne.CanvasObject // shown when there is a duty
	empty   fyne.CanvasObject
	picker  *widgets.Select
	facts   *widget.Label
	source  *widgets.Text
	plot    *widgets.ClockPlot
	table   *widgets.Table
	refusal *widgets.Text
	notes   *fyne.Container
	panel   *panel
	pages   *pages
	phases  *phases
	year    *year
	upper   fyne.CanvasObject // the plot
	both    *container.Split  // plot and pages
	ground  *canvas.Rectangle
	loading bool

	station    fyne.CanvasObject // all but the page of recordings
	recordings *recordings

	shown  *cycle.Duty // of the file that is shown
	of     string      // name of the duty in the table
	tracks []track

	courses courses // what the plot draws from
}

// New makes the station.
func New(ctx station.Context) station.Station {
	s := &Station{ctx: ctx}
	s.build()
	return s
}

// Name is the word on the job rail.
func (s *Station) Name() string { return "Duty" }

// Content is the page.
func (s *Station) Content() fyne.CanvasObject { return s.content }

func (s *Station) build() {
	s.picker = widgets.Name(widgets.NewSelect(nil, nil), "duty.picker")
	s.picker.PlaceHolder = "no duty"
	s.picker.OnChanged = func(string) {
		if i := s.picker.SelectedIndex(); !s.loading && i >= 0 {
			s.ctx.SetDuty(i)
		}
	}
	s.facts = widgets.Name(widget.NewLabel(""), "duty.facts")
	s.facts.Truncation = fyne.TextTruncateEllipsis
	s.source = widgets.Wrapped("duty.source")
	s.plot = widgets.Name(widgets.NewClockPlot(fyne.NewSize(300, 120), s.ctx.Palette), "duty.plot")
	s.plot.Moved = s.ctx.SetClock
	s.plot.Zooms = true
	s.plot.Value = s.valueAt
	s.plot.Points = plotPoints{s}
	s.plot.Format = func(t float64) string { return s.ctx.Text(t, units.Time, 4) }
	s.refusal = widgets.Wrapped("duty.refusal")
	s.refusal.Importance = widget.LowImportance
	s.table = widgets.Name(s.newTable(), "duty.table")
	s.notes = container.NewVBox()
	s.recordings = newRecordings(s)
	s.panel = newPanel(s)
	s.pages = newPages(s)
	s.ground = canvas.NewRectangle(s.ctx.Palette().Card)
	s.filled = s.lay()
	empty := widgets.Name(widget.NewLabelWithStyle(
		"No duty yet. A duty says what each axis must do over time: how fast, against which load, how many hours a year.\n"+
			"Add one here with New duty, after the axes of the machine are named, or make one of what a data logger recorded.",
		fyne.TextAlignCenter, fyne.TextStyle{}), "duty.empty")
	empty.Wrapping = fyne.TextWrapWord
	s.empty = container.NewPadded(container.NewBorder(empty, nil, nil, nil, container.NewVBox(container.NewCenter(s.recordings.button("duty.empty.recording")))))
	side := container.NewVScroll(container.New(besideBar{}, s.panel.content))
	split := container.NewHSplit(container.NewStack(s.filled, s.empty), side)
	split.Offset = 0.7
	s.station = widgets.Spaced(split)
	s.content = container.NewStack(s.station, s.recordings.page.Content())
}

// lay puts the parts of a duty together.
func (s *Station) lay() fyne.CanvasObject {
	pick := container.New(widgets.Wide(220), s.picker)
	head := container.NewBorder(nil, nil, pick, nil, s.facts)
	lanes := container.NewVScroll(widgets.Spaced(s.plot))
	s.plot.Outer = lanes.Scrolled
	plot := container.NewStack(s.ground, lanes)
	s.upper, s.both = plot, container.NewVSplit(plot, s.pages.content)
	s.both.Offset = 0.5
	return container.NewBorder(head, nil, nil, nil, s.both)
}

// Changed shows what changed.
func (s *Station) Changed(w station.What) {
	if s.recordings.open {
		s.recordings.page.Changed(w)
	}
	switch {
	case w.Has(station.Model | station.Settings):
		s.reload()
	case w.Has(station.Selection) && s.current() != s.shown:
		s.reload()
	case w.Has(station.Solution):
		s.fillNotes()
	}
	s.plot.SetClock(s.ctx.Clock())
}

// current is the duty at hand, or nil.
func (s *Station) current() *cycle.Duty {
	f := s.ctx.Doc().File()
	if f == nil || s.ctx.Duty() < 0 || s.ctx.Duty() >= len(f.Duties) {
		return nil
	}
	return f.Duties[s.ctx.Duty()]
}

// recorded is where the duty at hand was read from; the zero Source for one whose
// points stand in the audit file.
func (s *Station) recorded() audit.Source {
	f := s.ctx.Doc().File()
	if i := s.ctx.Duty(); f != nil && i >= 0 && i < len(f.Sources) {
		return f.Sources[i]
	}
	return audit.Source{}
}

func (s *Station) reload() {
	d := s.current()
	s.shown = d
	show(s.filled, d != nil)
	show(s.empty, d == nil)
	if d == nil {
		s.tracks, s.of = nil, ""
		s.notes.Objects = nil
		s.panel.fill()
		return
	}
	s.fillPicker()
	s.tracks = s.tracksOf(d)
	s.facts.SetText(s.factsOf(d))
	s.ground.FillColor = s.ctx.Palette().Card
	s.ground.Refresh()
	if d.Name != s.of { // another duty: all of it is shown
		s.plot.Fit()
	}
	s.fillPlot(d)
	s.fillTable(d)
	s.pages.fill()
	s.fillNotes()
	s.panel.fill()
}

// fillPicker lists the duties; two may have one name while a file is mended.
func (s *Station) fillPicker() {
	var names []string
	for i, d := range s.ctx.Doc().File().Duties {
		name := d.Name
		for _, n := range names {
			if n == name {
				name = fmt.Sprintf("%s (%d)", d.Name, i+1)
			}
		}
		names = append(names, name)
	}
	s.loading = true
	s.picker.SetOptions(names)
	s.picker.SetSelectedIndex(s.ctx.Duty())
	s.loading = false
}

// factsOf is what the file says of a duty besides its points.
func (s *Station) factsOf(d *cycle.Duty) string {
	var parts []string
	if state := s.ctx.Doc().File().StateOf(d.Name); state != "" {
		parts = append(parts, s.ctx.Local(units.Number(d.Hours/units.Hour, 4))+"\u202fh a year of "+string(state)+", from the calendar")
	} else if d.Hours > 0 {
		parts = append(parts, s.ctx.Local(units.Number(d.Hours/units.Hour, 4))+"\u202fh a year")
	} else {
		parts = append(parts, "no hours a year: left out of the year")
	}
	if d.Repeats {
		parts = append(parts, "repeats without pause")
	} else {
		parts = append(parts, "one recording, its mean is taken")
	}
	parts = append(parts, "one cycle takes "+s.ctx.Text(d.Cycle(), units.Time, 4))
	if d.Step > 0 {
		parts = append(parts, "time steps of "+s.ctx.Text(d.Step, units.Time, 2))
	} else {
		parts = append(parts, "time steps at the rows only")
	}
	return strings.Join(parts, "  ·  ")
}

// locked says why the points of the duty at hand cannot be changed here, "" if they can.
func (s *Station) locked() string {
	if s.imported() != nil {
		return "imported from a recording; change the import"
	}
	if src := s.recorded().File; src != "" {
		return "read from " + src + "; change it there"
	}
	if s.staged() {
		return "computed from its phases; change those, or turn them into points"
	}
	return ""
}

// sourceOf says where the points of a recorded duty come from, "" for others.
func (s *Station) sourceOf(d *cycle.Duty) string {
	src := s.recorded()
	if src.File == "" {
		return ""
	}
	return fmt.Sprintf("Read from %s: %d rows, SHA-256 %s. It can be read here but not changed: change the file, then open the audit again.",
		src.File, len(d.Time), src.SHA256)
}

// Mend reports whether a duty is at fault.
func (s *Station) Mend() bool {
	for _, f := range s.ctx.Doc().Findings() {
		if ofDuty(f) && f.ToMend() {
			return true
		}
	}
	return false
}

// ofDuty reports whether a finding is about a duty and no block.
func ofDuty(f circuit.Finding) bool { return f.Duty != "" && f.Block == "" }

// Help is the short help.
func (s *Station) Help() string {
	return "A duty cycle says what each axis of the machine must do over time. All circuits are balanced over the same duties, so what they do at the load can be compared.\n\n" +
		"Pick a duty at the top. The plot shows every track; click or drag in it to move the clock, or use the arrow keys once it has the focus. The values at the clock stand beside the line.\n\n" +
		"The wheel zooms the plot at the pointer, + and − about the clock; with Shift the wheel or the arrow keys pan, as does a drag with the middle button, and F or 0 shows all. With Ctrl the wheel scrolls the lanes. A long recording is drawn as the lowest and highest value of each column, so no peak is lost.\n\n" +
		"The table holds the points: one row a time stamp, one column a track, linear in between; two rows with one time are a step. Click a cell twice, or press Enter or F2, or just type. " +
		"A bare number is in the unit of the column; another unit may be typed with it, such as “150 mm/s”. Decimal comma and point are both understood. " +
		"Enter takes the value; Escape brings the old one back. What is refused stays in its cell, marked, with the reason below. A block of cells can be pasted from a spreadsheet.\n\n" +
		"The empty row at the end takes a new time stamp; Insert puts a row below the selected one, half way to the next, Delete takes it out. A pasted block that is longer than the table adds rows. " +
		"With few points the plot shows them as dots: drag one, with Shift in one direction only; a double click in a lane adds one, Delete takes the last one that was touched out.\n\n" +
		"On the right: name, hours a year and time step of the duty, and whether it repeats. Below, the axes of the machine: name one and press Enter, say what it moves, and tick what the duty gives of it. Of speed or position, load, and command exactly two are given; the balance finds the third. " +
		"Everything here is one step of undo.\n\n" +
		"Phases is the other way to a cycle: one row a phase with how long it lasts, the stroke or speed and the load of each axis; the tracks are computed so that strokes are met exactly. A usual duty gives invented numbers to begin with. Turn into points makes a table of it. Where strokes do not close, a button beside the note scales the way back.\n\n" +
		"Year says how the 8760 hours fall to work, idle, hold and off. Without a calendar each duty has its typed hours. Begin a shift calendar takes shifts with begin, end, days and breaks, the weeks worked and planned stops; a share of the shifts, or hours, may be idle or hold, and what is left is work. Below, say which duty stands for which state, with its share or its hours. A duty with hours of its own beside the calendar runs while the machine would be off. What the electric supply draws while off is booked, too. The oil temperature follows these shifts.\n\n" +
		"Speed above zero extends a cylinder or hoists; a load above zero resists that. A duty that was read from a CSV file is changed in that file.\n\n" +
		intake.Help + "\n\n" +
		"The notes tell whether the strokes close, below which speed an axis counts as standing, and what was found."
}
