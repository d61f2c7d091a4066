package audit

import (
	"bytes"
	"encoding/json"
	"regexp"
	"slices"
	"strings"

	"gopkg.in/yaml.v3"
)

// splice replaces data[from:to] by text.
type splice struct {
	from, to int
	text     string
}

// apply returns the data with all splices done. They must not overlap.
func apply(data []byte, splices []splice) []byte {
	slices.SortStableFunc(splices, func(a, b splice) int { return a.from - b.from })
	var out bytes.Buffer
	done := 0
	for _, s := range splices {
		out.Write(data[done:s.from])
		out.WriteString(s.text)
		done = s.to
	}
	out.Write(data[done:])
	return out.Bytes()
}

// put sets a key of a mapping to a single value, in place or as a new entry.
// Where the value has a mapping of its own (a quantity with its origin), its
// "value" is set. written is the value as encode writes it.
func (s *source) put(m *yaml.Node, key, written string) (splice, error) {
	if m == nil || m.Kind != yaml.MappingNode {
		return splice{}, errLayout
	}
	k, v := pair(m, key)
	switch {
	case v == nil:
		return s.insert(m, key, written)
	case v.Kind == yaml.MappingNode:
		return s.put(v, "value", written)
	case v.Kind != yaml.ScalarNode:
		return splice{}, errLayout
	case emptyValue(v):
		at, err := s.colonAfter(k, m.Column-1)
		return splice{at, at, " " + written}, err
	}
	return s.replace(v, m.Column-1, written)
}

// putBeside sets what is known of a quantity beside its value: origin, low, high
// or note. A quantity that stands alone becomes a mapping with that value.
func (s *source) putBeside(m *yaml.Node, key, attribute, written string) (splice, error) {
	v := child(m, key)
	switch {
	case v == nil || v.Kind == yaml.SequenceNode || emptyValue(v):
		return splice{}, errLayout
	case v.Kind == yaml.MappingNode:
		return s.put(v, attribute, written)
	}
	from, err := s.start(v)
	if err != nil {
		return splice{}, err
	}
	to, err := s.end(v, m.Column-1)
	return splice{from, to, "{value: " + encode(v.Value, false) + ", " + attribute + ": " + written + "}"}, err
}

// replace puts a value in place of a scalar, in the quotes that are there.
func (s *source) replace(n *yaml.Node, indent int, written string) (splice, error) {
	from, err := s.start(n)
	if err != nil {
		return splice{}, err
	}
	to, err := s.end(n, indent)
	plain := !strings.HasPrefix(written, `"`)
	switch {
	case plain && n.Style&yaml.DoubleQuotedStyle != 0:
		written = `"` + written + `"`
	case plain && n.Style&yaml.SingleQuotedStyle != 0:
		written = `'` + strings.ReplaceAll(written, `'`, `''`) + `'`
	}
	return splice{from, to, written}, err
}

// insert adds an entry at the end of a mapping: inside the braces, or as a line
// of its own at the indentation of the other entries.
func (s *source) insert(m *yaml.Node, key, written string) (splice, error) {
	text := key + ": " + written
	if strings.HasPrefix(written, s.lineBreak()) {
		text = key + ":" + written
	}
	return s.attach(m, text)
}

// attach adds entries, written out, at the end of a mapping or list.
func (s *source) attach(m *yaml.Node, texts ...string) (splice, error) {
	start, err := s.start(m)
	if err != nil {
		return splice{}, err
	}
	flow := m.Style&yaml.FlowStyle != 0
	if flow && len(m.Content) == 0 {
		return splice{start + 1, start + 1, strings.Join(texts, ", ")}, nil
	}
	if len(m.Content) == 0 {
		return splice{}, errLayout
	}
	end, err := s.lastEnd(m)
	if err != nil {
		return splice{}, err
	}
	if flow {
		return splice{end, end, ", " + strings.Join(texts, ", ")}, nil
	}
	indent, mark := m.Column-1, ""
	if m.Kind == yaml.SequenceNode {
		mark = "- "
		if indent, err = s.dash(m.Content[0]); err != nil {
			return splice{}, err
		}
	}
	begin := s.lineBreak() + strings.Repeat(" ", indent) + mark
	end = s.restOfLine(end) // past a comment in the same line
	return splice{end, end, begin + strings.Join(texts, begin)}, nil
}

var simpleText = regexp.MustCompile(`^-?[\pL\pN.+][\pL\pN .+/()°²³·%'*^_-]*$`)

// encode writes a text as YAML, plain where that reads back as the same. isText
// is set for keys that take a text, where a number would need quotes.
func encode(text string, isText bool) string {
	if simpleText.MatchString(text) && strings.TrimSpace(text) == text {
		docs, err := decode([]byte(text))
		if err == nil && len(docs) == 1 && len(docs[0].Content) == 1 {
			n := docs[0].Content[0]
			if n.Kind == yaml.ScalarNode && n.Value == text && n.Tag != "!!null" && (!isText || n.Tag == "!!str") {
				return text
			}
		}
	}
	var b bytes.Buffer
	e := json.NewEncoder(&b) // a JSON text is a double-quoted YAML text
	e.SetEscapeHTML(false)
	if e.Encode(text) != nil { // cannot be, for a string
		return `""`
	}
	return strings.TrimSuffix(b.String(), "\n")
}

// pair returns a key of a mapping and its value, or nil. The first one counts.
func pair(m *yaml.Node, key string) (k, v *yaml.Node) {
	if m == nil || m.Kind != yaml.MappingNode {
		return nil, nil
	}
	for i := 0; i+1 < len(m.Content); i += 2 {
		if m.Content[i].Kind == yaml.ScalarNode && m.Content[i].Value == key {
			return m.Content[i], m.Content[i+1]
		}
	}
	return nil, nil
}

// child returns the value of a key of a mapping, or nil.
func child(m *yaml.Node, key string) *yaml.Node {
	_, v := pair(m, key)
	return v
}
