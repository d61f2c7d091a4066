package audit

import (
	"errors"
	"fmt"
	"maps"
	"slices"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/circuit/logged"
	"barlitre/circuit/recording/logger"
	"barlitre/machines/units"
)

// Setup is all that a duty says of the recording that it is taken from.
type Setup struct {
	File, SHA256 string   // beside the audit file, with forward slashes; of the file as it was looked at
	More         []string // files that go on where File ends, in their order
	Recipe       logger.Recipe
	Also         []Also                       // recordings of other loggers: Files, SHA256, Recipe and Clock of each
	Columns      map[string]string            // by track, such as X1.pressure: the channel
	Derived      map[string]map[string]string // by track: law and what it needs, as in files
	Part         logged.Part                  // of the recording, that makes the duty; the zero Part is all of it
}

// keys writes the keys of a duty, each on one line.
func (s Setup) keys() ([]string, error) {
	out := []string{"file: " + encode(s.File, false)}
	if len(s.More) > 0 {
		list, err := onOneLine(append([]string{s.File}, s.More...))
		if err != nil {
			return nil, err
		}
		out[0] = "file: " + list
	}
	if s.SHA256 != "" {
		out = append(out, "sha256: "+encode(s.SHA256, false))
	}
	recipe, err := onOneLine(s.Recipe)
	if err != nil {
		return nil, err
	}
	out = append(out, "import: "+recipe)
	if len(s.Also) > 0 {
		text, err := alsoText(s.Also)
		if err != nil {
			return nil, err
		}
		out = append(out, "also: "+text)
	}
	if len(s.Columns) > 0 {
		text, err := onOneLine(s.Columns)
		if err != nil {
			return nil, err
		}
		out = append(out, "columns: "+text)
	}
	if len(s.Derived) > 0 {
		text, err := onOneLine(s.Derived)
		if err != nil {
			return nil, err
		}
		out = append(out, "derived: "+text)
	}
	if !s.Part.Whole() {
		second := units.Preferred(units.Time, units.SI)
		out = append(out, fmt.Sprintf("part: {from: %s, to: %s, is: %s}", units.FileText(s.Part.From, second), units.FileText(s.Part.To, second), encode(s.Part.Is, true)))
	}
	return out, nil
}

// alsoText writes recordings of other loggers on one line.
func alsoText(list []Also) (string, error) {
	var out []string
	add := func(key string, x any) error {
		text, err := onOneLine(x)
		out[len(out)-1] += ", " + key + ": " + text
		return err
	}
	for _, a := range list {
		out = append(out, "{file: "+encode(a.Files[0], false))
		var errs []error
		if len(a.Files) > 1 {
			out[len(out)-1] = "{"
			errs = append(errs, add("file", a.Files))
			out[len(out)-1] = strings.Replace(out[len(out)-1], "{, ", "{", 1)
		}
		if a.SHA256 != "" {
			out[len(out)-1] += ", sha256: " + encode(a.SHA256, false)
		}
		errs = append(errs, add("import", a.Recipe))
		for key, x := range a.Clock.fields() { // one at most
			errs = append(errs, add(key, x))
		}
		if err := errors.Join(errs...); err != nil {
			return "", err
		}
		out[len(out)-1] += "}"
	}
	return "[" + strings.Join(out, ", ") + "]", nil
}

// Text is what stands in a duty of an audit file, line by line, to be copied there by hand.
func (s Setup) Text() (string, error) {
	keys, err := s.keys()
	return strings.Join(keys, "\n"), err
}

// onOneLine writes a value as YAML between braces.
func onOneLine(x any) (string, error) {
	var n yaml.Node
	if err := n.Encode(x); err != nil {
		return "", err
	}
	n.Style = yaml.FlowStyle
	text, err := yaml.Marshal(&n)
	return strings.TrimSpace(string(text)), err // which is on one line, with the blanks that names have
}

// ImportDuty adds a duty that is taken from a recording; it does not repeat, for a recording
// seldom ends as it began.
func (f *File) ImportDuty(name string, s Setup) error {
	name = oneLine(name)
	if err := f.mayBeDuty(name); err != nil {
		return err
	}
	keys, err := s.keys()
	if err != nil {
		return fmt.Errorf("duty %q: %w", name, err)
	}
	d, n := f.draft(), len(f.Duties)
	if err := d.addItem("duties", append([]string{"name: " + encode(name, true), "repeats: no"}, keys...)); err != nil {
		return fmt.Errorf("duty %q: %w", name, err)
	}
	return f.take(name, d, func(g *File) bool { return g.dutyIndex(name) == n && g.Imports[n] != nil })
}

// SetImport lets a duty be taken from a recording in place of what it was taken from.
func (f *File) SetImport(name string, s Setup) error {
	i, err := f.dutyNamed(name)
	if err != nil {
		return err
	}
	keys, err := s.keys()
	if err != nil {
		return fmt.Errorf("duty %q: %w", name, err)
	}
	d := f.draft()
	for _, key := range []string{"points", "phases", "file", "sha256", "import", "also", "columns", "derived", "part"} {
		n := child(d.duty(i), key)
		if n == nil || key == "phases" && n.Kind == yaml.MappingNode { // names of stretches stay, phases that tracks are computed of go
			continue
		}
		if err := d.cutKey(d.duty(i), key); err != nil {
			return fmt.Errorf("duty %q: %w", name, err)
		}
	}
	return f.dutyEdit(d, i, d.one(d.src.attach(d.duty(i), keys...)), func(g *File) bool { return g.Imports[i] != nil })
}

// SetupOf returns how a duty is imported, to be changed and set again; false when it is not.
func (f *File) SetupOf(name string) (Setup, bool) {
	i := f.dutyIndex(name)
	if i < 0 || f.Imports[i] == nil {
		return Setup{}, false
	}
	im := f.Imports[i]
	s := Setup{File: im.File, More: slices.Clone(im.More), SHA256: im.SHA256, Recipe: im.Recipe, Also: slices.Clone(im.Also), Columns: maps.Clone(im.Columns), Derived: map[string]map[string]string{}, Part: im.Part}
	for _, d := range im.Derived {
		s.Derived[d.Track] = maps.Clone(d.Says)
	}
	return s, true
}

// Channels lists what an imported duty has channels of.
func (im *Import) Channels() []string {
	var out []string
	for _, c := range im.Recipe.Channels {
		if !c.Text && !c.Leave && !slices.Contains(out, c.Column) {
			out = append(out, c.Column)
		}
	}
	return out
}
