package widgets

import (
	"math"
	"strings"

	"barlitre/audit/pen"
)

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
// next; what is then left goes to the first when it holds words. Of a table that is a
// little too wide its words give way, so that all numbers can be read.
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
	words := len(t.columns) > 1 && t.columns[0].Left
	switch {
	case free > 0 && len(t.columns) > 0:
		each = math.Min(36, free/float64(len(t.columns)))
		if t.columns[0].Left {
			first = free - each*float64(len(t.columns))
		}
	case words && t.widths[0]+free >= tableWords:
		first = free
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
