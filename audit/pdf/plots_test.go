package pdf

import (
	"strings"
	"testing"
)

// A course at zero throughout is told in words, every other one is drawn.
func TestCoursesAtZeroAreToldInWords(t *testing.T) {
	s := solve(t, read(t))
	d := s.File.Duties[0]
	tracks := len(d.Tracks)
	l := newLayout(s, Options{Date: day})
	l.choose()
	lanes, zero := l.asked(0)
	if len(lanes) != tracks || len(zero) != 0 {
		t.Fatalf("%d lanes and %q of %d tracks that move", len(lanes), zero, tracks)
	}
	clear(d.Tracks[tracks-1].Values)
	flat := d.Tracks[tracks-1].Of + " " + d.Tracks[tracks-1].What.String()
	lanes, zero = l.asked(0)
	if len(lanes) != tracks-1 || len(zero) != 1 || zero[0] != flat {
		t.Errorf("%d lanes and %q, want %d and %q", len(lanes), zero, tracks-1, flat)
	}
	pages := &recorders{}
	l.print(pages)
	if !strings.Contains(everything(pages), "At zero throughout: "+flat) {
		t.Error("no page names the course at zero")
	}
}
