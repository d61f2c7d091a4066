package pdf

import (
	"slices"

	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
	"barlitre/audit/thermal"
	"barlitre/machines/units"
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
	l.temperatures()
	l.calculations("How these figures come about", of)
}

// temperatures prints how warm the oil gets, where the file says enough of tank and cooler.
func (l *layout) temperatures() {
	if len(l.r.Warmth) == 0 {
		l.para("How warm the oil gets is not worked out: the file says nothing of tank and cooler, or not enough.", l.small())
		return
	}
	u := units.Preferred(units.Temperature, l.r.System)
	days, start := figures.StudyLanes(l.s.Circuits)
	var limits []figures.HeatLimit
	for _, c := range l.s.Circuits {
		if c.Warmth != nil && c.Warmth.Week != nil {
			limits = figures.HeatLimits(c.Warmth, l.degrees)
			break
		}
	}
	draw := func(title string, f figures.Plot) {
		high := func(w float64) float64 { return f.Height(w) + 50*float64(len(f.Lanes)) }
		l.heading(3, title, 2+figureLeast*high(fullW/figureLeast))
		l.figure(high, func(p pen.Pen, w, h float64) { f.Draw(p, w, h, l.pal) })
		l.y += 2 * l.sheet.room
	}
	week := figures.TemperaturePlot(days, limits, u, 0, thermal.Week)
	week.Phases = figures.Weekdays()
	draw("Oil over the week that repeats itself", week)
	span := start.Courses[0].Course.T
	draw("Oil after a cold start", figures.TemperaturePlot([]figures.TemperatureLane{start}, limits, u, 0, span[len(span)-1]))
	for _, t := range l.r.Warmth {
		l.table(fromReport(t))
	}
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
