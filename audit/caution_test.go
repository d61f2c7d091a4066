package audit

import (
	"context"
	"strings"
	"testing"
	"unicode"

	"barlitre/circuit"
)

// Cautions are sentences, those that come from the check of a circuit as well.
func TestCautionsAreSentences(t *testing.T) {
	for _, c := range []struct{ block, text, want string }{
		{"C1", "C1: a load stands on the pump alone", "A load stands on the pump alone."},
		{"C1", "C10: a load stands", "C10: a load stands."},
		{"", "öl runs out. ", "Öl runs out."},
		{"", "", ""},
	} {
		if got := sentence(circuit.Finding{Block: c.block, Text: c.text}); got != c.want {
			t.Errorf("%q becomes %q, want %q", c.text, got, c.want)
		}
	}
	f, _ := Read("pdf/testdata/press.yaml")
	if f == nil {
		t.Fatal("press.yaml cannot be read")
	}
	s, err := Solve(context.Background(), f, Options{})
	if err != nil {
		t.Fatal(err)
	}
	drawn := 0
	for _, c := range s.Cautions() {
		if c.Topic == "As drawn" {
			drawn++
			if strings.HasPrefix(c.Text, c.Block+":") || strings.IndexFunc(c.Text, unicode.IsUpper) != 0 {
				t.Errorf("caution on %s begins %q", c.Block, c.Text)
			}
		}
		if !strings.HasSuffix(c.Text, ".") {
			t.Errorf("%s: %q has no full stop", c.Topic, c.Text)
		}
	}
	if drawn < 3 {
		t.Errorf("%d cautions as drawn, want 3 of the two sides of the cylinder and its valve at the least", drawn)
	}
}
