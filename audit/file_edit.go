package audit

import (
	"errors"
	"fmt"
	"regexp"
	"slices"
	"strconv"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/circuit"
	"barlitre/circuit/duty"
	"barlitre/machines/units"
)

// place is a value that an edit sets, in one circuit or elsewhere.
type place struct {
	mapping   *yaml.Node // holds key
	key       string
	attribute string // "" = the value itself
	label     string // for messages
	isText    bool   // a free text
	kind      *circuit.Kind
}

// Set changes one value, in the text and in the model. target is
//
//	RV1.crack             a parameter, in every circuit that has the block
//	As found/RV1.crack    in one circuit
//	RV1.crack.origin      what is known of the value: origin, low, high, note
//	As found/pump_at_rest, standby, note, role, retrofit_cost.low, .likely, .high
//	oil.temperature, air.temperature, energy.price, site.name ...
//
// A value that leaves its own low and high takes them along.
//
// quantity is written as in a file: "160 bar", "tandem", "yes". A key that is not
// in the file yet is added. On an error (an unknown target, a unit that does not
// fit) nothing is changed. After it,
// pointers taken from the File before are of the old model.
func (f *File) Set(target, quantity string) error {
	quantity = strings.TrimSpace(quantity)
	if quantity == "" {
		return fmt.Errorf("%s: the value is empty; write one, such as 160 bar", target)
	}
	places, err := f.find(target)
	if err != nil {
		return err
	}
	src := newSource(f.data)
	var splices []splice
	for _, p := range places {
		if err := f.fits(p, quantity); err != nil {
			return err
		}
		var sp splice
		written := encode(quantity, p.isText)
		if p.attribute == "" {
			sp, err = src.put(p.mapping, p.key, written)
		} else {
			sp, err = src.putBeside(p.mapping, p.key, p.attribute, written)
		}
		if err != nil {
			return fmt.Errorf("%s: %w", p.label, err)
		}
		splices = append(splices, sp)
		band, err := f.moveBand(src, p, quantity)
		if err != nil {
			return fmt.Errorf("%s: %w", p.label, err)
		}
		splices = append(splices, band...)
		if v := child(p.mapping, p.key); p.attribute == "" && v != nil {
			if n := child(v, "note"); n != nil && n.Value == typicalNote { // it was put in
				gone, err := src.cutOne(v, "note")
				if err != nil {
					return fmt.Errorf("%s: %w", p.label, err)
				}
				splices = append(splices, gone...)
			}
		}
	}
	return f.change(target, splices, func(g *File) bool { return g.holds(target, quantity) })
}

// bandDim has the quantities beside those of blocks that may have low and high.
var bandDim = map[string]units.Dim{
	"temperature": units.Temperature, "density": units.Density, "viscosity": units.DynamicViscosity,
	"price": units.EnergyPrice, "co2": units.CO2Factor,
	"fuel_co2": units.Density, "fuel_density": units.Density, "fuel_heating_value": units.SpecificEnergy,
}

// moveBand takes low and high along when a value leaves them: they said how sure
// the old value was, and keep that share of the new one (for temperatures: that
// distance). What is wrong with a
// value is said when the edited text is read.
func (f *File) moveBand(src *source, p place, quantity string) ([]splice, error) {
	n := child(p.mapping, p.key)
	dim, known := bandDim[p.key]
	if k := HeatKeyNamed(p.key); p.kind == nil && k != nil {
		dim, known = k.Dim, true
	}
	if p.kind != nil && p.kind.Param(p.key) != nil {
		dim, known = p.kind.Param(p.key).Dim, true
	}
	if p.attribute != "" || n == nil || n.Kind != yaml.MappingNode || !known {
		return nil, nil
	}
	read := func(key string, u units.Unit) (float64, units.Unit, bool) {
		v := child(n, key)
		if v == nil {
			return 0, u, false
		}
		if x, err := strconv.ParseFloat(v.Value, 64); err == nil && key != "value" {
			return u.ToSI(x), u, true
		}
		si, u, err := units.Parse(v.Value, dim)
		return si, u, err == nil
	}
	old, was, ok := read("value", units.Unit{})
	si, unit, err := units.Parse(quantity, dim)
	if !ok || err != nil || old <= 0 || si <= 0 {
		return nil, nil
	}
	var out []splice
	outside := false
	for i, key := range []string{"low", "high"} {
		end, _, ok := read(key, was)
		if !ok {
			continue
		}
		outside = outside || (i == 0 && si < end) || (i == 1 && si > end)
		// Four digits are as sure as such an end is.
		moved := end * si / old
		if dim == units.Temperature {
			moved = end + si - old
		}
		x, _ := strconv.ParseFloat(strconv.FormatFloat(unit.FromSI(moved), 'g', 4, 64), 64)
		sp, err := src.putBeside(p.mapping, p.key, key, encode(units.FileText(unit.ToSI(x), unit), false))
		if err != nil {
			return nil, err
		}
		out = append(out, sp)
	}
	if !outside {
		return nil, nil
	}
	return out, nil
}

// holds reports whether every place of a target has the value.
func (f *File) holds(target, quantity string) bool {
	places, err := f.find(target)
	for _, p := range places {
		n := child(p.mapping, p.key)
		switch {
		case n != nil && p.attribute != "":
			n = child(n, p.attribute)
		case n != nil && n.Kind == yaml.MappingNode:
			n = child(n, "value")
		}
		if n == nil || n.Value != quantity {
			return false
		}
	}
	return err == nil
}

// fits checks what only the check of the circuit would find: words that a
// parameter does not know. All else is found when the edited text is read.
func (f *File) fits(p place, quantity string) error {
	if p.kind == nil || p.attribute != "" {
		return nil
	}
	param := p.kind.Param(p.key)
	switch {
	case param == nil:
	case param.Type == circuit.Choice && !slices.Contains(param.Choices, quantity):
		return fmt.Errorf("%s: %q is not one of %s", p.label, quantity, strings.Join(param.Choices, ", "))
	case param.Type == circuit.AxisRef && !slices.ContainsFunc(f.Axes, func(a duty.Axis) bool { return a.Name == quantity }):
		return fmt.Errorf("%s: there is no axis %q", p.label, quantity)
	}
	return nil
}

// change applies splices if the edited text reads as well as the old one and has
// what was asked for; else nothing is changed.
func (f *File) change(what string, splices []splice, holds func(*File) bool) error {
	d := f.draft()
	if err := d.do(splices, nil); err != nil {
		return fmt.Errorf("%s: %w", what, err)
	}
	return f.take(what, d, holds)
}

// take is change for a draft.
func (f *File) take(what string, d *draft, holds func(*File) bool) error {
	g, found := f.parseTree(d.root, d.src.data, Importing{})
	if g == nil {
		return fmt.Errorf("%s: %w", what, errLayout)
	}
	var errs []error
	for _, n := range found {
		same := func(o circuit.Finding) bool {
			return withoutLines(o.Text) == withoutLines(n.Text) && o.Circuit == n.Circuit
		}
		if n.Level == circuit.Stops && !isUndrawn(n) && !slices.ContainsFunc(f.found, same) && !slices.ContainsFunc(errs, func(e error) bool { return e.Error() == n.Text }) {
			errs = append(errs, errors.New(n.Text))
		}
	}
	if len(errs) > 0 {
		return errors.Join(errs...)
	}
	if !holds(g) {
		return fmt.Errorf("%s: %w", what, errLayout)
	}
	*f = *g
	return nil
}

var lineNumbers = regexp.MustCompile(`in lines? \d+( and \d+)?`)

// isUndrawn reports whether a finding says what a file has that is not drawn yet.
func isUndrawn(n circuit.Finding) bool {
	return strings.HasSuffix(n.Text, noDuty) || strings.HasSuffix(n.Text, noCircuit)
}

// withoutLines is a text whose line numbers, which an edit above them shifts, do not count.
func withoutLines(text string) string { return lineNumbers.ReplaceAllString(text, "") }

// Replace takes another text for the whole file, as undo does; recordings are not read again. When it cannot be
// read as an audit file nothing is changed; the findings say why.
func (f *File) Replace(data []byte) []circuit.Finding { return f.ReplaceWith(data, Importing{}) }

// ReplaceWith is Replace for a text whose recordings may have to be read after all. When that is cancelled nothing is changed.
func (f *File) ReplaceWith(data []byte, how Importing) []circuit.Finding {
	g, found := f.parse(slices.Clone(data), how)
	if how.Context != nil && how.Context.Err() != nil {
		return found
	}
	if g != nil {
		*f = *g
	}
	return found
}

// putPlace sets the key at of a mapping.
func (s *source) putPlace(m *yaml.Node, at [2]float64) ([]splice, error) {
	list := child(m, "at")
	if list == nil {
		sp, err := s.insert(m, "at", placeText(at))
		return []splice{sp}, err
	}
	if list.Kind != yaml.SequenceNode || len(list.Content) != 2 {
		return nil, errLayout
	}
	var out []splice
	for i, n := range list.Content {
		if n.Kind != yaml.ScalarNode || emptyValue(n) {
			return nil, errLayout
		}
		sp, err := s.replace(n, list.Column-1, strconv.FormatFloat(at[i], 'f', -1, 64))
		if err != nil {
			return nil, err
		}
		out = append(out, sp)
	}
	return out, nil
}
