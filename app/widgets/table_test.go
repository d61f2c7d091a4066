package widgets

import (
	"errors"
	"fmt"
	"strings"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/test"
	"fyne.io/fyne/v2/widget"

	"barlitre/audit/figures"
)

// tableOf shows a table of numbers: row r, column c holds r·10 + c.
func tableOf(t *testing.T, rows, cols int, w, h float32) (*Table, fyne.Window) {
	t.Helper()
	test.NewTempApp(t).Settings().SetTheme(Theme{})
	table := NewTable(fyne.NewSize(100, 60), func() figures.Palette { return figures.Light })
	win := test.NewTempWindow(t, table)
	win.SetPadded(false)
	win.Resize(fyne.NewSize(w, h))
	var columns []Column
	for c := range cols {
		columns = append(columns, Column{Name: fmt.Sprintf("c%d", c), Head: "column\nnumber", Unit: "kN", Left: c == 0})
	}
	table.SetData(columns, rows, func(r int) TableRow {
		row := TableRow{}
		for c := range cols {
			row.Cells = append(row.Cells, fmt.Sprint(10*r+c))
		}
		return row
	})
	return table, win
}

func down(table *Table, p Part) {
	at := fyne.NewPos(float32(p.X+p.W/2), float32(p.Y+p.H/2))
	table.MouseDown(&desktop.MouseEvent{PointEvent: fyne.PointEvent{Position: at}, Button: desktop.MouseButtonPrimary})
	table.MouseUp(nil)
}

func keys(table *Table, names ...fyne.KeyName) {
	for _, n := range names {
		table.TypedKey(&fyne.KeyEvent{Name: n})
	}
}

// TestVeryManyRows asks only for the rows that are looked at, and reaches the last.
func TestVeryManyRows(t *testing.T) {
	const rows = 1_000_000
	table, win := tableOf(t, 10, 3, 300, 200)
	asked := map[int]bool{}
	table.SetData([]Column{{Name: "t", Head: "time", Unit: "s"}}, rows, func(r int) TableRow {
		asked[r] = true
		return TableRow{Cells: []string{fmt.Sprint(r)}}
	})
	win.Canvas().Focus(table)
	keys(table, fyne.KeyEnd)
	win.Canvas().Capture()
	if row, _ := table.Selection(); row != rows-1 {
		t.Errorf("End goes to row %d", row)
	}
	parts := table.Parts()
	if last := parts[len(parts)-1]; last.Name != "999999.t" || last.Y+last.H > 200 {
		t.Errorf("the last cell in sight is %+v", last)
	}
	if len(asked) > 3000 {
		t.Errorf("%d rows were asked for", len(asked))
	}
}

// TestNarrowTableScrolls: the first column stays, the selected cell comes into sight.
func TestNarrowTableScrolls(t *testing.T) {
	table, win := tableOf(t, 5, 12, 300, 200)
	win.Canvas().Focus(table)
	if hasPart(table, "0.c11") {
		t.Fatal("all columns are in sight; the test needs a narrower window")
	}
	for range 11 {
		keys(table, fyne.KeyRight)
	}
	if !hasPart(table, "0.c11") || !hasPart(table, "0.c0") || hasPart(table, "0.c2") {
		t.Errorf("in sight are %v", table.Parts())
	}
	for _, p := range table.Parts() {
		if p.Name == "0.c11" && (p.X < 0 || p.X+p.W > 300) {
			t.Errorf("the selected column is cut: %+v", p)
		}
	}
	across, _ := table.bars()
	table.MouseDown(&desktop.MouseEvent{PointEvent: fyne.PointEvent{Position: fyne.NewPos(float32(across[0]+3), float32(across[1]+1))}, Button: desktop.MouseButtonPrimary})
	table.Dragged(&fyne.DragEvent{Dragged: fyne.NewDelta(-400, 0)})
	table.DragEnd()
	if table.scrollX != 0 || !hasPart(table, "0.c1") {
		t.Errorf("dragged to the left, it stands at %g", table.scrollX)
	}
}

func hasPart(table *Table, name string) bool {
	for _, p := range table.Parts() {
		if p.Name == name {
			return true
		}
	}
	return false
}

func TestTitlesAreSkipped(t *testing.T) {
	table, win := tableOf(t, 6, 2, 300, 300)
	table.ByRow = true
	table.SetData(table.columns, 6, func(r int) TableRow {
		row := TableRow{Name: fmt.Sprintf("row %d", r), Cells: []string{"x", "1"}}
		if r%3 == 0 {
			row.Kind = RowGroup
		}
		return row
	})
	var seen []int
	table.Selected = func(row, _ int) { seen = append(seen, row) }
	win.Canvas().Focus(table)
	keys(table, fyne.KeyDown, fyne.KeyDown, fyne.KeyDown, fyne.KeyDown, fyne.KeyUp, fyne.KeyHome)
	if got := fmt.Sprint(seen); got != "[2 4 5 4 1]" {
		t.Errorf("selected %v", got)
	}
	seen = nil
	for _, p := range table.Parts() {
		if p.Name == "row 3.c0" {
			down(table, p)
		}
	}
	if row, _ := table.Selection(); row != 1 || seen != nil {
		t.Errorf("a click on a title selects row %d", row)
	}
}

// TestTypingInCells: Tab and Enter go on, a refusal stays, a click away keeps it, Escape
// gives it up.
func TestTypingInCells(t *testing.T) {
	table, win := tableOf(t, 4, 3, 400, 300)
	got := map[string]string{}
	table.Note = Wrapped("")
	table.Editable = func(_, col int) bool { return col > 0 }
	table.Commit = func(row, col int, text string) error {
		if strings.Contains(text, "no") {
			return errors.New("not that")
		}
		got[fmt.Sprintf("%d.%d", row, col)] = text
		return nil
	}
	write := func(text string, last fyne.KeyName) {
		for _, r := range text {
			win.Canvas().Focused().TypedRune(r)
		}
		win.Canvas().Focused().TypedKey(&fyne.KeyEvent{Name: last})
	}
	win.Canvas().Focus(table)
	write("7", fyne.KeyTab) // the first column takes nothing, and Tab is not for the table
	keys(table, fyne.KeyRight)
	write("81", fyne.KeyTab)
	write("82", fyne.KeyReturn)
	write("no", fyne.KeyReturn)
	if fmt.Sprint(got) != "map[0.1:81 0.2:82]" {
		t.Errorf("taken: %v", got)
	}
	if !table.editing || !strings.Contains(table.Note.Text, "not that") || table.Note.Importance != widget.DangerImportance {
		t.Errorf("refused: editing %v, note %q", table.editing, table.Note.Text)
	}
	for _, p := range table.Parts() {
		if p.Name == "3.c1" {
			down(table, p)
		}
	}
	if table.editing || table.Cell(1, 2) != "⚠ no" || !table.Refused() || !strings.Contains(table.Note.Text, "marked cell") {
		t.Errorf("after a click away: %q, note %q", table.Cell(1, 2), table.Note.Text)
	}
	table.Select(1, 2)
	keys(table, fyne.KeyReturn)
	if table.editor.Text != "no" {
		t.Errorf("opened again, %q stands there", table.editor.Text)
	}
	win.Canvas().Focused().TypedKey(&fyne.KeyEvent{Name: fyne.KeyEscape})
	if table.Refused() || table.Cell(1, 2) != "12" || table.editing {
		t.Errorf("after Escape: %q", table.Cell(1, 2))
	}
	keys(table, fyne.KeyReturn)
	win.Canvas().Focused().TypedKey(&fyne.KeyEvent{Name: fyne.KeyReturn})
	if len(got) != 2 {
		t.Errorf("an unchanged text was handed over: %v", got)
	}
}

// TestTabGoesFromCellToCell: after a cell was typed into, Tab goes on through the table, by row,
// and then out of it; before, it is not for the table.
func TestTabGoesFromCellToCell(t *testing.T) {
	table, win := tableOf(t, 2, 3, 400, 300)
	table.Editable = func(_, _ int) bool { return true }
	table.Commit = func(_, _ int, _ string) error { return nil }
	tab := &fyne.KeyEvent{Name: fyne.KeyTab}
	win.Canvas().Focus(table)
	if table.AcceptsTab() {
		t.Error("keeps Tab before anything was typed")
	}
	table.Select(0, 1)
	win.Canvas().Focused().TypedRune('5')
	var went []string
	for range 4 {
		win.Canvas().Focused().TypedKey(tab)
		row, col := table.Selection()
		went = append(went, fmt.Sprint(row, col, table.AcceptsTab()))
	}
	if want := "[0 2 true 1 0 true 1 1 true 1 2 true]"; fmt.Sprint(went) != want {
		t.Errorf("went %v, want %s", went, want)
	}
	win.Canvas().Focused().TypedKey(tab)
	if table.AcceptsTab() {
		t.Error("keeps Tab after its last cell")
	}
}

// TestColumnsHoldTheirTexts: no number of a table that fits is shortened.
func TestColumnsHoldTheirTexts(t *testing.T) {
	table, win := tableOf(t, 3, 4, 600, 200)
	win.Canvas().Capture()
	for c := range table.columns {
		if table.x[c+1]-table.x[c] < table.widths[c] {
			t.Errorf("column %d is %g wide, its texts need %g", c, table.x[c+1]-table.x[c], table.widths[c])
		}
	}
	if end := table.x[len(table.x)-1]; end > 600 {
		t.Errorf("the columns end at %g", end)
	}
}

// In a table that is a little too wide the words of the first column give way, and every number
// stays whole and in sight; one that is much too wide scrolls.
func TestWordsGiveWayToNumbers(t *testing.T) {
	table, win := tableOf(t, 3, 4, 600, 200)
	table.SetData([]Column{{Name: "name", Left: true}, {Name: "a"}, {Name: "b"}}, 2, func(int) TableRow {
		return TableRow{Cells: []string{"waiting, with the pump running", "0.0785 kW/K", "0.0208 kW/K"}}
	})
	need := table.widths[0] + table.widths[1] + table.widths[2] + tableBar
	for _, c := range []struct {
		less  float64
		whole bool
	}{{-10, true}, {1, true}, {table.widths[0] - tableWords, true}, {table.widths[0] - tableWords + 2, false}} {
		win.Resize(fyne.NewSize(float32(need-c.less), 200))
		win.Canvas().Capture()
		end, numbers := table.x[3], table.x[3]-table.x[1]
		if whole := end <= need-c.less+1e-3; whole != c.whole || numbers < table.widths[1]+table.widths[2]-1e-9 {
			t.Errorf("%g too narrow: the columns end at %g of %g, numbers have %g", c.less, end, need-c.less, numbers)
		}
		if first := table.x[1]; c.less > 0 && (first < tableWords-1e-3 || first > table.widths[0]+1e-9) {
			t.Errorf("%g too narrow: the words have %g", c.less, first)
		}
	}
}
