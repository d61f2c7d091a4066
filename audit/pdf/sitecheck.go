package pdf

import (
	"strings"

	"barlitre/audit/sitecheck"
)

// siteCheck prints the test plan, one page a circuit, and behind it what was read.
func (l *layout) siteCheck() {
	for i, p := range l.plans {
		if i > 0 {
			l.newPage()
			l.heading(1, string(SiteCheck), 30)
		}
		l.fitted(func() { l.plan(p) })
		l.readings(p)
	}
}

func (l *layout) plan(p *sitecheck.Plan) {
	small := l.small()
	l.lead(side, "Circuit “"+p.Circuit+"”.", sitecheck.Intro, l.body())
	l.lead(side, "Good.", p.Basis(), small)
	l.lead(side, "States.", upper(sitecheck.StateText()), small)
	t := table{cols: []column{{"where, and gauge", false}, {"stopped", true}, {"idling", true}, {"holding", true}, {"working", true}, {"bad looks like", false}, {"caution for this point", false}}}
	for _, pt := range p.Points {
		cells := []string{pt.What + ", " + pt.Place + "; " + pt.Gauge + "; " + pt.Rate}
		for _, s := range sitecheck.States() {
			cells = append(cells, p.Shown(pt, s.Name))
		}
		t.rows = append(t.rows, row{cells: append(cells, p.Bad(pt), pt.Caution)})
		if drawn := p.RowAsDrawn(pt); drawn != nil {
			t.rows = append(t.rows, row{cells: append(append([]string{"as drawn"}, drawn...), "", "")})
		}
		t.rows = append(t.rows, blankRow(p, pt))
	}
	l.table(t)
	l.lead(side, "Before you begin.", sitecheck.Cautions, l.body())
	l.blanks()
}

// blankRow leaves room for what is read at a point, in the states that the model says something of.
func blankRow(p *sitecheck.Plan, pt sitecheck.Point) row {
	cells := []string{"read:"}
	for _, s := range sitecheck.States() {
		blank := "________"
		if p.Shown(pt, s.Name) == "–" {
			blank = ""
		}
		cells = append(cells, blank)
	}
	return row{cells: append(cells, "", "")}
}

// blanks leaves lines to write on.
func (l *layout) blanks() {
	l.para("Read by ______________________   date ______________   oil grade ______________   hour meter ______________", l.small())
}

// readings prints what was read beside the model.
func (l *layout) readings(p *sitecheck.Plan) {
	if len(l.s.File.Readings) == 0 {
		return
	}
	v := p.Compare(l.s.File.Readings)
	l.para(v.Text, l.body())
	l.table(fromReport(p.ReadTable(v)))
}

// upper begins a sentence.
func upper(text string) string { return strings.ToUpper(text[:1]) + text[1:] }
