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
	t := table{cols: []column{{"where, and gauge", false}, {"stopped", false}, {"idling", false}, {"holding", false}, {"working", false}, {"bad looks like", false}, {"caution for this point", false}}}
	for _, pt := range p.Points {
		cells := append([]string{pt.What + ", " + pt.Place + "; " + pt.Gauge + "; " + pt.Rate}, stateCells(p, pt)...)
		t.rows = append(t.rows, row{cells: append(cells, p.Bad(pt), pt.Caution)})
	}
	l.table(t)
	l.lead(side, "Before you begin.", sitecheck.Cautions, l.body())
	l.blanks()
}

// stateCells say what is good in each state, what the machine as drawn would show where that is something
// else, and leave room for what is read where the model says something.
func stateCells(p *sitecheck.Plan, pt sitecheck.Point) []string {
	drawn := p.RowAsDrawn(pt)
	var cells []string
	for i, s := range sitecheck.States() {
		text := p.Shown(pt, s.Name)
		if text != "–" {
			if drawn != nil && drawn[i] != "" && drawn[i] != text {
				text += ", drawn " + drawn[i]
			}
			text += " ________"
		}
		cells = append(cells, text)
	}
	return cells
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
