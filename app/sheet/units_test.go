package sheet

import (
	"testing"

	"barlitre/app/station/stationtest"
)

// No text of the panel parts a number from its unit at the end of a line, whatever is selected.
func TestUnitsStayWithTheirNumbers(t *testing.T) {
	b := newBench(t, press, window)
	held := 0
	for _, block := range []string{"", "P1", "RV1", "C1", "M1"} {
		b.Select(0, block)
		n, parting := stationtest.Units(b.win.Content())
		if held += n; len(parting) > 0 {
			t.Errorf("with %q selected: these may part from their numbers: %q", block, parting)
		}
	}
	if held == 0 {
		t.Error("no text with a unit was seen")
	}
}
