package audit

import (
	"fmt"
	"slices"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/circuit/duty"
	"barlitre/circuit/recording"
	"barlitre/machines/units"
)

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
	if f.Stages[i] != nil {
		return fmt.Errorf("%s: the duty is computed from its phases; change them, or turn them into points", label)
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
			return w.Dim(a.Kind), ok && w.OfAxis()
		}
	}
	return w.Dim(duty.Linear), ok && w.OfBlock()
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
