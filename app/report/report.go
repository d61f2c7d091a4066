// Package report is the station for what leaves the program: the pages as they will
// print, and the report and the results as files.
package report

import (
	"fmt"
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
	"barlitre/audit/pdf"
)

// Report is the station.
type Report struct {
	ctx      station.Context
	content  fyne.CanvasObject
	fields   []textField
	sections map[pdf.Section]*widgets.Check
	sheets   *widgets.Check // the circuits on pages of their own
	settle   *time.Timer    // until the clock has come to rest
	preview  *preview
	saver    *saver
}

// textField is a text of the audit file.
type textField struct {
	field *widgets.Field
	get   func(*audit.File) string
}

// New makes the station.
func New(ctx station.Context) station.Station {
	r := &Report{ctx: ctx, sections: map[pdf.Section]*widgets.Check{}}
	r.preview = newPreview(ctx, r.options)
	r.saver = newSaver(ctx, r.options)
	head := container.NewVBox(
		r.text("Title", "report.title", "title", func(f *audit.File) string { return f.Title }),
		r.text("Customer", "report.customer", "site.customer", func(f *audit.File) string { return f.Site.Customer }),
		r.text("Site", "report.site", "site.name", func(f *audit.File) string { return f.Site.Name }),
		r.text("Author", "report.author", "site.author", func(f *audit.File) string { return f.Site.Author }),
	)
	block := container.NewVBox(
		r.text("Legal owner", "report.owner", "report.owner", func(f *audit.File) string { return f.Issue.Owner }),
		r.text("Number", "report.number", "report.number", func(f *audit.File) string { return f.Issue.Number }),
		r.text("Revision", "report.revision", "report.revision", func(f *audit.File) string { return f.Issue.Revision }),
		r.text("Date", "report.date", "site.date", func(f *audit.File) string { return f.Site.Date }),
		r.text("Approved by", "report.approved", "report.approved", func(f *audit.File) string { return f.Issue.Approved }),
	)
	parts := container.NewVBox()
	for _, s := range pdf.Sections() {
		check := widgets.Name(widgets.NewCheck(string(s), nil), "report.section."+slug(string(s)))
		check.Checked = true
		check.OnChanged = func(bool) { r.preview.load() }
		r.sections[s] = check
		parts.Add(check)
	}
	r.sheets = widgets.Name(widgets.NewCheck(string(pdf.Sheets)+", at the clock", func(bool) { r.preview.load() }), "report.section.circuit-sheets")
	parts.Add(r.sheets)
	always := widget.NewLabel("Cautions and limits of use are always printed.")
	always.Wrapping = fyne.TextWrapWord
	always.Importance = widget.LowImportance
	parts.Add(always)
	left := container.NewScroll(widgets.Spaced(container.NewVBox(widgets.Card("First page", head), widget.NewSeparator(), widgets.Card("Title block of the circuit sheets", block), widget.NewSeparator(), widgets.Card("Sections", parts))))
	side := container.NewBorder(nil, widgets.Spaced(r.saver.content), nil, nil, left)
	split := container.NewHSplit(side, widgets.Spaced(r.preview.content))
	split.Offset = 0.32
	r.content = split
	return r
}

// slug is a name for scripts: "where-the-energy-goes".
func slug(s string) string {
	return strings.ReplaceAll(strings.ToLower(s), " ", "-")
}

func (r *Report) text(title, name, target string, get func(*audit.File) string) fyne.CanvasObject {
	f := widgets.NewField("", func(text string) error {
		err := r.ctx.Doc().Edit("Change the "+strings.ToLower(title), func(f *audit.File) error { return f.Put(target, text) })
		if err == nil {
			r.show()
		}
		return err
	})
	f.Scroll = fyne.ScrollHorizontalOnly
	r.fields = append(r.fields, textField{widgets.Name(f, name), get})
	return widgets.FieldRow(title, f)
}

func (r *Report) show() {
	file := r.ctx.Doc().File()
	for _, f := range r.fields {
		f.field.SetValue(f.get(file), "")
	}
}

// options are those of the report as it is set up here. The names come from the audit file.
func (r *Report) options() pdf.Options {
	opt := pdf.Options{System: r.ctx.System(), Date: today()}
	for _, s := range pdf.Sections() {
		if !r.sections[s].Checked {
			opt.Without = append(opt.Without, s)
		}
	}
	if r.sheets.Checked {
		v := r.ctx.View()
		opt.Sheets = &pdf.View{Duty: r.ctx.Duty(), At: r.ctx.Clock(), Cycle: v.Cycle, Hide: v.Hide, Marks: figures.Marks(r.ctx.Doc().Findings())}
	}
	if a, current := r.ctx.Doc().Advice(); current && a.System == opt.System {
		opt = withAdvice(opt, a)
	}
	return opt
}

// withAdvice adds what is to be put right first and what to measure.
func withAdvice(opt pdf.Options, a *document.Advice) pdf.Options {
	opt.FixFirst = nil
	for _, l := range a.Ladders {
		opt.FixFirst = append(opt.FixFirst, l.Page(a.System))
	}
	opt.SiteCheck = a.Plans
	return opt
}

// clockRests is how long the clock must rest before sheets are laid out anew.
const clockRests = 400 * time.Millisecond

// clockMoved lays the sheets out for the new instant once the clock rests.
func (r *Report) clockMoved() {
	if !r.sheets.Checked {
		return
	}
	if r.settle != nil {
		r.settle.Stop()
	}
	r.settle = time.AfterFunc(clockRests, func() { fyne.Do(r.preview.load) })
}

// Name is the word on the rail.
func (r *Report) Name() string { return "Report" }

// Content is the station's page.
func (r *Report) Content() fyne.CanvasObject { return r.content }

// Mend reports nothing: a report can always be printed as far as there are results.
func (r *Report) Mend() bool { return false }

// Help is the short help.
func (r *Report) Help() string {
	return "The pages are drawn as they will print. Leave sections out by their switches; the cautions and limits of use stay in. Title, customer, site and author " +
		"belong to the audit and are saved with it.\n\n" +
		"Circuit sheets adds each circuit on a landscape page of its own, as it stands on its sheet at the clock, with a frame and a title block of fields of ISO 7200; what they say is typed here. " +
		"File > Sheets as PDF prints the two circuits that are shown alone, on A4 or A3.\n\n" +
		"Save PDF… writes the report, with the figures of all circuits as they are now. Save JSON… writes every result as numbers in SI units, for other programs. " +
		"Save CSV… writes a table of every time step for each circuit and duty into a folder; for that the audit is solved once more, which can be cancelled.\n\n" +
		"What to put right first and the site check are worked out behind the window and come into the pages when they are ready; a PDF that is saved waits for them.\n\n" +
		"Files are put in place when they are whole. When something fails, the message says what and where, and the audit stays open as it was."
}

// Changed shows anew what changed.
func (r *Report) Changed(w station.What) {
	if w.Has(station.Model) {
		r.show()
	}
	if w.Has(station.Solution | station.Settings | station.Model) {
		r.ctx.Doc().Advise(r.ctx.System())
	}
	if w.Has(station.Solution | station.Settings | station.Model | station.Advice) {
		r.saver.refresh()
		r.preview.load()
	} else if w.Has(station.Clock) {
		r.clockMoved()
	}
}

// plural writes "1 page", "3 pages".
func plural(n int, what string) string {
	if n == 1 {
		return "1 " + what
	}
	return fmt.Sprintf("%d %ss", n, what)
}
