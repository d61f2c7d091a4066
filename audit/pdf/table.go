package pdf

import (
	"math"
	"slices"
	"strings"
	"unicode/utf8"

	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
)

// table is laid out over the full width, over pages where needed: its head is
// repeated, and rows break between lines only when one alone is higher than a page.
type table struct {
	title string
	cols  []column
	rows  []row
	note  string
}

type column struct {
	head  string
	right bool
}

// row is a row of cells. A group row spans all columns and is repeated when its
// rows go on over the page.
type row struct {
	cells []string
	sum   bool // adds up those above
	group bool
	tint  bool
	carry string // shown in an empty first cell at the top of a page
	sign  rune   // before the first cell; 0 = none
	role  figures.Role
}

const (
	cellGap  = 3.0
	signRoom = 3.6
	keepable = 48.0 // a table not higher is not broken
)

// numeric reports whether a cell holds a number, with or without a unit, or says that there is none; a sentence that
// begins with a number is text.
func numeric(cell string) bool {
	r, _ := utf8.DecodeRuneInString(cell)
	return (r >= '0' && r <= '9' || strings.ContainsRune("−±≤", r)) && len(strings.Fields(cell)) <= numberWords || slices.Contains(noNumber, cell)
}

// noNumber are the words that stand where there is no number.
var noNumber = []string{"n/a", "–", "not given", "none needed", "none does", "no price", "not comparable"}

// numberWords is how many words a number with its unit, or a range of two, has at most; thin spaces part words.
const numberWords = 8

// fromReport turns a table of the report into one to be printed.
func fromReport(t audit.Table) table {
	out := table{title: t.Title, note: t.Note}
	for i, h := range t.Head {
		right := i > 0
		for _, r := range t.Rows {
			if i < len(r.Cells) && r.Cells[i] != "" && !numeric(r.Cells[i]) {
				right = false
			}
		}
		out.cols = append(out.cols, column{h, right})
	}
	for _, r := range t.Rows {
		out.rows = append(out.rows, row{cells: r.Cells, sum: r.Sum})
	}
	return out
}

// setTable is a table with the places of its columns fixed.
type setTable struct {
	table
	s     *sheet
	x, w  []float64
	heads [][]string
	lines [][][]string // of each cell of each row
	last  string       // group that the rows belong to
	first int          // row that stands first on the page
}

// table prints a table; one without rows prints its note alone.
func (s *sheet) table(t table) {
	if len(t.rows) == 0 {
		if t.note != "" {
			s.tableTitle(t.title, 6)
			s.para(t.note, s.body())
		}
		return
	}
	k := &setTable{table: t, s: s}
	k.place()
	s.tableTitle(t.title, k.start())
	s.need(k.start())
	s.gap(0.8)
	k.head()
	for i := range t.rows {
		k.breakBefore(i)
		k.row(i)
	}
	if t.note != "" {
		s.y += 1 * s.room
		s.lines(side, s.small().wrap(t.note, fullW), s.small())
	}
	s.y += 2.5 * s.room
}

func (s *sheet) tableTitle(text string, follow float64) {
	if text != "" {
		s.heading(3, text, follow)
	}
}

// start returns the height that must follow the title of the table: all of it
// when it is short, else its head and a few rows.
func (k *setTable) start() float64 {
	all := 1 + k.headHeight() + k.noteHeight()
	few := all
	for i := range k.rows {
		all += k.height(i)
		if i < 3 {
			few = all
		}
	}
	if all <= keepable {
		return all
	}
	return min(few, keepable)
}

func (k *setTable) noteHeight() float64 {
	if k.note == "" {
		return 0
	}
	return k.s.room + k.s.small().line()*float64(len(k.s.small().wrap(k.note, fullW)))
}

// place fixes the widths of the columns: as wide as their cells where there is
// room for all, else between the widest word and that.
func (k *setTable) place() {
	n := len(k.cols)
	least, most := make([]float64, n), make([]float64, n)
	for i, c := range k.cols {
		h := k.style(row{sum: true})
		least[i] = h.longestWord(c.head)
		most[i] = max(least[i], h.width(pen.Clean(c.head))/2.2)
		for _, r := range k.rows {
			if i >= len(r.cells) || r.group {
				continue
			}
			st, lead := k.style(r), 0.0
			if r.sign != 0 && i == 0 {
				lead = signRoom
			}
			if c.right {
				least[i] = max(least[i], lead+st.width(pen.Clean(r.cells[i]))) // a number stays in one piece
			}
			least[i] = max(least[i], lead+st.longestWord(r.cells[i]))
			for _, line := range strings.Split(r.cells[i], "\n") {
				most[i] = max(most[i], lead+st.width(pen.Clean(line)))
			}
		}
		least[i] = min(least[i], 36)
		most[i] = max(most[i], least[i]) + 0.01
	}
	k.w = share(least, most, fullW-cellGap*float64(n-1))
	x := side
	for _, w := range k.w {
		k.x = append(k.x, x)
		x += w + cellGap
	}
	for i, c := range k.cols {
		k.heads = append(k.heads, k.style(row{sum: true}).wrap(c.head, k.w[i]))
	}
	for _, r := range k.rows {
		cells := make([][]string, n)
		for i := range cells {
			cells[i] = k.cell(r, i)
		}
		k.lines = append(k.lines, cells)
	}
}

// share gives widths that add up to all. Where there is room, each is its most and
// an even part of what is to spare. Else they grow with the root of their most, none
// above it or below its least: what is narrow stays whole and the long texts wrap.
// Where even the least are too wide, all shrink.
func share(least, most []float64, all float64) []float64 {
	at := func(level float64) (w []float64, sum float64) {
		for i := range least {
			w = append(w, max(least[i], min(most[i], level*math.Sqrt(most[i]))))
			sum += w[i]
		}
		return w, sum
	}
	if w, sum := at(0); sum > all {
		for i := range w {
			w[i] *= all / sum
		}
		return w
	}
	if w, sum := at(math.Inf(1)); sum <= all {
		for i := range w {
			w[i] += (all - sum) / float64(len(w))
		}
		return w
	}
	lo, hi := 0.0, all
	for range 50 {
		if _, sum := at((lo + hi) / 2); sum > all {
			hi = (lo + hi) / 2
		} else {
			lo = (lo + hi) / 2
		}
	}
	w, _ := at(lo)
	return w
}

func (k *setTable) style(r row) style {
	return style{size: tableSize, bold: r.sum || r.group, c: k.s.pal.Ink}
}

func (k *setTable) pad() float64 { return 0.75 * k.s.room }

// cell returns the lines of a cell.
func (k *setTable) cell(r row, i int) []string {
	st := k.style(r)
	switch {
	case r.group && i > 0 || i >= len(r.cells):
		return nil
	case r.group:
		return st.wrap(r.cells[0], fullW)
	case i == 0 && r.sign != 0:
		return st.wrap(r.cells[0], k.w[0]-signRoom)
	}
	return st.wrap(r.cells[i], k.w[i])
}

func (k *setTable) height(i int) float64 {
	n := 1
	for _, lines := range k.lines[i] {
		n = max(n, len(lines))
	}
	return float64(n)*k.style(k.rows[i]).line() + 2*k.pad()
}

func (k *setTable) headHeight() float64 {
	n := 0
	for i, h := range k.heads {
		if k.cols[i].head != "" {
			n = max(n, len(h))
		}
	}
	if n == 0 {
		return 0
	}
	return float64(n)*k.headStyle().line() + 2*k.pad()
}

func (k *setTable) headStyle() style {
	return style{size: tableSize, bold: true, c: k.s.pal.Secondary}
}

// head draws the names of the columns, on their common lower edge.
func (k *setTable) head() {
	s, h, st := k.s, k.headHeight(), k.headStyle()
	for i, lines := range k.heads {
		y := s.y + h - k.pad() - float64(len(lines))*st.line()
		k.draw(i, y, lines, st)
	}
	s.y += h
	s.rule(side, side+fullW, s.y, s.pal.Secondary)
}

// draw writes the lines of a cell from y down.
func (k *setTable) draw(i int, y float64, lines []string, st style) {
	for _, t := range lines {
		if k.cols[i].right {
			k.s.put(k.x[i]+k.w[i], y+st.base(), t, st, pen.Right)
		} else {
			k.s.put(k.x[i], y+st.base(), t, st, pen.Left)
		}
		y += st.line()
	}
}
