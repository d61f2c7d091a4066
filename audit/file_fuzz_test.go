package audit

import (
	"bytes"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"gopkg.in/yaml.v3"
)

func seeds(f *testing.F) {
	paths, err := filepath.Glob("testdata/wrong/*.yaml")
	if err != nil || len(paths) == 0 {
		f.Fatal(err)
	}
	for _, path := range append(paths, "testdata/full.yaml", "testdata/small.yaml") {
		data, err := os.ReadFile(path)
		if err != nil {
			f.Fatal(err)
		}
		f.Add(data)
	}
}

// leaves lists all single values of a tree in order, keys included.
func leaves(n *yaml.Node) []string {
	if n.Kind == yaml.ScalarNode {
		return []string{n.Value}
	}
	var out []string
	for _, c := range n.Content {
		out = append(out, leaves(c)...)
	}
	return out
}

// Any text is read or refused in words, and an edit that is accepted changes one
// value (or adds one) and nothing else.
func FuzzParse(f *testing.F) {
	seeds(f)
	open := FromBytes(func(string) ([]byte, error) { return []byte("t [s]; ram.speed [m/s]\n0;0\n1;0\n"), nil })
	f.Fuzz(func(t *testing.T, data []byte) {
		a, found := Parse(data, open, "x.yaml")
		for _, n := range found {
			if n.Text == "" || n.Line < 1 || n.Line > bytes.Count(data, []byte("\n"))+bytes.Count(data, []byte("\r"))+1+bytes.Count(data, []byte("\u2028"))+bytes.Count(data, []byte("\u2029"))+bytes.Count(data, []byte("\u0085")) {
				t.Fatalf("finding %+v", n)
			}
		}
		if a == nil {
			if len(found) == 0 {
				t.Fatal("no file and no reason")
			}
			return
		}
		if !bytes.Equal(a.Bytes(), data) {
			t.Fatal("unedited bytes differ")
		}
		_, _ = a.Conditions()
		for _, c := range a.Circuits {
			for _, b := range c.Blocks {
				if b.Kind == "relief" {
					tryEdit(t, a, func(g *File) error { return g.Set(c.Name+"/"+b.ID+".crack", "123.5 bar") }, 0, 2)
				}
				tryEdit(t, a, func(g *File) error { return setAt(g, c.Name, b.ID, [2]float64{3, 4}) }, 0, 3)
			}
		}
		if len(a.Duties) > 0 {
			tryEdit(t, a, func(g *File) error { return g.SetPoint(a.Duties[0].Name, "ram.speed", 0, "0.5 m/s") }, 0, 0)
		}
	})
}

// tryEdit does an edit on a copy and compares the trees.
func tryEdit(t *testing.T, a *File, edit func(*File) error, fewest, most int) {
	t.Helper()
	g := *a
	if edit(&g) != nil {
		if !bytes.Equal(g.data, a.data) {
			t.Fatal("refused, but the text changed")
		}
		return
	}
	was, is := leaves(a.root), leaves(g.root)
	if d := len(is) - len(was); d < fewest || d > most {
		t.Fatalf("%d leaves more\n%s\nbecame\n%s", d, a.data, g.data)
	}
	for len(was) > 0 && len(is) > 0 && was[0] == is[0] {
		was, is = was[1:], is[1:]
	}
	for len(was) > 0 && len(is) > 0 && was[len(was)-1] == is[len(is)-1] {
		was, is = was[:len(was)-1], is[:len(is)-1]
	}
	if len(was) > 2 || len(is) > 3 {
		t.Fatalf("%q became %q\n%s\nbecame\n%s", was, is, a.data, g.data)
	}
	if comments(a.data) != comments(g.data) {
		t.Fatalf("comments differ\n%s\nbecame\n%s", a.data, g.data)
	}
}

// comments counts the # signs, which no edit here adds or removes.
func comments(data []byte) int { return strings.Count(string(data), "#") }
