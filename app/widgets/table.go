package widgets

import (
	"fmt"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/widget"

	"barlitre/audit/figures"
	"barlitre/audit/pen"
)

// Column is a column of a table.
type Column struct {
	Name string // for scripts
	Head string // what stands in it; lines are separated by "\n"
	Unit string // of its numbers, in a line of its own
	Left bool   // words, to the left; numbers stand to the right
	Most float64
}

// RowKind says how a row is set.
type RowKind int

// The kinds of row.
const (
	RowPlain RowKind = iota
	RowSum           // adds up those above: a line over it, bold
	RowGroup         // a title over the rows that follow; it cannot be selected
)

// TableRow is a row of a table. Cells beyond the last column are left out.
type TableRow struct {
	Name  string // for scripts; the number of the row, from 0, when empty
	Cells []string
	Kind  RowKind
}

// Table is a calm table: a head with units, every second row tinted, numbers to the
// right, the first column in place while the others scroll. Rows are asked for as
// they are shown, so there may be very many. Cells can be typed into where Commit and
// Editable are set; what is refused stays in its cell, marked, until it is put right
// or given up with Escape.
type Table struct {
	widget.BaseWidget
	Palette  func() figures.Palette
	ByRow    bool                                  // whole rows are selected, not cells
	Selected func(row, col int)                    // the user selected
	Tapped   func(row, col int)                    // the user clicked, or pressed Enter where nothing can be typed
	Editable func(row, col int) bool               // nil = nothing can be typed
	EditText func(row, col int) string             // what typing starts from; nil = the text of the cell
	Commit   func(row, col int, text string) error // takes what was typed
	Paste    func(row, col int, block [][]string)  // takes a block from the clipboard, its corner at the cell
	Key      func(k fyne.KeyName) bool             // is offered the keys that the table has no use for; may be nil
	Note     *Text                                 // where refusals are said; may be nil
	Hint     func(row, col int) string             // what Note says else
	Empty    string                                // what is said without rows
	Outer    func(*fyne.ScrollEvent)               // takes the wheel where there is nothing to scroll
	min      fyne.Size
	columns  []Column
	rows     int
	row      func(int) TableRow
	widths   []float64 // as measured
	x        []float64 // left edges as laid out, and the right edge of the last
	laidFor  float64
	scrollX  float64
	scrollY  float64
	selRow   int
	selCol   int
	refused  map[cellAt]refusal
	raster   *canvas.Raster
	editor   *cellEntry
	editing  bool
	focused  bool
	tabbing  bool // Tab goes from cell to cell
	grabbed  grip
	pointer  fyne.Position
	drawn    *pen.Raster
	lastRows map[int]TableRow
}

type cellAt struct{ row, col int }

type refusal struct{ text, reason string }

// Sizes at scale 1.
const (
	tableText  = 12.5
	tableSmall = 11.0
	tableRow   = 24.0
	tableLine  = 14.0 // of the head
	tablePad   = 9.0
	tableBar   = 9.0  // room of a scroll bar
	tableWords = 96.0 // least width of a first column that gives way
	tableLook  = 400  // rows that are measured for the widths
)

// NewTable makes an empty table with a least size.
func NewTable(min fyne.Size, palette func() figures.Palette) *Table {
	t := &Table{Palette: palette, min: min, selRow: -1, selCol: -1, refused: map[cellAt]refusal{}, lastRows: map[int]TableRow{}}
	t.raster = canvas.NewRaster(t.paint)
	t.raster.ScaleMode = canvas.ImageScalePixels
	t.editor = newCellEntry(t)
	t.editor.Hide()
	t.ExtendBaseWidget(t)
	return t
}

// SetData brings in what the table shows. The selection stays where such a row is;
// what was refused stays while the columns are the same, and goes with Forget.
func (t *Table) SetData(columns []Column, rows int, row func(int) TableRow) {
	if !sameColumns(columns, t.columns) {
		t.scrollX = 0
		t.Forget()
		t.stop()
	}
	t.columns, t.rows, t.row = columns, rows, row
	t.lastRows = map[int]TableRow{}
	if t.selRow >= rows || t.selCol >= len(columns) {
		t.selRow, t.selCol = -1, -1
	}
	t.measure()
	t.laidFor = 0
	t.scroll(0, 0)
	t.Refresh()
}

// FitRows makes the table as high as all its rows.
func (t *Table) FitRows() {
	t.min.Height = float32(t.headHeight() + tableRow*float64(t.rows) + tableBar + 1)
	t.Refresh()
}

// Forget drops what was refused, such as when another thing is shown.
func (t *Table) Forget() {
	t.refused = map[cellAt]refusal{}
	t.say()
}

func sameColumns(a, b []Column) bool {
	if len(a) != len(b) {
		return false
	}
	for i := range a {
		if a[i].Name != b[i].Name {
			return false
		}
	}
	return true
}

// at returns a row; the rows on screen are kept until the data changes.
func (t *Table) at(i int) TableRow {
	r, ok := t.lastRows[i]
	if !ok {
		if len(t.lastRows) > 4*tableLook {
			t.lastRows = map[int]TableRow{}
		}
		r = t.row(i)
		t.lastRows[i] = r
	}
	return r
}

func (r TableRow) cell(col int) string {
	if col < len(r.Cells) {
		return r.Cells[col]
	}
	return ""
}

// Select selects a cell without telling, and brings it into sight. A row below 0
// selects nothing.
func (t *Table) Select(row, col int) {
	if row >= t.rows || row < 0 {
		row, col = -1, -1
	}
	t.selRow, t.selCol = row, min(col, len(t.columns)-1)
	t.reveal()
	t.say()
	t.Refresh()
}

// Selection returns the selected cell; row −1 when there is none.
func (t *Table) Selection() (row, col int) { return t.selRow, t.selCol }

// Parts are the cells in sight, for scripts.
func (t *Table) Parts() []Part {
	var out []Part
	if t.Size().Width <= 0 {
		return nil
	}
	_, _, _, viewH := t.body()
	k := float64(Scale())
	for r := int(t.scrollY / tableRow); r < t.rows && tableRow*float64(r)-t.scrollY < viewH; r++ {
		row := t.at(r)
		name := row.Name
		if name == "" {
			name = fmt.Sprint(r)
		}
		for c, col := range t.columns {
			if x, y, w, h, ok := t.place(r, c); ok && (row.Kind != RowGroup || c == 0) {
				out = append(out, Part{Name: name + "." + col.Name, Text: t.text(r, c), X: x * k, Y: y * k, W: w * k, H: h * k, Click: t.Tapped != nil})
			}
		}
	}
	return out
}

// DumpText says for scripts what is selected.
func (t *Table) DumpText() string {
	if t.selRow < 0 || t.selRow >= t.rows {
		return fmt.Sprintf("%d rows", t.rows)
	}
	return fmt.Sprintf("%d rows, selected %d: %s", t.rows, t.selRow, t.text(t.selRow, max(0, t.selCol)))
}

// text is what a cell shows: what was typed when that was refused.
func (t *Table) text(row, col int) string {
	if bad, ok := t.refused[cellAt{row, col}]; ok {
		return "⚠ " + bad.text
	}
	return t.at(row).cell(col)
}

// Cell returns what a cell shows.
func (t *Table) Cell(row, col int) string { return t.text(row, col) }

// Rows returns the number of rows.
func (t *Table) Rows() int { return t.rows }

// Refused reports whether something that was typed stands refused.
func (t *Table) Refused() bool { return len(t.refused) > 0 }

// MinSize is the least size.
func (t *Table) MinSize() fyne.Size { return fyne.NewSize(t.min.Width*Scale(), t.min.Height*Scale()) }

// Resize lays the columns out anew.
func (t *Table) Resize(s fyne.Size) {
	if s == t.Size() {
		return
	}
	t.BaseWidget.Resize(s)
	t.scroll(0, 0)
	t.Refresh()
}

// Refresh draws anew.
func (t *Table) Refresh() {
	t.arrange()
	t.raster.Refresh()
	t.BaseWidget.Refresh()
}

// CreateRenderer is for the toolkit.
func (t *Table) CreateRenderer() fyne.WidgetRenderer { return &tableRenderer{t} }
