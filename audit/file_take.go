package audit

import (
	"bytes"
	"fmt"
	"maps"
	"slices"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/circuit/duty"
	"barlitre/circuit/logged"
	"barlitre/circuit/recording/logger"
	"barlitre/machines/units"
)

// Kept is a recording that was read, with what its channels are in SI: it need not be read
// again by the audits that take it in.
type Kept struct{ as *recorded }

// Keep keeps a recording.
func Keep(rec *logger.Recording) *Kept {
	return &Kept{&recorded{rec: rec, channels: map[string][]float64{}}}
}

// KeptOf returns the recording that a duty was imported from, nil where it was not.
func (f *File) KeptOf(i int) *Kept {
	if i < 0 || i >= len(f.Imports) || f.Imports[i] == nil {
		return nil
	}
	n := child(f.dutyNode(i), "import")
	if key, err := importKey(f.Imports[i].File, n); err == nil && f.tables[key] != nil {
		return &Kept{f.tables[key]}
	}
	return nil
}

// Recording is what was read.
func (k *Kept) Recording() *logger.Recording { return k.as.rec }

// Taking says how a duty is made of a recording.
type Taking struct {
	Duty   string // its name
	File   string // beside the audit file, with forward slashes
	Kept   *Kept
	Tracks []logged.Track
	Part   logged.Part
	Axes   []duty.Axis       // that the file does not have yet
	Keys   map[string]string // of a new duty, as SetDuty takes them
}

// importKey names what is kept of a file read by a recipe.
func importKey(name string, recipe *yaml.Node) (string, error) {
	text, err := yaml.Marshal(recipe)
	return name + "\x00" + string(text), err
}

// TakeIn adds a duty that is imported from a recording, or changes how the one of that name
// is, if it was imported; new axes with it. On an error nothing is changed.
func (f *File) TakeIn(t Taking) error {
	g := *f
	g.tables = maps.Clone(f.tables) // of this edit alone until it is taken
	for _, a := range t.Axes {
		if err := g.AddAxis(a.Name, a.Kind); err != nil {
			return err
		}
	}
	name := oneLine(t.Duty)
	what := fmt.Sprintf("duty %q", name)
	d, i, err := g.roomFor(name, t.Keys)
	if err == nil {
		err = d.takeIn(i, t)
	}
	var key string
	if err == nil {
		key, err = importKey(t.File, child(d.duty(i), "import"))
	}
	if err != nil {
		return fmt.Errorf("%s: %w", what, err)
	}
	g.tables[key] = t.Kept.as
	if err := g.take(what, d, func(g *File) bool { return g.dutyIndex(name) == i && g.Imports[i] != nil }); err != nil {
		return err
	}
	*f = g
	return nil
}

// roomFor returns a draft with room for the import of a duty, new or imported before.
func (f *File) roomFor(name string, keys map[string]string) (*draft, int, error) {
	d, i := f.draft(), f.dutyIndex(name)
	if i < 0 {
		if err := f.mayBeDuty(name); err != nil {
			return nil, 0, err
		}
		texts := []string{"name: " + encode(name, true)}
		for _, key := range dutyKeys {
			if v := keys[key]; v != "" {
				texts = append(texts, key+": "+encode(v, key == "note"))
			}
		}
		return d, len(f.Duties), d.addItem("duties", texts)
	}
	if f.Imports[i] == nil {
		return nil, 0, fmt.Errorf("it was not imported from a logger's recording; choose another name")
	}
	for _, key := range []string{"file", "sha256", "import", "columns", "derived", "part"} {
		if child(d.duty(i), key) != nil {
			if err := d.cutKey(d.duty(i), key); err != nil {
				return nil, 0, err
			}
		}
	}
	return d, i, nil
}

// takeIn writes how a duty is imported.
func (d *draft) takeIn(i int, t Taking) error {
	m := d.duty(i)
	if m == nil {
		return errLayout
	}
	rec := t.Kept.as.rec
	texts := []string{"file: " + encode(t.File, true), "sha256: " + encode(rec.SHA256, true)}
	recipe, err := recipeNode(rec.Recipe)
	if err != nil {
		return err
	}
	columns, derived := &yaml.Node{Kind: yaml.MappingNode}, &yaml.Node{Kind: yaml.MappingNode}
	for _, x := range t.Tracks {
		if x.Law == logged.AsMeasured {
			columns.Content = append(columns.Content, textNode(x.Name), textNode(x.Says["column"]))
			continue
		}
		says := &yaml.Node{Kind: yaml.MappingNode, Style: yaml.FlowStyle, Content: []*yaml.Node{textNode("law"), textNode(x.Law)}}
		for _, key := range slices.Sorted(maps.Keys(x.Says)) {
			if x.Says[key] != "" {
				says.Content = append(says.Content, textNode(key), textNode(x.Says[key]))
			}
		}
		derived.Content = append(derived.Content, textNode(x.Name), says)
	}
	for _, e := range []struct {
		key   string
		value *yaml.Node
	}{{"import", recipe}, {"columns", columns}, {"derived", derived}} {
		if len(e.value.Content) > 0 {
			text, err := d.src.entryText(e.key, e.value, m)
			if err != nil {
				return err
			}
			texts = append(texts, text)
		}
	}
	if !t.Part.Whole() {
		second := units.Preferred(units.Time, units.SI)
		texts = append(texts, fmt.Sprintf("part: {from: %s, to: %s, is: %s}", units.FileText(t.Part.From, second), units.FileText(t.Part.To, second), encode(t.Part.Is, true)))
	}
	return d.one(d.src.attach(m, texts...))
}

func textNode(text string) *yaml.Node {
	return &yaml.Node{Kind: yaml.ScalarNode, Tag: "!!str", Value: text}
}

// recipeNode lays a recipe out: a line each for the time and for every channel.
func recipeNode(r logger.Recipe) (*yaml.Node, error) {
	var n yaml.Node
	if err := n.Encode(r); err != nil {
		return nil, err
	}
	for i := 1; i < len(n.Content); i += 2 {
		v := n.Content[i]
		if v.Kind == yaml.MappingNode {
			v.Style = yaml.FlowStyle
		}
		for _, item := range v.Content {
			if item.Kind != yaml.ScalarNode {
				item.Style = yaml.FlowStyle
			}
		}
	}
	return &n, nil
}

// entryText writes an entry of a mapping: below its key in lines of its own, unless the
// mapping stands in one line.
func (s *source) entryText(key string, v *yaml.Node, m *yaml.Node) (string, error) {
	if m.Style&yaml.FlowStyle != 0 {
		return key + ": " + flowText(v), nil
	}
	var b bytes.Buffer
	e := yaml.NewEncoder(&b)
	e.SetIndent(2)
	if err := e.Encode(v); err != nil {
		return "", err
	}
	lines := strings.Split(strings.TrimRight(b.String(), "\n"), "\n")
	begin := s.lineBreak() + strings.Repeat(" ", m.Column+1)
	return key + ":" + begin + strings.Join(lines, begin), nil
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
