package circuit

import (
	"go/ast"
	"go/parser"
	"go/token"
	"regexp"
	"strconv"
	"strings"
	"testing"
)

// fileWord is a word of files: a key or choice of several parts, or anything quoted as such.
var fileWord = regexp.MustCompile("[a-z0-9]+_[a-z0-9_]+|`")

// What a window shows of the catalog has no words of the file in it.
func TestCatalogSpeaksOfTheTrade(t *testing.T) {
	for _, k := range Catalog() {
		texts := map[string]string{"title": k.Title}
		for _, p := range k.Ports {
			texts["port "+p.Name] = p.Text
		}
		for _, l := range k.Losses {
			texts["loss "+l.Name] = l.Name + ": " + l.Text
		}
		for _, e := range k.Equations {
			texts["equation "+e.Text] = e.Text + " " + e.Source
		}
		for i := range k.Params {
			p := &k.Params[i]
			texts[p.Key] = strings.Join([]string{p.Title, p.Text, p.Source, p.Derived}, " | ")
			seen := map[string]bool{}
			for _, word := range p.Choices {
				name := p.NameOf(word)
				texts[p.Key] += " | " + name
				if seen[name] {
					t.Errorf("%s.%s: two choices are called %q", k.Name, p.Key, name)
				}
				seen[name] = true
			}
			for word := range p.Called {
				if p.checkChoice(word) != "" {
					t.Errorf("%s.%s: %q is called something, but no choice", k.Name, p.Key, word)
				}
			}
		}
		for of, text := range texts {
			if w := fileWord.FindString(text); w != "" {
				t.Errorf("%s, %s: %q is a word of the file: %s", k.Name, of, w, text)
			}
		}
	}
}

func TestNames(t *testing.T) {
	control := KindNamed("pump").Param("control")
	// Terms of the trade as ISO 5598 and common practice have them; "p/Q" from memory.
	for word, want := range map[string]string{"load_sensing": "load sensing", "negative_flow": "negative flow", "pq": "p/Q control"} {
		if got := control.NameOf(word); got != want {
			t.Errorf("%s is called %q, want %q", word, got, want)
		}
	}
	if got := KindNamed("valve").Param("follows").NameOf("lift_axis"); got != "lift_axis" {
		t.Errorf("the axis lift_axis of a user is called %q", got)
	}
	if got := KindNamed("pump").Param("set_pressure").InText(); got != "set pressure (set_pressure)" {
		t.Errorf("in a text the set pressure is %q", got)
	}
	if got := KindNamed("cylinder").Param("rod").InText(); strings.Contains(got, "Rod") {
		t.Errorf("in a text the rod is %q", got)
	}
}

// inBrackets is what a finding may add in words of the file.
var inBrackets = regexp.MustCompile(`\([^()]*\)`)

// A finding names things in words; keys of the file stand in brackets. It is the literals of the calls that make one
// which are read here, for no set of wrong circuits meets all of them.
func TestFindingsSpeakOfTheTrade(t *testing.T) {
	files, err := parser.ParseDir(token.NewFileSet(), ".", nil, 0)
	if err != nil {
		t.Fatal(err)
	}
	read := 0
	for name, file := range files["circuit"].Files {
		if strings.HasSuffix(name, "_test.go") {
			continue
		}
		ast.Inspect(file, func(n ast.Node) bool {
			call, ok := n.(*ast.CallExpr)
			if !ok || !makesFinding(call) {
				return true
			}
			for _, a := range call.Args {
				lit, ok := a.(*ast.BasicLit)
				if !ok || lit.Kind != token.STRING {
					continue
				}
				text, _ := strconv.Unquote(lit.Value)
				if !strings.Contains(text, " ") || strings.Contains(text, "`barlitre ") {
					continue
				}
				read++
				if w := fileWord.FindString(inBrackets.ReplaceAllString(text, "")); w != "" {
					t.Errorf("%s: %q is a word of the file: %s", name, w, text)
				}
			}
			return true
		})
	}
	if read < 100 {
		t.Errorf("only %d texts of findings were read", read)
	}
}

func makesFinding(call *ast.CallExpr) bool {
	switch f := call.Fun.(type) {
	case *ast.Ident:
		return f.Name == "bad" || f.Name == "gateOf"
	case *ast.SelectorExpr:
		return f.Sel.Name == "say" || f.Sel.Name == "add" || f.Sel.Name == "or"
	}
	return false
}
