// Package payback is the station for money: prices, hours and the cost of the retrofit
// in; cost a year, saving, simple payback and CO2 out, as the report has them.
package payback

import (
	"math"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/fixfirst"
	"barlitre/app/sitecheck"
	"barlitre/app/station"
	"barlitre/app/widgets"
	"barlitre/audit"
)

// Payback is the station.
type Payback struct {
	ctx     station.Context
	content fyne.CanvasObject
	inputs  *inputs
	empty   *widgets.Text
	alone   *widgets.FigureTable // the year of each circuit, where there is nothing to compare
	results *fyne.Container
	shown   []*decision
	below   *fyne.Container // basis and exclusions
	basis   *widgets.Text
	left    *widgets.Text
	scroll  *container.Scroll // of the results
	pages   *pages
}

// New makes the station.
func New(ctx station.Context) station.Station {
	p := &Payback{ctx: ctx, inputs: newInputs(ctx), results: container.NewVBox()}
	p.empty = widgets.Wrapped("payback.empty")
	p.alone = widgets.NewFigureTable(ctx.Palette, ctx.Explain, ctx.Local)
	widgets.Name(p.alone.Table, "payback.year")
	p.basis, p.left = widgets.Wrapped("payback.basis"), widgets.Wrapped("payback.excluded")
	p.left.Importance, p.basis.Importance = widget.LowImportance, widget.LowImportance
	p.below = container.NewVBox(widget.NewSeparator(), widgets.Card("What the figures rest on", p.basis),
		widgets.Card("What they leave out", p.left))
	right := container.NewVBox(p.empty, p.alone.Table, p.results, p.below)
	p.scroll = container.NewScroll(widgets.Spaced(right))
	p.alone.In(p.scroll)
	split := container.NewHSplit(p.inputs.scroll, p.scroll)
	split.Offset = 0.36
	p.pages = newPages(ctx, split, p.saving)
	p.content = p.pages.content
	return p
}

// Name is the word on the rail.
func (p *Payback) Name() string { return "Payback" }

// Content is the station's page.
func (p *Payback) Content() fyne.CanvasObject { return p.content }

// Help is the short help.
func (p *Payback) Help() string {
	return "The station has three pages, chosen at its top.\n\nSaving and payback: left stand the inputs: what the next kilowatt-hour costs (without standing charges), what it emits, how many hours a year each duty runs, " +
		"and what the retrofit costs at least, likely and at most. Each is written into the audit file with where it comes from.\n\n" +
		"Right stands what follows: cost a year before and after, the saving, and the simple payback, which is cost divided by the money saved a year, without interest, " +
		"price changes or upkeep. A click on a figure, or Enter on it, opens its calculation.\n\n" +
		"The published savings are a check for the reader; they never enter a figure. The list at the end says what is not in the figures.\n\n" +
		fixfirst.Help + "\n\n" + sitecheck.Help
}

// Changed shows anew what changed, on the page in sight.
func (p *Payback) Changed(w station.What) { p.pages.tell(w) }

// ShowPage brings a page to the front.
func (p *Payback) ShowPage(name string) { p.pages.named(name) }

// saving shows anew what changed of saving and payback.
func (p *Payback) saving(w station.What) {
	if w.Has(station.Model | station.Settings) {
		p.inputs.show()
	}
	if w.Has(station.Solution | station.Settings | station.Model) {
		p.ctx.Doc().Advise(p.ctx.System())
	}
	if w.Has(station.Solution | station.Settings | station.Model | station.Advice) {
		p.figures()
	}
}

// figures shows the report's decisions.
func (p *Payback) figures() {
	r, s := p.ctx.Report(), p.ctx.Solution()
	if r == nil || s == nil {
		p.empty.SetText("Cost and saving stand here as soon as there is a result. Draw the circuit as found and a proposal under Circuit, and their duty under Duty; both are then solved by themselves.")
		p.empty.Show()
		p.alone.Table.Hide()
		p.results.Hide()
		p.below.Hide()
		return
	}
	p.compare(r, s)
	p.results.Show()
	p.below.Show()
	p.basis.SetText(p.ctx.Local(strings.Join(moneyBasis(r), "\n")))
	p.left.SetText(p.ctx.Local("· " + strings.Join(r.Exclusions, "\n· ")))
}

// compare shows one part a proposal, or the circuits alone.
func (p *Payback) compare(r *audit.Report, s *audit.Solution) {
	if len(r.Decisions) != len(p.shown) {
		p.shown, p.results.Objects = nil, nil
		for i := range r.Decisions {
			p.shown = append(p.shown, newDecision(p.ctx, i, p.scroll))
			p.results.Add(p.shown[i].content)
		}
	}
	for i := range p.shown {
		p.shown[i].show(&r.Decisions[i], s.Comparisons[i])
	}
	if len(r.Decisions) > 0 {
		p.empty.Hide()
		p.alone.Table.Hide()
		return
	}
	p.empty.SetText("There is nothing to compare yet. A payback needs a circuit as found and a proposal over the same duties: add a proposal under Circuit.")
	p.empty.Show()
	head, rows := yearRows(r)
	widgets.Show(p.alone.Table, len(rows) > 0)
	p.alone.Set(head, rows)
}

// yearRows sets the year of each solved circuit side by side.
func yearRows(r *audit.Report) (head []string, rows []widgets.FigureRow) {
	head = []string{""}
	for _, c := range r.Circuits {
		if !c.Solved {
			continue
		}
		head = append(head, c.Name)
		for i, f := range c.Year {
			if i == len(rows) {
				rows = append(rows, widgets.FigureRow{Name: f.Name})
			}
			rows[i].Cells = append(rows[i].Cells, f)
		}
	}
	return head, rows
}

// moneyBasis picks what the report assumes of money and emissions.
func moneyBasis(r *audit.Report) []string {
	var out []string
	for _, a := range r.Assumptions {
		for _, begin := range []string{"Energy costs", "No price", "Energy returned", "CO2 follows", "Duty "} {
			if strings.HasPrefix(a, begin) {
				out = append(out, a)
			}
		}
	}
	return out
}

// Mend reports that a payback lacks an input.
func (p *Payback) Mend() bool {
	s := p.ctx.Solution()
	if s == nil {
		return false
	}
	for _, c := range s.Comparisons {
		if c.Missing == "" && (math.IsNaN(c.MoneySaved) || !c.Proposal.Cost.Given) {
			return true
		}
	}
	return false
}
