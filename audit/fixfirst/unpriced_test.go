package fixfirst_test

import (
	"context"
	"math"
	"strings"
	"testing"

	"barlitre/audit/fixfirst"
	"barlitre/machines/units"
)

// Where nothing that was found has a price, no saving of zero is shown: by the shift calendar of this sample the hours of
// waiting are not those of a duty alone.
func TestUnpricedIsNotZero(t *testing.T) {
	s := solve(t, asFound(parse(t, sources(t)["handling-machine"])))
	l, err := fixfirst.All(context.Background(), s, fixfirst.Options{})
	if err != nil {
		t.Fatal(err)
	}
	p := l[0].Page(units.Metric)
	if len(l[0].Steps) != 1 || l[0].Steps[0].Unpriced == "" {
		t.Fatalf("%+v", l[0].Steps)
	}
	if strings.Contains(p.Verdict, "less") || !strings.Contains(p.Verdict, "is not known") {
		t.Error(p.Verdict)
	}
	all := p.Rows[len(p.Rows)-1].Cells
	if e := all[len(all)-2]; !math.IsNaN(e.Value) || e.Text != "n/a" {
		t.Errorf("all cures save %+v", e)
	}
}
