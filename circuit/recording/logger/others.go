package logger

import (
	"bytes"
	"fmt"
	"strings"
)

// seen counts lines or cells of one sort.
type seen struct {
	count, first int
	example      string
}

func (s *seen) at(line int) {
	if s.count++; s.count == 1 {
		s.first = line
	}
}

func (s *seen) with(line int, example []byte) {
	if s.at(line); s.count == 1 {
		s.example = shortened(example)
	}
}

func shortened(b []byte) string {
	s := strings.ToValidUTF8(string(bytes.TrimSpace(b)), "?")
	if r := []rune(s); len(r) > 60 {
		return string(r[:60]) + "…"
	}
	return s
}

// others are the lines that are no rows, and rows that are not whole.
type others struct {
	heads, comments, unread, long, short seen
	further, footers                     seen   // above the rows of further files, below those of files that another follows
	tail                                 []seen // unread lines after the last row, so far
	tailRow                              int
	tailCount                            int
}

// other takes a line that is no row.
func (im *importer) other(line []byte) {
	b := bytes.TrimSpace(line)
	o := &im.others
	switch {
	case len(b) == 0 || len(bytes.Trim(b, ";,|\t \"\x00")) == 0:
	case im.heading[string(b)]:
		o.heads.with(im.line, b)
	case b[0] == '#' || b[0] == '%' || b[0] == '!' || bytes.HasPrefix(b, []byte("//")):
		if o.comments.with(im.line, b); len(im.marks) < maxMarks {
			im.marks = append(im.marks, rowMark{im.rows, im.line, shortened(bytes.TrimLeft(b, "#%!/ "))})
		} else {
			im.moreMark++
		}
	case im.otherHead(line):
		o.heads.with(im.line, b)
	case im.further():
		o.further.with(im.line, b)
	default:
		im.leftOver(b)
	}
}

// otherHead reports whether a line names the columns again. Where it names them otherwise,
// the import ends, for rows would be read under names or units that are not theirs.
func (im *importer) otherHead(line []byte) bool {
	named, same, all := 0, 0, 0
	for i, c := range im.split.head(line) {
		if len(c) == 0 {
			continue
		}
		all++
		name, unit := nameAndUnit(string(c))
		if contains(im.names, name) {
			named++
		}
		if i < len(im.names) && im.names[i] == name && (unit == "" || im.units[i] == "" || im.units[i] == unit) {
			same++
		}
	}
	if named < 2 || 2*named < all {
		return false
	}
	if same < all && im.fault == nil {
		im.fault = fmt.Errorf("line %d names the columns otherwise than line %d: %q; cut the file there and import the parts one by one", im.line, im.Recipe.Head, shortened(line))
	}
	return true
}

// leftOver keeps lines that may be a footer until a row follows.
func (im *importer) leftOver(b []byte) {
	o := &im.others
	if im.rows != o.tailRow {
		o.settle()
		o.tailRow = im.rows
	}
	if o.tailCount++; len(o.tail) < 3 {
		var s seen
		s.with(im.line, b)
		o.tail = append(o.tail, s)
	}
}

// ends takes lines after the last row of a part for its footer.
func (o *others) ends(rows int) {
	if o.tailRow == rows && o.tailCount > 0 {
		if o.footers.count == 0 {
			o.footers = o.tail[0]
			o.footers.count = 0
		}
		o.footers.count += o.tailCount
		o.tail, o.tailCount = nil, 0
	}
}

// settle counts the lines of the tail as lines between rows.
func (o *others) settle() {
	if o.tailCount > 0 && o.unread.count == 0 {
		o.unread = seen{0, o.tail[0].first, o.tail[0].example}
	}
	o.unread.count += o.tailCount
	o.tail, o.tailCount = nil, 0
}

// report turns what was passed over into corrections.
func (im *importer) otherLines() {
	o := &im.others
	if o.tailRow != im.rows {
		o.settle()
	}
	say := func(key string, s seen, warns bool, text, done string) {
		if s.count > 0 {
			im.Corrections = append(im.Corrections, Correction{Key: key, Count: s.count, Line: s.first, Warns: warns,
				Text: fmt.Sprintf("%s %s", counted(s.count, "line"), fmt.Sprintf(text, s.example)), Done: done})
		}
	}
	say("repeated heads", o.heads, false, "like those above the first row, such as %q", "passed over")
	say("comments", o.comments, false, "that begin as comments, such as %q", "kept as marks")
	say("lines that are no rows", o.unread, true, "between the rows have no time stamp or no numbers, such as %q", "left out")
	o.ends(im.rows)
	say("footer", o.footers, false, "after the last row, such as %q", "left out")
	say("further heads", o.further, false, "above the first row of further files, such as %q", "passed over")
	if o.long.count > 0 {
		im.Corrections = append(im.Corrections, Correction{Key: "long rows", Count: o.long.count, Line: o.long.first, Warns: true,
			Text: fmt.Sprintf("%s more cells than the head names columns", rowsHave(o.long.count)), Done: "what is beyond is left out"})
	}
	if o.short.count > 0 {
		im.Corrections = append(im.Corrections, Correction{Key: "short rows", Count: o.short.count, Line: o.short.first, Warns: true,
			Text: fmt.Sprintf("%s fewer cells than the head names columns", rowsHave(o.short.count)), Done: "the cells that are not there count as empty"})
	}
	if im.moreMark > 0 {
		im.Corrections = append(im.Corrections, Correction{Key: "marks", Count: im.moreMark, Text: fmt.Sprintf("%d remarks beyond the first %d", im.moreMark, maxMarks), Done: "not kept"})
	}
}

func counted(n int, what string) string {
	if n == 1 {
		return "1 " + what
	}
	return fmt.Sprintf("%d %ss", n, what)
}

func rowsHave(n int) string {
	if n == 1 {
		return "1 row has"
	}
	return fmt.Sprintf("%d rows have", n)
}
