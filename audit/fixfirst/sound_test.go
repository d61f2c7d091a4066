package fixfirst_test

import (
	"context"
	"testing"

	"barlitre/audit/fixfirst"
)

// drawnSo are the starters that show a waste on purpose: their own text tells of it. What is found there is no false alarm.
var drawnSo = map[string]string{
	"throttled-constant-flow": "RV1: unloading at pressure", // "nothing unloads it: the whole flow leaves over RV1"
}

// The samples and starters are sound: nothing is found in them but what their own text tells of.
func TestSound(t *testing.T) {
	for name, data := range sources(t) {
		t.Run(name, func(t *testing.T) {
			found := faults(solve(t, asFound(parse(t, data))))
			if want := drawnSo[name]; want != "" && len(found) != 1 {
				t.Errorf("found %d, want %s", len(found), want)
			}
			for _, f := range found {
				if f.Name() != drawnSo[name] {
					t.Errorf("%s: %s %v", f.Name(), f.Text, f.Evidence)
				}
			}
		})
	}
}

// Where a duty waits and the motor runs, that is a habit with a price, and no fault; where the motor is switched off it is not
// named. Its price is what the duty draws by the ledger.
func TestRunsIdle(t *testing.T) {
	for _, rest := range []string{"keep", "stop"} {
		f := asFound(parse(t, sources(t)["quayside-winch"]))
		if err := f.Set("As found/pump_at_rest", rest); err != nil {
			t.Fatal(err)
		}
		s := solve(t, asFound(f))
		l, err := fixfirst.All(context.Background(), s, fixfirst.Options{})
		if err != nil {
			t.Fatal(err)
		}
		var got *fixfirst.Step
		for _, x := range l[0].Steps {
			if x.Rule == "pump kept running idle" {
				got = x
			}
		}
		if (got != nil) != (rest == "keep") {
			t.Fatalf("%s: %+v", rest, got)
		}
		if got == nil {
			continue
		}
		want := s.Circuits[0].Year.Duties[1].Drawn
		if !got.Habit || got.Class != fixfirst.StopStart || !near(got.Alone.Energy, want, want) {
			t.Errorf("%+v, the duty draws %g J", got, want)
		}
	}
}
