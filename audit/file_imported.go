package audit

import (
	"context"
	"errors"
	"fmt"
	"maps"
	"reflect"
	"slices"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/circuit"
	"barlitre/circuit/duty"
	"barlitre/circuit/logged"
	"barlitre/circuit/recording/logger"
	"barlitre/machines/units"
)

// Import is what a duty was taken from by a recipe: the recording of a logger and what was
// found and done on the way.
type Import struct {
	File, SHA256 string   // SHA256 of all files, one after another
	More         []string // files that go on where File ends
	Expected     string   // SHA-256 that the audit file has; "" = none
	Recipe       logger.Recipe
	Rows         int
	Interval     float64 // s, median
	Start        string  // date and clock of the first row, where the recording has them
	Corrections  []logger.Correction
	Marks        []logger.Mark
	Columns      map[string]string // by track, the channel it is
	Derived      []Derived
	Part         logged.Part // of the recording, that makes the duty
	Also         []Also      // recordings of other loggers, set beside it
}

// Derived is a track that was worked out from channels.
type Derived struct {
	Track, Formula string
	Says           map[string]string // as the file has it
}

// imported reads the rows of a duty from a logger's recording by the recipe under import.
func (r *reader) imported(s scope, d *duty.Duty, f map[string]entry) Source {
	file, recipe := f["file"], f["import"]
	names := r.besideNames(s, file.value, "file")
	if len(names) == 0 {
		return Source{}
	}
	name, src := names[0], Source{File: names[0], Rest: strings.Join(names[1:], "\n")}
	var rp logger.Recipe
	if !r.recipe(s, recipe.value, &rp) {
		return src
	}
	rec := r.recording(s, file.value, names, recipe.value, rp)
	if rec == nil {
		return src
	}
	if src.SHA256 = rec.SHA256; len(names) > 1 {
		name = rec.Name
	}
	rec, more := r.alongside(s, rec, f["also"])
	if rec == nil {
		return src
	}
	for _, a := range more {
		for _, name := range a.Files {
			if !slices.Contains(src.Files(), name) {
				src.Rest = strings.TrimPrefix(src.Rest+"\n"+name, "\n")
			}
		}
	}
	im := &Import{File: names[0], More: names[1:], SHA256: rec.SHA256, Recipe: rp, Rows: len(rec.Time), Interval: rec.Interval, Start: rec.Start, Corrections: rec.Corrections, Marks: rec.Marks, Also: more}
	if im.Expected = strings.ToLower(r.text(s, f, "sha256")); im.Expected != "" && im.Expected != rec.SHA256 {
		r.told(s, circuit.Warns, f["sha256"].value, fmt.Sprintf("%s is not the file that this duty was made from: its SHA-256 is %s, the audit has %s; put the old file back, or look through the import again and keep the new number", name, rec.SHA256, im.Expected))
	}
	for _, c := range rec.Corrections {
		level := circuit.Note
		if c.Warns {
			level = circuit.Warns
		}
		r.told(s, level, file.value, name+": "+c.String())
	}
	d.Time = rec.Time
	im.Columns = r.channelTracks(s, d, rec, f["columns"].value)
	im.Derived = r.derived(s, d, rec, f["derived"].value)
	r.file.Imports[len(r.file.Imports)-1] = im
	return src
}

// besideNames reads one name or a list of them; nil when one is faulty.
func (r *reader) besideNames(s scope, n *yaml.Node, key string) (names []string) {
	list := []*yaml.Node{n}
	if n != nil && n.Kind == yaml.SequenceNode {
		if list = n.Content; len(list) == 0 {
			r.bad(s, n, key, "names no file")
		}
	}
	for _, x := range list {
		name, ok := r.besideName(s, x, key)
		if !ok {
			return nil
		}
		if slices.Contains(names, name) {
			r.bad(s, x, key, "%s is named twice", name)
			return nil
		}
		names = append(names, name)
	}
	return names
}

// told is a finding that stops nothing.
func (r *reader) told(s scope, level circuit.Level, n *yaml.Node, text string) {
	r.found = append(r.found, circuit.Finding{Level: level, Duty: s.duty, Parameter: "file", Text: s.where + ": " + text, Line: n.Line})
}

// recipe reads how a recording is read.
func (r *reader) recipe(s scope, n *yaml.Node, to *logger.Recipe) bool {
	in := s.in("import")
	if isNull(n) || n.Kind != yaml.MappingNode {
		r.bad(s, n, "import", "needs keys with values; barlitre import FILE prints them")
		return false
	}
	before := len(r.found)
	r.knownKeys(in, n, reflect.TypeOf(*to))
	if len(r.found) > before {
		return false
	}
	if err := n.Decode(to); err != nil {
		r.bad(s, n, "import", "%s", strings.TrimPrefix(strings.Join(strings.Fields(err.Error()), " "), "yaml: "))
		return false
	}
	return true
}

// knownKeys finds keys that a struct has no place for.
func (r *reader) knownKeys(s scope, n *yaml.Node, t reflect.Type) {
	for t.Kind() == reflect.Pointer {
		t = t.Elem()
	}
	switch {
	case t.Kind() == reflect.Slice && n.Kind == yaml.SequenceNode:
		for _, item := range n.Content {
			r.knownKeys(s, item, t.Elem())
		}
	case t.Kind() == reflect.Struct && n.Kind == yaml.MappingNode:
		var known []string
		field := map[string]reflect.Type{}
		for i := range t.NumField() {
			key, _, _ := strings.Cut(t.Field(i).Tag.Get("yaml"), ",")
			if key != "-" && key != "" {
				known, field[key] = append(known, key), t.Field(i).Type
			}
		}
		for _, e := range r.entries(s, n, "import") {
			if !slices.Contains(known, e.key) {
				r.unknownKey(s, e, n, known)
				continue
			}
			r.knownKeys(s.in(e.key), e.value, field[e.key])
		}
	}
}

// recording imports a file by a recipe, once for every text of the recipe.
func (r *reader) recording(s scope, at *yaml.Node, names []string, recipe *yaml.Node, rp logger.Recipe) *logger.Recording {
	text, err := yaml.Marshal(recipe)
	if err != nil {
		r.bad(s, recipe, "import", "%v", err)
		return nil
	}
	name := strings.Join(names, "\n")
	key := name + "\x00" + string(text)
	r.file.used[key] = true
	if t := r.file.tables[key]; t != nil {
		r.from = t
		return t.rec
	}
	if r.file.open == nil {
		r.bad(s, at, "file", "%s cannot be read: the audit has no folder yet; save it first", names[0])
		return nil
	}
	rec, err := r.file.importFiles(names, rp)
	if err != nil {
		if errors.Is(err, context.Canceled) || errors.Is(err, context.DeadlineExceeded) {
			r.bad(s, at, "file", "reading %s was cancelled", names[0])
			return nil
		}
		r.bad(s, at, "file", "%v", cannotRead(names[0], err))
		return nil
	}
	t := keptRecording(rec)
	r.file.tables[key], r.from = t, t
	return rec
}

// keptRecording has room for what is worked out of a recording.
func keptRecording(rec *logger.Recording) *recorded {
	return &recorded{rec: rec, channels: map[string][]float64{}}
}

// forget drops what was read of recordings and is no longer needed. What the text before needed
// stays until another text ceases to need something, so that one undo reads nothing again.
func (f *File) forget(before map[string]bool) {
	ceased := false
	for key := range before {
		ceased = ceased || !f.used[key]
	}
	maps.DeleteFunc(f.tables, func(key string, _ *recorded) bool { return ceased && !f.used[key] && !before[key] })
}

// channelTracks takes channels as they are: which track is which column.
func (r *reader) channelTracks(s scope, d *duty.Duty, rec *logger.Recording, n *yaml.Node) map[string]string {
	out := map[string]string{}
	in := s.in("columns")
	for _, e := range r.entries(s, n, "columns") {
		if e.key == "t" {
			r.bad(in, e.at, e.key, "the import says where the time stamps are; take it out")
			continue
		}
		column, ok := r.scalar(in, e.value, e.key, "the name of a column")
		if !ok {
			continue
		}
		dim, ok := r.column(in, d, e.at, e.key)
		if !ok {
			continue
		}
		if v := r.channel(in, rec, e.value, e.key, column, dim); v != nil {
			r.keep(d, e.key, v)
			out[e.key] = column
		}
	}
	return out
}

// channel returns the values of a column that must be of a quantity.
func (r *reader) channel(s scope, rec *logger.Recording, at *yaml.Node, key, column string, dim units.Dim) []float64 {
	c := rec.Find(column)
	if c == nil {
		var have []string
		for _, x := range rec.Series {
			have = append(have, x.Column)
		}
		r.bad(s, at, key, "%s has no channel %q%s", rec.Name, column, guess(column, have))
		return nil
	}
	if c.Dim != dim {
		was := c.Dim.Name()
		if c.Quantity == "" {
			was = "plain number"
		}
		r.bad(s, at, key, "%s: %q is a %s, must be a %s; say its quantity and unit in the import", rec.Name, column, was, dim.Name())
		return nil
	}
	t := r.from
	t.Lock()
	defer t.Unlock()
	if t.channels[column] == nil {
		t.channels[column] = c.Values()
	}
	return t.channels[column]
}
