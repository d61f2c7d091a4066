package audit

import (
	"slices"
	"strings"

	"gopkg.in/yaml.v3"
)

// draft is the text of a file during an edit of several steps. Only its layout is
// followed; File.take then reads it as a whole.
type draft struct {
	file *File // as it was
	src  *source
	root *yaml.Node
}

func (f *File) draft() *draft { return &draft{file: f, src: newSource(f.data), root: f.root} }

// do applies splices, which must not overlap; err is that of making them.
func (d *draft) do(splices []splice, err error) error {
	if err != nil || len(splices) == 0 {
		return err
	}
	slices.SortStableFunc(splices, func(a, b splice) int { return a.from - b.from })
	for i := 1; i < len(splices); i++ {
		if splices[i].from < splices[i-1].to {
			return errLayout
		}
	}
	data := apply(d.src.data, splices)
	root, faults := load(data)
	if len(faults) > 0 {
		return errLayout
	}
	d.src, d.root = newSource(data), root
	return nil
}

// one is do for a single splice.
func (d *draft) one(sp splice, err error) error { return d.do([]splice{sp}, err) }

// circuit returns the mapping of a circuit by its place in the file.
func (d *draft) circuit(i int) *yaml.Node {
	if n := item(child(d.root, "circuits"), i); n != nil && n.Kind == yaml.MappingNode {
		return n
	}
	return nil
}

// duty returns the mapping of a duty by its place in the file.
func (d *draft) duty(i int) *yaml.Node {
	if n := item(child(d.root, "duties"), i); n != nil && n.Kind == yaml.MappingNode {
		return n
	}
	return nil
}

// add puts entries at the end of the mapping or list that key of m holds, which is
// made when it is missing or empty: in lines of their own below block style.
func (d *draft) add(m *yaml.Node, key string, isList bool, texts ...string) error {
	if m == nil || m.Kind != yaml.MappingNode || len(texts) == 0 {
		return errLayout
	}
	v := child(m, key)
	if v != nil && len(v.Content) > 0 {
		return d.one(d.src.attach(v, texts...))
	}
	if m.Style&yaml.FlowStyle != 0 {
		return d.addInline(m, key, isList, texts...)
	}
	begin := d.src.lineBreak() + strings.Repeat(" ", m.Column+1)
	if isList {
		begin = d.src.lineBreak() + strings.Repeat(" ", m.Column-1) + "- "
	}
	return d.fill(m, key, begin+strings.Join(texts, begin))
}

// addInline is add for short entries, which stand within brackets where there are none yet.
func (d *draft) addInline(m *yaml.Node, key string, isList bool, texts ...string) error {
	if v := child(m, key); v != nil && len(v.Content) > 0 {
		return d.one(d.src.attach(v, texts...))
	}
	if isList {
		return d.fill(m, key, "["+strings.Join(texts, ", ")+"]")
	}
	return d.fill(m, key, "{"+strings.Join(texts, ", ")+"}")
}

// fill writes a value where a key of a mapping is missing or empty.
func (d *draft) fill(m *yaml.Node, key, written string) error {
	k, v := pair(m, key)
	if v == nil {
		return d.one(d.src.insert(m, key, written))
	}
	if v.Kind == yaml.ScalarNode && !isNull(v) {
		return errLayout
	}
	colon, err := d.src.colonAfter(k, m.Column-1)
	if err != nil {
		return err
	}
	to := colon
	if !emptyValue(v) {
		if to, err = d.src.end(v, m.Column-1); err != nil {
			return err
		}
	}
	if !strings.HasPrefix(written, d.src.lineBreak()) {
		return d.one(splice{colon, to, " " + written}, nil)
	}
	rest := d.src.restOfLine(to) // a comment beside the key stays there
	return d.do([]splice{{colon, to, ""}, {rest, rest, written}}, nil)
}

// cut takes entries out of the mapping or list that key of m holds; which tells them
// by their place. Comments stay, but for those within an entry, and beside it when
// beside is set.
func (d *draft) cut(m *yaml.Node, key string, beside bool, which func(i int) bool) error {
	k, v := pair(m, key)
	if v == nil || len(v.Content) == 0 {
		return nil
	}
	n, gone := entriesOf(v), 0
	for i := 0; i < n; i++ {
		if which(i) {
			gone++
		}
	}
	if gone == 0 {
		return nil
	}
	if v.Style&yaml.FlowStyle != 0 {
		return d.do(d.src.cutFlow(v, which))
	}
	splices, err := d.src.cutLines(v, beside, which)
	if err != nil {
		return err
	}
	if gone == n {
		colon, err := d.src.colonAfter(k, m.Column-1)
		if err != nil {
			return err
		}
		empty := " {}"
		if v.Kind == yaml.SequenceNode {
			empty = " []"
		}
		splices = append(splices, splice{colon, colon, empty})
	}
	return d.do(splices, nil)
}

// cutKey takes one key out of a mapping.
func (d *draft) cutKey(m *yaml.Node, key string) error { return d.do(d.src.cutOne(m, key)) }

// mappingKeys returns the keys of a mapping.
func mappingKeys(m *yaml.Node) []*yaml.Node {
	var out []*yaml.Node
	if m != nil && m.Kind == yaml.MappingNode {
		for i := 0; i+1 < len(m.Content); i += 2 {
			out = append(out, m.Content[i])
		}
	}
	return out
}
