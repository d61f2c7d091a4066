package audit

import (
	"fmt"
	"slices"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/circuit"
)

// textKeys are the keys that take a free text.
var textKeys = []string{"note", "name", "customer", "author", "date", "currency", "owner", "number", "revision", "approved"}

// attributes are what may stand beside the value of a quantity.
var attributes = []string{"origin", "low", "high", "note"}

// sections are the parts of a file that Set reaches besides circuits, with their keys.
var sections = map[string][]string{
	"site":   {"name", "customer", "author", "date", "note", "currency"},
	"report": {"owner", "number", "revision", "approved"},
	"oil":    {"grade", "temperature", "density", "viscosity", "viscosity_index", "viscosity_40", "viscosity_100", "specific_heat", "bulk_modulus", "air", "start_temperature"},
	"air":    {"temperature"},
	"heat":   heatKeyNames(),
	"energy": {"price", "co2", "co2_year", "co2_basis", "credit_returned", "fuel_price", "fuel_co2", "fuel_density", "fuel_heating_value"},
}

// circuitKeys are what Set reaches of a circuit besides its blocks.
var circuitKeys = []string{"role", "note", "pump_at_rest", "standby"}

// find returns the places that a target of Set names, at least one.
func (f *File) find(target string) ([]place, error) {
	name, rest := "", target
	if i := strings.LastIndex(target, "/"); i >= 0 {
		name, rest = strings.TrimSpace(target[:i]), target[i+1:]
	}
	words := strings.Split(strings.TrimSpace(rest), ".")
	if name != "" && f.circuitIndex(name) < 0 {
		var names []string
		for _, c := range f.Circuits {
			names = append(names, c.Name)
		}
		return nil, fmt.Errorf("%s: there is no circuit %q%s", target, name, guess(name, names))
	}
	if places, err := f.blockPlaces(target, name, words); len(places) > 0 || err != nil {
		return places, err
	}
	if name != "" {
		return f.circuitPlace(target, name, words)
	}
	return f.sectionPlace(target, words)
}

// blockPlaces finds a parameter of a block: in the circuit of that name, or with
// "" in all that have the block. No places: there is no such block.
func (f *File) blockPlaces(target, name string, words []string) ([]place, error) {
	var places []place
	var fault error
	for i := range f.Circuits {
		if name != "" && i != f.circuitIndex(name) {
			continue
		}
		m, kind := f.blockNode(i, words[0])
		if m == nil {
			continue
		}
		p, err := blockPlace(target, words, m, kind)
		if err != nil {
			fault = err
			continue
		}
		p.label = f.Circuits[i].Name + "/" + strings.Join(words, ".")
		places = append(places, p)
	}
	if len(places) > 0 {
		return places, nil
	}
	return nil, fault
}

func blockPlace(target string, words []string, m *yaml.Node, kind *circuit.Kind) (place, error) {
	p := place{mapping: m, kind: kind}
	if len(words) < 2 || len(words) > 3 {
		return p, fmt.Errorf("%s: write block.parameter, as in RV1.crack", target)
	}
	p.key = words[1]
	if p.key == "turn" || p.key == "mirror" {
		if len(words) == 2 {
			return p, nil
		}
	}
	if kind == nil {
		return p, fmt.Errorf("%s: the kind of block %s is not known", target, words[0])
	}
	param := kind.Param(p.key)
	if param == nil {
		var known []string
		for _, q := range kind.Params {
			known = append(known, q.Key)
		}
		return p, fmt.Errorf("%s: %s has no parameter %q%s", target, circuit.WithWord(kind.Title, kind.Name), p.key, scope{}.ofKind(kind).guess(p.key, known))
	}
	if len(words) == 2 {
		return p, nil
	}
	return p, p.beside(target, words[2], param.Type == circuit.Number)
}

// beside makes a place that of an attribute of a quantity.
func (p *place) beside(target, attribute string, isNumber bool) error {
	if !isNumber || !slices.Contains(attributes, attribute) {
		return fmt.Errorf("%s: %q is not known of %s; known of a quantity: %s", target, attribute, p.key, strings.Join(attributes, ", "))
	}
	if v := child(p.mapping, p.key); isNull(v) {
		return fmt.Errorf("%s: %s is not in the file; set its value first", target, p.key)
	}
	p.attribute = attribute
	p.isText = attribute == "note"
	return nil
}

// circuitPlace finds what a circuit has besides blocks.
func (f *File) circuitPlace(target, name string, words []string) ([]place, error) {
	p := place{mapping: f.circuitNode(f.circuitIndex(name)), key: words[0], label: target, isText: words[0] == "note"}
	switch {
	case p.mapping == nil:
		return nil, fmt.Errorf("%s: %w", target, errLayout)
	case len(words) == 1 && slices.Contains(circuitKeys, words[0]):
		return []place{p}, nil
	case (len(words) == 2 || len(words) == 3) && words[0] == "heat":
		return f.heatPlace(target, p.mapping, words)
	case len(words) == 2 && words[0] == "retrofit_cost":
		cost := child(p.mapping, "retrofit_cost")
		if cost == nil || cost.Kind != yaml.MappingNode {
			return nil, fmt.Errorf("%s: write retrofit_cost: {low: ..., likely: ..., high: ...} in the file first", target)
		}
		return []place{{mapping: cost, key: words[1], label: target, isText: words[1] == "note"}}, nil
	}
	return nil, fmt.Errorf("%s: circuit %q has no block %q; besides blocks it has %s and retrofit_cost", target, name, words[0],
		strings.Join(circuitKeys, ", "))
}

// sectionPlace finds a key of site, report, oil, air or energy.
func (f *File) sectionPlace(target string, words []string) ([]place, error) {
	known, ok := sections[words[0]]
	switch {
	case !ok:
		return nil, fmt.Errorf("%s: no circuit has a block %q", target, words[0])
	case len(words) < 2 || len(words) > 3 || !slices.Contains(known, words[1]):
		return nil, fmt.Errorf("%s: %s has %s", target, words[0], strings.Join(known, ", "))
	}
	p := place{mapping: child(f.root, words[0]), key: words[1], label: target, isText: slices.Contains(textKeys, words[1])}
	if isNull(p.mapping) {
		return nil, fmt.Errorf("%s: %s is not in the file; add it there first, as in %s: {%s: ...}", target, words[0], words[0], words[1])
	}
	if len(words) == 3 {
		err := p.beside(target, words[2], words[0] != "site" && words[0] != "report" && !isHeatWord(words))
		return []place{p}, err
	}
	return []place{p}, nil
}

// isHeatWord reports whether a target names a word of the section heat, which has no low and high.
func isHeatWord(words []string) bool {
	k := HeatKeyNamed(words[1])
	return words[0] == "heat" && k != nil && (len(k.Choices) > 0 || k.IsText)
}

// heatPlace finds a key of the heat of one circuit.
func (f *File) heatPlace(target string, m *yaml.Node, words []string) ([]place, error) {
	p := place{mapping: child(m, "heat"), key: words[1], label: target}
	k := HeatKeyNamed(words[1])
	switch {
	case k == nil:
		return nil, fmt.Errorf("%s: heat has no %q%s", target, words[1], guess(words[1], heatKeyNames()))
	case isNull(p.mapping):
		return nil, fmt.Errorf("%s: the circuit has no heat of its own; add it there first, as in heat: {%s: ...}", target, words[1])
	case len(words) == 3:
		return []place{p}, p.beside(target, words[2], len(k.Choices) == 0 && !k.IsText)
	}
	return []place{p}, nil
}

// circuitIndex returns the place of a circuit in the file, −1 where there is
// none; the first of two with one name.
func (f *File) circuitIndex(name string) int {
	return slices.IndexFunc(f.Circuits, func(c CircuitEntry) bool { return c.Name == name })
}

// circuitNode returns the mapping of a circuit, or nil.
func (f *File) circuitNode(i int) *yaml.Node {
	if n := item(child(f.root, "circuits"), i); n != nil && n.Kind == yaml.MappingNode {
		return n
	}
	return nil
}

// blockNode returns the mapping of a block and its kind, nil where there is none.
func (f *File) blockNode(i int, id string) (*yaml.Node, *circuit.Kind) {
	m := child(child(f.circuitNode(i), "blocks"), id)
	if m == nil || m.Kind != yaml.MappingNode {
		return nil, nil
	}
	var kind *circuit.Kind
	if k := child(m, "kind"); k != nil {
		kind = circuit.KindNamed(k.Value)
	}
	return m, kind
}
