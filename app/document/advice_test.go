package document

import (
	"sync"
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

// waitWarm waits until the present revision is solved, with its oil temperatures.
func waitWarm(t *testing.T, d *Document) {
	t.Helper()
	for end := time.Now().Add(60 * time.Second); !d.Current() || d.Warming(); time.Sleep(2 * time.Millisecond) {
		if time.Now().After(end) {
			t.Fatal("not solved in 60 s")
		}
	}
}

// Advice is made once asked for, belongs to a solution, and is made anew for the next.
func TestAdviceFollowsTheSolution(t *testing.T) {
	d := New(Options{})
	defer d.Abandon()
	if err := d.OpenSample("quayside-winch.yaml"); err != nil {
		t.Fatal(err)
	}
	waitWarm(t, d)
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
	waitWarm(t, d)
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
	waitWarm(t, d)
	d.Advise(units.Metric)
	if err := d.Abandon(); err != nil {
		t.Fatal(err)
	}
	if running, _, _, _ := d.Advising(); running {
		t.Error("it is still being made")
	}
}

// An edit gives up advice on the drawing before it, and no advice comes of that.
func TestEditGivesUpAdvice(t *testing.T) {
	var mu sync.Mutex
	advised := 0
	d := New(Options{Notify: func(e Event) {
		mu.Lock()
		defer mu.Unlock()
		if e.Kind == Advised {
			advised++
		}
	}})
	defer d.Abandon()
	if err := d.OpenSample("transfer-station.yaml"); err != nil {
		t.Fatal(err)
	}
	waitWarm(t, d)
	d.Advise(units.Metric)
	d.mu.Lock()
	made := d.advice.asked
	d.mu.Unlock()
	if made == nil {
		t.Fatal("no advice is being made")
	}
	if err := d.Edit("Lower", func(f *audit.File) error { return f.Set("As found/RV1.crack", "150 bar") }); err != nil {
		t.Fatal(err)
	}
	if running, _, _, _ := d.Advising(); running || made.ctx.Err() == nil {
		t.Errorf("after an edit advice is still being made: %v, %v", running, made.ctx.Err())
	}
	if d.AdviceFollows() { // else it was solved already
		d.Advise(units.Metric)
		if running, _, _, _ := d.Advising(); running && d.AdviceFollows() {
			t.Error("advice on the drawing before is made while the edited one is solved")
		}
	}
	waitWarm(t, d)
	mu.Lock()
	defer mu.Unlock()
	if a, _ := d.Advice(); a != nil || advised != 0 {
		t.Errorf("advice on a drawing that is gone: %v, told %d times", a, advised)
	}
}
