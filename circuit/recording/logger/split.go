package logger

import (
	"bytes"
	"unicode/utf8"
)

// splitter cuts lines into cells.
type splitter struct {
	sep    byte // of cells; 0 = spaces or widths
	widths []int
}

func newSplitter(r *Recipe) splitter {
	switch r.Separator {
	case "tab":
		return splitter{sep: '\t'}
	case "space":
		return splitter{}
	case "fixed":
		return splitter{widths: r.Widths}
	}
	return splitter{sep: r.Separator[0]}
}

// split appends the cells of a line, without blanks around them and without quotes. They share its bytes.
func (s *splitter) split(line []byte, cells [][]byte) [][]byte {
	switch {
	case s.widths != nil:
		return s.fixed(line, cells)
	case s.sep == 0:
		return spaced(line, cells)
	}
	for {
		if i := skipBlank(line, s.sep); i < len(line) && line[i] == '"' {
			if end := closing(line, i+1); end > 0 {
				cells = append(cells, trim(line[i+1:end]))
				rest := bytes.IndexByte(line[end+1:], s.sep)
				if rest < 0 {
					return cells
				}
				line = line[end+1+rest+1:]
				continue
			}
		}
		i := bytes.IndexByte(line, s.sep)
		if i < 0 {
			return append(cells, trim(line))
		}
		cells = append(cells, trim(line[:i]))
		line = line[i+1:]
	}
}

// head cuts a line that names columns, which may begin as a comment does.
func (s *splitter) head(line []byte) [][]byte {
	if s.widths == nil {
		line = bytes.TrimLeft(line, "#%/ ")
	}
	return s.split(line, nil)
}

func skipBlank(line []byte, sep byte) int {
	i := 0
	for i < len(line) && (line[i] == ' ' || line[i] == '\t' && sep != '\t') {
		i++
	}
	return i
}

// closing finds the quote that ends a cell, 0 if there is none; two quotes stand for one.
func closing(line []byte, from int) int {
	for i := from; i < len(line); i++ {
		if line[i] != '"' {
			continue
		}
		if i+1 == len(line) || line[i+1] != '"' {
			return i
		}
		i++
	}
	return 0
}

func trim(b []byte) []byte {
	for len(b) > 0 && (b[0] == ' ' || b[0] == '\t' || b[0] == 0) {
		b = b[1:]
	}
	for len(b) > 0 && (b[len(b)-1] == ' ' || b[len(b)-1] == '\t' || b[len(b)-1] == 0) {
		b = b[:len(b)-1]
	}
	return b
}

func spaced(line []byte, cells [][]byte) [][]byte {
	for {
		line = trim(line)
		if len(line) == 0 {
			return cells
		}
		if line[0] == '"' {
			if end := closing(line, 1); end > 0 {
				cells = append(cells, trim(line[1:end]))
				line = line[end+1:]
				continue
			}
		}
		i := bytes.IndexAny(line, " \t")
		if i < 0 {
			return append(cells, line)
		}
		cells = append(cells, line[:i])
		line = line[i:]
	}
}

func (s *splitter) fixed(line []byte, cells [][]byte) [][]byte {
	for k := range s.widths {
		a := s.at(line, s.widths[k])
		b := len(line)
		if k+1 < len(s.widths) {
			b = s.at(line, s.widths[k+1])
		}
		cells = append(cells, trim(line[min(a, b):b]))
	}
	return cells
}

// at returns where a character stands in a line, in bytes.
func (s *splitter) at(line []byte, char int) int {
	i := 0
	for i < len(line) && char > 0 {
		if line[i] < utf8.RuneSelf {
			i++
		} else {
			_, n := utf8.DecodeRune(line[i:])
			i += n
		}
		char--
	}
	return i
}
