package audit

import (
	"fmt"
	"slices"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/circuit/duty"
)

// Put is Set for the fields of a screen, where the place of a value cannot be
// prepared by hand. Besides what Set does it
//
//   - sets title, the one text that stands by itself;
//   - adds oil, air, energy, site or report where the file lacks it;
//   - adds the retrofit_cost of a circuit with its likely cost, and opens one that is a
//     bare number; the first low or high makes the likely cost the other end;
//   - empties a text: site.customer and "" leave no customer.
//
// On an error nothing is changed.
func (f *File) Put(target, quantity string) error {
	quantity = strings.TrimSpace(quantity)
	splices, err := f.added(newSource(f.data), target, quantity)
	switch {
	case err != nil:
		return fmt.Errorf("%s: %w", target, err)
	case len(splices) == 0:
		return f.Set(target, quantity)
	case target == "title":
		return f.change(target, splices, func(g *File) bool { return child(g.root, "title").Value == quantity })
	}
	return f.change(target, splices, func(g *File) bool { return g.holds(target, quantity) })
}

// costKey is what a target of a retrofit cost has between the circuit and low, likely, high or note.
const costKey = "/retrofit_cost."

// added returns what Put does beyond Set; nothing where Set does it all.
func (f *File) added(s *source, target, quantity string) ([]splice, error) {
	one := func(sp splice, err error) ([]splice, error) { return []splice{sp}, err }
	if target == "title" {
		return one(s.put(f.root, "title", encode(quantity, true)))
	}
	if i := strings.LastIndex(target, costKey); i >= 0 {
		return f.addedCost(s, f.circuitNode(f.circuitIndex(target[:i])), target[i+len(costKey):], quantity)
	}
	if i := strings.LastIndex(target, "/heat."); i >= 0 && quantity != "" {
		if m := f.circuitNode(f.circuitIndex(target[:i])); m != nil && isNull(child(m, "heat")) && HeatKeyNamed(target[i+6:]) != nil {
			return one(s.put(m, "heat", "{"+target[i+6:]+": "+encode(quantity, false)+"}"))
		}
	}
	if section, key, ok := strings.Cut(target, "."); ok && slices.Contains(sections[section], key) && isNull(child(f.root, section)) && quantity != "" {
		return one(s.put(f.root, section, "{"+key+": "+encode(quantity, slices.Contains(textKeys, key))+"}"))
	}
	if quantity != "" {
		return nil, nil
	}
	places, err := f.find(target)
	if err != nil {
		return nil, nil // Set says the same
	}
	var splices []splice
	for _, p := range places {
		if !p.isText || p.attribute != "" || p.key == "currency" {
			return nil, nil
		}
		sp, err := s.put(p.mapping, p.key, `""`)
		if err != nil {
			return nil, err
		}
		splices = append(splices, sp)
	}
	return splices, nil
}

// addedCost is added for the cost of a retrofit; m is its circuit.
func (f *File) addedCost(s *source, m *yaml.Node, key, quantity string) ([]splice, error) {
	if m == nil || quantity == "" || !slices.Contains([]string{"low", "likely", "high", "note"}, key) {
		return nil, nil
	}
	one := func(sp splice, err error) ([]splice, error) { return []splice{sp}, err }
	cost := child(m, "retrofit_cost")
	written := encode(quantity, key == "note")
	isEnd := key == "low" || key == "high"
	switch {
	case isNull(cost) && key != "likely":
		return nil, fmt.Errorf("there is no cost yet; give the likely cost first")
	case isNull(cost):
		return one(s.put(m, "retrofit_cost", "{likely: "+written+"}"))
	case cost.Kind == yaml.ScalarNode:
		from, err := s.start(cost)
		if err != nil {
			return nil, err
		}
		to, err := s.end(cost, m.Column-1)
		likely := encode(cost.Value, false)
		text := "likely: " + likely
		switch {
		case isEnd:
			low, high := ends(key, written, likely)
			text += ", low: " + low + ", high: " + high
		case key == "note":
			text += ", note: " + written
		default:
			text = "likely: " + written
		}
		return one(splice{from, to, "{" + text + "}"}, err)
	}
	likely := child(cost, "likely")
	if !isEnd || isNull(likely) || child(cost, "low") != nil || child(cost, "high") != nil {
		return nil, nil
	}
	low, high := ends(key, written, encode(likely.Value, false))
	first, err := s.insert(cost, "low", low)
	if err != nil {
		return nil, err
	}
	second, err := s.insert(cost, "high", high)
	return []splice{first, second}, err
}

// ends returns low and high of a cost, of which one is given and the other is the likely cost.
func ends(key, written, likely string) (low, high string) {
	if key == "low" {
		return written, likely
	}
	return likely, written
}

// PutHours sets the hours a year of a duty, such as "4200 h".
func (f *File) PutHours(dutyName, hours string) error {
	label := fmt.Sprintf("duty %q, hours", dutyName)
	i := slices.IndexFunc(f.Duties, func(d *duty.Duty) bool { return d.Name == dutyName })
	m := item(child(f.root, "duties"), i)
	if m == nil || strings.TrimSpace(hours) == "" {
		return fmt.Errorf("%s: there is no such duty, or no hours were given", label)
	}
	hours = strings.TrimSpace(hours)
	sp, err := newSource(f.data).put(m, "hours", encode(hours, false))
	if err != nil {
		return fmt.Errorf("%s: %w", label, err)
	}
	return f.change(label, []splice{sp}, func(g *File) bool {
		n := child(item(child(g.root, "duties"), i), "hours")
		if n != nil && n.Kind == yaml.MappingNode {
			n = child(n, "value")
		}
		return n != nil && n.Value == hours
	})
}
