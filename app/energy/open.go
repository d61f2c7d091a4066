package energy

import (
	"fmt"
	"slices"
	"strings"

	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/machines/units"
)

// open opens a calculation, and marks the step and the row it belongs to.
func (s *Station) open(about opened) {
	s.opened = about
	switch about.kind {
	case aRow:
		if i := s.lineOf(about); i >= 0 {
			s.table.Select(i, 0)
			s.showRow(s.lines[i])
		}
	case aGathering:
		s.table.Select(-1, 0)
		s.showGathering(about)
	}
	s.steps.Refresh()
}

func (s *Station) lineOf(about opened) int {
	for i, l := range s.lines {
		if l.row != nil && l.circuit == about.circuit && l.row.Name == about.name {
			return i
		}
	}
	return -1
}

// openLine opens a row of the table.
func (s *Station) openLine(i int) {
	if l := s.lines[i]; l.row != nil {
		s.take(opened{circuit: l.circuit, name: l.row.Name, kind: aRow})
	}
}

// take opens what the user chose; the block of a loss is then the one at hand.
func (s *Station) take(about opened) {
	s.open(about)
	if i := s.lineOf(about); i >= 0 && s.lines[i].row.Block != "" {
		name := s.circuitName(about.circuit)
		if at := slices.IndexFunc(s.ctx.Doc().File().Circuits, func(c audit.CircuitEntry) bool { return c.Name == name }); at >= 0 {
			s.ctx.Select(at, s.lines[i].row.Block)
		}
	}
}

// reopen shows anew what was open, or for a start the largest loss.
func (s *Station) reopen() {
	about := s.opened
	switch {
	case about.kind == aFigure:
		for _, c := range s.ctx.Report().Circuits {
			for _, f := range s.figuresOf(&c) {
				if f.Name == about.name && c.Name == s.circuitName(about.circuit) {
					s.show(about, f)
					return
				}
			}
		}
	case about.kind == aGathering && s.gathering(about) != nil, about.kind == aRow && s.lineOf(about) >= 0:
		s.open(about)
		return
	}
	s.open(s.largest())
}

func (s *Station) circuitName(i int) string {
	if i < 0 || i >= len(s.shown.Circuits) {
		return ""
	}
	return s.shown.Circuits[i].Circuit.Name
}

// largest is the largest loss of the first circuit that is solved.
func (s *Station) largest() opened {
	best := opened{}
	most := 0.0
	for _, l := range s.lines {
		if l.row == nil || l.row.Block == "" || (best.kind == aRow && l.circuit != best.circuit) {
			continue
		}
		if e := l.row.Energy.Total(); e > most {
			most, best = e, opened{circuit: l.circuit, name: l.row.Name, kind: aRow}
		}
	}
	return best
}

func (s *Station) showRow(l line) {
	calc := s.shown.RowCalculation(l.circuit, s.scopeDuty(), *l.row, s.ctx.System())
	s.calc.show(s.circuitName(l.circuit)+", "+l.row.Name, s.ctx.Local(units.Format(l.row.Energy.Total(), s.unit(), 4))+s.scopeWords(), s.local(calc))
}

func (s *Station) scopeWords() string {
	if s.year {
		return " a year"
	}
	return " a cycle"
}

func (s *Station) local(c audit.Calculation) audit.Calculation {
	return audit.Calculation{Formula: c.Formula, Numbers: s.ctx.Local(c.Numbers), Source: c.Source}
}

// gathering returns the losses behind a gathered step, or nil.
func (s *Station) gathering(about opened) []audit.LossRow {
	for g, c := range s.drawn.circuits {
		for i, step := range s.drawn.figure.Circuits[g].Steps {
			if c == about.circuit && step.Label == about.name {
				return s.drawn.behind[g][i]
			}
		}
	}
	return nil
}

// showGathering lists the losses that a step stands for.
func (s *Station) showGathering(about opened) {
	u, sum := s.unit(), 0.0
	var lines []string
	for _, r := range s.gathering(about) {
		sum += r.Energy.Total()
		lines = append(lines, fmt.Sprintf("%s: %s  %s", r.Block, r.Kind, units.Format(r.Energy.Total(), u, 4)))
	}
	total := units.Format(sum, u, 4)
	calc := audit.Calculation{Formula: "E = Σ of the losses below " + units.Format(figures.SmallStep, units.Percent, 1) + " of what comes in",
		Numbers: strings.Join(lines, "\n") + "\nE = " + total, Source: "the rows of the table; each opens its own calculation"}
	s.calc.show(s.circuitName(about.circuit)+", "+about.name, s.ctx.Local(total)+s.scopeWords(), s.local(calc))
}

// Explain opens the calculation of a figure of the report.
func (s *Station) Explain(f audit.Figure) {
	about := opened{name: f.Name, kind: aFigure, circuit: -1}
	if r := s.ctx.Report(); r != nil {
		for i, c := range r.Circuits {
			for _, g := range s.figuresOf(&c) {
				if g.Name == f.Name && g.Calculation == f.Calculation {
					about.circuit = i
				}
			}
		}
	}
	s.show(about, f)
}

func (s *Station) show(about opened, f audit.Figure) {
	s.opened = about
	s.table.Select(-1, 0)
	title := f.Name
	if name := s.circuitName(about.circuit); name != "" {
		title = name + ", " + title
	}
	s.calc.show(title, s.ctx.Local(f.Text), s.local(f.Calculation))
	s.steps.Refresh()
}
