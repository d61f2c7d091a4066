package audit

import (
	"crypto/sha256"
	"fmt"
	"hash"
	"slices"

	"gopkg.in/yaml.v3"

	"barlitre/circuit"
)

// Fingerprint tells files apart of which something else is computed: the SHA-256 of their text, of the recordings and the tables
// of measured points as they were read, and of what else says what is asked for. Readings of a site check change nothing that is
// computed and are not in it.
func (f *File) Fingerprint(asked ...any) [sha256.Size]byte {
	sum := sha256.New()
	sum.Write(f.textComputed())
	for _, s := range f.Sources {
		fmt.Fprintf(sum, "\x00%q %s", s.File, s.SHA256)
	}
	for _, c := range f.Circuits {
		f.addTables(sum, c.Circuit)
	}
	for _, a := range asked {
		fmt.Fprintf(sum, "\x00%v", a)
	}
	return [sha256.Size]byte(sum.Sum(nil))
}

// textComputed is the text without its readings, in the layout that YAML gives it; as it stands where that cannot be written.
func (f *File) textComputed() []byte {
	if f.root == nil {
		return f.data
	}
	rest := *f.root
	if k, _ := pair(f.root, "site_check"); k != nil {
		i := slices.Index(rest.Content, k)
		rest.Content = slices.Concat(rest.Content[:i], rest.Content[i+2:])
	}
	text, err := yaml.Marshal(&rest)
	if err != nil {
		return f.data
	}
	return text
}

// addTables adds the tables that blocks name.
func (f *File) addTables(sum hash.Hash, c *circuit.Circuit) {
	for _, x := range tablesOf(c) {
		if t := f.tables[x.name]; t != nil && t.Table != nil {
			fmt.Fprintf(sum, "\x00%s.%s %s", x.block, x.key, t.SHA256)
		}
	}
}

// tableNamed is a file beside the audit file that a block names.
type tableNamed struct{ block, key, name string }

func tablesOf(c *circuit.Circuit) (out []tableNamed) {
	for i := range c.Blocks {
		b := &c.Blocks[i]
		kind := circuit.KindNamed(b.Kind)
		if kind == nil {
			continue
		}
		for _, p := range kind.Params {
			if name := b.Word(p.Key); p.Type == circuit.FileRef && name != "" {
				out = append(out, tableNamed{b.ID, p.Key, name})
			}
		}
	}
	return out
}

// Beside lists the files beside the audit file that it names, each once: recordings, and tables of measured points.
func (f *File) Beside() (names []string) {
	add := func(name string) {
		if !slices.Contains(names, name) {
			names = append(names, name)
		}
	}
	for _, s := range f.Sources {
		for _, name := range s.Files() {
			add(name)
		}
	}
	for _, c := range f.Circuits {
		for _, t := range tablesOf(c.Circuit) {
			if f.tables[t.name] != nil { // what could not be read is not there to be handed on
				add(t.name)
			}
		}
	}
	return names
}
