package recording

import (
	"go/ast"
	"go/parser"
	"go/token"
	"io/fs"
	"path/filepath"
	"regexp"
	"slices"
	"strconv"
	"strings"
	"testing"

	"barlitre/machines/units"
)

// words are symbols of units that are words of English as well.
var words = []string{"in", "a", "at", "d", "r", "day", "days", "hours", "year", "years"}

// plainGap finds a number, or a verb that writes one, with a plain space before its unit: there a line may break.
func plainGap() *regexp.Regexp {
	symbols := []string{"%%", "Hz", "kHz", "mA", "V", "°C"}
	for d := units.Dim(0); d.Name() != "unknown quantity"; d++ {
		for _, u := range units.Units(d) {
			for _, s := range []string{u.Symbol, u.Label()} {
				if s != "" && !slices.Contains(words, s) {
					symbols = append(symbols, regexp.QuoteMeta(s))
				}
			}
		}
	}
	slices.SortFunc(symbols, func(a, b string) int { return len(b) - len(a) })
	return regexp.MustCompile(`(?:[0-9]|%[-+#0-9.]*[a-z]) (?:` + strings.Join(symbols, "|") + `)(?:[^\pL\pN]|$)`)
}

// typed is what a user writes: it has a plain space, as files have.
var typed = regexp.MustCompile(`"[^"]*"`)

// A number and its unit stand together in all texts about recordings, as in the rest of the program. It is the literals
// of the code that are read here, for no set of recordings meets all of them.
func TestUnitsStandAtTheirNumbers(t *testing.T) {
	gap, read := plainGap(), 0
	if !gap.MatchString("lasts %.4g s only") || !gap.MatchString("4 to 20 mA") || !gap.MatchString("10 %% of") || gap.MatchString("%d in all") || gap.MatchString("2\u202fs") || gap.MatchString("%d steps") {
		t.Fatalf("%s does not find what it should", gap)
	}
	for _, root := range []string{".", "../logged"} {
		err := filepath.WalkDir(root, func(path string, e fs.DirEntry, err error) error {
			if err != nil || e.IsDir() || !strings.HasSuffix(path, ".go") || strings.HasSuffix(path, "_test.go") {
				return err
			}
			file, err := parser.ParseFile(token.NewFileSet(), path, nil, 0)
			if err != nil {
				return err
			}
			ast.Inspect(file, func(n ast.Node) bool {
				if call, ok := n.(*ast.CallExpr); ok && readsTyped(call) {
					return false
				}
				lit, ok := n.(*ast.BasicLit)
				if !ok || lit.Kind != token.STRING {
					return true
				}
				read++
				text, _ := strconv.Unquote(lit.Value)
				if w := gap.FindString(typed.ReplaceAllString(text, "")); w != "" {
					t.Errorf("%s: %q in %q", path, w, text)
				}
				return true
			})
			return nil
		})
		if err != nil {
			t.Fatal(err)
		}
	}
	if read < 1000 {
		t.Errorf("only %d texts were read", read)
	}
}

// readsTyped reports whether a call reads what a user or a file wrote.
func readsTyped(call *ast.CallExpr) bool {
	switch f := call.Fun.(type) {
	case *ast.Ident:
		return f.Name == "scalingIn"
	case *ast.SelectorExpr:
		return f.Sel.Name == "Sscanf"
	}
	return false
}
