package audit

import (
	"fmt"
	"maps"
	"regexp"
	"slices"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/circuit"
)

// reader turns the node tree of a file into a File and collects what is wrong.
type reader struct {
	file  *File
	found []circuit.Finding
	// misspelt is set when the top of the file has keys that are not known: one of
	// them may be the one that seems to be missing.
	misspelt bool
	axes     map[string]bool // names, also of axes whose kind is wrong
	blocks   map[string]bool // ids over all circuits
	from     *recorded       // what the duty at hand is taken from; nil = it is typed
}

// scope says where in the file something stands, for findings.
type scope struct {
	circuit, duty, block string
	where                string                  // begins the text: "oil", "RV1"
	param                string                  // the parameter that all keys further in belong to
	title                func(key string) string // what the window calls a key, "" for what it shows no other way; nil = none has a title
}

// in returns the scope one key further in.
func (s scope) in(key string) scope {
	if key != "" {
		s.where, s.title = s.place(key), nil
	}
	return s
}

// place says where a key stands: "RV1, cracks at (crack)".
func (s scope) place(key string) string {
	name := s.named(key)
	switch {
	case key == "":
		return s.where
	case s.where == "" || strings.HasPrefix(name, s.where+" "): // "oil temperature (temperature)" tells the section
		return name
	}
	return s.where + ", " + name
}

// bad books a fault at a node. key is the parameter, or "" for the scope itself.
func (r *reader) bad(s scope, n *yaml.Node, key, format string, args ...any) {
	text := fmt.Sprintf(format, args...)
	if p := s.place(key); p != "" {
		text = p + ": " + text
	}
	r.book(s, n, key, text)
}

// book is bad for a text that says where it belongs.
func (r *reader) book(s scope, n *yaml.Node, key, text string) {
	line := 1
	if n != nil && n.Line > 0 {
		line = n.Line
	}
	if s.param != "" {
		key = s.param
	}
	r.found = append(r.found, circuit.Finding{Level: circuit.Stops, Circuit: s.circuit, Duty: s.duty,
		Block: s.block, Parameter: key, Text: text, Line: line})
}

// entry is one key of a mapping with its value.
type entry struct {
	key   string
	at    *yaml.Node // the key
	value *yaml.Node
}

// isNull reports whether nothing is written, or an explicit null.
func isNull(n *yaml.Node) bool {
	return n == nil || n.Kind == 0 || n.Kind == yaml.ScalarNode && n.Tag == "!!null"
}

// entries lists a mapping. Keys that stand in it twice are faults; the first counts.
func (r *reader) entries(s scope, n *yaml.Node, key string) []entry {
	if isNull(n) {
		return nil
	}
	if n.Kind != yaml.MappingNode {
		r.bad(s, n, key, "needs keys with values, as in {key: value}")
		return nil
	}
	var out []entry
	line := map[string]int{}
	for i := 0; i+1 < len(n.Content); i += 2 {
		k, v := n.Content[i], n.Content[i+1]
		if k.Kind != yaml.ScalarNode {
			r.bad(s, k, key, "a key must be a word, not a list or a mapping")
			continue
		}
		if first, twice := line[k.Value]; twice {
			r.bad(s.in(key), k, k.Value, "stands here twice, %s; take one out or rename it", lines(first, k.Line))
			continue
		}
		line[k.Value] = k.Line
		out = append(out, entry{k.Value, k, v})
	}
	return out
}

// lines names two lines, or the one that they are.
func lines(a, b int) string {
	if a == b {
		return fmt.Sprintf("in line %d", a)
	}
	return fmt.Sprintf("in lines %d and %d", a, b)
}

var startsWithDigit = regexp.MustCompile(`^\d`)

// fields lists a mapping whose keys are known; others are faults.
func (r *reader) fields(s scope, n *yaml.Node, key string, known ...string) map[string]entry {
	out := map[string]entry{}
	for _, e := range r.entries(s, n, key) {
		if slices.Contains(known, e.key) {
			out[e.key] = e
			continue
		}
		r.unknownKey(s.in(key), e, n, known)
	}
	return out
}

func (r *reader) unknownKey(s scope, e entry, n *yaml.Node, known []string) {
	if n.Style&yaml.FlowStyle != 0 && isNull(e.value) && startsWithDigit.MatchString(e.key) {
		r.bad(s, e.at, e.key, "a comma ends a value inside {}; write the number with a decimal point")
		return
	}
	r.bad(s, e.at, e.key, "unknown key%s", s.guess(e.key, known))
}

// items lists a sequence.
func (r *reader) items(s scope, n *yaml.Node, key, example string) []*yaml.Node {
	if isNull(n) {
		return nil
	}
	if n.Kind != yaml.SequenceNode {
		r.bad(s, n, key, "needs a list, as in %s", example)
		return nil
	}
	return n.Content
}

// scalar returns what is written for a single value.
func (r *reader) scalar(s scope, n *yaml.Node, key, want string) (string, bool) {
	switch {
	case isNull(n):
		r.bad(s, n, key, "has no value; write %s", want)
	case n.Kind != yaml.ScalarNode:
		r.bad(s, n, key, "needs %s, not a list or a mapping", want)
	default:
		return n.Value, true
	}
	return "", false
}

// text returns a text. A number or a yes is likely a slip, and is refused.
func (r *reader) text(s scope, fields map[string]entry, key string) string {
	e, ok := fields[key]
	if !ok {
		return ""
	}
	t, ok := r.scalar(s, e.value, key, "a text")
	if ok && e.value.Style&(yaml.DoubleQuotedStyle|yaml.SingleQuotedStyle|yaml.LiteralStyle|yaml.FoldedStyle) == 0 {
		switch e.value.Tag {
		case "!!int", "!!float", "!!bool":
			r.bad(s, e.value, key, "needs a text; write it in quotes, %q", t)
			return ""
		}
	}
	return t
}

// word returns one of a few words, or "".
func (r *reader) word(s scope, fields map[string]entry, key string, words ...string) string {
	return r.wordCalled(s, fields, key, func(string) string { return "" }, words...)
}

// wordCalled is word for words that the window calls something else.
func (r *reader) wordCalled(s scope, fields map[string]entry, key string, called func(string) string, words ...string) string {
	e, ok := fields[key]
	if !ok {
		return ""
	}
	t, ok := r.scalar(s, e.value, key, "one of: "+strings.Join(namedAll(words, called), ", "))
	if ok && !slices.Contains(words, t) {
		r.bad(s, e.value, key, "is %q%s", t, guessOf(t, words, called))
		return ""
	}
	return t
}

// flag returns a yes or no; fallback when the key is not there.
func (r *reader) flag(s scope, fields map[string]entry, key string, fallback bool) bool {
	e, ok := fields[key]
	if !ok {
		return fallback
	}
	t, ok := r.scalar(s, e.value, key, "yes or no")
	switch strings.ToLower(t) {
	case "yes", "true":
		return true
	case "no", "false":
		return false
	}
	if ok {
		r.bad(s, e.value, key, "is %q; write yes or no", t)
	}
	return fallback
}

// plain walks a tree for what the format leaves out: anchors, aliases and tags
// would let one text stand in two places, which no edit could then keep apart.
func (r *reader) plain(n *yaml.Node) bool {
	ok := true
	if n.Kind == yaml.AliasNode || n.Anchor != "" {
		r.bad(scope{}, n, "", "anchors (&) and aliases (*) are not part of the format; write the value out, or put the text in quotes")
		ok = false
	}
	if n.Style&yaml.TaggedStyle != 0 {
		r.bad(scope{}, n, "", "tags (%s) are not part of the format; write the value alone, or put the text in quotes", n.Tag)
		ok = false
	}
	for _, c := range n.Content {
		ok = r.plain(c) && ok
	}
	return ok
}

// parse reads another text in place of that of f, with the recordings that f has read.
func (f *File) parse(data []byte, how Importing) (*File, []circuit.Finding) {
	root, faults := load(data)
	if len(faults) > 0 {
		return nil, faults
	}
	return f.parseTree(root, data, how)
}

// parseTree is parse for a text whose node tree is made already.
func (f *File) parseTree(root *yaml.Node, data []byte, how Importing) (*File, []circuit.Finding) {
	g := &File{Path: f.Path, data: data, root: root, open: f.open, tables: map[string]*recorded{}, used: map[string]bool{}, how: how}
	maps.Copy(g.tables, f.tables) // other files may be copied meanwhile
	r := &reader{file: g, axes: map[string]bool{}, blocks: map[string]bool{}}
	if !r.plain(root) || !r.top(root) {
		return nil, r.found
	}
	g.found, g.how = r.found, Importing{} // an edit reads what is new without them
	g.forget(f.used)
	return g, g.Findings()
}
