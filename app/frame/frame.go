// Package frame is the window: verdict line, job rail, duty strip and clock, menus
// and dialogs around the stations. It shows and passes on; it computes nothing.
package frame

import (
	"math"
	"strings"
	"time"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/document"
	"barlitre/app/station"
	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/machines/units"
)

// Frame is the window of one open audit. Its methods run on the UI goroutine.
type Frame struct {
	app      fyne.App
	win      fyne.Window
	doc      *document.Document
	settings settings
	stations []station.Station
	stale    []station.What // by station: what changed while it was not shown
	current  int

	clock    float64
	duty     int
	gone     int // counts what was gone to: what is found for one before is of no use then
	circuit  int
	block    string
	beside   string // the circuit picked, "" = the first
	view     station.View
	player   *player
	laid     *audit.Report
	laidOf   *audit.Solution
	laidFor  units.System
	solution *audit.Solution // of all circuits, as last told
	solved   int             // its revision
	pickedIn string          // the folder that a file to read was last taken from
	pair     *audit.Solution // of the two shown
	pairOf   pairOf

	verdict *widgets.Figure
	rail    *rail
	strip   *strip
	status  *status
	body    *fyne.Container
	menu    menus
	boxes   []*closable // dialogs, the last on top
	working *long       // what is being done to files, nil = nothing
	dumper  *dumper
	closed  bool
}

var _ station.Context = (*Frame)(nil)

// post runs a function on the UI goroutine; tests keep a queue of their own.
var post = fyne.Do

// New makes the window around a document that it opens and closes itself. The
// document tells it of changes through Notify, from any goroutine. stations are
// the constructors of the stations in the order of the job.
func New(app fyne.App, opt document.Options, stations ...func(station.Context) station.Station) *Frame {
	f := &Frame{app: app, circuit: -1}
	f.settings = readSettings(app.Preferences())
	app.Settings().SetTheme(f.theme())
	opt.Notify = func(e document.Event) { post(func() { f.told(e) }) }
	f.doc = document.New(opt)
	f.win = app.NewWindow("Barlitre")
	f.win.SetPadded(false)
	f.win.SetMaster()
	for _, make := range stations {
		f.stations = append(f.stations, make(f))
	}
	f.build()
	f.win.Resize(f.settings.size())
	f.win.SetCloseIntercept(f.quit)
	f.win.SetOnDropped(func(_ fyne.Position, uris []fyne.URI) {
		var paths []string
		for _, u := range uris {
			paths = append(paths, u.Path())
		}
		f.dropped(paths...)
	})
	f.dumper = newDumper(f)
	countFrames()
	return f
}

// build lays the window out.
func (f *Frame) build() {
	f.stale = make([]station.What, len(f.stations))
	f.verdict = f.newVerdict()
	f.rail = newRail(f)
	f.strip = newStrip(f)
	f.status = newStatus()
	f.body = container.NewStack()
	for i := range f.stations {
		f.stale[i] = station.Everything
	}
	f.win.SetContent(widgets.NewTips(container.New(&page{f}, f.verdict, widget.NewSeparator(), f.rail.content,
		container.NewScroll(f.body), widget.NewSeparator(), f.strip.content, f.status.Label)))
	f.buildMenu()
	f.shortcuts()
	f.show(0)
}

// show brings a station into the window; the others are not in it, so that the toolkit
// spends no time on them.
func (f *Frame) show(i int) {
	if i != f.current {
		f.status.acted(time.Now())
		f.win.Canvas().Unfocus() // the keys would go to what is no longer seen
	}
	f.current = i
	f.body.RemoveAll()
	f.body.Add(f.stations[i].Content())
	if w := f.stale[i]; w != 0 {
		f.stale[i] = 0
		f.stations[i].Changed(w)
	}
	f.body.Refresh()
	f.rail.refresh()
}

// changed tells the station that is shown at once, the others when they are.
func (f *Frame) changed(w station.What) {
	for i := range f.stations {
		f.stale[i] |= w
	}
	f.stale[f.current] = 0
	f.stations[f.current].Changed(w)
	if w.Has(station.Model | station.Solution | station.Settings) {
		f.verdict.Refresh()
		f.rail.refresh()
		f.menu.update(f)
		f.title()
	}
	if w.Has(station.Advice) {
		f.verdict.Refresh()
		f.rail.refresh()
	}
	if w.Has(station.Model | station.Settings | station.Selection) {
		f.strip.reload()
	}
	if w.Has(station.Clock | station.Reading) {
		f.strip.moved(w.Has(station.Reading))
	}
}

func (f *Frame) title() {
	if t := f.doc.Title() + " - Barlitre"; f.win.Title() != t {
		f.win.SetTitle(t)
	}
}

// told handles an event of the document.
func (f *Frame) told(e document.Event) {
	if f.closed {
		return
	}
	switch e.Kind {
	case document.Opened:
		f.reset()
	case document.Edited:
		f.status.acted(time.Now())
		f.keepInRange()
		f.changed(station.Model)
	case document.Solved, document.Warmed:
		if e.Err != nil {
			f.Say(e.Err.Error())
		}
		f.solution, f.solved = f.doc.Solution()
		f.changed(station.Solution)
	case document.Solving:
		f.verdict.Refresh()
	case document.Advising, document.Advised, document.FaultsFound:
		f.changed(station.Advice)
	default:
		if e.Err != nil {
			f.Say(e.Err.Error())
		}
		f.changed(station.Solution)
	}
}

// reset goes to the start of what was just opened.
func (f *Frame) reset() {
	f.clock, f.duty, f.circuit, f.block, f.beside = 0, 0, -1, "", ""
	f.gone++
	f.solution, f.solved = f.doc.Solution()
	if file := f.doc.File(); file != nil && len(file.Duties) > 0 {
		f.clock, _ = f.span()
		f.find(opening)
	}
	f.changed(station.Everything)
}

// keepInRange mends what an edit may have left pointing at nothing.
func (f *Frame) keepInRange() {
	file := f.doc.File()
	if file == nil {
		return
	}
	f.duty = max(0, min(f.duty, len(file.Duties)-1))
	if f.circuit >= len(file.Circuits) || (f.circuit >= 0 && f.block != "" && file.Circuits[f.circuit].Block(f.block) == nil) {
		f.circuit, f.block = -1, ""
	}
	from, to := f.span()
	f.clock = math.Max(from, math.Min(to, f.clock))
}

// span is the time of the duty at hand [s].
func (f *Frame) span() (from, to float64) {
	file := f.doc.File()
	if file == nil || f.duty >= len(file.Duties) || len(file.Duties[f.duty].Time) == 0 {
		return 0, 0
	}
	t := file.Duties[f.duty].Time
	return t[0], t[len(t)-1]
}

// Doc returns the open audit.
func (f *Frame) Doc() *document.Document { return f.doc }

// Window returns the window.
func (f *Frame) Window() fyne.Window { return f.win }

// Clock returns the time into the duty at hand [s].
func (f *Frame) Clock() float64 { return f.clock }

// SetClock moves the clock, kept inside the duty.
func (f *Frame) SetClock(t float64) { f.moveClock(t, station.Clock|station.Reading) }

// moveClock is SetClock that tells of no more than what is asked for.
func (f *Frame) moveClock(t float64, tell station.What) {
	from, to := f.span()
	t = math.Max(from, math.Min(to, t))
	if t != f.clock && !math.IsNaN(t) {
		f.gone++
		f.clock = t
		f.changed(tell)
	}
}

// Duty returns the duty at hand.
func (f *Frame) Duty() int { return f.duty }

// SetDuty takes another duty at hand.
func (f *Frame) SetDuty(i int) {
	if file := f.doc.File(); file == nil || i == f.duty || i < 0 || i >= len(file.Duties) {
		return
	}
	f.status.acted(time.Now())
	f.duty = i
	f.clock, _ = f.span()
	f.find(func(file *audit.File) instant { return busiest(file, i) })
	f.changed(station.Selection | station.Clock | station.Reading)
}

// Selected returns the block at hand.
func (f *Frame) Selected() (int, string) { return f.circuit, f.block }

// Select takes another block at hand. One of a circuit that is not shown picks that.
func (f *Frame) Select(circuit int, block string) {
	if circuit == f.circuit && block == f.block {
		return
	}
	f.status.acted(time.Now())
	f.circuit, f.block = circuit, block
	w := station.Selection
	if file := f.doc.File(); circuit >= 0 && circuit < len(file.Circuits) && f.pick(file.Circuits[circuit].Name) {
		w |= station.Solution
	}
	f.changed(w)
}

// Report lays the solution out in the user's units, once for each.
func (f *Frame) Report() *audit.Report {
	s := f.Solution()
	if s == nil {
		return nil
	}
	if f.laid == nil || f.laidOf != s || f.laidFor != f.settings.system {
		f.laid, f.laidOf, f.laidFor = s.Report(f.settings.system), s, f.settings.system
	}
	return f.laid
}

// System returns the user's family of units.
func (f *Frame) System() units.System { return f.settings.system }

// Text writes a quantity as the user reads it.
func (f *Frame) Text(si float64, d units.Dim, digits int) string {
	return f.Local(units.Format(si, units.Preferred(d, f.settings.system), digits))
}

// Local puts the user's decimal sign into a text: a point between two digits.
func (f *Frame) Local(text string) string {
	if change := f.Words(); change != nil {
		return change(text)
	}
	return text
}

// Words is Local as it is now.
func (f *Frame) Words() func(string) string {
	if !f.settings.comma {
		return nil
	}
	return units.DecimalComma
}

// Palette returns the colours of the theme.
func (f *Frame) Palette() figures.Palette { return f.theme().Palette() }

func (f *Frame) theme() widgets.Theme {
	return widgets.Theme{Dark: f.settings.dark, Scale: f.settings.scale}
}

// Go shows a station by name, or a page of it by "station/page".
func (f *Frame) Go(name string) {
	name, page, _ := strings.Cut(name, "/")
	for i, s := range f.stations {
		if s.Name() != name {
			continue
		}
		f.show(i)
		if p, ok := s.(station.Paged); ok && page != "" {
			p.ShowPage(page)
		}
	}
}

// Show opens the window and returns when it is closed.
func (f *Frame) Show() {
	f.win.Show()
	f.app.Run()
}

// Open opens what the program was started with: a file, or the first sample.
func (f *Frame) Open(path string) {
	if path != "" {
		f.openThen(path, f.offerRecovery)
		return
	}
	f.openSample(firstSample)
	f.Say("Sample, invented data. File > New and File > Open start an audit of your own; click a block to change it, and the verdict follows.")
	f.offerRecovery()
}
