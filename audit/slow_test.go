package audit_test

import (
	"context"
	"math"
	"testing"

	"barlitre/audit"
)

// C6 repeats after 24 s, two cycles, which the program finds; its figures are the
// average over that period (trial circuit C6, described with this period).
func TestAccumulatorAveragesItsPeriod(t *testing.T) {
	f := parsed(t, text(t, "trials/c6.yaml"))
	s, err := audit.Solve(context.Background(), f, audit.Options{})
	if err != nil {
		t.Fatal(err)
	}
	d := s.Circuits[0].Duties[0]
	if d.Balance == nil {
		t.Fatal(s.Circuits[0].Findings)
	}
	if d.Cycles != 2 || s.Result().Circuits[0].Duties[0].CyclesAveraged != 2 {
		t.Errorf("%d cycles averaged, want 2", d.Cycles)
	}
	if math.Abs(d.Balance.Cycle-12) > 1e-9 {
		t.Errorf("the cycle lasts %g s, want 12 s", d.Balance.Cycle)
	}
	if c := d.Balance.Closure(); c > 1e-9 || d.Certificate.Unbalanced > 0 {
		t.Errorf("closure %g, %d unbalanced", c, d.Certificate.Unbalanced)
	}
	// Work at the load is that of C1: the same duty.
	if w := d.Balance.WorkPositive().Total(); math.Abs(w-5129.70) > 0.5e-3*5129.70 {
		t.Errorf("work %g J, want 5129.70 J", w)
	}
	// The pump runs loaded only part of the time: unloaded it turns 3 bar over.
	un := 0.0
	for _, l := range d.Balance.Losses {
		if l.Block == "UV1" && l.Kind == "unloaded circulation" {
			un = l.Energy.Total()
		}
	}
	if un <= 0 {
		t.Error("the pump is never unloaded")
	}
}
