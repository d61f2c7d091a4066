package fixfirst

import (
	"fmt"
	"math"
	"strings"

	"barlitre/audit"
	"barlitre/machines/units"
)

// Page is a ladder in words, for a terminal, paper and the window.
type Page struct {
	Circuit string
	Verdict string   // in a sentence or two
	Head    []string // of Rows
	Rows    []Row    // the steps in order with their prices
	Note    string   // below them
	Items   []Item
	Splits  []SplitPage
}

// Row is a row of figures.
type Row struct {
	Name  string
	Cells []audit.Figure
	Sum   bool
}

// tableOf is a table of rows.
func tableOf(title, note string, head []string, rows []Row) audit.Table {
	t := audit.Table{Title: title, Head: head, Note: note}
	for _, r := range rows {
		cells := []string{r.Name}
		for _, c := range r.Cells {
			cells = append(cells, c.Text)
		}
		t.Rows = append(t.Rows, audit.TableRow{Cells: cells, Sum: r.Sum})
	}
	return t
}

// Ladder is the steps as a table.
func (p Page) Ladder() audit.Table {
	return tableOf("What to put right, in this order", p.Note, p.Head, p.Rows)
}

// Table is the split as a table.
func (s SplitPage) Table() audit.Table {
	return tableOf("Where the saving of "+s.Proposal+" comes from", "", s.Head, s.Rows)
}

// Item is a step in words.
type Item struct {
	Number   int
	Head     string
	Where    string // duty and time, "" where it is everywhere
	Text     string
	Evidence []Quantity
	Do       string
	Caution  string
	Basis    string
	Price    string
	Note     string
	Cure     string // as the price was computed, for the command line
	Edits    Cure   // the same
	Block    string // to be shown, "" where it is the machine as a whole
	Habit    bool
}

// SplitPage is what of a proposal's saving is its own.
type SplitPage struct {
	Proposal string
	Text     string
	Head     []string
	Rows     []Row
}

// Page puts a ladder into words.
func (l *Ladder) Page(system units.System) Page {
	w := words{l.Currency, system}
	p := Page{Circuit: l.Circuit, Verdict: w.verdict(l), Head: []string{"what", "takes", "alone", "", "in order", ""}, Rows: w.ladder(l),
		Note: "A year. First what costs nothing, then service, then parts; within each the largest saving first. \"Alone\" is the saving if nothing else is done, \"in order\" what it adds to those above it. Both come from balancing the circuit again with the cure in it."}
	for i, x := range l.Steps {
		p.Items = append(p.Items, w.item(i+1, x))
	}
	for _, s := range l.Splits {
		p.Splits = append(p.Splits, w.split(l, s))
	}
	return p
}

// words writes figures.
type words struct {
	currency string
	system   units.System
}

func (w words) energy(j float64) string {
	if math.IsNaN(j) {
		return "n/a"
	}
	u, _ := units.ParseUnit("kWh", units.Energy)
	return units.Format(j, u, 4)
}

func (w words) money(x float64) string {
	if math.IsNaN(x) || w.currency == "" {
		return "no price"
	}
	return units.Number(x, 4) + "\u202f" + w.currency
}

func seconds(t float64) string { return units.Format(t, units.Preferred(units.Time, units.Metric), 3) }

func (w words) both(s Saving) string {
	if math.IsNaN(s.Money) || w.currency == "" {
		return w.energy(s.Energy)
	}
	return w.energy(s.Energy) + " (" + w.money(s.Money) + ")"
}

func (w words) verdict(l *Ladder) string {
	n, total := l.Faults(), l.Total()
	if n == 0 && len(l.Steps) == 0 {
		return "Nothing was found that is to be put right before anything else: settings, parts and running hours are as one would wish, as far as the drawing and its results show."
	}
	faults := map[int]string{0: "No fault was found", 1: "One fault was found"}[n]
	if faults == "" {
		faults = fmt.Sprintf("%d faults were found", n)
	}
	join := ", and"
	if n == 0 {
		join = ", but"
	}
	switch habits := len(l.Steps) - n; {
	case habits == 1:
		faults += join + " the way it is run costs money"
	case habits > 1:
		faults += fmt.Sprintf("%s it is run in %d ways that cost money", join, habits)
	}
	if l.Lacks > leastLack {
		return fmt.Sprintf("The circuit \"%s\" as it stands does not do its work: %s of motion a cycle are missing. %s. What the cures save cannot be compared, for the machine delivers less as it stands; put right in the order below it does that work and draws %s a year. That is the machine a proposal has to beat.",
			l.Circuit, seconds(l.Lacks), faults, w.energy(l.Cured.Drawn))
	}
	if l.unpriced("") {
		return fmt.Sprintf("%s. What putting it right would save is not known; why stands with each below. The circuit \"%s\" draws %s a year as it is run now.", faults, l.Circuit, w.energy(l.AsFound.Drawn))
	}
	share := ""
	if l.AsFound.Drawn > 0 {
		share = ", " + units.Format(total.Energy/l.AsFound.Drawn, units.Percent, 3)
	}
	left := ""
	switch n := l.withoutPrice(); {
	case n == 1:
		left = " What one of them would save is not known and not counted; why stands with it below."
	case n > 1:
		left = fmt.Sprintf(" What %d of them would save is not known and not counted; why stands with each below.", n)
	}
	return fmt.Sprintf("%s. Put right in the order below, the circuit \"%s\" would draw %s a year in place of %s: %s less%s.%s That is the machine a proposal has to beat.",
		faults, l.Circuit, w.energy(l.Cured.Drawn), w.energy(l.AsFound.Drawn), w.both(total), share, left)
}

func (w words) ladder(l *Ladder) []Row {
	var rows []Row
	for i, x := range l.Steps {
		r := Row{Name: fmt.Sprintf("%d  %s", i+1, x.Name()), Cells: []audit.Figure{{Text: x.Effort.short()}}}
		alone := w.figures(x.Name()+", cured alone", x.Alone, l.AsFound, x.Without, x.Cure.String())
		order := w.figures(x.Name()+", after those above it", x.InOrder, x.Before, x.After, x.Taken.String())
		if x.Regained > leastLack {
			alone, order = notCompared(), notCompared()
		}
		r.Cells = append(append(r.Cells, alone...), order...)
		rows = append(rows, r)
	}
	if len(l.Steps) > 0 {
		r := Row{Name: l.sumName(), Sum: true, Cells: []audit.Figure{{}, {}, {}}}
		all := w.figures("all, in order", l.Total(), l.AsFound, l.Cured, l.Edits.String())
		if l.Lacks > leastLack {
			all = notCompared()
		} else if l.unpriced("") {
			all = w.figures("all, in order", unknown, l.AsFound, l.Cured, "")
		}
		rows = append(rows, Row{r.Name, append(r.Cells, all...), true})
	}
	return rows
}

// sumName names the sum of what the steps save, which counts only those with a price.
func (l *Ladder) sumName() string {
	if n := l.withoutPrice(); n > 0 && n < len(l.Steps) {
		return "all with a price, in order"
	}
	return "all, in order"
}

// notCompared stands for a saving between a machine that does its work and one that does not.
func notCompared() []audit.Figure {
	return []audit.Figure{{Value: math.NaN(), Text: "not comparable"}, {Value: math.NaN(), Text: "–"}}
}

// figures are a saving in energy and money, with where they come from.
func (w words) figures(name string, s Saving, before, after Year, with string) []audit.Figure {
	energy := audit.Figure{Name: name + ": energy a year", Value: s.Energy, Text: w.energy(s.Energy)}
	money := audit.Figure{Name: name + ": money a year", Value: s.Money, Text: w.money(s.Money)}
	if math.IsNaN(s.Energy) {
		return []audit.Figure{energy, money}
	}
	source := "the circuit balanced twice over the year of its duties"
	if with != "" {
		source += "; with " + with
	}
	energy.Calculation = audit.Calculation{Formula: "saving = E_before − E_after", Numbers: fmt.Sprintf("%s − %s = %s", w.energy(before.Drawn), w.energy(after.Drawn), energy.Text), Source: source}
	if w.currency != "" && !math.IsNaN(s.Money) {
		money.Calculation = audit.Calculation{Formula: "saving = K_before − K_after, K the cost of energy a year", Numbers: fmt.Sprintf("%s − %s = %s", w.money(before.Money), w.money(after.Money), money.Text), Source: source}
	}
	return []audit.Figure{energy, money}
}

func (e Effort) short() string { return [...]string{"nothing", "service", "a part"}[e] }

func (w words) item(n int, x *Step) Item {
	it := Item{Number: n, Head: x.Name(), Text: x.Text, Evidence: x.Evidence, Do: x.Do, Caution: x.Caution, Basis: x.Basis, Note: x.Note(), Block: x.Block, Habit: x.Habit, Cure: x.Cure.String(), Edits: x.Cure}
	if x.Duty != "" {
		it.Where = x.Duty
		if x.Time > 0 {
			it.Where += ", at " + units.Format(x.Time, units.Preferred(units.Time, units.Metric), 4)
		}
	}
	if x.Unpriced == "" && x.Regained <= leastLack {
		it.Price = fmt.Sprintf("%s a year alone, %s in order; %s.", w.both(x.Alone), w.both(x.InOrder), x.Effort)
	}
	return it
}

func (w words) split(l *Ladder, s Split) SplitPage {
	page := SplitPage{Proposal: s.Proposal, Head: []string{"", "energy a year", "money a year", "share"}}
	row := func(sum bool, name string, x Saving, figures []audit.Figure) {
		share := "n/a"
		if s.Whole.Energy != 0 && !math.IsNaN(x.Energy) {
			share = units.Format(x.Energy/s.Whole.Energy, units.Percent, 3)
		}
		page.Rows = append(page.Rows, Row{name, append(figures, audit.Figure{Text: share}), sum})
	}
	for _, c := range Classes() {
		x := s.Class[c]
		if l.unpriced(c) {
			x = unknown
		}
		row(false, "of "+l.Circuit+": "+string(c), x, []audit.Figure{{Text: w.energy(x.Energy)}, {Text: w.money(x.Money)}})
	}
	adds := "what " + s.Proposal + " adds"
	row(false, adds, s.Architecture, w.figures(adds, s.Architecture, l.Cured, s.Year, ""))
	row(true, "saving in all", s.Whole, w.figures("saving in all", s.Whole, l.AsFound, s.Year, ""))
	page.Text = fmt.Sprintf("Of the %s that %s saves a year, %s can be had without it, by putting %s right. With that done it adds %s.",
		w.both(s.Whole), s.Proposal, w.both(l.Total()), l.Circuit, w.both(s.Architecture))
	if s.Whole.Energy <= 0 || l.Total().Energy <= 0 {
		page.Text = fmt.Sprintf("Against %s with its faults cured, %s saves %s.", l.Circuit, s.Proposal, w.both(s.Architecture))
	}
	if l.Lacks > leastLack { // no split of a saving against a machine that does less
		page.Text = fmt.Sprintf("%s cannot be compared with %s as it stands, which delivers less (%s a cycle missing). Against that with its faults cured it saves %s.", s.Proposal, l.Circuit, seconds(l.Lacks), w.both(s.Architecture))
		page.Rows = []Row{page.Rows[len(page.Rows)-2]}
		page.Rows[0].Cells[len(page.Rows[0].Cells)-1].Text = "–"
	}
	if s.Payback.None == "" && l.Total().Energy != 0 {
		page.Text += fmt.Sprintf(" By what it adds alone, its cost comes back in %s.", s.Payback)
	}
	if s.Besides.Energy > 0 {
		page.Text += fmt.Sprintf(" Switched off in the same hours, it would draw %s less besides.", w.both(s.Besides))
	}
	return page
}

// Names lists the faults of a ladder in one line.
func (l *Ladder) Names() string {
	var out []string
	for _, x := range l.Steps {
		if !x.Habit {
			out = append(out, x.Name())
		}
	}
	return strings.Join(out, "; ")
}
