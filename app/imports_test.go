package main

import (
	"go/ast"
	"go/parser"
	"go/token"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"
)

// arrow is what a folder may import of ours, and of the world outside the
// standard library. The map is the one in DEVELOPERS.md.
type arrow struct {
	ours    []string // folders, with all below when they end in /...
	outside []string // module path prefixes
}

var arrows = map[string]arrow{
	"machines/units":             {},
	"assets":                     {},
	"machines":                   {ours: []string{"machines/units"}, outside: []string{"gonum.org/v1/gonum"}},
	"circuit/balance":            {outside: []string{"gonum.org/v1/gonum"}},
	"circuit/duty":               {ours: []string{"machines/units"}},
	"circuit/recording":          {ours: []string{"machines/units"}},
	"circuit/recording/logger":   {ours: []string{"machines/units"}, outside: []string{"golang.org/x/text", "gopkg.in/yaml.v3"}},
	"circuit/recording/channels": {ours: []string{"machines/units"}},
	"circuit/recording/rate":     {ours: []string{"machines/units"}},
	"circuit/recording/cycles":   {outside: []string{"gonum.org/v1/gonum"}},
	"circuit/logged":             {ours: []string{"circuit/duty", "circuit/recording/...", "machines/units"}},
	"circuit/recording/align":    {ours: []string{"machines/units"}, outside: []string{"gonum.org/v1/gonum"}},
	"circuit/drawing":            {ours: []string{"machines/units"}},
	"circuit":                    {ours: []string{"circuit/balance", "circuit/duty", "circuit/drawing", "machines", "machines/units"}, outside: []string{"gopkg.in/yaml.v3"}},
	"samples":                    {ours: []string{"audit", "circuit"}}, // tests only: the samples are data
	"audit/pen":                  {ours: []string{"assets"}, outside: []string{"github.com/jung-kurt/gofpdf", "golang.org/x/image"}},
	"audit/figures":              {ours: []string{"audit", "circuit", "audit/pen", "machines/units", "circuit/...", "audit/calendar", "audit/thermal"}},
	"audit/pdf":                  {ours: []string{"audit", "circuit", "audit/pen", "audit/figures", "machines/units", "circuit/...", "audit/calendar", "audit/thermal", "audit/fixfirst", "audit/sitecheck"}, outside: []string{"github.com/jung-kurt/gofpdf"}},
	"audit":                      {ours: []string{"circuit", "circuit/...", "machines", "machines/units", "audit/thermal", "audit/calendar", "audit/whole"}, outside: []string{"gonum.org/v1/gonum", "gopkg.in/yaml.v3"}},
	"app/document":               {ours: []string{"audit", "audit/...", "circuit", "circuit/...", "machines", "machines/units", "samples"}},
	"app":                        {ours: []string{"..."}, outside: []string{"fyne.io/fyne/v2", "github.com/go-gl/glfw"}},
	"audit/calendar":             {},
	"audit/whole":                {},
	"audit/thermal":              {outside: []string{"gonum.org/v1/gonum"}},
	"audit/look":                 {ours: []string{"audit", "circuit", "machines/units"}},
	"audit/fixfirst":             {ours: []string{"audit", "audit/calendar", "audit/look", "circuit", "machines", "machines/units"}},
	"audit/sitecheck":            {ours: []string{"audit", "audit/fixfirst", "audit/look", "circuit", "machines/units"}},
	"audit/cure":                 {ours: []string{"audit", "circuit", "audit/figures", "machines/units"}},
}

// forbidden are packages and calls that would make a result hang on the moment or the machine.
var pure = []string{"machines", "circuit", "audit"}

func TestArrows(t *testing.T) {
	walk(t, func(dir, path string, f *ast.File) {
		rule, ok := ruleFor(dir)
		if !ok {
			t.Errorf("%s: folder %s has no rule; add one to the map of arrows here and in DEVELOPERS.md", path, dir)
			return
		}
		test := strings.HasSuffix(path, "_test.go")
		for _, im := range f.Imports {
			name, _ := strconv.Unquote(im.Path.Value)
			switch {
			case strings.HasPrefix(name, "barlitre/"):
				to := strings.TrimPrefix(name, "barlitre/")
				if to != dir && !allowed(rule.ours, to) && !(test && testMay(dir, to)) {
					t.Errorf("%s imports %s: %s may import only %v", path, name, dir, rule.ours)
				}
			case strings.Contains(strings.Split(name, "/")[0], "."):
				if !slices.ContainsFunc(rule.outside, func(p string) bool { return name == p || strings.HasPrefix(name, p+"/") }) && !test {
					t.Errorf("%s imports %s: %s may use only %v from outside", path, name, dir, rule.outside)
				}
			case !test && isPure(dir) && (name == "log" || strings.HasPrefix(name, "log/") || name == "net" || strings.HasPrefix(name, "net/")):
				t.Errorf("%s imports %s: no log and no network in %s", path, name, dir)
			}
		}
	})
}

// testMay lets tests below audit look at samples and trials.
func testMay(dir, to string) bool {
	return isPure(dir) && dir != "machines/units" && (to == "samples" || strings.HasPrefix(to, "machines") || strings.HasPrefix(to, "circuit") && !strings.HasPrefix(dir, "machines"))
}

func TestNoClock(t *testing.T) {
	walk(t, func(dir, path string, f *ast.File) {
		if !isPure(dir) || strings.HasSuffix(path, "_test.go") {
			return
		}
		ast.Inspect(f, func(n ast.Node) bool {
			if s, ok := n.(*ast.SelectorExpr); ok {
				if x, ok := s.X.(*ast.Ident); ok && x.Name == "time" && (s.Sel.Name == "Now" || s.Sel.Name == "Since") {
					t.Errorf("%s reads the clock; let the caller give the date", path)
				}
			}
			return true
		})
	})
}

// TestTopLevel keeps the house as it is: a new room needs a decision.
func TestTopLevel(t *testing.T) {
	want := []string{"app", "assets", "audit", "circuit", "machines", "samples", "go.mod", "go.sum", "FyneApp.toml", "README.md", "DEVELOPERS.md", "LICENSE"}
	entries, err := os.ReadDir("..")
	if err != nil {
		t.Fatal(err)
	}
	for _, e := range entries {
		if !strings.HasPrefix(e.Name(), ".") && !slices.Contains(want, e.Name()) && e.Name() != "out" {
			t.Errorf("%s is not part of the house", e.Name())
		}
	}
}

func isPure(dir string) bool {
	return slices.ContainsFunc(pure, func(p string) bool { return dir == p || strings.HasPrefix(dir, p+"/") })
}

func ruleFor(dir string) (arrow, bool) {
	for d := dir; d != "."; d = filepath.ToSlash(filepath.Dir(d)) {
		if r, ok := arrows[d]; ok && (d == dir || d == "app") {
			return r, true
		}
	}
	return arrow{}, false
}

func allowed(list []string, to string) bool {
	return slices.ContainsFunc(list, func(p string) bool {
		below, tree := strings.CutSuffix(p, "...")
		return p == to || tree && strings.HasPrefix(to, below)
	})
}

func walk(t *testing.T, visit func(dir, path string, f *ast.File)) {
	t.Helper()
	fset := token.NewFileSet()
	files := 0
	err := filepath.WalkDir("..", func(path string, e fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		if e.IsDir() && e.Name() != ".." && (strings.HasPrefix(e.Name(), ".") || e.Name() == "testdata" || e.Name() == "out") {
			return filepath.SkipDir
		}
		if !strings.HasSuffix(path, ".go") {
			return nil
		}
		f, err := parser.ParseFile(fset, path, nil, 0)
		if err != nil {
			return err
		}
		files++
		dir, err := filepath.Rel("..", filepath.Dir(path))
		visit(filepath.ToSlash(dir), path, f)
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	if files < 50 {
		t.Fatalf("only %d files found; the test looks in the wrong place", files)
	}
}
