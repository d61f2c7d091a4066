package circuit

import (
	"testing"

	"barlitre/circuit/drawing"
)

// Every symbol a block can ask for is drawn, and has the block's ports.
func TestSymbolsExist(t *testing.T) {
	for _, k := range Catalog() {
		words := []map[string]Word{{}}
		for _, p := range k.Params {
			if p.Type != Choice {
				continue
			}
			var more []map[string]Word
			for _, w := range words {
				for _, c := range p.Choices {
					m := map[string]Word{p.Key: {Text: c}}
					for key, v := range w {
						m[key] = v
					}
					more = append(more, m)
				}
			}
			words = more
		}
		for _, w := range words {
			for _, axis := range []string{"", "follows", "directs"} {
				b := Block{ID: "X", Kind: k.Name, Words: w, Values: map[string]Value{"bypass": {}}}
				if axis != "" {
					b.Words = map[string]Word{axis: {Text: "a"}}
					for key, v := range w {
						b.Words[key] = v
					}
				}
				s, ok := drawing.Lookup(k.Symbol(&b))
				if !ok {
					t.Fatalf("%s: no symbol %q", k.Name, k.Symbol(&b))
				}
				for _, p := range k.Ports {
					found := false
					for _, q := range s.Ports {
						found = found || q.Name == p.Name
					}
					if !found && !p.Optional {
						t.Errorf("%s: symbol %s has no port %s", k.Name, s.Name, p.Name)
					}
				}
			}
		}
	}
}
