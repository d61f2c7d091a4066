package pdf

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"slices"
	"time"

	"github.com/jung-kurt/gofpdf"

	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/audit/fixfirst"
	"barlitre/audit/pen"
	"barlitre/audit/sitecheck"
	"barlitre/machines/units"
)

// Section is a part of the report that can be left out.
type Section string

// The sections, in the order of printing. Cautions always follow them.
const (
	Decision   Section = "Decision"
	Basis      Section = "What the figures rest on"
	Circuits   Section = "Circuits"
	Energy     Section = "Where the energy goes"
	FixFirst   Section = "What to put right first"
	Machines   Section = "Machines and drives"
	Duty       Section = "Duty and course over time"
	Heat       Section = "Heat and cooler"
	Request    Section = "Cooler request sheet"
	Money      Section = "Money"
	Parameters Section = "Values and where they come from"
	Findings   Section = "Findings"
	SiteCheck  Section = "Site check"
	Method     Section = "Method and certificate"
)

// Sheets is the section of the circuits on pages of their own; it is there when Options
// ask for it.
const Sheets Section = "Circuit sheets"

// cautionPages is the section that cannot be left out.
const cautionPages Section = "Cautions and limits of use"

// Sections lists all sections in the order of printing; the slice is the caller's.
func Sections() []Section {
	return []Section{Decision, Basis, Circuits, Energy, FixFirst, Machines, Duty, Heat, Request, Money, Parameters, Findings, SiteCheck, Method}
}

// Options of Write; only Date is needed.
type Options struct {
	System  units.System
	Date    time.Time // of the report, printed and written into the document
	Without []Section // left out
	Sheets  *View     // the circuits on pages of their own at the end; nil = none

	FixFirst  []fixfirst.Page   // of the circuits as found; without them their section is left out
	SiteCheck []*sitecheck.Plan // the same

	Customer, Site, Author string // in place of those of the audit file; "" keeps them
}

// Write writes the report of a solved audit to w. The error is that of w, or of
// the PDF library; nothing is written in the second case.
func Write(w io.Writer, s *audit.Solution, opt Options) error { return write(w, s, opt, true) }

func write(w io.Writer, s *audit.Solution, opt Options, compress bool) error {
	if s == nil || s.File == nil {
		return errors.New("write report: there is no solved audit to print")
	}
	if opt.Sheets != nil {
		if _, err := newBoards(s.File, s, *opt.Sheets, opt); err != nil {
			return fmt.Errorf("write report: %w", err)
		}
	}
	l := newLayout(s, opt)
	l.choose()
	doc := pen.NewPDF("P", opt.Date)
	doc.SetCompression(compress)
	doc.SetAutoPageBreak(false, 0)
	doc.SetTitle(pen.Clean(l.title()), true)
	doc.SetAuthor(pen.Clean(l.author), true)
	doc.SetCreator("Barlitre", true)
	l.print(&document{doc: doc})
	var buf bytes.Buffer
	if err := doc.Output(&buf); err != nil {
		return fmt.Errorf("write report: %w", err)
	}
	if _, err := w.Write(buf.Bytes()); err != nil {
		return fmt.Errorf("write report: %w", err)
	}
	return nil
}

// paper is what a sheet prints on: the document, or recorders that are measured.
type paper interface {
	page() pen.Pen         // begins an upright A4 page
	lying(p Paper) pen.Pen // begins a lying page
	mark(title string, level int, y float64)
}

// document is the PDF as paper.
type document struct{ doc *gofpdf.Fpdf }

func (d *document) page() pen.Pen {
	d.doc.AddPage()
	return pen.NewPDFPen(d.doc)
}

func (d *document) mark(title string, level int, y float64) {
	d.doc.Bookmark(pen.Clean(title), level, y)
}

// recorders is paper that draws nothing and remembers every page.
type recorders struct {
	pages []*pen.Recorder
	marks []string
}

func (r *recorders) page() pen.Pen {
	r.pages = append(r.pages, pen.NewRecorder())
	return r.pages[len(r.pages)-1]
}

func (r *recorders) mark(title string, _ int, _ float64) { r.marks = append(r.marks, title) }

// layout is a report being printed.
type layout struct {
	*sheet
	s       *audit.Solution
	r       *audit.Report
	without []Section
	date    string

	site, customer, author string
	fix                    []fixfirst.Page
	plans                  []*sitecheck.Plan

	room   float64         // share of the usual space between things
	total  int             // pages in all, as the last printing found them
	starts map[Section]int // page on which a section starts
	drawn  *drawings       // nil before they are asked for
	boards *boards         // nil when there are none

	pictures map[int][]figures.Picture // of the machines, by circuit
}

func newLayout(s *audit.Solution, opt Options) *layout {
	l := &layout{s: s, r: s.Report(opt.System), without: opt.Without, date: opt.Date.Format("2006-01-02"),
		site: opt.Site, customer: opt.Customer, author: opt.Author, fix: opt.FixFirst, plans: opt.SiteCheck, room: 1, pictures: map[int][]figures.Picture{}}
	l.without = slices.Clone(l.without)
	if len(l.fix) == 0 {
		l.without = append(l.without, FixFirst)
	}
	if len(l.plans) == 0 {
		l.without = append(l.without, SiteCheck)
	}
	for own, file := range map[*string]string{&l.site: l.r.Site.Name, &l.customer: l.r.Site.Customer, &l.author: l.r.Site.Author} {
		if *own == "" {
			*own = file
		}
	}
	if opt.Sheets != nil {
		l.boards, _ = newBoards(s.File, s, *opt.Sheets, opt)
	}
	return l
}

func (l *layout) title() string {
	if l.r.Title == "" {
		return "Energy audit"
	}
	return l.r.Title
}

// leastFill is the share of a page below which it counts as nearly empty.
const leastFill = 0.2

// choose lays the report out on trial: to learn its page numbers, and with less
// space between things when a page would be nearly empty otherwise.
func (l *layout) choose() {
	best, chosen := -1, 1.0
	for _, room := range []float64{1, 0.94, 0.88, 0.8, 0.7} {
		l.room = room
		if n := l.trial(); best < 0 || n < best {
			best, chosen = n, room
		}
		if best == 0 {
			break
		}
	}
	l.room = chosen
	l.trial()
}

// trial lays out on paper that is thrown away and returns the number of nearly empty pages.
func (l *layout) trial() int {
	l.print(&recorders{})
	empty := 0
	for _, end := range l.sheet.ends {
		if end-top < leastFill*(bottom-top) {
			empty++
		}
	}
	return empty
}

// print lays the whole report out on paper.
func (l *layout) print(to paper) {
	l.sheet = newSheet(to, l.room, l.furniture(l.total))
	known := l.starts
	l.starts = map[Section]int{}
	l.firstPage(known)
	for _, part := range []struct {
		Section
		draw func()
	}{
		{Decision, l.decisions}, {Basis, l.basis}, {Circuits, l.circuits}, {Energy, l.energy}, {FixFirst, l.fixFirst}, {Machines, l.machines}, {Duty, l.duties}, {Heat, l.heat},
		{Request, l.requests}, {Money, l.money}, {Parameters, l.parameters}, {Findings, l.findings}, {SiteCheck, l.siteCheck}, {Method, l.method},
	} {
		if slices.Contains(l.without, part.Section) {
			continue
		}
		if (part.Section == Request && l.asks() || part.Section == SiteCheck) && !l.fresh() {
			l.newPage() // these go to someone else, or are taken along alone
		}
		if part.Section != Decision {
			l.heading(1, string(part.Section), l.follow(part.Section))
		}
		l.starts[part.Section] = l.number
		part.draw()
		if part.Section == Decision && len(l.r.Decisions) > 0 {
			l.newPage() // what is signed stands by itself
		}
		if part.Section == SiteCheck && !l.fresh() {
			l.newPage()
		}
	}
	l.cautions()
	l.finish()
	l.total = l.number
	if l.boards != nil {
		l.starts[Sheets] = l.number + 1
		l.total += len(l.boards.all)
		l.boards.before, l.boards.pages = l.number, l.total
		l.boards.print(to)
	}
}

// follow returns the height of what stays with the heading of a section.
func (l *layout) follow(s Section) float64 {
	switch steps := l.lossSteps(); {
	case s == Circuits && len(l.s.Circuits) > 0:
		return l.firstDrawings()
	case s == Energy && len(steps) > 0:
		return 2 + figureLeast*steps[0].Height()
	case s == Machines && l.firstMaps() > 0:
		return l.firstMaps()
	case s == Duty && len(l.s.File.Duties) > 0:
		d := l.s.File.Duties[0]
		_, name := l.headLines(2, dutyHead+d.Name)
		lanes, _ := l.asked(0)
		return 20 + name + l.plotHeight(lanes, d)
	}
	return keepable + 12 // a short table with its title
}
