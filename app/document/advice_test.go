package document

import (
	"testing"
	"time"

	"barlitre/audit"
	"barlitre/machines/units"
)

func waitAdvised(t *testing.T, d *Document) *Advice {
	t.Helper()
	for end := time.Now().Add(60 * time.Second); time.Now().Before(end); time.Sleep(5 * time.Millisecond) {
		if a, current := d.Advice(); current {
			return a
		}
	}
	t.Fatal("no advice in 60 s")
	return nil
}

// Advice is made once asked for, belongs to a solution, and is made anew for the next.
func TestAdviceFollowsTheSolution(t *testing.T) {
	d := New(Options{})
	defer d.Abandon()
	if err := d.OpenSample("quayside-winch.yaml"); err != nil {
		t.Fatal(err)
	}
	solved := func() {
		for end := time.Now().Add(60 * time.Second); !d.Current() || d.Warming(); time.Sleep(2 * time.Millisecond) {
			if time.Now().After(end) {
				t.Fatal("not solved in 60 s")
			}
		}
	}
	solved()
	if a, _ := d.Advice(); a != nil {
		t.Error("there is advice that nobody asked for")
	}
	d.Advise(units.Metric)
	first := waitAdvised(t, d)
	if len(first.Ladders) != 1 || first.Ladders[0].Faults() != 0 || len(first.Plans) != 1 {
		t.Errorf("%+v", first)
	}
	if err := d.Edit("Lower", func(f *audit.File) error { return f.Set("As found/RV1.crack", "200 bar") }); err != nil {
		t.Fatal(err)
	}
	solved()
	if _, current := d.Advice(); current {
		t.Error("advice on the drawing before counts as present")
	}
	d.Advise(units.Metric)
	if second := waitAdvised(t, d); second.Ladders[0].Faults() != 1 {
		t.Errorf("%d faults", second.Ladders[0].Faults())
	}
	d.Advise(units.Metric)
	if running, _, _, _ := d.Advising(); running {
		t.Error("what is there is made again")
	}
}

// Closing gives up what is being made and does not wait for all of it.
func TestCloseGivesUpAdvice(t *testing.T) {
	d := New(Options{})
	if err := d.OpenSample("transfer-station.yaml"); err != nil {
		t.Fatal(err)
	}
	for end := time.Now().Add(60 * time.Second); !d.Current() || d.Warming(); time.Sleep(2 * time.Millisecond) {
		if time.Now().After(end) {
			t.Fatal("not solved in 60 s")
		}
	}
	d.Advise(units.Metric)
	if err := d.Abandon(); err != nil {
		t.Fatal(err)
	}
	if running, _, _, _ := d.Advising(); running {
		t.Error("it is still being made")
	}
}
