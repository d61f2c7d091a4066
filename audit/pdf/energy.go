package pdf

import (
	"math"
	"slices"

	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// energy prints where the energy of the year and of each cycle goes.
func (l *layout) energy() {
	if !l.anySolved() {
		l.para("No circuit could be solved, so there is no energy to show; see the findings.", l.body())
		return
	}
	l.drawSteps()
	for i := range l.r.Decisions {
		if t := fromReport(l.r.Decisions[i].Source); len(t.rows) > 0 {
			t.title += ": " + l.r.Decisions[i].Proposal
			l.table(t)
		}
	}
	for i := range l.r.Circuits {
		c := &l.r.Circuits[i]
		l.heading(2, c.Name, 55) // with its note and the start of a table
		if c.Note != "" {
			l.para(c.Note, l.body())
		}
		if !c.Solved {
			l.para("This circuit could not be solved; see the findings.", l.body())
			continue
		}
		if l.s.Circuits[i].Year.Hours > 0 {
			l.table(fromReport(c.Losses))
			l.table(fromReport(c.States))
			if t := fromReport(c.Calendar); len(t.rows) > 0 {
				l.table(t)
			}
		}
		l.services(i)
		for _, d := range c.Duties {
			for _, of := range []audit.Table{d.Losses, d.Work, d.Gates, d.Measured} {
				if t := fromReport(of); len(t.rows) > 0 {
					t.title += ": " + d.Name
					l.table(t)
				}
			}
		}
	}
	for _, d := range l.s.File.Duties {
		l.figureTable("Balance of one cycle: "+d.Name, "", func(c *audit.CircuitPage) []audit.Figure {
			for _, p := range c.Duties {
				if p.Name == d.Name {
					return p.Figures
				}
			}
			return nil
		})
	}
}

func (l *layout) anySolved() bool {
	return slices.ContainsFunc(l.r.Circuits, func(c audit.CircuitPage) bool { return c.Solved })
}

// most circuits that stand side by side in one figure or table.
const abreast = 4

// figureTable sets figures of all circuits side by side, row by row of one name.
func (l *layout) figureTable(title, note string, of func(*audit.CircuitPage) []audit.Figure) {
	for from := 0; from < len(l.r.Circuits); from += abreast {
		group := l.r.Circuits[from:min(len(l.r.Circuits), from+abreast)]
		t := table{title: title, note: note, cols: []column{{"", false}}}
		var names []string
		for i := range group {
			t.cols = append(t.cols, column{group[i].Name, true})
			for _, f := range of(&group[i]) {
				if !slices.Contains(names, f.Name) {
					names = append(names, f.Name)
				}
			}
		}
		for _, name := range names {
			r := row{cells: []string{name}}
			for i := range group {
				r.cells = append(r.cells, textOf(of(&group[i]), name))
			}
			t.rows = append(t.rows, r)
		}
		if len(t.rows) > 0 {
			l.table(t)
		}
	}
}

func textOf(fs []audit.Figure, name string) string {
	for _, f := range fs {
		if f.Name == name {
			return f.Text
		}
	}
	return "–"
}

// calculations prints how the figures of all circuits came about.
func (l *layout) calculations(title string, of func(*audit.CircuitPage) []audit.Figure) {
	t := table{title: title, cols: []column{{"figure", false}, {"calculation", false}, {"source", false}}}
	at := map[string]int{}
	for i := range l.r.Circuits {
		c := &l.r.Circuits[i]
		for _, f := range of(c) {
			k, ok := at[f.Name]
			if !ok {
				k = len(t.rows)
				at[f.Name] = k
				t.rows = append(t.rows, row{cells: []string{f.Name, f.Calculation.Formula, f.Calculation.Source}})
			}
			if f.Calculation.Numbers != "" {
				t.rows[k].cells[1] += "\n" + c.Name + ": " + f.Calculation.Numbers
			}
		}
	}
	l.table(t)
}

// stepBasis is what the loss steps show: a year, or one cycle of a duty.
type stepBasis struct {
	text                                         string
	supply, returned, positive, negative, stored float64
	losses                                       []audit.LossRow
}

// lossSteps returns the circuits on one scale: over the year, or, where no duty has
// hours, over one cycle of each duty.
func (l *layout) lossSteps() []figures.LossSteps {
	kWh, _ := units.ParseUnit("kWh", units.Energy)
	var year []figures.StepsCircuit
	for _, c := range l.s.Circuits {
		if y := c.Year; y != nil && y.Complete && y.Hours > 0 {
			year = append(year, stepsOf(c, kWh, stepBasis{"a year", y.Drawn.Total(), y.Returned.Total(), y.WorkPositive().Total(),
				y.WorkNegative().Total(), y.Stored.Total(), y.Losses}))
		}
	}
	if len(year) > 0 {
		return abreastSteps(year, kWh)
	}
	var out []figures.LossSteps
	unit := units.Preferred(units.Energy, l.r.System)
	for i, d := range l.s.File.Duties {
		var cycle []figures.StepsCircuit
		for _, c := range l.s.Circuits {
			if i < len(c.Duties) && c.Duties[i].Balance != nil {
				b := c.Duties[i].Balance
				cycle = append(cycle, stepsOf(c, unit, stepBasis{"one cycle of " + d.Name, b.SupplyIn.Total(), b.Returned.Total(),
					b.WorkPositive().Total(), b.WorkNegative().Total(), b.StoredEnergy().Total(), b.Losses}))
			}
		}
		if len(cycle) > 0 {
			out = append(out, abreastSteps(cycle, unit)...)
		}
	}
	return out
}

// smallStep is the share of what comes in below which losses are drawn as one step.
const smallStep = 0.01

// stepsOf turns a balance into loss steps. Small losses are gathered, those that
// warm the oil apart from the others; the tables hold every one.
func stepsOf(c *audit.CircuitRun, u units.Unit, b stepBasis) figures.StepsCircuit {
	f := figures.StepsCircuit{Title: c.Circuit.Name, Subtitle: b.text, Supply: u.FromSI(b.supply), Returned: u.FromSI(b.returned),
		WorkPositive: u.FromSI(b.positive), WorkNegative: -u.FromSI(b.negative), Stored: u.FromSI(b.stored)}
	in := b.supply - b.negative
	limit := smallStep * in
	var small [2][]figures.Step
	for _, r := range fromSupply(c.Circuit, b.losses) {
		e := r.Energy.Total()
		if math.Abs(e) < 1e-9*in {
			continue // left by rounding
		}
		heat := r.Sink == circuit.ToOil
		step := figures.Step{Label: r.Block + ": " + r.Kind, Value: u.FromSI(e), Heat: heat}
		switch {
		case e >= limit || e < 0:
			f.Steps = append(f.Steps, step)
		case e > 0 && heat:
			small[0] = append(small[0], step)
		case e > 0:
			small[1] = append(small[1], step)
		}
	}
	for i, name := range []string{"other losses to the oil", "other losses"} {
		f.Steps = append(f.Steps, gathered(small[i], name)...)
	}
	return f
}

// fromSupply orders losses on the way from the supply to the load, as the catalog
// orders the kinds of block.
func fromSupply(c *circuit.Circuit, rows []audit.LossRow) []audit.LossRow {
	place := map[string]int{}
	for i, k := range circuit.Catalog() {
		place[k.Name] = i
	}
	at := func(r audit.LossRow) int {
		if b := c.Block(r.Block); b != nil {
			return place[b.Kind]
		}
		return len(place)
	}
	out := slices.Clone(rows)
	slices.SortStableFunc(out, func(a, b audit.LossRow) int { return at(a) - at(b) })
	return out
}

func gathered(steps []figures.Step, name string) []figures.Step {
	if len(steps) < 2 {
		return steps
	}
	sum := figures.Step{Label: name, Heat: steps[0].Heat}
	for _, s := range steps {
		sum.Value += s.Value
	}
	return []figures.Step{sum}
}

// abreastSteps puts circuits on one scale; where they are too many for a page, the
// first is repeated beside the others, so that each figure holds the comparison.
func abreastSteps(all []figures.StepsCircuit, u units.Unit) []figures.LossSteps {
	var out []figures.LossSteps
	rest := all[1:]
	for {
		n := len(rest)
		var f figures.LossSteps
		for ; n >= 0; n-- {
			f = figures.LossSteps{Circuits: append(all[:1:1], rest[:n]...), Unit: u.Label(),
				Format: func(v float64) string { return units.Number(v, 4) }}
			if n <= 1 || figureScale*f.Height() < bottom-top-25 {
				break
			}
		}
		out = append(out, f)
		if rest = rest[n:]; len(rest) == 0 {
			return out
		}
	}
}

func (l *layout) drawSteps() {
	for _, f := range l.lossSteps() {
		l.figure(func(float64) float64 { return f.Height() }, func(p pen.Pen, w, h float64) { f.Draw(p, w, h, l.pal) })
		l.y += 2 * l.sheet.room
	}
	l.para("All bars of a figure have one scale. A loss below "+units.Format(smallStep, units.Percent, 1)+
		" of what comes in is part of “other losses”; the tables hold each.", l.small())
}
