// Package sitecheck is the page with the test plan of a circuit as found and the form for what was read at the machine in
// its four states. Readings are kept in the audit file and set beside the model. It is a page of the station for money.
package sitecheck

import (
	"slices"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/station"
	"barlitre/app/widgets"
	"barlitre/audit/sitecheck"
)

// Page is the page.
type Page struct {
	ctx     station.Context
	content *container.Scroll
	say     *widgets.Text
	bar     *widget.ProgressBar
	circuit *widgets.Select // of several as found
	verdict *widgets.Text
	list    *fyne.Container
	plan    *sitecheck.Plan
	comma   string
	fields  []*reading
}

// New makes the page.
func New(ctx station.Context) *Page {
	p := &Page{ctx: ctx, say: widgets.Wrapped("sitecheck.say"), verdict: widgets.Wrapped("sitecheck.verdict"), bar: widgets.Name(widget.NewProgressBar(), "sitecheck.progress"), list: container.NewVBox()}
	p.verdict.TextStyle.Bold = true
	p.circuit = widgets.Name(widgets.NewSelect(nil, func(string) { p.Changed(station.Advice) }), "sitecheck.circuit")
	p.circuit.Hide()
	p.content = container.NewScroll(widgets.Spaced(container.NewVBox(p.say, p.bar, p.circuit, p.list)))
	return p
}

// Content is the page.
func (p *Page) Content() fyne.CanvasObject { return p.content }

// Help is its part of the short help.
const Help = "Site check is a test plan made from the drawing: which gauge at which port, its range, how fast and how long to log, what to read in each of four states (stopped, idling, holding, working), what a fault looks like there, and the caution for that point. " +
	"Type what the gauges show into the fields; a number without a unit takes the unit shown. The readings are saved with the audit and compared with the model, and the fault that explains them best is named. The report prints the plan on one page."

// Changed shows anew what changed.
func (p *Page) Changed(w station.What) {
	if !w.Has(station.Solution | station.Advice | station.Settings | station.Model) {
		return
	}
	doc := p.ctx.Doc()
	if w.Has(station.Solution|station.Settings|station.Model) && p.ctx.Solution() != nil { // not on the end of advice: it may have been cancelled
		doc.Advise(p.ctx.System())
	}
	running, done, total, err := doc.Advising()
	p.bar.Max = float64(max(total, 1))
	p.bar.SetValue(float64(done))
	widgets.Show(p.bar, running)
	a, _ := doc.Advice()
	var plan *sitecheck.Plan
	if a != nil && p.ctx.Solution() != nil {
		plan = p.pick(a.Plans)
	}
	text := ""
	switch {
	case plan == nil && err != nil:
		text = "The plan could not be made: " + err.Error()
	case plan == nil && (running || p.ctx.Solution() != nil && doc.AdviceFollows()):
		text = "Making the plan: the circuit is balanced with one fault after the other, to say what each looks like…"
	case plan == nil:
		text = "The test plan stands here as soon as the circuit as found can be solved over a duty that has hours a year."
	}
	p.say.SetText(text)
	widgets.Show(p.say, text != "")
	if comma := p.ctx.Local("0.5"); plan != p.plan || comma != p.comma {
		p.comma = comma
		p.show(plan)
	}
	p.compare()
	p.content.Refresh()
}

// pick returns the plan of the circuit chosen, the first where that is gone, nil where there is none; of several as found the
// page lets one be chosen.
func (p *Page) pick(plans []*sitecheck.Plan) *sitecheck.Plan {
	var names []string
	var out *sitecheck.Plan
	for _, x := range plans {
		names = append(names, x.Circuit)
		if x.Circuit == p.circuit.Selected {
			out = x
		}
	}
	if out == nil && len(plans) > 0 {
		out = plans[0]
		p.circuit.Selected = out.Circuit
	}
	if !slices.Equal(names, p.circuit.Options) {
		p.circuit.Options = names
		p.circuit.Refresh()
	}
	widgets.Show(p.circuit, len(names) > 1)
	return out
}

// show lays the form out for a plan.
func (p *Page) show(plan *sitecheck.Plan) {
	p.plan, p.list.Objects, p.fields = plan, nil, nil
	if plan == nil {
		return
	}
	title := widget.NewLabelWithStyle("Site check: "+plan.Circuit, fyne.TextAlignLeading, fyne.TextStyle{Bold: true})
	intro, states, caution := widgets.Wrapped(""), widgets.Wrapped(""), widgets.Wrapped("sitecheck.caution")
	intro.SetText(p.ctx.Local(sitecheck.Intro + " " + plan.Basis()))
	states.SetText("States: " + sitecheck.StateText())
	states.Importance = widget.LowImportance
	caution.SetText("▲ " + sitecheck.Cautions)
	caution.Importance = widget.DangerImportance
	for _, o := range []fyne.CanvasObject{title, p.verdict, intro, states, caution, p.head()} {
		p.list.Add(o)
	}
	for _, pt := range plan.Points {
		p.list.Add(widget.NewSeparator())
		p.list.Add(p.point(pt))
	}
}

// head names the columns.
func (p *Page) head() fyne.CanvasObject {
	row := container.New(columns{}, widget.NewLabel(""))
	for _, s := range sitecheck.States() {
		row.Add(widget.NewLabelWithStyle(s.Name, fyne.TextAlignLeading, fyne.TextStyle{Bold: true}))
	}
	return row
}

// point is what is read at one place: its name, a field a state, and how it is read.
func (p *Page) point(pt sitecheck.Point) fyne.CanvasObject {
	name := widget.NewLabelWithStyle(strings.ToUpper(pt.What[:1])+pt.What[1:], fyne.TextAlignLeading, fyne.TextStyle{Bold: true})
	name.Wrapping = fyne.TextWrapWord
	row := container.New(columns{}, name)
	for _, s := range sitecheck.States() {
		r := p.reading(pt, s.Name)
		p.fields = append(p.fields, r)
		row.Add(r.content)
	}
	how, caution := widgets.Wrapped(""), widgets.Wrapped("")
	how.SetText(p.ctx.Local(strings.ToUpper(pt.Place[:1]) + pt.Place[1:] + ". Gauge: " + pt.Gauge + "; " + pt.Rate + ". Bad looks like: " + p.plan.Bad(pt) + "."))
	how.Importance = widget.LowImportance
	caution.SetText("▲ " + pt.Caution)
	caution.Importance = widget.DangerImportance
	return container.NewVBox(row, how, caution)
}
