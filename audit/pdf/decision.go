package pdf

import (
	"fmt"
	"math"
	"path/filepath"
	"slices"
	"strings"

	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
	"barlitre/circuit"
	"barlitre/machines/units"
)

func (l *layout) fileName() string {
	if l.s.File.Path == "" {
		return "file not saved yet"
	}
	return filepath.Base(l.s.File.Path)
}

// firstPage opens the document with its title and whose machine it is.
func (l *layout) firstPage(starts map[Section]int) {
	l.newPage()
	l.lines(side, []string{"Energy audit of an oil-hydraulic machine"}, l.small())
	l.y += 0.5
	title := style{size: 6.4, bold: true, c: l.pal.Ink}
	l.lines(side, title.wrap(l.title(), fullW), title)
	l.y += 0.8
	var parts []string
	for _, p := range [][2]string{{"Site", l.site}, {"Customer", l.customer}, {"Author", l.author},
		{"Audit of", l.r.Site.Date}, {"Report of", l.date}} {
		if p[1] != "" {
			parts = append(parts, p[0]+": "+p[1])
		}
	}
	l.lines(side, l.body().wrap(strings.Join(parts, "  ·  "), fullW), l.body())
	if l.r.Site.Note != "" {
		l.lines(side, l.small().wrap("Note: "+l.r.Site.Note, fullW), l.small())
	}
	l.y += 1.5
	l.rule(side, side+fullW, l.y, l.pal.Edge)
	l.y += 1
	l.contents(starts)
	l.y += 1.5 * l.sheet.room
}

// contents names the page of each section. Before they are known it leaves as much room.
func (l *layout) contents(starts map[Section]int) {
	var parts []string
	for _, s := range append(Sections(), cautionPages, Sheets) {
		n, ok := starts[s]
		switch {
		case slices.Contains(l.without, s), s == Sheets && l.boards == nil:
			continue
		case !ok:
			n = 10
		}
		parts = append(parts, fmt.Sprintf("%s\u00a0%d", strings.ReplaceAll(string(s), " ", "\u00a0"), n))
	}
	l.lines(side, l.small().wrap("Pages: "+strings.Join(parts, " · "), fullW), l.small())
}

// decisions prints a page for each proposal, or what there is without one.
func (l *layout) decisions() {
	for i := range l.r.Decisions {
		if i > 0 {
			l.newPage()
		}
		l.fitted(func() { l.decision(&l.r.Decisions[i], l.s.Comparisons[i]) })
	}
	if len(l.r.Decisions) == 0 {
		l.heading(1, "No proposal to decide on", 20)
		l.para("The file holds no pair of a circuit as found and a proposal, so nothing is compared. The pages that follow show the circuits one by one.", l.body())
		l.figureTable("", "", func(c *audit.CircuitPage) []audit.Figure { return c.Year })
		for _, c := range l.s.Circuits {
			l.stops(c)
		}
	}
}

// fitted draws on the rest of the page, with less room and smaller figures if that
// is what it takes; what is too much for a page in any case goes on over it.
func (l *layout) fitted(draw func()) {
	page := l.sheet
	for _, try := range []struct{ room, scale float64 }{{1, figureScale}, {0.85, 0.21}, {0.7, 0.195}, {0.5, figureLeast}, {0.4, 0.165}, {0.25, 0.165}} {
		trial := *page
		trial.to, trial.p = &recorders{}, pen.NewRecorder()
		trial.room, trial.scale = try.room*page.room, try.scale
		l.sheet = &trial
		draw()
		l.sheet = page
		if trial.number > page.number {
			continue
		}
		room := page.room
		page.room, page.scale = trial.room, trial.scale
		draw()
		page.room, page.scale = room, figureScale
		return
	}
	draw()
}

func (l *layout) decision(d *audit.Decision, c *audit.Comparison) {
	l.heading(1, d.Proposal+" in place of "+d.Base, 40)
	l.verdict(d.Verdict, c.SavedDrawn)
	l.besides(d.Proposal)
	if c.Missing != "" {
		l.stops(c.Base)
		l.stops(c.Proposal)
	}
	l.beforeAfter(d)
	l.bars(d)
	l.paybackTable(c, "")
	if d.Oil != "" {
		l.lead(side, "Oil temperature.", d.Oil, style{size: 2.6, c: l.pal.Ink})
	}
	l.against(d)
	st := style{size: 2.6, c: l.pal.Ink}
	if len(l.r.Assumptions) > 0 {
		l.lead(side, "Assumed.", l.r.Assumptions[0]+" All else: see “"+string(Basis)+"”.", st)
	}
	l.lead(side, "Left out.", strings.Join(l.r.Exclusions, " "), st)
	l.signatures()
}

// verdict sets the sentence apart. Its bar is vermilion where there is no saving.
func (l *layout) verdict(text string, saved float64) {
	st := style{size: 3.5, c: l.pal.Ink}
	lines := st.wrap(text, fullW-10)
	h := float64(len(lines))*st.line() + 5
	l.need(h)
	bar := l.pal.Gain
	if !(saved > 0) {
		bar = l.pal.Danger
	}
	if l.y+h <= bottom { // a verdict longer than a page has no ground
		l.fill(side, l.y, fullW, h, l.pal.Ground)
		l.fill(side, l.y, 1.2, h, bar)
	}
	l.y += 2.5
	l.lines(side+5, lines, st)
	l.y += 2.5 + 2*l.sheet.room
}

// stops lists what keeps a circuit from being solved.
func (l *layout) stops(c *audit.CircuitRun) {
	var items []string
	for _, f := range c.Findings {
		if f.Level == circuit.Stops {
			items = append(items, f.Text)
		}
	}
	if len(items) > 0 {
		l.heading(3, c.Circuit.Name+" could not be solved", 10)
		l.bullets(items, l.body())
	}
}

func (l *layout) beforeAfter(d *audit.Decision) {
	if len(d.Rows) == 0 {
		return
	}
	t := table{cols: []column{{"", false}, {d.Base, true}, {d.Proposal, true}, {"less", true}}}
	for _, r := range d.Rows {
		t.rows = append(t.rows, row{cells: []string{r.Name, r.Before.Text, r.After.Text, r.Change.Text}})
	}
	var notes []string
	if d.Cooler != "" {
		notes = append(notes, d.Cooler)
	}
	if len(d.Shortfalls.Rows) == 0 {
		notes = append(notes, d.Shortfalls.Note)
	}
	t.note = strings.Join(notes, " ")
	l.table(t)
	if len(d.Shortfalls.Rows) > 0 {
		l.table(fromReport(d.Shortfalls))
	}
}

func (l *layout) degrees(kelvin float64) string {
	return units.Format(kelvin, units.Preferred(units.Temperature, l.r.System), 3)
}

func known(v float64) bool { return !math.IsNaN(v) && !math.IsInf(v, 0) }

// barRows are the figures drawn as bars, by their names in the report.
var barRows = []struct {
	name string
	role figures.Role // of the circuit as found
}{{"energy drawn a year", figures.RoleBar}, {"mean heat to the oil", figures.RoleHeat}, {"cost of energy a year", figures.RoleBar}}

// bars draws before and after of the figures that decide, with their printed text.
func (l *layout) bars(d *audit.Decision) {
	var f figures.Bars
	for _, want := range barRows {
		for _, r := range d.Rows {
			if r.Name != want.name || !known(r.Before.Value) || !known(r.After.Value) {
				continue
			}
			f.Groups = append(f.Groups, figures.BarGroup{Title: r.Name,
				Bars:   []figures.Bar{{Label: d.Base, Value: r.Before.Value, Role: want.role}, {Label: d.Proposal, Value: r.After.Value, Role: figures.RoleGain}},
				Format: printed(r.Before, r.After)})
		}
	}
	if len(f.Groups) > 0 {
		l.figure(func(float64) float64 { return f.Height() }, func(p pen.Pen, w, h float64) { f.Draw(p, w, h, l.pal) })
		l.y += 2.5 * l.sheet.room
	}
}

// printed writes a bar's value as the report prints the figure.
func printed(fs ...audit.Figure) func(float64) string {
	return func(v float64) string {
		for _, f := range fs {
			if f.Value == v {
				return f.Text
			}
		}
		return units.Number(v, 3)
	}
}

func (l *layout) moneyText(v float64) string {
	if !known(v) {
		return "–"
	}
	return units.Format(v, units.Unit{Symbol: l.s.Tariff.Currency, Dim: units.Money, Factor: 1}, 4)
}

// paybackTable sets cost and payback side by side, low, likely and high.
func (l *layout) paybackTable(c *audit.Comparison, title string) {
	cost, n := c.Proposal.Cost, c.Payback
	if !cost.Given || n.None != "" {
		return
	}
	years := func(v float64) string {
		if !known(v) {
			return "–"
		}
		return units.Number(v, 2) + " years"
	}
	t := table{title: title, cols: []column{{"", false}, {"low", true}, {"likely", true}, {"high", true}}, rows: []row{
		{cells: []string{"cost of the retrofit", l.moneyText(cost.Low), l.moneyText(cost.Likely), l.moneyText(cost.High)}},
		{cells: []string{"simple payback", years(n.Low), years(n.Likely), years(n.High)}, sum: true},
	}}
	if cost.Note != "" {
		t.note = "Cost: " + cost.Note + "."
	}
	l.table(t)
}

// against prints what stands against the verdict, and how it compares with others.
func (l *layout) against(d *audit.Decision) {
	if len(d.Warnings) > 0 {
		l.heading(3, "What stands against it", 8)
		for _, w := range d.Warnings {
			l.marked('▲', figures.RoleDanger, w, l.body())
		}
	}
	l.gap(1)
	if d.Published.Text != "" {
		l.lead(side, "Published.", strings.TrimSpace(d.Published.Text+" "+d.Published.Explanation), style{size: 2.6, c: l.pal.Ink})
	}
}

// marked writes a paragraph behind a sign.
func (l *layout) marked(sign rune, role figures.Role, text string, st style) {
	lines := st.wrap(text, fullW-5)
	l.need(st.begin(len(lines)))
	l.put(side, l.y+st.base(), string(sign), style{st.size, false, l.pal.Color(role)}, pen.Left)
	l.lines(side+5, lines, st)
	l.y += 0.8 * l.sheet.room
}

// signatures leaves lines to sign on.
func (l *layout) signatures() {
	const h, gap = 17.0, 8.0
	l.need(h)
	l.y += 11.5
	w := (fullW - 2*gap) / 3
	for i, who := range []string{"Prepared by", "Checked by", "Accepted by"} {
		x := side + float64(i)*(w+gap)
		l.rule(x, x+w, l.y, l.pal.Ink)
		if who == "Prepared by" && l.author != "" {
			who += " " + l.author
		}
		l.put(x, l.y+3.4, pen.Shorten(who+", date", smallSize, false, w), l.small(), pen.Left)
	}
	l.y += h - 11.5
}

// basis prints all that the figures rest on, and what they leave out.
func (l *layout) basis() {
	l.heading(2, "Assumed", 12)
	l.bullets(l.r.Assumptions, l.body())
	l.heading(2, "Left out of the figures", 12)
	l.bullets(l.r.Exclusions, l.body())
}
