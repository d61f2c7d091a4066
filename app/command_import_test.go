package main

import (
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// A recording is read as it comes: the guess, both ends, what was found, the rate, the cycles
// and the text for an audit file are printed.
func TestImportOnTheCommandLine(t *testing.T) {
	path := "../circuit/recording/logger/testdata/quirks/10-missing-doubled-unordered.csv"
	code, out, errs := called("import", path, "-rows", "2", "-rate", "p1,q1", "-cycles", "v1", "-held", "p1", "-yaml")
	if code != exitOK {
		t.Fatalf("exit %d: %s", code, errs)
	}
	for _, want := range []string{"pressure in bar", "     2  0.000,85.0,65.00,16.8", "   146  14.900,115.0,55.37,76.1", "1 row out of order, line 53; sorted by time",
		"fit for energy", "cycles", "import: {encoding: UTF-8, separator: ',', decimal: .,", "sha256: 976ca431"} {
		if !strings.Contains(out, want) {
			t.Errorf("no %q in\n%s", want, out)
		}
	}
	if code, out, _ = called("import", path, "-choose", "out of order=drop"); code != exitOK || !strings.Contains(out, "left out [out of order = drop") {
		t.Errorf("exit %d:\n%s", code, out)
	}
}

// What cannot be read is refused in words, and a question is put with its answer's option.
func TestImportRefuses(t *testing.T) {
	dir := t.TempDir()
	prose := filepath.Join(dir, "letter.csv")
	if err := os.WriteFile(prose, []byte("Dear sir,\nno numbers here.\n"), 0o644); err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		args []string
		want string
	}{
		{[]string{prose}, "no rows of numbers were found"},
		{[]string{filepath.Join(dir, "none.csv")}, "no such file"},
		{nil, "name one recording"},
		{[]string{"../circuit/recording/logger/testdata/quirks/07-ambiguous-date.csv"}, "may have the day or the month first"},
		{[]string{"../circuit/recording/logger/testdata/quirks/06-cr.csv", "-rate", "p1,x"}, `has no channel "x"`},
		{[]string{"../circuit/recording/logger/testdata/quirks/06-cr.csv", "-answer", "order=dmy"}, "no question is open"},
	} {
		if code, _, errs := called(append([]string{"import"}, c.args...)...); code != exitUnreadable || !strings.Contains(errs, c.want) {
			t.Errorf("%v: exit %d: %s, want %q", c.args, code, errs, c.want)
		}
	}
	code, out, _ := called("import", "../circuit/recording/logger/testdata/quirks/07-ambiguous-date.csv")
	if code != exitUnreadable || !strings.Contains(out, "-answer \"order=") {
		t.Errorf("the question is not put:\n%s", out)
	}
	if code, _, errs := called("import", "../circuit/recording/logger/testdata/quirks/07-ambiguous-date.csv", "-answer", "order=mdy"); code != exitOK {
		t.Errorf("answered: exit %d, %s", code, errs)
	}
}

// What only the owner knows of a recording is told in a file, or as an answer to a question.
func TestImportIsTold(t *testing.T) {
	dir := "../circuit/recording/logger/testdata/foreign/"
	code, out, errs := called("import", dir+"pressa_riavvio.csv", "-told", dir+"pressa_riavvio.told.yaml")
	out = strings.Join(strings.Fields(out), " ")
	if code != exitOK || !strings.Contains(out, "after the pauses that the recipe tells, 42 7.5 s") {
		t.Errorf("exit %d, %s\n%s", code, errs, out)
	}
	signals := []string{"import", dir + "winde_mA_ohne_bereich.csv", "-answer", "Kanal 1: scaling=0 to 250 bar", "-answer", "Kanal 2: scaling=mA"}
	if code, out, _ = called(signals...); code != exitUnreadable || !strings.Contains(out, `-answer "Kanal 3: scaling=`) {
		t.Errorf("exit %d\n%s", code, out)
	}
	if code, out, errs = called(append(signals, "-answer", "Kanal 3: scaling=-20 to +120 °C")...); code != exitOK || !strings.Contains(out, "-20 to 120 C") && !strings.Contains(out, "for -20 to 120") {
		t.Errorf("exit %d, %s\n%s", code, errs, out)
	}
	bad := filepath.Join(t.TempDir(), "told.yaml")
	if err := os.WriteFile(bad, []byte("recipe: {pause: 3}\n"), 0o644); err != nil {
		t.Fatal(err)
	}
	if code, _, errs = called("import", dir+"pressa_riavvio.csv", "-told", bad); code != exitUnreadable || !strings.Contains(errs, "pause") || !strings.Contains(errs, "told.yaml") {
		t.Errorf("exit %d, %s", code, errs)
	}
}
