package widgets

import (
	"fmt"
	"math"
	"strings"

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
	Note     *widget.Label                         // where refusals are said; may be nil
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
	tableBar   = 9.0 // room of a scroll bar
	tableLook  = 400 // rows that are measured for the widths
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

// measure finds the widths that the texts need. Of very many rows the first, the
// last and some between are looked at.
func (t *Table) measure() {
	t.widths = make([]float64, len(t.columns))
	for c, col := range t.columns {
		for _, line := range col.lines() {
			t.widths[c] = math.Max(t.widths[c], pen.TextWidth(line, tableSmall, false))
		}
	}
	step := max(1, t.rows/tableLook)
	look := func(i int) {
		r := t.at(i)
		for c := range t.columns {
			if r.Kind != RowGroup {
				t.widths[c] = math.Max(t.widths[c], pen.TextWidth(r.cell(c), tableText, r.Kind == RowSum))
			}
		}
	}
	for i := 0; i < t.rows; i += step {
		look(i)
	}
	if t.rows > 0 {
		look(t.rows - 1)
	}
	for c, col := range t.columns {
		if col.Most > 0 {
			t.widths[c] = math.Min(t.widths[c], col.Most)
		}
		t.widths[c] += 2 * tablePad
	}
}

// lines are what stands in the head of a column.
func (c Column) lines() []string {
	lines := strings.Split(c.Head, "\n")
	if c.Unit != "" {
		lines = append(lines, c.Unit)
	}
	return lines
}

// headHeight is the height of the head.
func (t *Table) headHeight() float64 {
	n := 1
	for _, c := range t.columns {
		n = max(n, len(c.lines()))
	}
	return tableLine*float64(n) + 9
}

// view is the size of the widget at scale 1.
func (t *Table) view() (w, h float64) {
	k := float64(Scale())
	return float64(t.Size().Width) / k, float64(t.Size().Height) / k
}

// lay places the columns: what is free is shared, but no column drifts far from the
// next; what is then left goes to the first when it holds words.
func (t *Table) lay() {
	w, _ := t.view()
	if t.laidFor == w && len(t.x) == len(t.columns)+1 {
		return
	}
	t.laidFor = w
	sum := 0.0
	for _, x := range t.widths {
		sum += x
	}
	free := w - tableBar - sum
	each, first := 0.0, 0.0
	if free > 0 && len(t.columns) > 0 {
		each = math.Min(36, free/float64(len(t.columns)))
		if t.columns[0].Left {
			first = free - each*float64(len(t.columns))
		}
	}
	t.x = []float64{0}
	for c, x := range t.widths {
		x += each
		if c == 0 {
			x += first
		}
		t.x = append(t.x, t.x[c]+x)
	}
}

// frozen is the width of the column that stays in place: none where it would leave
// too little for the others.
func (t *Table) frozen() float64 {
	w, _ := t.view()
	if len(t.columns) < 2 || t.x[1] > 0.6*w {
		return 0
	}
	return t.x[1]
}

// body is the size of what scrolls, and of the window on it.
func (t *Table) body() (width, height, viewW, viewH float64) {
	t.lay()
	w, h := t.view()
	width, height = t.x[len(t.x)-1], tableRow*float64(t.rows)
	viewW, viewH = w, h-t.headHeight()
	if width > viewW {
		viewH -= tableBar
	}
	if height > viewH {
		viewW -= tableBar
	}
	return width, height, math.Max(0, viewW), math.Max(0, viewH)
}

// scroll moves what is shown, as far as there is something to show.
func (t *Table) scroll(dx, dy float64) {
	width, height, viewW, viewH := t.body()
	t.scrollX = math.Max(0, math.Min(width-viewW, t.scrollX+dx))
	t.scrollY = math.Max(0, math.Min(height-viewH, t.scrollY+dy))
}

// place is where a cell lies, at scale 1, and whether it is in sight.
func (t *Table) place(row, col int) (x, y, w, h float64, visible bool) {
	_, _, viewW, viewH := t.body()
	x, y = t.x[col], t.headHeight()+tableRow*float64(row)-t.scrollY
	w, h = t.x[col+1]-x, tableRow
	left := 0.0
	if f := t.frozen(); f == 0 || col > 0 {
		x -= t.scrollX
		left = f
	}
	visible = y+h > t.headHeight() && y < t.headHeight()+viewH && x+w > left && x < viewW
	return x, y, w, h, visible
}

// find returns the cell at a point at scale 1; row −1 beside the rows.
func (t *Table) find(x, y float64) (row, col int) {
	width, _, viewW, viewH := t.body()
	top := t.headHeight()
	if y < top || y > top+viewH || x > viewW || len(t.columns) == 0 {
		return -1, -1
	}
	row = int((y - top + t.scrollY) / tableRow)
	if row < 0 || row >= t.rows {
		return -1, -1
	}
	if x >= t.frozen() {
		x += t.scrollX
	}
	if x > width {
		x = width - 0.5 // right of the last column the row goes on
	}
	for col = len(t.columns) - 1; col > 0 && t.x[col] > x; col-- {
	}
	return row, col
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

// reveal scrolls to the selected cell.
func (t *Table) reveal() {
	if t.selRow < 0 || t.Size().Width == 0 {
		return
	}
	_, _, viewW, viewH := t.body()
	top := tableRow * float64(t.selRow)
	if t.selRow > 0 && t.at(t.selRow-1).Kind == RowGroup {
		top -= tableRow // with its title
	}
	t.scrollY = math.Min(t.scrollY, top)
	t.scrollY = math.Max(t.scrollY, tableRow*float64(t.selRow+1)-viewH)
	if f := t.frozen(); !t.ByRow && t.selCol > 0 {
		t.scrollX = math.Min(t.scrollX, t.x[t.selCol]-f)
		t.scrollX = math.Max(t.scrollX, t.x[t.selCol+1]-viewW)
	}
	t.scroll(0, 0)
}

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
