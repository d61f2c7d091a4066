package audit

import (
	"errors"
	"fmt"
	"slices"
	"strconv"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/circuit"
	"barlitre/circuit/duty"
	"barlitre/circuit/recording"
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
//	As found/pump_at_rest, note, role, retrofit_cost.low, .likely, .high
//	oil.temperature, air.temperature, energy.price, site.name ...
//
// quantity is written as in a file: "160 bar", "tandem", "yes". A key that is not
// in the file yet is added. On an error (an unknown target, a unit that does not
// fit, a value outside its own low and high) nothing is changed. After it,
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
	}
	return f.change(target, splices, func(g *File) bool { return g.holds(target, quantity) })
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
	g, found := parse(apply(f.data, splices), f.open, f.Path, f.tables)
	if g == nil {
		return fmt.Errorf("%s: %w", what, errLayout)
	}
	var errs []error
	for _, n := range found {
		same := func(o circuit.Finding) bool { return o.Text == n.Text && o.Circuit == n.Circuit }
		if !slices.ContainsFunc(f.found, same) && !slices.ContainsFunc(errs, func(e error) bool { return e.Error() == n.Text }) {
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

// Replace takes another text for the whole file, as undo does. When it cannot be
// read as an audit file nothing is changed; the findings say why.
func (f *File) Replace(data []byte) []circuit.Finding {
	g, found := parse(slices.Clone(data), f.open, f.Path, f.tables)
	if g != nil {
		*f = *g
	}
	return found
}

// SetAt moves a block on the sheet of a circuit to at [modules].
func (f *File) SetAt(circuitName, block string, at [2]float64) error {
	label := circuitName + "/" + block + ".at"
	m, _ := f.blockNode(circuitName, block)
	if m == nil {
		return fmt.Errorf("%s: there is no block %q in circuit %q", label, block, circuitName)
	}
	src := newSource(f.data)
	x, y := strconv.FormatFloat(at[0], 'f', -1, 64), strconv.FormatFloat(at[1], 'f', -1, 64)
	var splices []splice
	list := child(m, "at")
	if list == nil {
		sp, err := src.insert(m, "at", "["+x+", "+y+"]")
		if err != nil {
			return fmt.Errorf("%s: %w", label, err)
		}
		splices = append(splices, sp)
	} else {
		if list.Kind != yaml.SequenceNode || len(list.Content) != 2 {
			return fmt.Errorf("%s: %w", label, errLayout)
		}
		for i, text := range []string{x, y} {
			if list.Content[i].Kind != yaml.ScalarNode || emptyValue(list.Content[i]) {
				return fmt.Errorf("%s: %w", label, errLayout)
			}
			sp, err := src.replace(list.Content[i], list.Column-1, text)
			if err != nil {
				return fmt.Errorf("%s: %w", label, err)
			}
			splices = append(splices, sp)
		}
	}
	return f.change(label, splices, func(g *File) bool {
		e := g.Circuit(circuitName)
		b := e.Block(block)
		return b != nil && b.At != nil && *b.At == at
	})
}

// SetPoint changes one value of a duty whose points stand in the audit file.
// track is "t", "ram.speed" and so on; row counts from 0. A bare number is in
// the unit that the track names in its key.
func (f *File) SetPoint(dutyName, track string, row int, quantity string) error {
	label := fmt.Sprintf("duty %q, %s, row %d", dutyName, track, row+1)
	quantity = strings.TrimSpace(quantity)
	i := slices.IndexFunc(f.Duties, func(d *duty.Duty) bool { return d.Name == dutyName })
	if i < 0 {
		return fmt.Errorf("there is no duty %q", dutyName)
	}
	if f.Sources[i].File != "" {
		return fmt.Errorf("%s: the duty is taken from %s; change it there", label, f.Sources[i].File)
	}
	points := child(item(child(f.root, "duties"), i), "points")
	list, unit := trackNode(points, track)
	if list == nil || list.Kind != yaml.SequenceNode {
		return fmt.Errorf("%s: there is no such track", label)
	}
	dim, ok := f.trackQuantity(track)
	if !ok || row < 0 || row >= len(list.Content) {
		return fmt.Errorf("%s: there is no such row; the track has %d", label, len(list.Content))
	}
	written, want, err := point(quantity, unit, dim)
	if err != nil {
		return fmt.Errorf("%s: %w", label, err)
	}
	old := list.Content[row]
	if old.Kind != yaml.ScalarNode || emptyValue(old) {
		return fmt.Errorf("%s: %w", label, errLayout)
	}
	sp, err := newSource(f.data).replace(old, list.Column-1, encode(written, false))
	if err != nil {
		return fmt.Errorf("%s: %w", label, err)
	}
	return f.change(label, []splice{sp}, func(g *File) bool {
		got, ok := g.pointAt(i, track, row)
		return ok && got == want
	})
}

// point brings a typed value into the unit of its track and returns it as it is
// written in the file, and in SI.
func point(quantity, unit string, d units.Dim) (string, float64, error) {
	u, err := headUnit(unit, d)
	if err != nil {
		return "", 0, err
	}
	si, err := pointIn(quantity, unit, u, d)
	if err != nil || unit == "" {
		return quantity, si, err
	}
	if _, _, err := units.Parse(quantity, units.Count); err == nil {
		return quantity, si, nil
	}
	text := strings.TrimSpace(strings.TrimSuffix(units.FileText(si, u), u.Symbol))
	si, err = pointIn(text, unit, u, d)
	return text, si, err
}

// trackNode finds a track among points, and the unit that its key names.
func trackNode(points *yaml.Node, track string) (list *yaml.Node, unit string) {
	if points == nil || points.Kind != yaml.MappingNode {
		return nil, ""
	}
	for i := 0; i+1 < len(points.Content); i += 2 {
		name, unit, ok := recording.SplitHead(points.Content[i].Value)
		if ok && name == track {
			return points.Content[i+1], unit
		}
	}
	return nil, ""
}

// trackQuantity returns the quantity of a track, as column does while reading.
func (f *File) trackQuantity(track string) (units.Dim, bool) {
	if track == "t" {
		return units.Time, true
	}
	of, what, _ := strings.Cut(track, ".")
	w, ok := duty.WhatNamed(what)
	for _, a := range f.Axes {
		if a.Name == of {
			return trackDim(a.Kind, w), ok
		}
	}
	return units.Ratio, ok && w == duty.Command
}

func (f *File) pointAt(i int, track string, row int) (float64, bool) {
	values := f.Duties[i].Time
	if track != "t" {
		of, what, _ := strings.Cut(track, ".")
		w, _ := duty.WhatNamed(what)
		t := f.Duties[i].Track(of, w)
		if t == nil {
			return 0, false
		}
		values = t.Values
	}
	if row >= len(values) {
		return 0, false
	}
	return values[row], true
}

// item returns an entry of a list, or nil.
func item(list *yaml.Node, i int) *yaml.Node {
	if list == nil || list.Kind != yaml.SequenceNode || i < 0 || i >= len(list.Content) {
		return nil
	}
	return list.Content[i]
}
