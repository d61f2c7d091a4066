package duty

import (
	"testing"

	"barlitre/app/station/stationtest"
)

// No text over several lines parts a number from its unit at the end of a line.
func TestUnitsStayWithTheirNumbers(t *testing.T) {
	f, _ := shown(t, sample(t, "baling-press.yaml"), nil)
	held, parting := stationtest.Units(f.Win.Content())
	if held == 0 || len(parting) > 0 {
		t.Errorf("%d texts with units; these may part from their numbers: %q", held, parting)
	}
}
