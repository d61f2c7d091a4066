package audit

import (
	"strings"

	"gopkg.in/yaml.v3"
)

// entriesOf returns how many entries a mapping or list has.
func entriesOf(n *yaml.Node) int {
	if n.Kind == yaml.MappingNode {
		return len(n.Content) / 2
	}
	return len(n.Content)
}

// entrySpan returns where entry i of a mapping or list begins and ends; a dash is not
// counted in.
func (s *source) entrySpan(n *yaml.Node, i int) (from, to int, err error) {
	first, last := i, i
	if n.Kind == yaml.MappingNode {
		first, last = 2*i, 2*i+1
	}
	if from, err = s.start(n.Content[first]); err != nil {
		return
	}
	v := n.Content[last]
	switch {
	case !emptyValue(v):
		to, err = s.end(v, n.Column-1)
	case n.Kind == yaml.MappingNode:
		to, err = s.colonAfter(n.Content[first], n.Column-1)
	default:
		err = errLayout
	}
	return
}

// cutLines takes entries with lines of their own out. A comment beside an entry goes
// with it when beside is set, else it stays as a line.
func (s *source) cutLines(n *yaml.Node, beside bool, which func(i int) bool) ([]splice, error) {
	var out []splice
	for i := 0; i < entriesOf(n); i++ {
		if !which(i) {
			continue
		}
		from, to, err := s.entrySpan(n, i)
		if err != nil {
			return nil, err
		}
		line := n.Content[i*len(n.Content)/entriesOf(n)].Line
		begin := s.starts[line-1]
		if n.Kind == yaml.SequenceNode {
			dash, err := s.dash(n.Content[i])
			if err != nil {
				return nil, err
			}
			from = begin + dash
		}
		if strings.Trim(string(s.data[begin:from]), " ") != "" {
			return nil, errLayout // it shares its line with what holds it
		}
		end := s.restOfLine(to)
		if rest := strings.TrimLeft(string(s.data[to:end]), " \t"); strings.HasPrefix(rest, "#") && !beside {
			out = append(out, splice{from, end - len(rest), ""})
			continue
		}
		switch n := breakLen(s.data, end); {
		case n > 0:
			end += n
		case begin > 0: // the last line of the file: its break is the one before it
			begin -= len(s.breakBefore(begin))
		}
		out = append(out, splice{begin, end, ""})
	}
	return merged(out), nil
}

// breakBefore returns the line break that ends where a line begins.
func (s *source) breakBefore(i int) string {
	for n := 3; n > 0; n-- {
		if i >= n && breakLen(s.data, i-n) == n {
			return string(s.data[i-n : i])
		}
	}
	return ""
}

// merged makes cuts that overlap one.
func merged(cuts []splice) []splice {
	var out []splice
	for _, c := range cuts {
		if n := len(out); n > 0 && c.from < out[n-1].to {
			out[n-1].to = max(out[n-1].to, c.to)
			continue
		}
		out = append(out, c)
	}
	return out
}

// cutFlow takes entries out of brackets or braces, with the commas they need no more.
func (s *source) cutFlow(n *yaml.Node, which func(i int) bool) ([]splice, error) {
	var out []splice
	count := entriesOf(n)
	last := -1 // entry that stays
	for i := 0; i < count; i++ {
		if !which(i) {
			last = i
		}
	}
	for i := 0; i < count; i++ {
		from, to, err := s.entrySpan(n, i)
		if err != nil {
			return nil, err
		}
		if which(i) {
			out = append(out, splice{from, to, ""})
		}
		if which(i) && (i < count-1 || last < 0) || i == last && i < count-1 {
			if comma := s.comma(to); comma >= 0 {
				end := comma + 1
				for end < len(s.data) && s.data[end] == ' ' {
					end++
				}
				out = append(out, splice{comma, end, ""})
			}
		}
	}
	return out, nil
}

// comma returns the place of the comma after an entry in brackets, −1 where none is.
func (s *source) comma(i int) int {
	for i < len(s.data) {
		switch c := s.data[i]; {
		case c == ',':
			return i
		case c == '#':
			i = s.restOfLine(i)
		case c == ' ' || c == '\t' || breakLen(s.data, i) > 0:
			i++
		default:
			return -1
		}
	}
	return -1
}
