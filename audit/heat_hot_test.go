package audit

import (
	"strings"
	"testing"

	"barlitre/circuit"
)

// A cooler of next to nothing: hotter than any oil stands is said once, as a warning, and no saving
// is worked out there.
func TestHotterThanOilStands(t *testing.T) {
	s := sampleWith(t, "baling-press.yaml", map[string]string{"heat.cooler_rate": "0.001 kW/K", "heat.tank_volume": "40 L"})
	if ran := s.Circuits[0].Warmth.Week.Ran; !(ran > mostOil) {
		t.Fatalf("runs at %g K only", ran)
	}
	warned := 0
	for _, f := range s.warmthRemarks(s.Circuits[0]) {
		if f.Level == circuit.Warns && strings.Contains(f.Text, "no oil stands more than 120") {
			warned++
		}
	}
	if warned != 1 {
		t.Errorf("warned %d times: %v", warned, s.warmthRemarks(s.Circuits[0]))
	}
	for _, c := range s.Comparisons {
		if text, stands := s.oilText(printer{}, c); stands || !strings.Contains(text, "hotter than any oil stands") {
			t.Errorf("says %q", text)
		}
	}
}
