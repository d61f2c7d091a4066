package audit

import (
	"errors"
	"maps"
	"slices"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/circuit/duty"
	"barlitre/circuit/logged"
	"barlitre/circuit/recording/logger"
)

// Kept is a recording that was read, with what its channels are in SI: audits that take it
// in do not read it again.
type Kept struct{ as *recorded }

// Keep keeps a recording.
func Keep(rec *logger.Recording) *Kept {
	return &Kept{keptRecording(rec)}
}

// KeptOf returns the recording that a duty was imported from, nil where it was not.
func (f *File) KeptOf(i int) *Kept {
	if i < 0 || i >= len(f.Imports) || f.Imports[i] == nil {
		return nil
	}
	im := f.Imports[i]
	if key, err := importKey(strings.Join(append([]string{im.File}, im.More...), "\n"), child(f.dutyNode(i), "import")); err == nil && f.tables[key] != nil {
		return &Kept{f.tables[key]}
	}
	return nil
}

// Recording is what was read.
func (k *Kept) Recording() *logger.Recording { return k.as.rec }

// importKey names what is kept of a file read by a recipe.
func importKey(name string, recipe *yaml.Node) (string, error) {
	text, err := yaml.Marshal(recipe)
	return name + "\x00" + string(text), err
}

// Taking says how a duty is made of a recording that was read.
type Taking struct {
	Duty   string   // its name
	File   string   // beside the audit file, with forward slashes
	More   []string // files that go on where File ends
	Kept   *Kept
	Also   []TakenAlso // recordings of other loggers
	Tracks []logged.Track
	Part   logged.Part
	Axes   []duty.Axis       // that the file does not have yet
	Keys   map[string]string // of a new duty, as SetDuty takes them

	InPlaceOf string // the duty whose hours a year the new one takes, which stays without; "" = none
}

// TakenAlso is the recording of another logger that was read: its Files, Recipe and Clock count.
type TakenAlso struct {
	Also
	Kept *Kept
}

func (t Taking) setup() Setup {
	rec := t.Kept.as.rec
	s := Setup{File: t.File, More: t.More, SHA256: rec.SHA256, Recipe: rec.Recipe, Columns: map[string]string{}, Derived: map[string]map[string]string{}, Part: t.Part}
	for _, a := range t.Also {
		a.SHA256, a.Recipe = a.Kept.as.rec.SHA256, a.Kept.as.rec.Recipe
		s.Also = append(s.Also, a.Also)
	}
	for _, x := range t.Tracks {
		if x.Law == logged.AsMeasured {
			s.Columns[x.Name] = x.Says["column"]
			continue
		}
		says := map[string]string{"law": x.Law}
		for key, text := range x.Says {
			if strings.TrimSpace(text) != "" {
				says[key] = text
			}
		}
		s.Derived[x.Name] = says
	}
	return s
}

// TakeIn is ImportDuty, or SetImport where there is such a duty, for a recording that was
// read: it is not read again. New axes come with it. On an error nothing is changed.
func (f *File) TakeIn(t Taking) error {
	g := *f
	g.tables = maps.Clone(f.tables) // of this edit alone until it is taken
	for _, a := range t.Axes {
		if err := g.AddAxis(a.Name, a.Kind); err != nil {
			return err
		}
	}
	s, name := t.setup(), oneLine(t.Duty)
	err := g.know(append([]string{t.File}, t.More...), t.Kept)
	for _, a := range t.Also {
		err = errors.Join(err, g.know(a.Files, a.Kept))
	}
	if err != nil {
		return err
	}
	if g.dutyIndex(name) >= 0 {
		err = g.SetImport(name, s)
	} else if err = g.ImportDuty(name, s); err == nil {
		for _, k := range slices.Sorted(maps.Keys(t.Keys)) {
			if err == nil {
				err = g.SetDuty(name, k, t.Keys[k])
			}
		}
	}
	if err == nil && t.InPlaceOf != "" {
		err = g.HandHours(t.InPlaceOf, name)
	}
	if err == nil {
		*f = g
	}
	return err
}

// know keeps a recording that was read, under the key that the text will have for it.
func (f *File) know(names []string, k *Kept) error {
	recipe, err := onOneLine(k.as.rec.Recipe)
	if err != nil {
		return err
	}
	docs, err := decode([]byte(recipe))
	if err != nil || len(docs) != 1 {
		return errLayout
	}
	key, err := importKey(strings.Join(names, "\n"), docs[0].Content[0])
	f.tables[key] = k.as
	return err
}

// TracksOf returns how the tracks of an imported duty are made of channels.
func (im *Import) TracksOf() (out []logged.Track) {
	for _, name := range slices.Sorted(maps.Keys(im.Columns)) {
		out = append(out, logged.Track{Name: name, Law: logged.AsMeasured, Says: map[string]string{"column": im.Columns[name]}})
	}
	for _, x := range im.Derived {
		says := maps.Clone(x.Says)
		delete(says, "law")
		out = append(out, logged.Track{Name: x.Track, Law: x.Says["law"], Says: says})
	}
	return out
}
