// Package recording reads tables of numbers out of text files.
//
// ReadTable is for tables that belong to an audit file, such as the rows of a
// duty: one head line that names each column with its unit, then rows of
// numbers. It guesses the separator and nothing else, and refuses what it is
// not sure of, since a misread recording gives a wrong audit without a sign.
//
//	t [s]; ram.speed [m/s]; ram.load [kN]
//	0;     0;               5
//	0,1;   0,15;            5
//
// Numbers are kept in the unit of their column; the reader of the table knows
// which quantity it is and converts.
package recording

import (
	"bufio"
	"bytes"
	"crypto/sha256"
	"encoding/csv"
	"encoding/hex"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"slices"
	"strconv"
	"strings"
	"unicode/utf8"
)

// Column is one column of a table.
type Column struct {
	Name   string    // from the head, without its unit
	Unit   string    // as in the head between brackets; "" = none
	Values []float64 // finite, in Unit; one a row
}

// Table is a table of numbers.
type Table struct {
	Columns []Column
	SHA256  string // of the bytes read, in hexadecimal

	rows  int
	steps []step // where rows stop following line by line
}

// step says that a row, from 0, stands in a line, and the rows after it in the lines after it.
type step struct{ row, line int }

// Rows returns how many rows the table has.
func (t *Table) Rows() int { return t.rows }

// Lines returns the line of the file, from 1, that each row stands in.
func (t *Table) Lines() []int32 {
	out := make([]int32, 0, t.rows)
	for i, s := range t.steps {
		end := t.rows
		if i+1 < len(t.steps) {
			end = t.steps[i+1].row
		}
		for row := s.row; row < end; row++ {
			out = append(out, int32(s.line+row-s.row))
		}
	}
	return out
}

// Column returns a column by name, or nil.
func (t *Table) Column(name string) *Column {
	for i := range t.Columns {
		if t.Columns[i].Name == name {
			return &t.Columns[i]
		}
	}
	return nil
}

// Fault is something wrong in a file, in words that say what to do.
type Fault struct {
	File string
	Line int // from 1; 0 = the file as a whole
	Text string
}

func (f Fault) Error() string {
	if f.Line == 0 {
		return fmt.Sprintf("%s: %s", f.File, f.Text)
	}
	return fmt.Sprintf("%s, line %d: %s", f.File, f.Line, f.Text)
}

// maxFaults ends the list of faults: a wrong separator would fault every row.
const maxFaults = 10

// ReadTable reads a table. The separator is guessed from the head: a semicolon
// if there is one, else a tab, else a comma. The decimal sign is a point; with
// semicolons or tabs it may be a comma instead, one of the two throughout the
// file. A byte order mark, CRLF line ends, blank lines and lines that start
// with # are passed over. The table is nil when there is any fault; the first
// few are listed. The text is read as it comes and not kept. name is for messages only.
func ReadTable(name string, in io.Reader) (*Table, []Fault) {
	r := &tableReader{name: name, table: &Table{}, size: sizeOf(in)}
	sum := sha256.New()
	src := bufio.NewReaderSize(io.TeeReader(in, sum), headSize)
	r.read(src)
	if len(r.faults) > 0 {
		return nil, r.faults
	}
	if _, err := io.Copy(io.Discard, src); err != nil {
		return nil, []Fault{{name, 0, err.Error()}}
	}
	r.table.SHA256 = hex.EncodeToString(sum.Sum(nil))
	return r.table, nil
}

// headSize is how much of a file is looked at for its separator and the length of its lines.
const headSize = 1 << 16

// sizeOf returns how many bytes a reader has, 0 when it does not tell.
func sizeOf(in io.Reader) int64 {
	switch x := in.(type) {
	case interface{ Len() int }:
		return int64(x.Len())
	case interface{ Stat() (fs.FileInfo, error) }:
		if info, err := x.Stat(); err == nil {
			return info.Size()
		}
	}
	return 0
}

type tableReader struct {
	name   string
	table  *Table
	faults []Fault
	comma  rune
	size   int64
	// lines at which a decimal point and a decimal comma were first seen
	pointLine, commaLine int
}

func (r *tableReader) bad(line int, format string, args ...any) {
	switch n := len(r.faults); {
	case n < maxFaults:
		r.faults = append(r.faults, Fault{r.name, line, fmt.Sprintf(format, args...)})
	case n == maxFaults:
		r.faults = append(r.faults, Fault{r.name, line, "more faults follow; mend these first"})
	}
}

func (r *tableReader) read(in *bufio.Reader) {
	start, _ := in.Peek(headSize)
	if bytes.HasPrefix(start, []byte("\ufeff")) {
		start = start[len("\ufeff"):]
		_, _ = in.Discard(len("\ufeff"))
	}
	r.comma = separator(start)
	rows := r.expected(start)
	c := csv.NewReader(in)
	c.Comma, c.Comment, c.FieldsPerRecord, c.TrimLeadingSpace, c.ReuseRecord = r.comma, '#', -1, r.comma != '\t', true
	head := true
	for len(r.faults) <= maxFaults {
		cells, err := c.Read()
		if errors.Is(err, io.EOF) {
			break
		}
		if pe := (*csv.ParseError)(nil); errors.As(err, &pe) {
			r.bad(pe.Line, "%v", pe.Err)
			return
		} else if err != nil {
			r.bad(0, "cannot be read: %v", err)
			return
		}
		if slices.ContainsFunc(cells, func(s string) bool { return !utf8.ValidString(s) || strings.IndexByte(s, 0) >= 0 }) {
			r.bad(0, "is not UTF-8 text; save it as CSV in UTF-8")
			return
		}
		line, _ := c.FieldPos(0)
		if len(cells) == 1 && strings.TrimSpace(cells[0]) == "" {
			continue
		}
		if head {
			r.head(line, cells)
			r.reserve(rows)
			head = false
			continue
		}
		r.row(line, cells)
	}
	if head {
		r.bad(0, "is empty; write a head such as %q and rows of numbers", "t [s]; ram.speed [m/s]")
	} else if r.table.rows == 0 && len(r.faults) == 0 {
		r.bad(0, "has a head but no rows")
	}
}

// expected guesses how many rows there are from how many lines the start has.
func (r *tableReader) expected(start []byte) int {
	n := bytes.Count(start, []byte("\n"))
	if r.size > int64(len(start)) && len(start) > 0 {
		return int(float64(n) * float64(r.size) / float64(len(start)) * 1.02)
	}
	return n
}

// separator guesses from the first line that is neither blank nor a comment.
func separator(data []byte) rune {
	for line := range bytes.Lines(data) {
		line = bytes.TrimSpace(line)
		if len(line) == 0 || line[0] == '#' {
			continue
		}
		for _, c := range ";\t" {
			if bytes.ContainsRune(line, c) {
				return c
			}
		}
		break
	}
	return ','
}

func (r *tableReader) head(line int, cells []string) {
	for i, cell := range cells {
		name, unit, ok := SplitHead(cell)
		switch {
		case !ok:
			r.bad(line, "head %q: write the name and its unit between brackets, as in %q", cell, "t [s]")
		case name == "":
			r.bad(line, "column %d has no name", i+1)
		case numeric(name):
			r.bad(line, "head %q is a number; the first line names the columns, as in %q", name, "t [s]; ram.speed [m/s]")
		case r.table.Column(name) != nil:
			r.bad(line, "column %q stands here twice; keep one", name)
		}
		r.table.Columns = append(r.table.Columns, Column{Name: name, Unit: unit})
	}
}

// reserve makes room for rows: a long recording would else be copied as it grows.
func (r *tableReader) reserve(rows int) {
	for i := range r.table.Columns {
		r.table.Columns[i].Values = make([]float64, 0, rows)
	}
}

// SplitHead splits "ram.speed [m/s]" into the name and the unit, "" when there
// is none. ok is false when the brackets do not close at the end.
func SplitHead(cell string) (name, unit string, ok bool) {
	cell = strings.TrimSpace(cell)
	name, rest, has := strings.Cut(cell, "[")
	if !has {
		return cell, "", !strings.Contains(cell, "]")
	}
	unit, closed := strings.CutSuffix(rest, "]")
	unit = strings.TrimSpace(unit)
	return strings.TrimSpace(name), unit, closed && unit != "" && !strings.ContainsAny(unit, "[]")
}

func (r *tableReader) row(line int, cells []string) {
	if n := len(r.table.Columns); len(cells) != n {
		hint := ""
		if r.comma == ',' && len(cells) > n {
			hint = "; where commas separate, the decimal sign is a point"
		}
		r.bad(line, "has %d cells, the head has %d%s", len(cells), n, hint)
		return
	}
	if t := r.table; len(t.steps) == 0 || line-t.rows != t.steps[len(t.steps)-1].line-t.steps[len(t.steps)-1].row {
		t.steps = append(t.steps, step{t.rows, line})
	}
	r.table.rows++
	for i, cell := range cells {
		x, text := r.number(line, strings.TrimSpace(cell))
		if text != "" {
			r.bad(line, "column %q: %s", r.table.Columns[i].Name, text)
		}
		r.table.Columns[i].Values = append(r.table.Columns[i].Values, x)
	}
}

// number reads a cell, or says in words what is wrong with it.
func (r *tableReader) number(line int, cell string) (float64, string) {
	if cell == "" {
		return 0, "the cell is empty; fill it or take the row out"
	}
	hasPoint, hasComma := strings.Contains(cell, "."), strings.Contains(cell, ",")
	switch {
	case hasPoint && hasComma:
		return 0, fmt.Sprintf("%q has a point and a comma; write numbers without thousands separators", cell)
	case hasComma && r.comma == ',':
		return 0, fmt.Sprintf("%q: use a decimal point where commas separate the columns", cell)
	case hasComma:
		if r.pointLine > 0 {
			return 0, fmt.Sprintf("%q has a decimal comma, line %d a decimal point; use one in the whole file", cell, r.pointLine)
		}
		r.commaLine = line
		cell = strings.Replace(cell, ",", ".", 1)
	case hasPoint:
		if r.commaLine > 0 {
			return 0, fmt.Sprintf("%q has a decimal point, line %d a decimal comma; use one in the whole file", cell, r.commaLine)
		}
		r.pointLine = line
	}
	x, err := decimal(cell)
	switch {
	case errors.Is(err, strconv.ErrRange):
		return 0, fmt.Sprintf("%q is out of range", cell)
	case err != nil:
		return 0, fmt.Sprintf("%q is not a number", cell)
	}
	return x, ""
}

// numeric reports whether s is a decimal number.
func numeric(s string) bool {
	_, err := decimal(s)
	return err == nil || errors.Is(err, strconv.ErrRange)
}

// decimal reads a decimal number: no names such as "inf", no hexadecimal, which the
// standard library would take as well.
func decimal(s string) (float64, error) {
	for i := range len(s) {
		if c := s[i]; (c < '0' || c > '9') && c != '.' && c != '-' && c != '+' && c != 'e' && c != 'E' {
			return 0, strconv.ErrSyntax
		}
	}
	return strconv.ParseFloat(s, 64)
}
