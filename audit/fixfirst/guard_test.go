package fixfirst

import (
	"context"
	"strings"
	"testing"

	"barlitre/audit"
	"barlitre/samples"
)

// An error of the program in one price leaves the others as they are, alone and in order; here the cache is not there.
func TestErrorInOnePriceIsKeptThere(t *testing.T) {
	data, err := samples.Read("quayside-winch.yaml")
	if err != nil {
		t.Fatal(err)
	}
	f, _ := audit.Parse(data, nil, "")
	circuit := f.Circuits[0].Name
	l := &Ladder{Circuit: circuit, Class: map[Class]Saving{}, Steps: []*Step{{Finding: &Finding{Circuit: circuit, Cures: []Cure{{Set("RV1.crack", "300 bar")}}}}}}
	x, last := l.Steps[0], outcome{drawn: 1}
	if err := l.alone(context.Background(), f, last, nil, &meter{}); err != nil || !strings.Contains(x.Unpriced, "an error of its own") {
		t.Errorf("alone: %v, %q", err, x.Unpriced)
	}
	x.Unpriced = ""
	got, err := l.inOrder(context.Background(), f, last, nil, &meter{})
	if err != nil || !strings.Contains(x.Unpriced, "an error of its own") || got.drawn != 1 || len(l.Edits) != 0 {
		t.Errorf("in order: %v, %q, %+v, %v", err, x.Unpriced, got, l.Edits)
	}
}
