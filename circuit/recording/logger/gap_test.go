package logger

import (
	"path/filepath"
	"regexp"
	"slices"
	"strings"
	"testing"

	"barlitre/machines/units"
)

// What is said of recordings keeps a number and its unit on one line, in whatever unit the recording is.
func TestCorrectionsKeepUnits(t *testing.T) {
	symbols := []string{"%", "mA", "V"}
	for d := units.Dim(0); d.Name() != "unknown quantity"; d++ {
		for _, u := range units.Units(d) {
			if s := u.Symbol; s != "" && !slices.Contains([]string{"in", "a", "at", "d", "r"}, s) {
				symbols = append(symbols, regexp.QuoteMeta(s), regexp.QuoteMeta(u.Label()))
			}
		}
	}
	slices.SortFunc(symbols, func(a, b string) int { return len(b) - len(a) })
	plain := regexp.MustCompile(`[0-9] (?:` + strings.Join(symbols, "|") + `)(?:[^\pL\pN]|$)`)
	said := 0
	for _, pattern := range []string{"testdata/foreign/*", "testdata/quirks/*", "testdata/odd/*"} {
		paths, err := filepath.Glob(pattern)
		if err != nil {
			t.Fatal(err)
		}
		for _, path := range paths {
			if strings.Contains(path, ".want.") || strings.Contains(path, ".told.") || strings.Contains(path, ".refused.") || strings.HasSuffix(path, ".md") {
				continue
			}
			rec, err := imported(t, path)
			var texts []string
			if err != nil {
				texts = append(texts, err.Error())
			} else {
				for _, c := range rec.Corrections {
					texts = append(texts, c.Text, c.Done) // a channel may be called "p1 min"
				}
			}
			for _, text := range texts {
				said++
				if w := plain.FindString(regexp.MustCompile(`"[^"]*"`).ReplaceAllString(text, "")); w != "" {
					t.Errorf("%s: %q in %s", path, w, text)
				}
			}
		}
	}
	if said < 100 {
		t.Errorf("only %d texts", said)
	}
}
