package audit

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"regexp"
	"strings"
	"unicode/utf8"

	"gopkg.in/yaml.v3"

	"barlitre/circuit"
)

var byteOrderMark = []byte("\ufeff")

// load makes the node tree of a file and returns its top node.
func load(data []byte) (*yaml.Node, []circuit.Finding) {
	stop := func(line int, format string, args ...any) (*yaml.Node, []circuit.Finding) {
		return nil, []circuit.Finding{{Level: circuit.Stops, Line: line, Text: fmt.Sprintf(format, args...)}}
	}
	if len(data) > maxSize {
		return stop(1, "the file is %d MB long; an audit file has at most %d MB", len(data)>>20, maxSize>>20)
	}
	if line := invalidLine(data); line > 0 {
		return stop(line, "the text is not UTF-8; save the file in UTF-8")
	}
	docs, err := decode(data)
	if err != nil {
		line := syntaxLine(data)
		return stop(line, "%s", syntaxText(err, data, line))
	}
	switch {
	case len(docs) == 0 || len(docs[0].Content) == 0 || isNull(docs[0].Content[0]):
		return stop(1, "the file is empty; an audit file begins with %q", "format: "+Format)
	case len(docs) > 1:
		return stop(docs[1].Line, "a second document begins here (---); an audit file has one")
	}
	return docs[0].Content[0], nil
}

// invalidLine returns the first line that is not UTF-8 text, or 0.
func invalidLine(data []byte) int {
	line := 1
	for i := 0; i < len(data); {
		c, n := utf8.DecodeRune(data[i:])
		if c == utf8.RuneError && n == 1 || c == 0 {
			return line
		}
		if c == '\n' {
			line++
		}
		i += n
	}
	return 0
}

// decode reads at most two documents. A panic of the YAML library, which it may
// have for text nobody has tried, becomes an error like any other.
func decode(data []byte) (docs []*yaml.Node, err error) {
	defer func() {
		if p := recover(); p != nil {
			docs, err = nil, fmt.Errorf("yaml: %v", p)
		}
	}()
	d := yaml.NewDecoder(bytes.NewReader(data))
	for len(docs) < 2 {
		var n yaml.Node
		if err := d.Decode(&n); errors.Is(err, io.EOF) {
			return docs, nil
		} else if err != nil {
			return nil, err
		}
		docs = append(docs, &n)
	}
	return docs, nil
}

// syntaxLine finds the line of a syntax fault. The YAML library names the line
// where the enclosing list or mapping began, often far above, so the fault is
// looked for instead: it is in the line after the longest run of lines that
// reads on its own. Runs that end within brackets or quotes do not read, hence
// the look ahead after each halving.
func syntaxLine(data []byte) int {
	ends := []int{0}
	for i, c := range data {
		if c == '\n' {
			ends = append(ends, i+1)
		}
	}
	reads := func(n int) bool { _, err := decode(data[:ends[n]]); return err == nil }
	const ahead = 60
	lo, hi := 0, len(ends) // lo lines read, hi do not
	for {
		for hi-lo > 1 {
			if mid := (lo + hi) / 2; reads(mid) {
				lo = mid
			} else {
				hi = mid
			}
		}
		next := 0
		for n := lo + 2; n < min(lo+ahead, len(ends)) && next == 0; n++ {
			if reads(n) {
				next = n
			}
		}
		if next == 0 {
			return lo + 1
		}
		lo, hi = next, len(ends)
	}
}

var unquotedKey = regexp.MustCompile(`[\pL\pN] *\[[^\]"]*\] *:`)

var yamlPrefix = regexp.MustCompile(`^yaml: (line \d+: )?`)

// syntaxText says what to do about the usual slips, in front of what the YAML
// library has to say.
func syntaxText(err error, data []byte, line int) string {
	said := yamlPrefix.ReplaceAllString(err.Error(), "")
	var text string
	if l := lineText(data, line); len(l) > 0 && bytes.IndexByte(l[:len(l)-len(bytes.TrimLeft(l, " \t"))], '\t') >= 0 {
		return "the line is indented with a tab; use spaces"
	}
	switch {
	case strings.Contains(said, "mapping values are not allowed"):
		text = "a colon too many, or the line is indented too far; put text that has a colon in quotes"
	case strings.Contains(said, "expected ',' or") && unquotedKey.Match(lineText(data, line)):
		text = "a key with its unit in brackets needs quotes, as in \"ram.speed [m/s]\": [0, 1]"
	case strings.Contains(said, "expected ',' or"):
		text = "a bracket or brace is not closed, or a comma is missing between two entries"
	case strings.Contains(said, "cannot start any token"):
		text = "a text that begins with @, `, % or a tab needs quotes"
	case strings.Contains(said, "unexpected end of stream"), strings.Contains(said, "unexpected document indicator"):
		text = "a quote is not closed"
	case strings.Contains(said, "could not find expected ':'"):
		text = "a key needs a colon and a space after it"
	case strings.Contains(said, "did not find expected"):
		text = "the indentation does not fit the lines above"
	case strings.Contains(said, "control characters"):
		text = "there is a control character in the text; take it out"
	default:
		return "not readable as YAML: " + said
	}
	return text + " (" + said + ")"
}

func lineText(data []byte, line int) []byte {
	lines := bytes.SplitN(data, []byte("\n"), line+1)
	if line < 1 || line > len(lines) {
		return nil
	}
	return lines[line-1]
}
