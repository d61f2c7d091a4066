package audit

import (
	"errors"
	"fmt"
	"slices"

	"gopkg.in/yaml.v3"
)

// Clear takes out what Set has set: a parameter that has a default or is asked for,
// an axis that a block is bound to, a key of a circuit or of oil, air and energy. What
// the file needs stays, and the error says so.
func (f *File) Clear(target string) error {
	places, err := f.find(target)
	if err != nil {
		return err
	}
	d := f.draft()
	var splices []splice
	for _, p := range places {
		m, key := p.mapping, p.key
		if p.attribute != "" {
			m, key = child(p.mapping, p.key), p.attribute
		}
		more, err := d.src.cutOne(m, key)
		if err != nil {
			return fmt.Errorf("%s: %w", p.label, err)
		}
		splices = append(splices, more...)
	}
	if err := d.do(splices, nil); err != nil {
		return fmt.Errorf("%s: %w", target, err)
	}
	return f.take(target, d, func(g *File) bool { return true })
}

// cutOne takes one key out of a mapping; nothing where it has none.
func (s *source) cutOne(m *yaml.Node, key string) ([]splice, error) {
	at := slices.IndexFunc(mappingKeys(m), func(k *yaml.Node) bool { return k.Value == key })
	which := func(i int) bool { return i == at }
	switch {
	case at < 0:
		return nil, nil
	case m.Style&yaml.FlowStyle != 0:
		return s.cutFlow(m, which)
	case len(m.Content) == 2:
		return nil, errLayout // nothing would be left of the lines of the mapping
	}
	return s.cutLines(m, false, which)
}

// PutOil sets keys of the oil and takes all others out, at once: an oil is given by its
// grade or by its viscosity, and never by both or neither.
func (f *File) PutOil(keys map[string]string) error {
	if len(keys) == 0 {
		return errors.New("oil: nothing is given; give a grade or a viscosity")
	}
	d := f.draft()
	if isNull(child(d.root, "oil")) {
		if err := d.addInline(d.root, "oil", false, "temperature: "+encode(keys["temperature"], false)); err != nil {
			return fmt.Errorf("oil: %w", err)
		}
	}
	for _, key := range sections["oil"] { // in the order of the format
		text, ok := keys[key]
		if !ok {
			continue
		}
		if err := d.one(d.src.put(child(d.root, "oil"), key, encode(text, key == "grade"))); err != nil {
			return fmt.Errorf("oil.%s: %w", key, err)
		}
	}
	for _, k := range mappingKeys(child(d.root, "oil")) {
		if _, ok := keys[k.Value]; ok {
			continue
		}
		if err := d.cutKey(child(d.root, "oil"), k.Value); err != nil {
			return fmt.Errorf("oil.%s: %w", k.Value, err)
		}
	}
	return f.take("oil", d, func(g *File) bool { return len(mappingKeys(child(g.root, "oil"))) == len(keys) })
}
