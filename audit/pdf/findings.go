package pdf

import (
	"fmt"
	"strings"

	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// levelMarks are the signs beside the words, for those who do not see the colour.
var levelMarks = map[circuit.Level]struct {
	sign rune
	role figures.Role
}{circuit.Stops: {'■', figures.RoleDanger}, circuit.Warns: {'▲', figures.RoleHeat}, circuit.Note: {'●', figures.RoleSecondary}}

// findings prints what check, run and audit have to say.
func (l *layout) findings() {
	if len(l.r.Findings) == 0 {
		l.para("There are none.", l.body())
		return
	}
	t := table{cols: []column{{"level", false}, {"where", false}, {"finding", false}}}
	for _, f := range l.r.Findings {
		m := levelMarks[f.Level]
		t.rows = append(t.rows, row{cells: []string{string(f.Level), l.where(f), f.Text}, sign: m.sign, role: m.role})
	}
	l.table(t)
}

func (l *layout) where(f circuit.Finding) string {
	var parts []string
	for _, p := range []string{f.Circuit, f.Duties(), f.Block} {
		if p != "" {
			parts = append(parts, p)
		}
	}
	if f.Time != 0 {
		parts = append(parts, units.Format(f.Time, units.Preferred(units.Time, l.r.System), 4))
	}
	if f.Line > 0 {
		parts = append(parts, fmt.Sprintf("line %d of the file", f.Line))
	}
	return strings.Join(parts, ", ")
}

// method prints how well the equations were solved, which a reader asks first, and then these with their sources.
func (l *layout) method() {
	l.certificate()
	t := table{title: "Equations and their sources", cols: []column{{"of", false}, {"equation", false}, {"source", false}}}
	last := ""
	for _, m := range l.r.Method {
		r := row{cells: []string{m.Of, m.Text, m.Source}, carry: m.Of}
		if m.Of == last {
			r.cells[0] = ""
		}
		last = m.Of
		t.rows = append(t.rows, r)
	}
	l.table(t)
}

// certificate prints the worst residuals of every run and how its energies close.
func (l *layout) certificate() {
	t := table{cols: []column{{"circuit, duty", false}, {"time steps", true}, {"by fall-back", true}, {"not balanced", true},
		{"worst flow left", true}, {"worst force left", true}, {"closure", true}, {"worst gap of powers", true}}}
	in := func(v float64, d units.Dim) string { return units.Format(v, units.Preferred(d, l.r.System), 2) }
	for _, c := range l.s.Circuits {
		for _, d := range c.Duties {
			name := c.Circuit.Name + ", " + d.Duty.Name
			if d.Balance == nil {
				t.rows = append(t.rows, row{cells: []string{name, "not solved", "", "", "", "", "", ""}})
				continue
			}
			cert := d.Certificate
			t.rows = append(t.rows, row{cells: []string{name, fmt.Sprint(cert.Steps), fmt.Sprint(cert.Fallbacks), fmt.Sprint(cert.Unbalanced),
				in(cert.Worst, units.Flow), in(cert.Force, units.Force), units.Format(d.Balance.Closure(), units.Percent, 2),
				in(d.Balance.WorstGap, units.Power)}})
		}
	}
	t.note = "What a node or an actuator was left with at its worst time step, and what the energy balance lacks, as a share of what came in. " +
		"By fall-back: steps that were found another way than by Newton's method from the step before, to the same limits. " +
		"A closure above " + units.Format(audit.ClosureLimit, units.Percent, 1) + " is reported as a fault."
	t.title = "Certificate of the balance"
	l.table(t)
}

// cautions prints the page on harm and limits of use; it stands for itself and
// cannot be left out.
func (l *layout) cautions() {
	if !l.fresh() {
		l.newPage()
	}
	l.accent = l.pal.Danger
	l.starts[cautionPages] = l.number
	l.heading(1, string(cautionPages), 30)
	last := ""
	for _, c := range l.r.Cautions {
		if c.Circuit != last && c.Circuit != "" {
			l.heading(2, "In circuit "+c.Circuit, 15)
		}
		last = c.Circuit
		topic := c.Topic + "."
		if c.Block != "" {
			topic = c.Block + ": " + topic
		}
		st := l.body()
		l.need(3 * st.line())
		l.put(side, l.y+st.base(), "▲", style{st.size, false, l.pal.Danger}, pen.Left)
		l.lead(side+4.5, topic, c.Text, st)
	}
}
