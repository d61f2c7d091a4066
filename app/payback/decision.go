package payback

import (
	"fmt"
	"math"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/station"
	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
	"barlitre/machines/units"
)

// decision shows one proposal against the circuit as found.
type decision struct {
	ctx       station.Context
	content   fyne.CanvasObject
	title     *widget.Label
	verdict   *widgets.Text
	credit    *widgets.Text // what of the saving could be had without the proposal
	oil       *widgets.Text // what the oil temperature found does to the saving
	warnings  *widgets.Text
	figure    *widgets.Figure
	bars      figures.Bars
	of        [][2]audit.Figure // of the bars
	table     *widgets.FigureTable
	cost      *widgets.FigureTable
	none      *widgets.Text
	published *widgets.Text
}

// numbered names the parts of the second proposal and of those after it.
func numbered(name string, i int) string {
	if i == 0 {
		return name
	}
	return fmt.Sprintf("%s.%d", name, i+1)
}

func newDecision(ctx station.Context, i int, in *container.Scroll) *decision {
	d := &decision{ctx: ctx}
	d.title = widget.NewLabelWithStyle("", fyne.TextAlignLeading, fyne.TextStyle{Bold: true})
	d.title.Wrapping = fyne.TextWrapWord
	d.verdict, d.warnings = widgets.Wrapped(numbered("payback.verdict", i)), widgets.Wrapped(numbered("payback.warnings", i))
	d.credit = widgets.Wrapped(numbered("payback.credit", i))
	d.oil = widgets.Wrapped(numbered("payback.oil", i))
	d.warnings.Importance = widget.DangerImportance
	d.figure = widgets.Name(widgets.NewFigure(fyne.NewSize(300, 60), d.draw), numbered("payback.bars", i))
	d.figure.Tapped = d.tapped
	d.table = widgets.NewFigureTable(ctx.Palette, ctx.Explain, ctx.Local)
	widgets.Name(d.table.Table, numbered("payback.table", i))
	d.cost = widgets.NewFigureTable(ctx.Palette, ctx.Explain, ctx.Local)
	widgets.Name(d.cost.Table, numbered("payback.range", i))
	d.table.In(in)
	d.cost.In(in)
	d.none = widgets.Wrapped(numbered("payback.none", i))
	d.published = widgets.Wrapped(numbered("payback.published", i))
	d.content = container.NewVBox(d.title, d.verdict, d.credit, d.oil, d.warnings, d.figure, d.table.Table, d.cost.Table, d.none, d.published)
	return d
}

// barRows are the rows that are drawn as bars, by their names in the report.
var barRows = []string{"cost of energy a year", "energy drawn a year", "CO2 a year"}

// tableRows are the rows of the table: what the bill and the payback hang on. Heat and
// cooler stand under Heat.
var tableRows = []string{"energy drawn a year", "energy returned a year", "cost of energy a year", "CO2 a year",
	"largest 15-minute mean of power drawn"}

func (d *decision) show(r *audit.Decision, c *audit.Comparison) {
	d.title.SetText(r.Proposal + " in place of " + r.Base)
	d.verdict.SetText(d.ctx.Local(r.Verdict))
	d.credit.SetText(d.ctx.Local(d.creditText(r)))
	widgets.Show(d.credit, d.credit.Text != "")
	d.oil.SetText(d.ctx.Local(r.Oil))
	widgets.Show(d.oil, r.Oil != "")
	d.warnings.SetText("")
	if len(r.Warnings) > 0 {
		d.warnings.SetText("▲ " + d.ctx.Local(strings.Join(r.Warnings, "\n▲ ")))
	}
	widgets.Show(d.warnings, len(r.Warnings) > 0)
	d.loadBars(r)
	d.loadTable(r)
	d.loadCost(r, c)
	d.published.SetText(d.ctx.Local(publishedText(r.Published)))
	widgets.Show(d.published, d.published.Text != "")
}

// creditText says what of the saving is the repair of faults and habits, "" before that is known.
func (d *decision) creditText(r *audit.Decision) string {
	a, current := d.ctx.Doc().Advice()
	if !current {
		return ""
	}
	for _, l := range a.Ladders {
		for _, s := range l.Page(a.System).Splits {
			if l.Circuit == r.Base && s.Proposal == r.Proposal && len(l.Steps) > 0 {
				return s.Text + " See Fix first, above."
			}
		}
	}
	return ""
}

func publishedText(p audit.Published) string {
	text := strings.TrimSpace(p.Text + " " + p.Explanation)
	if p.Outside {
		return "▲ " + text
	}
	return text
}

func known(v float64) bool { return !math.IsNaN(v) && !math.IsInf(v, 0) }

// loadBars takes what can be drawn before and after.
func (d *decision) loadBars(r *audit.Decision) {
	d.bars, d.of = figures.Bars{}, nil
	for _, name := range barRows {
		for _, row := range r.Rows {
			if row.Name != name || !known(row.Before.Value) || !known(row.After.Value) {
				continue
			}
			before, after := row.Before, row.After
			d.bars.Groups = append(d.bars.Groups, figures.BarGroup{Title: name,
				Bars: []figures.Bar{{Label: r.Base, Value: before.Value, Role: figures.RoleBar}, {Label: r.Proposal, Value: after.Value, Role: figures.RoleGain}},
				Format: func(v float64) string { // as the report prints it
					if v == before.Value {
						return d.ctx.Local(before.Text)
					}
					return d.ctx.Local(after.Text)
				}})
			d.of = append(d.of, [2]audit.Figure{before, after})
		}
	}
	d.figure.SetMin(fyne.NewSize(300, float32(d.bars.Height())))
	if len(d.bars.Groups) == 0 {
		d.figure.Hide()
		return
	}
	d.figure.Show()
	d.figure.Refresh()
}

func (d *decision) draw(p pen.Pen, w, h float64) []widgets.Part {
	var parts []widgets.Part
	for _, g := range d.bars.Draw(p, w, h, d.ctx.Palette()) {
		f := d.of[g.Group][g.Index]
		parts = append(parts, widgets.Part{Name: fmt.Sprintf("%d.%d", g.Group, g.Index), Text: f.Name + ": " + d.ctx.Local(f.Text),
			X: g.X, Y: g.Y, W: g.W, H: g.H, Click: true})
	}
	return parts
}

func (d *decision) tapped(part widgets.Part, _, _ float64) {
	var group, index int
	if n, _ := fmt.Sscanf(part.Name, "%d.%d", &group, &index); n == 2 && group < len(d.of) && index < 2 {
		d.ctx.Explain(d.of[group][index])
	}
}

func (d *decision) loadTable(r *audit.Decision) {
	var rows []widgets.FigureRow
	for _, name := range tableRows {
		for _, row := range r.Rows {
			if row.Name == name {
				rows = append(rows, widgets.FigureRow{Name: name, Cells: []audit.Figure{row.Before, row.After, row.Change}})
			}
		}
	}
	if len(r.Outcome) > 0 {
		rows = append(rows, widgets.FigureRow{Name: "What it brings"})
	}
	for _, f := range r.Outcome {
		if f.Name == "simple payback" && !known(f.Value) {
			continue // said in words below the table
		}
		rows = append(rows, widgets.FigureRow{Name: f.Name, Cells: []audit.Figure{{}, {}, f}, Sum: f.Name == "simple payback"})
	}
	widgets.Show(d.table.Table, len(rows) > 0)
	d.table.Set([]string{"", r.Base, r.Proposal, "less"}, rows)
}

// loadCost sets cost and payback side by side, low, likely and high.
func (d *decision) loadCost(r *audit.Decision, c *audit.Comparison) {
	cost, n := c.Proposal.Cost, c.Payback
	d.none.SetText("")
	if !cost.Given || n.None != "" {
		if c.Missing == "" {
			d.none.SetText(strings.ToUpper(n.None[:1]) + n.None[1:] + ".")
			if !cost.Given {
				d.none.SetText(d.none.DumpText() + " Type it at the left, under the cost of " + r.Proposal + ".")
			}
		}
		widgets.Show(d.none, d.none.Text != "")
		d.cost.Table.Hide()
		return
	}
	d.none.Hide()
	var calc audit.Calculation
	for _, f := range r.Outcome {
		if f.Name == "simple payback" {
			calc = f.Calculation
		}
	}
	row := widgets.FigureRow{Name: "simple payback", Sum: true}
	for _, v := range []float64{n.Low, n.Likely, n.High} {
		row.Cells = append(row.Cells, audit.Figure{Name: "simple payback", Value: v, Text: units.Number(v, 2) + " years", Calculation: calc})
	}
	costs := widgets.FigureRow{Name: "cost of the retrofit"}
	for _, v := range []float64{cost.Low, cost.Likely, cost.High} {
		costs.Cells = append(costs.Cells, audit.Figure{Name: "cost of the retrofit", Value: v, Text: units.Format(v, currency(d.ctx), 4)})
	}
	d.cost.Table.Show()
	d.cost.Set([]string{"", "low", "likely", "high"}, []widgets.FigureRow{costs, row})
}

// currency is the unit of money of the audit.
func currency(ctx station.Context) units.Unit {
	code := ctx.Doc().File().Site.Currency
	if code == "" {
		return units.Preferred(units.Money, ctx.System())
	}
	return units.Unit{Symbol: code, Dim: units.Money, Factor: 1}
}
