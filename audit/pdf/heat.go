package pdf

import (
	"slices"

	"barlitre/audit"
)

// heat prints the heat put into the oil and the cooler it asks for.
func (l *layout) heat() {
	of := func(c *audit.CircuitPage) []audit.Figure { return c.Heat }
	if !l.anySolved() {
		l.para("No circuit could be solved, so there is no heat to show.", l.body())
		return
	}
	note := ""
	if known(l.s.Oil) && known(l.s.Air) {
		note = "Oil entering the cooler at " + l.degrees(l.s.Oil) + ", air at " + l.degrees(l.s.Air) + ", in all circuits."
	}
	l.figureTable("", note, of)
	var faults []string
	for _, c := range l.s.Circuits {
		if c.Heat != nil && c.Heat.Fault != "" && !slices.Contains(faults, c.Heat.Fault) {
			faults = append(faults, c.Heat.Fault)
		}
	}
	l.bullets(faults, l.body())
	l.calculations("How these figures come about", of)
}

// money prints the year's bill, and what each proposal brings and costs.
func (l *layout) money() {
	of := func(c *audit.CircuitPage) []audit.Figure { return c.Year }
	if !l.anySolved() {
		l.para("No circuit could be solved, so there is no money to show.", l.body())
		return
	}
	l.figureTable("The year", "", of)
	for i := range l.r.Decisions {
		l.outcome(&l.r.Decisions[i], l.s.Comparisons[i])
	}
	l.calculations("How the figures of the year come about", of)
}

func (l *layout) outcome(d *audit.Decision, c *audit.Comparison) {
	t := table{title: "What " + d.Proposal + " brings", cols: []column{{"", false}, {"", true}, {"calculation", false}, {"source", false}}}
	for _, f := range d.Outcome {
		calc := f.Calculation.Formula
		if f.Calculation.Numbers != "" {
			calc += "\n" + f.Calculation.Numbers
		}
		t.rows = append(t.rows, row{cells: []string{f.Name, f.Text, calc, f.Calculation.Source}})
	}
	if len(t.rows) == 0 {
		t.note = d.Verdict
	}
	l.table(t)
	l.paybackTable(c, "Cost and payback")
}
