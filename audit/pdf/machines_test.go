package pdf

import (
	"strings"
	"testing"

	"barlitre/machines/units"
)

// Every circuit has its machines with the figures of the report, a map each of at most two, and what the fit leaves
// where a machine has measured points.
func TestMachinesArePrinted(t *testing.T) {
	s := solve(t, read(t))
	pages := lay(t, "press", s, Options{Date: day})
	from, to := pageOf(t, pages, Machines), pageOf(t, pages, Duty)
	got := everything(&recorders{pages: pages.pages[from : to+1]})
	for _, c := range s.Report(units.Metric).Circuits {
		if len(c.Machines) < 2 {
			t.Fatalf("%s has %d machines", c.Name, len(c.Machines))
		}
		for _, m := range c.Machines {
			if mean := m.Figures[2].Text; !strings.Contains(got, m.Block) || !strings.Contains(got, mean) {
				t.Errorf("%s: %s with %s is not printed", c.Name, m.Block, mean)
			}
		}
	}
	if n := strings.Count(got, "Efficiency of "); n < 2 || n > 4 {
		t.Errorf("%d maps", n)
	}
}
