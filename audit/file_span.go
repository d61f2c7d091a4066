package audit

import (
	"bytes"
	"errors"
	"strings"
	"unicode/utf8"

	"gopkg.in/yaml.v3"
)

// source is the text of a file with the places of its lines: nodes know line and
// column, edits need bytes.
type source struct {
	data   []byte
	starts []int // of lines, bytes
}

// breakLen returns the length of the line break at i as YAML counts them, 0 when there is none.
func breakLen(b []byte, i int) int {
	rest := b[i:]
	switch {
	case bytes.HasPrefix(rest, []byte("\r\n")), bytes.HasPrefix(rest, []byte("\u0085")):
		return 2
	case bytes.HasPrefix(rest, []byte("\u2028")), bytes.HasPrefix(rest, []byte("\u2029")):
		return 3
	case len(rest) > 0 && (rest[0] == '\n' || rest[0] == '\r'):
		return 1
	}
	return 0
}

func newSource(data []byte) *source {
	s := &source{data: data, starts: []int{0}}
	if bytes.HasPrefix(data, byteOrderMark) {
		s.starts[0] = len(byteOrderMark)
	}
	for i := 0; i < len(data); {
		if n := breakLen(data, i); n > 0 {
			i += n
			s.starts = append(s.starts, i)
			continue
		}
		i++
	}
	return s
}

// lineBreak returns the line break that the file uses.
func (s *source) lineBreak() string {
	if bytes.Contains(s.data, []byte("\r\n")) {
		return "\r\n"
	}
	return "\n"
}

// start returns where a node begins.
func (s *source) start(n *yaml.Node) (int, error) {
	if n == nil || n.Line < 1 || n.Line > len(s.starts) {
		return 0, errLayout
	}
	i := s.starts[n.Line-1]
	for c := 1; c < n.Column; c++ { // columns count characters
		if i >= len(s.data) {
			return 0, errLayout
		}
		_, size := utf8.DecodeRune(s.data[i:])
		i += size
	}
	return i, nil
}

// errLayout is for text whose layout the edits do not follow: rare YAML, such as
// keys marked with "?".
var errLayout = errors.New("the text is laid out in a way that cannot be changed here; change it in a text editor")

// emptyValue reports whether nothing at all is written for a value.
func emptyValue(n *yaml.Node) bool {
	return n.Kind == yaml.ScalarNode && n.Value == "" && n.Tag == "!!null"
}

// end returns where a node ends. indent is the column (from 0) of the key or list
// that holds it: lines of a | or > text stand further in.
func (s *source) end(n *yaml.Node, indent int) (int, error) {
	i, err := s.start(n)
	if err != nil {
		return 0, err
	}
	switch {
	case n.Kind == yaml.ScalarNode:
		return s.scalarEnd(n, i, indent)
	case n.Kind != yaml.MappingNode && n.Kind != yaml.SequenceNode:
		return 0, errLayout
	case n.Style&yaml.FlowStyle != 0:
		return s.flowEnd(n, i)
	case len(n.Content) == 0:
		return 0, errLayout
	}
	return s.lastEnd(n)
}

// lastEnd returns where the last entry of a collection ends.
func (s *source) lastEnd(n *yaml.Node) (int, error) {
	last := n.Content[len(n.Content)-1]
	if !emptyValue(last) {
		return s.end(last, n.Column-1)
	}
	if n.Kind != yaml.MappingNode {
		return 0, errLayout
	}
	return s.colonAfter(n.Content[len(n.Content)-2], n.Column-1)
}

// colonAfter returns the place after the colon of a key, or after the key when,
// in braces, it has none.
func (s *source) colonAfter(key *yaml.Node, indent int) (int, error) {
	end, err := s.end(key, indent)
	if err != nil {
		return 0, err
	}
	rest := bytes.TrimLeft(s.data[end:], " \t")
	if len(rest) > 0 && rest[0] == ':' {
		return len(s.data) - len(rest) + 1, nil
	}
	return end, nil
}

func (s *source) flowEnd(n *yaml.Node, i int) (int, error) {
	open, closing := byte('{'), byte('}')
	if n.Kind == yaml.SequenceNode {
		open, closing = '[', ']'
	}
	if i >= len(s.data) || s.data[i] != open {
		return 0, errLayout
	}
	i++
	if len(n.Content) > 0 {
		var err error
		if i, err = s.lastEnd(n); err != nil {
			return 0, err
		}
	}
	for i < len(s.data) {
		switch c := s.data[i]; {
		case c == closing:
			return i + 1, nil
		case c == '#':
			for i < len(s.data) && breakLen(s.data, i) == 0 {
				i++
			}
		case breakLen(s.data, i) > 0:
			i += breakLen(s.data, i)
		case c == ' ' || c == '\t' || c == ',':
			i++
		default:
			return 0, errLayout
		}
	}
	return 0, errLayout
}

func (s *source) scalarEnd(n *yaml.Node, i, indent int) (int, error) {
	switch {
	case n.Style&yaml.DoubleQuotedStyle != 0:
		return s.quoteEnd(i, '"')
	case n.Style&yaml.SingleQuotedStyle != 0:
		return s.quoteEnd(i, '\'')
	case n.Style&(yaml.LiteralStyle|yaml.FoldedStyle) != 0:
		return s.blockEnd(n.Line, indent), nil
	}
	return s.plainEnd(n.Value, i)
}

func (s *source) quoteEnd(i int, quote byte) (int, error) {
	if i >= len(s.data) || s.data[i] != quote {
		return 0, errLayout
	}
	for i++; i < len(s.data); i++ {
		switch {
		case quote == '"' && s.data[i] == '\\':
			i++
		case quote == '\'' && bytes.HasPrefix(s.data[i:], []byte("''")):
			i++
		case s.data[i] == quote:
			return i + 1, nil
		}
	}
	return 0, errLayout
}

// blockEnd returns the end of a | or > text: its last line that is not blank and
// stands further in than indent, or its first line.
func (s *source) blockEnd(line, indent int) int {
	end := s.lineEnd(line)
	for l := line + 1; l <= len(s.starts); l++ {
		t := s.data[s.starts[l-1]:s.lineEnd(l)]
		body := bytes.TrimLeft(t, " ")
		if len(bytes.TrimSpace(body)) == 0 {
			continue
		}
		if len(t)-len(body) <= indent {
			break
		}
		end = s.lineEnd(l)
	}
	return end
}

// lineEnd returns where a line ends, without its break.
func (s *source) lineEnd(line int) int {
	return s.restOfLine(s.starts[line-1])
}

// plainEnd follows a plain text through the file: line breaks and the spaces
// around them are one space or line break in the value.
func (s *source) plainEnd(value string, i int) (int, error) {
	for j := 0; j < len(value); {
		switch {
		case i >= len(s.data):
			return 0, errLayout
		case s.data[i] == value[j]:
			i++
			j++
		case strings.IndexByte(" \t\r\n", s.data[i]) >= 0:
			i++
		case value[j] == ' ' || value[j] == '\n':
			j++
		default:
			return 0, errLayout
		}
	}
	return i, nil
}

// restOfLine returns the end of the line that i stands in.
func (s *source) restOfLine(i int) int {
	for i < len(s.data) && breakLen(s.data, i) == 0 {
		i++
	}
	return i
}

// dash returns the column, from 0, of the dash before an entry of a list.
func (s *source) dash(item *yaml.Node) (int, error) {
	at, err := s.start(item)
	if err != nil {
		return 0, err
	}
	from := s.starts[item.Line-1]
	before := strings.TrimRight(string(s.data[from:at]), " ")
	if !strings.HasSuffix(before, "-") || strings.Trim(before[:len(before)-1], " ") != "" {
		return 0, errLayout // the dash stands alone, or two lists begin in one line
	}
	return len(before) - 1, nil
}
