package logger

import (
	"bytes"
	"fmt"
	"io"
	"slices"
	"strings"
)

// sample is the start of a file, cut into lines.
type sample struct {
	lines [][]byte
	whole bool // there is no more of the file
}

const sampleLines = 3000

func (f *File) sample(encoding string) sample {
	s := sample{whole: f.whole()}
	for l := newLines(bytes.NewReader(text(f.head, encoding))); len(s.lines) < sampleLines; {
		line := l.next()
		if line == nil {
			break
		}
		s.lines = append(s.lines, bytes.Clone(line))
	}
	if len(f.head) == headBytes && len(s.lines) > 1 && len(s.lines) < sampleLines {
		s.lines = s.lines[:len(s.lines)-1] // cut in its middle
	}
	return s
}

// Guess finds out how a file is written. What it cannot tell is in Questions.
func (f *File) Guess() Recipe {
	r := Recipe{Decimal: "."}
	why := ""
	r.Encoding, why = encodingOf(f.head)
	r.because(why != "", "%s: %s", r.Encoding, why)
	s := f.sample(r.Encoding)
	g := guesser{Recipe: &r, sample: s}
	if !g.separators() {
		r.ask("separator", "no rows of numbers were found; say what separates the columns", Separators...)
		return r
	}
	g.notation()
	g.heads()
	g.columns()
	g.times()
	return r
}

func (r *Recipe) because(is bool, format string, args ...any) {
	if is {
		r.Reasons = append(r.Reasons, fmt.Sprintf(format, args...))
	}
}

func (r *Recipe) ask(field, text string, choices ...string) {
	r.Questions = append(r.Questions, Question{field, text, choices})
}

type guesser struct {
	*Recipe
	sample
	split splitter
	width int        // cells in a row
	rows  [][][]byte // cells of rows of the sample
	names []string
	units []string // by column
}

// shape is what a line is, cut in one way.
type shape struct {
	all, cells, good, solid int // cells: up to the last with something in it; good: a number, a stamp or nothing; solid: not nothing
}

func shapeOf(cells [][]byte) (s shape) {
	s.all = len(cells)
	for len(cells) > 0 && len(cells[len(cells)-1]) == 0 {
		cells = cells[:len(cells)-1] // a separator at the end
	}
	s.cells = len(cells)
	for _, c := range cells {
		switch {
		case isBlank(c):
			s.good++
		case looksNumber(c):
			s.good, s.solid = s.good+1, s.solid+1
		default:
			if d, k := isStamp(c); d || k {
				s.good, s.solid = s.good+1, s.solid+1
			}
		}
	}
	return s
}

func (s shape) row() bool { return s.cells >= 1 && s.solid >= 1 && 2*s.good >= s.cells }

// looksNumber reports whether a cell may be a number in some notation, with a unit or without.
func looksNumber(cell []byte) bool {
	for _, n := range []numbers{{decimal: '.', group: ','}, {decimal: ',', group: '.'}, {decimal: '.', group: ' '}, {decimal: ',', group: ' '}, {decimal: '.', group: '\''}, {decimal: ',', group: '\''}} {
		if _, _, rest, ok := n.parse(cell); ok {
			rest = trim(rest)
			if len(rest) == 0 {
				return true
			}
			if c := rest[0]; c < 'A' && c != '%' && c != '"' { // a figure or a sign: no unit begins so
				continue
			}
			if _, known := unitOf(string(rest)); known {
				return true
			}
		}
	}
	return false
}

// separators takes the separator with which most lines are rows of equally many numbers.
func (g *guesser) separators() bool {
	best := 0.0
	for _, sep := range []string{"tab", ";", "|", ",", "space"} {
		r := Recipe{Separator: sep}
		score, width := g.score(newSplitter(&r))
		if width >= 2 && score > best*1.001 {
			best, g.Separator, g.width = score, sep, width
		}
	}
	if best == 0 {
		r := Recipe{Separator: ";"}
		score, width := g.score(newSplitter(&r))
		if score == 0 || width != 1 {
			return false
		}
		g.Separator, g.width = ";", 1
	}
	if g.Separator == "space" {
		g.fixed()
	}
	g.split = newSplitter(g.Recipe)
	return true
}

func (g *guesser) score(s splitter) (score float64, width int) {
	count, filled := map[int]int{}, map[int]int{} // by how many separators a row has: rows, and cells in the fullest of them
	shapes := make([]shape, len(g.lines))
	for i, line := range g.lines {
		if shapes[i] = shapeOf(s.split(line, nil)); shapes[i].row() {
			count[shapes[i].all]++
			filled[shapes[i].all] = max(filled[shapes[i].all], shapes[i].cells)
		}
	}
	rows, all := 0, 0
	for n, k := range count {
		if k > rows || k == rows && n > all {
			rows, all = k, n
		}
	}
	width = filled[all]
	for _, sh := range shapes {
		if sh.row() && sh.all >= width/2 && sh.cells <= width {
			share := float64(sh.good) / float64(sh.cells)
			score += share * share
		}
	}
	return score, width
}

// fixed looks for columns of blanks through all rows, and takes them as ends of columns
// where rows of words have unequal numbers of them or the head has more words than columns.
func (g *guesser) fixed() {
	s := splitter{}
	var rows, whole [][]byte // whole: nothing but numbers
	counts := map[int]int{}
	head := 0
	for _, line := range g.lines {
		cells := s.split(line, nil)
		if sh := shapeOf(cells); sh.row() {
			if rows = append(rows, line); sh.good == sh.cells {
				whole = append(whole, line)
			}
			counts[len(cells)]++
		} else if len(rows) == 0 && len(cells) > 0 {
			head = len(cells)
		}
	}
	if len(counts) == 1 && (head == 0 || counts[head] > 0) {
		return
	}
	if 2*len(whole) > len(rows) { // a line above them may look like a row
		rows = whole
	}
	widths := blankColumns(rows)
	if len(widths) < 2 {
		return
	}
	f := splitter{widths: widths}
	score, width := g.score(f)
	if old, _ := g.score(s); width >= 2 && score >= 0.9*old {
		g.Separator, g.Widths, g.width = "fixed", widths, len(widths)
		g.because(true, "fixed width: blanks stand below each other in all rows")
	}
}

// blankColumns returns where words begin after places that are blank in all rows.
func blankColumns(rows [][]byte) (widths []int) {
	var used []bool
	for _, line := range rows {
		for i, c := range []rune(string(line)) {
			if i >= len(used) {
				used = append(used, false)
			}
			used[i] = used[i] || c != ' ' && c != '\t'
		}
	}
	for i, u := range used {
		if u && (i == 0 || !used[i-1]) {
			widths = append(widths, i)
		}
	}
	for k := range widths { // numbers stand to the right, heads may begin before them: a column begins where the last one ends
		if k == 0 {
			widths[0] = 0
			continue
		}
		end := widths[k]
		for end > 0 && !used[end-1] {
			end--
		}
		widths[k] = end
	}
	return widths
}

// heads finds the first row, the line that names the columns and a line of their units.
func (g *guesser) heads() {
	n := g.width
	g.First = 0
	for i, line := range g.lines {
		cells := g.split.split(line, nil)
		sh := shapeOf(cells)
		if !sh.row() || sh.all*2 < n || sh.all < n && sh.good < sh.cells || sh.good*2 < n && sh.cells == n || g.unitLike(cells) {
			continue
		}
		next, of := 0, 0
		for k := i + 1; k < len(g.lines) && of < 6; k++ {
			if len(bytes.TrimSpace(g.lines[k])) == 0 {
				continue
			}
			of++
			if s := shapeOf(g.split.split(g.lines[k], nil)); s.row() && s.all*2 >= n {
				next++
			}
		}
		if 2*next >= of {
			g.First = i + 1
			break
		}
	}
	if g.First == 0 {
		g.First = 1
	}
	above := []int{}
	for i := g.First - 2; i >= 0 && len(above) < 3; i-- {
		i = headStart(g.lines, i)
		line := bytes.TrimLeft(g.lines[i], "#%/ ")
		cells := g.cellsOf(i + 1)
		for len(cells) > n && len(cells[len(cells)-1]) == 0 {
			cells = cells[:len(cells)-1]
		}
		if len(bytes.TrimSpace(line)) == 0 {
			continue
		}
		if len(cells) > n+2 || 2*len(cells) < n || words(cells) == 0 {
			break
		}
		above = append(above, i+1)
	}
	if len(above) > 0 && g.unitLike(g.cellsOf(above[0])) && len(above) > 1 {
		g.UnitsRow, g.Head = above[0], above[1]
	} else if len(above) > 0 {
		g.Head = above[0]
		if len(above) > 1 && g.unitLike(g.cellsOf(above[0])) {
			g.UnitsRow = above[0]
		}
	}
	for i := g.First - 1; i < len(g.lines); i++ {
		if cells := g.split.split(g.lines[i], nil); shapeOf(cells).row() {
			g.rows = append(g.rows, cells)
		}
	}
}

func (g *guesser) cellsOf(line int) [][]byte {
	return g.split.head(headText(g.lines, line-1))
}

// headStart returns the line in which a head begins that ends in line i, for a cell between quotes may go over several.
func headStart(lines [][]byte, i int) int {
	if quotes(lines[i])%2 == 0 {
		return i
	}
	for k := i - 1; k >= max(0, i-40); k-- {
		if n := quotes(lines[k]); n%2 == 1 && headEnd(lines, k) == i {
			return k
		}
	}
	return i
}

// headEnd returns the line in which the quotes are closed that line i leaves open; i where none does.
func headEnd(lines [][]byte, i int) int {
	open := false
	for k := i; k < min(len(lines), i+40); k++ {
		if open = open != (quotes(lines[k])%2 == 1); !open {
			return k
		}
	}
	return i
}

// headText returns a head as one line.
func headText(lines [][]byte, i int) []byte {
	return bytes.Join(lines[i:headEnd(lines, i)+1], []byte(" "))
}

func quotes(line []byte) int { return bytes.Count(line, []byte{'"'}) }

// words counts the cells that are neither numbers nor empty.
func words(cells [][]byte) (n int) {
	for _, c := range cells {
		if d, k := isStamp(c); len(c) > 0 && !looksNumber(c) && !d && !k {
			n++
		}
	}
	return n
}

// unitLike reports whether most cells that are not empty are units.
func (g *guesser) unitLike(cells [][]byte) bool {
	known, all := 0, 0
	for _, c := range cells {
		s := strings.TrimSpace(string(c))
		if s == "" || s == "-" || s == "[-]" || s == "[]" {
			continue
		}
		all++
		if _, ok := unitOf(s); ok || strings.HasPrefix(s, "[") && strings.HasSuffix(s, "]") || strings.Contains(s, ":mm") || strings.EqualFold(s, "hh:mm:ss") {
			known++
		}
	}
	return all > 0 && 2*known > all
}

// header returns the names of the columns and their units as a recipe says.
func (r *Recipe) header(lines [][]byte, width int) (names, units []string) {
	split := newSplitter(r)
	cells := func(line int) [][]byte {
		if line < 1 || line > len(lines) {
			return nil
		}
		return split.head(headText(lines, line-1))
	}
	head, row := cells(r.Head), cells(r.UnitsRow)
	for len(head) > width && len(head[len(head)-1]) == 0 {
		head = head[:len(head)-1]
	}
	for i := range max(width, len(head)) {
		name, unit := "", ""
		if i < len(head) {
			name, unit = nameAndUnit(string(head[i]))
		}
		if i < len(row) && len(row[i]) > 0 {
			unit = strings.TrimSpace(strings.Trim(string(row[i]), "[]"))
		}
		if name == "" {
			name = fmt.Sprintf("column %d", i+1)
		}
		for base, k := name, 2; slices.Contains(names, name); k++ {
			name = fmt.Sprintf("%s (%d)", base, k)
		}
		names, units = append(names, name), append(units, unit)
	}
	return names, units
}

// heading reads the lines up to the first row.
func (f *File) heading(r *Recipe) (lines [][]byte, err error) {
	in, err := f.parts[0].open()
	if err != nil {
		return nil, err
	}
	defer in.Close()
	l := newLines(decoded(io.LimitReader(in, headBytes), r.Encoding))
	for len(lines) < max(r.First, r.Head, r.UnitsRow) {
		line := l.next()
		if line == nil {
			break
		}
		lines = append(lines, bytes.Clone(line))
	}
	return lines, nil
}
