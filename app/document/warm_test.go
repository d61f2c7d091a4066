package document

import (
	"testing"
	"time"

	"barlitre/audit"
	"barlitre/machines/units"
	"barlitre/samples"
)

// The energy is there first, without any oil temperature; then both, and the energy of both is that of a solve in one go.
func TestEnergyBeforeTemperatures(t *testing.T) {
	b := newBench(t, audit.SolveEnergy, Options{})
	b.openPress(t)
	b.events.wait(t, Solved, b.Revision())
	b.events.wait(t, Warmed, b.Revision())
	s, revision := b.Solution()
	if s.Pending || b.Warming() || revision != b.Revision() {
		t.Fatalf("pending %t, warming %t, revision %d", s.Pending, b.Warming(), revision)
	}
	whole, err := audit.Solve(t.Context(), b.File(), audit.Options{})
	check(t, err)
	for i, c := range s.Circuits {
		w := whole.Circuits[i]
		if c.Year.Drawn != w.Year.Drawn || c.Money.Net() != w.Money.Net() || (c.Warmth == nil) != (w.Warmth == nil) {
			t.Errorf("%s: %v in stages, %v at once", c.Circuit.Name, c.Year.Drawn, w.Year.Drawn)
		}
	}
}

// What an edit finds of the stage before: no temperature of the drawing before, the fan booked as it was. That of the proposal
// does not run at all: its oil stays too cold.
func TestFirstStage(t *testing.T) {
	text, err := samples.Read(press)
	check(t, err)
	f, _ := audit.Parse(text, nil, "")
	warm, err := audit.Solve(t.Context(), f, audit.Options{})
	check(t, err)
	cold, err := audit.SolveEnergy(t.Context(), f, audit.Options{Before: warm})
	check(t, err)
	alone, err := audit.SolveEnergy(t.Context(), f, audit.Options{})
	check(t, err)
	if !cold.Pending || len(cold.Report(units.Metric).Warmth) > 0 {
		t.Error("the first stage has temperatures")
	}
	if !cold.EnergyMayChange() {
		t.Error("the thermostat of the sample switches its fan")
	}
	for i, c := range cold.Circuits {
		w, a := warm.Circuits[i].Year.Drawn.Total(), alone.Circuits[i].Year.Drawn.Total()
		if got := c.Year.Drawn.Total(); got != w || a > w || i == 0 && a == w || c.Warmth != nil {
			t.Errorf("%s draws %g at first, %g in the end, %g without a fan", c.Circuit.Name, got, w, a)
		}
	}
}

// The next edit, and a cancel, end the second stage; closing does not wait for it.
func TestSecondStageEnds(t *testing.T) {
	b := newBench(t, audit.SolveEnergy, Options{})
	b.openPress(t)
	b.events.wait(t, Solved, b.Revision())
	for range 3 {
		check(t, b.Set("As found/RV1.crack", "231 bar"))
		check(t, b.Set("As found/RV1.crack", "230 bar"))
	}
	b.events.wait(t, Warmed, b.Revision())
	check(t, b.Set("As found/RV1.crack", "232 bar"))
	b.events.wait(t, Solved, b.Revision())
	b.CancelSolve()
	if s, _ := b.Solution(); b.Warming() {
		t.Errorf("cancelled and still at it, pending %t", s.Pending)
	}
	b.Resolve()
	for end := time.Now().Add(30 * time.Second); ; time.Sleep(5 * time.Millisecond) {
		if s, _ := b.Solution(); b.Current() && !s.Pending {
			break
		}
		if time.Now().After(end) {
			t.Fatal("no temperatures after a second try")
		}
	}
}
