package intake

import (
	"testing"

	"fyne.io/fyne/v2"

	"barlitre/app/station/stationtest"
)

// No text over several lines parts a number from its unit at the end of a line, on any page of a recording.
func TestUnitsStayWithTheirNumbers(t *testing.T) {
	t.Cleanup(Inline())
	c := stationtest.New(t, "")
	p := New(c)
	p.Leave = func() {}
	if err := p.Open("../../../samples/recordings/press-shift.csv"); err != nil {
		t.Fatal(err)
	}
	c.Win.SetContent(p.Content())
	c.Win.Resize(fyne.NewSize(1200, 900))
	held := 0
	for i := range p.tabs {
		p.open(i)
		n, parting := stationtest.Units(c.Win.Content())
		if held += n; len(parting) > 0 {
			t.Errorf("page %d: these may part from their numbers: %q", i, parting)
		}
	}
	if held == 0 {
		t.Error("no text with a unit was seen")
	}
}
