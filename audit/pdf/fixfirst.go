package pdf

import (
	"strings"

	"barlitre/audit/fixfirst"
	"barlitre/audit/pen"
)

// fixFirst prints what is to be put right before anything is bought, with prices, and what is left for the proposal.
func (l *layout) fixFirst() {
	for i, p := range l.fix {
		if len(l.fix) > 1 {
			l.heading(2, p.Circuit, 20)
		}
		if i > 0 {
			l.gap(1)
		}
		l.para(p.Verdict, l.body())
		if len(p.Items) > 0 {
			l.table(fromReport(p.Ladder()))
		}
		for _, s := range p.Splits {
			l.para(s.Text, l.body())
			l.table(fromReport(s.Table()))
		}
		for _, it := range p.Items {
			l.fixItem(it)
		}
	}
}

// fixItem prints one thing to put right: what was found, what to do, what to beware of.
func (l *layout) fixItem(it fixfirst.Item) {
	st := l.body()
	l.heading(3, it.Head, 6*st.line())
	l.para(it.Text, st)
	t := table{cols: []column{{"evidence", false}, {"found", false}, {"should be", false}}}
	for _, q := range it.Evidence {
		t.rows = append(t.rows, row{cells: []string{q.Name, q.Found, q.Limit}})
	}
	l.table(t)
	for _, part := range [][2]string{{"Where it shows:", it.Where}, {"Do:", it.Do}, {"Worth:", strings.TrimSpace(it.Price + " " + it.Note)}, {"Limit:", it.Basis}} {
		if part[1] != "" {
			l.lead(side, part[0], part[1], st)
		}
	}
	if it.Caution != "" {
		l.need(2 * st.line())
		l.put(side, l.y+st.base(), "▲", style{st.size, false, l.pal.Danger}, pen.Left)
		l.lead(side+4.5, "Caution:", it.Caution, st)
	}
	l.gap(1.5)
}

// besides says on the page of a proposal what of its saving could be had without it.
func (l *layout) besides(proposal string) {
	for _, p := range l.fix {
		for _, s := range p.Splits {
			if s.Proposal == proposal && len(p.Items) > 0 {
				l.lead(side, "Before it is bought.", s.Text+" See “"+string(FixFirst)+"”.", style{size: 2.6, c: l.pal.Ink})
			}
		}
	}
}
