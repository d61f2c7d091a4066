package widgets

import (
	"strconv"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"

	"barlitre/audit"
	"barlitre/audit/figures"
)

// FigureRow is a row of a FigureTable. One without cells is a title over rows.
type FigureRow struct {
	Name  string
	Cells []audit.Figure // one with an empty Text stays empty
	Sum   bool
}

// FigureTable fills a Table, as high as its rows, with figures of the report. A click on a
// figure, or Enter, opens its calculation.
type FigureTable struct {
	Table *Table
	open  func(audit.Figure)
	local func(string) string
	rows  []FigureRow
}

// NewFigureTable makes a table; open opens a calculation, local puts the user's
// decimal sign into a text.
func NewFigureTable(palette func() figures.Palette, open func(audit.Figure), local func(string) string) *FigureTable {
	t := &FigureTable{Table: NewTable(fyne.NewSize(240, 60), palette), open: open, local: local}
	t.Table.Tapped = t.tapped
	return t
}

// In tells the table what scrolls around it: the wheel goes there.
func (t *FigureTable) In(s *container.Scroll) { t.Table.Outer = s.Scrolled }

func (t *FigureTable) tapped(row, col int) {
	if row < 0 || row >= len(t.rows) || col < 1 || col > len(t.rows[row].Cells) {
		return
	}
	if f := t.rows[row].Cells[col-1]; f.Calculation != (audit.Calculation{}) {
		t.open(f)
	}
}

// Set shows rows under a head whose first entry stands over the names.
func (t *FigureTable) Set(head []string, rows []FigureRow) {
	t.rows = rows
	columns := make([]Column, len(head))
	for i, h := range head {
		columns[i] = Column{Name: strconv.Itoa(i), Head: h, Left: i == 0}
	}
	t.Table.SetData(columns, len(rows), t.row)
	t.Table.FitRows()
}

func (t *FigureTable) row(i int) TableRow {
	r := t.rows[i]
	out := TableRow{Name: plainName(r.Name), Cells: []string{r.Name}}
	switch {
	case len(r.Cells) == 0:
		out.Kind = RowGroup
	case r.Sum:
		out.Kind = RowSum
	}
	for _, c := range r.Cells {
		out.Cells = append(out.Cells, t.local(c.Text))
	}
	return out
}

// plainName is a name for scripts: "mean-heat".
func plainName(s string) string {
	return strings.Join(strings.FieldsFunc(strings.ToLower(s), func(r rune) bool {
		return !(r >= 'a' && r <= 'z' || r >= '0' && r <= '9')
	}), "-")
}

// Text is what stands in the table: cells apart by " | ", rows by " / ".
func (t *FigureTable) Text() string {
	var rows []string
	for i := range t.rows {
		rows = append(rows, strings.Join(t.row(i).Cells, " | "))
	}
	return strings.Join(rows, " / ")
}

// Rows returns what Set was given.
func (t *FigureTable) Rows() []FigureRow { return t.rows }
