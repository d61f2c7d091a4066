package energy

import (
	"math"

	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/machines/units"
)

// line is a row of the table: a row of energy, or the title of a circuit.
type line struct {
	circuit int
	row     *audit.EnergyRow // nil for a title or a remark
	text    string
}

func (s *Station) fillTable() {
	s.lines = nil
	for i, c := range s.shown.Circuits {
		s.lines = append(s.lines, line{circuit: i, text: c.Circuit.Name})
		rows := s.shown.EnergyRows(i, s.scopeDuty())
		for n := range rows {
			s.lines = append(s.lines, line{circuit: i, row: &rows[n]})
		}
		if len(rows) == 0 {
			s.lines = append(s.lines, line{circuit: i, text: s.unsolved(c)})
		}
	}
	s.table.SetData(s.columns(), len(s.lines), s.tableRow)
}

func (s *Station) unsolved(c *audit.CircuitRun) string {
	if s.year && (c.Year == nil || c.Year.Hours <= 0) && len(c.Duties) > 0 {
		return "no hours a year, or not solved"
	}
	return "not solved: see the findings"
}

// priced reports whether energy or fuel has a price.
func (s *Station) priced() bool {
	return !math.IsNaN(s.shown.Tariff.Price) || !math.IsNaN(s.shown.Tariff.Fuel.Price)
}

// columns are the head of the table.
func (s *Station) columns() []widgets.Column {
	u := s.unit().Label()
	cols := []widgets.Column{{Name: "name", Left: true, Most: 168}, {Name: "to", Head: "to", Left: true}}
	if !s.year {
		cols = append(cols, widgets.Column{Name: "cycle", Head: "a cycle", Unit: u})
	}
	cols = append(cols, widgets.Column{Name: "year", Head: "a year", Unit: audit.YearUnit().Label()},
		widgets.Column{Name: "share", Head: "of drawn", Unit: "%"})
	if s.priced() {
		cols = append(cols, widgets.Column{Name: "money", Head: "a year", Unit: s.shown.Tariff.Currency})
	}
	return append(cols, widgets.Column{Name: "driving", Head: "of which\nload drives", Unit: u}, widgets.Column{Name: "working", Head: "while\nworking", Unit: u},
		widgets.Column{Name: "holding", Head: "while\nholding", Unit: u}, widgets.Column{Name: "idle", Head: "while\nidle", Unit: u})
}

func (s *Station) tableRow(i int) widgets.TableRow {
	l := s.lines[i]
	name := s.shown.Circuits[l.circuit].Circuit.Name
	if l.row == nil {
		r := widgets.TableRow{Name: name, Cells: []string{l.text}, Kind: widgets.RowGroup}
		if l.text != name {
			r.Name, r.Kind = name+"/unsolved", widgets.RowPlain
		}
		return r
	}
	u := s.unit()
	energy := func(e float64) string { return s.known(u.FromSI(e), 4) }
	cells := []string{l.row.Name, l.row.To}
	if !s.year {
		cells = append(cells, energy(l.row.Energy.Total()))
	}
	cells = append(cells, s.known(audit.YearUnit().FromSI(l.row.Year), 4), s.known(units.Percent.FromSI(l.row.Share), 3))
	if s.priced() {
		cells = append(cells, s.known(l.row.Money, 4))
	}
	e := l.row.Energy
	cells = append(cells, energy(e.Driving), energy(e.Working), energy(e.Holding), energy(e.Idle))
	r := widgets.TableRow{Name: name + "/" + l.row.Name, Cells: cells}
	if l.row.Sum {
		r.Kind = widgets.RowSum
	}
	return r
}

// known writes a number, and a dash for one that is not known.
func (s *Station) known(v float64, digits int) string {
	if math.IsNaN(v) {
		return "–"
	}
	return s.number(v, digits)
}

// fillFigures sets the figures of the report side by side.
func (s *Station) fillFigures() {
	head := []string{"Figures of one cycle"}
	if s.year {
		head = []string{"Figures of the year"}
	}
	var rows []widgets.FigureRow
	at := map[string]int{}
	r := s.ctx.Report()
	for i := range r.Circuits {
		head = append(head, r.Circuits[i].Name)
		for _, f := range s.figuresOf(&r.Circuits[i]) {
			n, ok := at[f.Name]
			if !ok {
				n = len(rows)
				at[f.Name] = n
				rows = append(rows, widgets.FigureRow{Name: f.Name, Cells: make([]audit.Figure, len(r.Circuits))})
			}
			rows[n].Cells[i] = f
		}
	}
	s.figures.Set(head, rows)
}

// figuresOf are the figures of a circuit in the scope.
func (s *Station) figuresOf(c *audit.CircuitPage) []audit.Figure {
	if s.year {
		return c.Year
	}
	for _, d := range c.Duties {
		if d.Name == s.shown.File.Duties[s.scopeDuty()].Name {
			return d.Figures
		}
	}
	return nil
}
