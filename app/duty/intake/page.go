// Package intake is the page on which a logger's recording becomes a duty: what the file
// seems to be and every correction of that, what is wrong with the data and what is done
// about it, which columns make which tracks, how well the rate tells the energy, and which
// cycle is taken.
package intake

import (
	"fmt"
	"path/filepath"
	"slices"
	"strings"
	"sync"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/station"
	"barlitre/app/widgets"
	"barlitre/circuit/duty"
	"barlitre/circuit/logged"
	"barlitre/circuit/recording/logger"
	"barlitre/machines/units"
)

// Page is the page. Its methods run on the UI goroutine.
type Page struct {
	Leave func() // shows the station again

	ctx     station.Context
	content fyne.CanvasObject
	head    *header
	tabs    []*tab
	at      int
	loading bool // values come from the recipe: choices are not the user's

	sources  []*source         // the loggers; the first gives the rows
	hand     int               // the one that File and Columns show
	which    *choice           // picks it
	ofLogger *fyne.Container   // holds that
	rec      *logger.Recording // of all loggers, nil before they are read
	tracks   []logged.Track
	axes     []duty.Axis // that the audit does not have yet
	part     logged.Part
	again    string          // the duty that is changed, "" for a new one
	known    map[string]bool // tracks that were suggested or added

	job  job
	work sync.Mutex // held by what works tracks out
	out  outcome
}

// tab is one side of the page.
type tab struct {
	word   string
	button *widgets.Button
	body   fyne.CanvasObject
	fill   func()
	mark   func() string // behind the word; may be nil
}

// New makes the page.
func New(ctx station.Context) *Page {
	p := &Page{ctx: ctx}
	p.head = newHeader(p)
	bar, bodies := container.NewHBox(), container.NewStack()
	add := func(word string, body fyne.CanvasObject, fill func(), mark func() string) {
		i := len(p.tabs)
		t := &tab{word: word, body: body, fill: fill, mark: mark}
		t.button = widgets.Name(widgets.NewButton(word, func() { p.open(i) }), "intake.tab."+strings.ToLower(word))
		p.tabs = append(p.tabs, t)
		bar.Add(t.button)
		bodies.Add(body)
	}
	form := newForm(p)
	add("File", form.content, form.fill, func() string { return count(len(p.src().recipe.Open())) })
	columns := newColumns(p)
	add("Columns", columns.content, columns.fill, nil)
	loggers := newLoggers(p)
	add("Loggers", loggers.content, loggers.fill, nil)
	found := newFindings(p)
	add("Findings", found.content, found.fill, func() string { return count(len(p.corrections())) })
	tracks := newTracks(p)
	add("Tracks", tracks.content, tracks.fill, func() string { return count(len(p.out.faults)) })
	cycle := newCycles(p)
	add("Cycles", cycle.content, cycle.fill, nil)
	p.which = p.newChoice("intake.logger", nil, nil, func(word string) { p.show(slices.Index(p.which.words, word)) })
	p.ofLogger = container.New(widgets.Wide(190), p.which.Select)
	p.content = widgets.Spaced(container.NewBorder(container.NewVBox(p.head.content, container.NewBorder(nil, nil, nil, p.ofLogger, container.NewHScroll(bar))), nil, nil, nil, bodies))
	p.open(0)
	return p
}

func count(n int) string {
	if n == 0 {
		return ""
	}
	return fmt.Sprintf(" (%d)", n)
}

// Content is the page.
func (p *Page) Content() fyne.CanvasObject { return p.content }

// open shows a side.
func (p *Page) open(i int) {
	p.at = i
	p.refresh()
}

// refresh brings what is shown up to date.
func (p *Page) refresh() {
	for i, t := range p.tabs {
		show(t.body, i == p.at)
		text, importance := t.word, widget.MediumImportance
		if t.mark != nil {
			text += t.mark()
		}
		if i == p.at {
			importance = widget.HighImportance
		}
		if t.button.Text != text || t.button.Importance != importance {
			t.button.Text, t.button.Importance = text, importance
			t.button.Refresh()
		}
	}
	p.head.fill()
	p.fillWhich()
	if len(p.sources) > 0 {
		p.loading = true
		p.tabs[p.at].fill()
		p.loading = false
	}
}

// Changed follows a change of theme, units or the audit.
func (p *Page) Changed(station.What) { p.refresh() }

// Open begins with a recording, of several files where they are given; it says why it cannot.
func (p *Page) Open(paths ...string) error {
	list, err := sorted(nil, paths)
	if err != nil {
		return err
	}
	p.begin(list...)
	p.head.name.SetValue(p.freeName(list[0].paths[0]), "")
	p.head.hours.SetValue("", "")
	p.at = fileTab
	switch {
	case len(paths) > 1:
		p.at = loggersTab // which file was taken for what
	case len(p.blocking()) == 0:
		p.at = tracksTab // what comes of it; the other sides tell how
	}
	p.readAll()
	return nil
}

// Reopen begins with a duty that was made here: its recording is read anew if it changed.
func (p *Page) Reopen(i int) error {
	f := p.ctx.Doc().File()
	im := f.Imports[i]
	list, err := sourcesOf(im, filepath.Dir(p.ctx.Doc().Path()))
	if err != nil {
		return err
	}
	p.begin(list...)
	p.again, p.part, p.tracks = f.Duties[i].Name, im.Part, im.TracksOf()
	p.head.name.SetValue(p.again, "")
	p.head.hours.SetValue(p.ctx.Local(hoursOf(f.Duties[i].Hours)), "")
	p.at = tracksTab
	p.read()
	return nil
}

// The sides that the page opens with.
const (
	fileTab    = 0
	loggersTab = 2
	tracksTab  = 4
)

func (p *Page) begin(list ...*source) {
	p.job.cancel()
	p.sources, p.hand, p.rec = list, 0, nil
	p.tracks, p.axes, p.part, p.again, p.known, p.out = nil, nil, logged.Part{}, "", map[string]bool{}, outcome{}
	p.head.year.picked = false
}

// freeName is the name of the file, or with a number behind it where a duty has it.
func (p *Page) freeName(path string) string {
	base := strings.TrimSuffix(filepath.Base(path), filepath.Ext(path))
	name := base
	for n := 2; p.dutyNamed(name) >= 0; n++ {
		name = fmt.Sprintf("%s %d", base, n)
	}
	return name
}

func (p *Page) dutyNamed(name string) int {
	for i, d := range p.ctx.Doc().File().Duties {
		if d.Name == name {
			return i
		}
	}
	return -1
}

// close leaves the page; nothing is changed.
func (p *Page) close() {
	p.job.cancel()
	p.sources, p.hand, p.rec, p.out = nil, 0, nil, outcome{}
	p.Leave()
}

// kind tells the kind of an axis, of the audit or new.
func (p *Page) kind(of string) (duty.AxisKind, bool) {
	for _, a := range p.allAxes() {
		if a.Name == of {
			return a.Kind, true
		}
	}
	return duty.Linear, false
}

func (p *Page) allAxes() []duty.Axis {
	return append(append([]duty.Axis{}, p.ctx.Doc().File().Axes...), p.axes...)
}

func (p *Page) corrections() []logger.Correction {
	if p.rec == nil {
		return nil
	}
	return p.rec.Corrections
}

func (p *Page) seconds(t float64) string { return p.ctx.Text(t, units.Time, 4) }

// brief is a time without zeros at its end.
func (p *Page) brief(t float64) string {
	u := units.Preferred(units.Time, p.ctx.System())
	return p.ctx.Local(station.TrimZeros(units.Number(u.FromSI(t), 4))) + "\u202f" + u.Label()
}

func show(o fyne.CanvasObject, on bool) {
	switch {
	case on && !o.Visible():
		o.Show()
	case !on && o.Visible():
		o.Hide()
	}
}

// say is a text over several lines.
func say(text string, importance widget.Importance, bold bool) *widgets.Text {
	l := widgets.Wrapped("")
	l.TextStyle.Bold, l.Importance = bold, importance
	l.SetText(text)
	return l
}
