package audit

import (
	"fmt"
	"slices"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/circuit/recording"
	"barlitre/machines/units"
)

// AddTrack adds a column of zeros to the table of a duty, such as "ram.speed" in
// "m/s", or in the usual unit where unit is "".
func (f *File) AddTrack(dutyName, track, unit string) error {
	i, d, err := f.typedDuty(dutyName)
	if err != nil {
		return err
	}
	track = strings.TrimSpace(track)
	dim, ok := f.trackQuantity(track)
	if !ok || track == "t" {
		return fmt.Errorf("duty %q: %q is not a track; write an axis or block and what is given of it, as in ram.speed", dutyName, track)
	}
	if unit == "" {
		unit = units.Preferred(dim, units.Metric).Symbol
	} else if _, err := headUnit(unit, dim); err != nil {
		return fmt.Errorf("duty %q, %s: %w", dutyName, track, err)
	}
	points := child(d.duty(i), "points")
	if list, _ := trackNode(points, track); list != nil {
		return fmt.Errorf("duty %q has a track %s already", dutyName, track)
	}
	head := track
	if unit != "" {
		head += " [" + unit + "]"
	}
	zeros := make([]string, len(f.Duties[i].Time))
	for k := range zeros {
		zeros[k] = "0"
	}
	err = d.one(d.src.attach(points, encode(head, true)+": ["+strings.Join(zeros, ", ")+"]"))
	return f.dutyEdit(d, i, err, func(g *File) bool { _, ok := g.pointAt(i, track, 0); return ok })
}

// RemoveTrack takes a column out of the table of a duty.
func (f *File) RemoveTrack(dutyName, track string) error {
	i, d, err := f.typedDuty(dutyName)
	if err != nil {
		return err
	}
	keys := mappingKeys(child(d.duty(i), "points"))
	is := func(k int) bool { name, _, _ := recording.SplitHead(keys[k].Value); return name == track }
	at := -1
	for k := range keys {
		if is(k) {
			at = k
		}
	}
	if at < 0 || track == "t" {
		return fmt.Errorf("duty %q has no track %q that can be taken out", dutyName, track)
	}
	return f.dutyEdit(d, i, d.cut(d.duty(i), "points", false, is), func(g *File) bool { _, ok := g.pointAt(i, track, 0); return !ok })
}

// AddRow puts a row into the table of a duty, before the row at that place (from 0);
// at its end with their number. values go by track, "t" among them; what is not given
// is taken over from the row before, or after at the beginning.
func (f *File) AddRow(dutyName string, row int, values map[string]string) error {
	i, d, err := f.typedDuty(dutyName)
	if err != nil {
		return err
	}
	n := len(f.Duties[i].Time)
	if row < 0 || row > n {
		return fmt.Errorf("duty %q: there is no row %d; it has %d", dutyName, row+1, n)
	}
	if strings.TrimSpace(values["t"]) == "" {
		return fmt.Errorf("duty %q: the new row has no time; give t, such as 2 s", dutyName)
	}
	points := child(d.duty(i), "points")
	var splices []splice
	for k, key := range mappingKeys(points) {
		list := points.Content[2*k+1]
		name, unit, _ := recording.SplitHead(key.Value)
		text, err := f.rowText(list, name, unit, row, values)
		if err != nil {
			return fmt.Errorf("duty %q, %s: %w", dutyName, name, err)
		}
		sp, err := d.src.insertItem(list, row, text)
		if err != nil {
			return fmt.Errorf("duty %q: %w", dutyName, err)
		}
		splices = append(splices, sp)
	}
	for track := range values {
		if list, _ := trackNode(points, track); list == nil {
			return fmt.Errorf("duty %q has no track %q; add it first", dutyName, track)
		}
	}
	return f.dutyEdit(d, i, d.do(splices, nil), func(g *File) bool { return len(g.Duties[i].Time) == n+1 })
}

// rowText returns what stands in a new row of a track.
func (f *File) rowText(list *yaml.Node, track, unit string, row int, values map[string]string) (string, error) {
	if v := strings.TrimSpace(values[track]); v != "" {
		dim, _ := f.trackQuantity(track)
		text, _, err := point(v, unit, dim)
		return encode(text, false), err
	}
	near := item(list, max(row-1, 0))
	if near == nil || near.Kind != yaml.ScalarNode {
		return "", errLayout
	}
	return encode(near.Value, false), nil
}

// insertItem puts an entry into a list before another, or at its end.
func (s *source) insertItem(list *yaml.Node, before int, text string) (splice, error) {
	if list.Kind != yaml.SequenceNode || len(list.Content) == 0 || before > len(list.Content) {
		return splice{}, errLayout
	}
	if before == len(list.Content) {
		return s.attach(list, text)
	}
	from, err := s.start(list.Content[before])
	if list.Style&yaml.FlowStyle != 0 {
		return splice{from, from, text + ", "}, err
	}
	dash, err := s.dash(list.Content[before])
	if err != nil {
		return splice{}, err
	}
	begin := s.starts[list.Content[before].Line-1]
	return splice{begin, begin, strings.Repeat(" ", dash) + "- " + text + s.lineBreak()}, nil
}

// RemoveRow takes a row out of the table of a duty; row counts from 0.
func (f *File) RemoveRow(dutyName string, row int) error {
	i, d, err := f.typedDuty(dutyName)
	if err != nil {
		return err
	}
	n := len(f.Duties[i].Time)
	if row < 0 || row >= n || n <= 2 {
		return fmt.Errorf("duty %q: row %d cannot be taken out; it has %d and needs two", dutyName, row+1, n)
	}
	for _, key := range mappingKeys(child(d.duty(i), "points")) {
		if err := d.cut(child(d.duty(i), "points"), key.Value, false, func(k int) bool { return k == row }); err != nil {
			return fmt.Errorf("duty %q: %w", dutyName, err)
		}
	}
	return f.dutyEdit(d, i, nil, func(g *File) bool { return len(g.Duties[i].Time) == n-1 })
}

// Table returns the table of a duty as it is written: heads such as "t" and
// "ram.speed [m/s]", and the values of each column.
func (f *File) Table(dutyName string) (heads []string, columns [][]string, err error) {
	i, d, err := f.typedDuty(dutyName)
	if err != nil {
		return nil, nil, err
	}
	points := child(d.duty(i), "points")
	for k, key := range mappingKeys(points) {
		var column []string
		for _, n := range points.Content[2*k+1].Content {
			column = append(column, n.Value)
		}
		heads, columns = append(heads, key.Value), append(columns, column)
	}
	return heads, columns, nil
}

// SetTable writes the whole table of a duty: heads such as "t", "ram.speed [m/s]" and
// the values of each column. A column that stays keeps its place and comments.
func (f *File) SetTable(dutyName string, heads []string, columns [][]string) error {
	i, d, err := f.typedDuty(dutyName)
	if err != nil {
		return err
	}
	isTime := func(head string) bool { name, _, _ := recording.SplitHead(head); return name == "t" }
	if len(heads) != len(columns) || !slices.ContainsFunc(heads, isTime) {
		return fmt.Errorf("duty %q: give as many columns as heads, the time t among them", dutyName)
	}
	points := child(d.duty(i), "points")
	var splices []splice
	var added []string
	for k, head := range heads {
		name, unit, _ := recording.SplitHead(head)
		dim, _ := f.trackQuantity(name)
		var words []string
		for _, v := range columns[k] {
			v = strings.TrimSpace(v)
			if text, _, err := point(v, unit, dim); err == nil {
				v = text // in the unit of its head
			}
			words = append(words, encode(v, false))
		}
		text := "[" + strings.Join(words, ", ") + "]"
		old := slices.IndexFunc(mappingKeys(points), func(n *yaml.Node) bool { was, _, _ := recording.SplitHead(n.Value); return was == name })
		if old < 0 {
			added = append(added, encode(head, true)+": "+text)
			continue
		}
		more, err := d.src.replaceEntry(points, old, head, text)
		if err != nil {
			return fmt.Errorf("duty %q: %w", dutyName, err)
		}
		splices = append(splices, more...)
	}
	err = d.do(splices, nil)
	if err == nil && len(added) > 0 {
		err = d.one(d.src.attach(child(d.duty(i), "points"), added...))
	}
	if err == nil {
		keys := mappingKeys(child(d.duty(i), "points"))
		err = d.cut(d.duty(i), "points", false, func(k int) bool { return !slices.Contains(heads, keys[k].Value) })
	}
	return f.dutyEdit(d, i, err, func(g *File) bool { return len(g.Duties[i].Tracks) == len(heads)-1 })
}

// replaceEntry writes a key and its value anew where they stand.
func (s *source) replaceEntry(m *yaml.Node, i int, key, text string) ([]splice, error) {
	k, v := m.Content[2*i], m.Content[2*i+1]
	from, err := s.start(v)
	if err != nil || v.Style&yaml.FlowStyle == 0 {
		return nil, errLayout
	}
	to, err := s.end(v, m.Column-1)
	out := []splice{{from, to, text}}
	if err != nil || k.Value == key {
		return out, err
	}
	if from, err = s.start(k); err != nil {
		return nil, err
	}
	to, err = s.end(k, m.Column-1)
	return append(out, splice{from, to, encode(key, true)}), err
}

// typedDuty finds a duty whose table stands in the audit file.
func (f *File) typedDuty(name string) (int, *draft, error) {
	i, err := f.dutyNamed(name)
	if err != nil {
		return i, nil, err
	}
	if f.Sources[i].File != "" {
		return i, nil, fmt.Errorf("duty %q is taken from %s; change it there", name, f.Sources[i].File)
	}
	if f.Stages[i] != nil {
		return i, nil, fmt.Errorf("duty %q is computed from its phases; change them, or turn them into points", name)
	}
	d := f.draft()
	points := child(d.duty(i), "points")
	if points == nil || points.Kind != yaml.MappingNode || len(points.Content) == 0 {
		return i, nil, fmt.Errorf("duty %q: %w", name, errLayout)
	}
	return i, d, nil
}
