package audit

import (
	"bytes"
	"fmt"

	"gopkg.in/yaml.v3"
)

// Drop takes a value out of the file, so that the default holds again: a parameter of a block or a key of oil, air or
// energy, with all that is known of it. target is as of Set. On an error, such as a value that must be given, nothing
// is changed.
func (f *File) Drop(target string) error {
	places, err := f.find(target)
	if err != nil {
		return err
	}
	src := newSource(f.data)
	var splices []splice
	for _, p := range places {
		if p.kind != nil {
			if q := p.kind.Param(p.key); q != nil && q.Need {
				return fmt.Errorf("%s: it must be given; type another value", p.label)
			}
		}
		key := p.key
		m := p.mapping
		if p.attribute != "" {
			key, m = p.attribute, child(p.mapping, p.key)
		}
		if child(m, key) == nil {
			continue
		}
		sp, err := src.remove(m, key)
		if err != nil {
			return fmt.Errorf("%s: %w", p.label, err)
		}
		splices = append(splices, sp)
	}
	if len(splices) == 0 {
		return nil
	}
	return f.change(target, splices, func(g *File) bool { return g.lacks(target) })
}

// lacks reports whether no place of a target has a value.
func (f *File) lacks(target string) bool {
	places, err := f.find(target)
	for _, p := range places {
		n := child(p.mapping, p.key)
		if p.attribute != "" {
			n = child(n, p.attribute)
		}
		if n != nil {
			return false
		}
	}
	return err == nil
}

// remove takes an entry out of a mapping: within braces with one of the commas beside it, else with its lines.
func (s *source) remove(m *yaml.Node, key string) (splice, error) {
	i := 0
	for ; i+1 < len(m.Content) && m.Content[i].Value != key; i += 2 {
	}
	if i+1 >= len(m.Content) || len(m.Content) == 2 && m.Style&yaml.FlowStyle == 0 {
		return splice{}, errLayout // the last line of a mapping makes it one
	}
	from, err := s.start(m.Content[i])
	if err != nil {
		return splice{}, err
	}
	to, err := s.entryEnd(m, i)
	switch {
	case err != nil:
		return splice{}, err
	case m.Style&yaml.FlowStyle == 0:
		return s.removeLines(m.Content[i], from, to)
	case i > 0:
		from, err = s.entryEnd(m, i-2)
	case len(m.Content) > 2:
		to, err = s.start(m.Content[2])
	}
	return splice{from, to, ""}, err
}

// entryEnd is where the entry at an index of a mapping's content ends.
func (s *source) entryEnd(m *yaml.Node, i int) (int, error) {
	if v := m.Content[i+1]; !emptyValue(v) {
		return s.end(v, m.Column-1)
	}
	return s.colonAfter(m.Content[i], m.Column-1)
}

// removeLines takes out the lines from a key to the end of its value, with a comment behind it.
func (s *source) removeLines(key *yaml.Node, from, to int) (splice, error) {
	first := s.starts[key.Line-1]
	if len(bytes.TrimSpace(s.data[first:from])) > 0 {
		return splice{}, errLayout
	}
	for to < len(s.data) && breakLen(s.data, to) == 0 {
		to++
	}
	if to < len(s.data) {
		to += breakLen(s.data, to)
	}
	return splice{first, to, ""}, nil
}
