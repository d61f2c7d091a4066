package frame

import (
	"errors"
	"testing"
	"time"

	"barlitre/audit"
)

// A message stays while it is read, and goes with the next action: an edit, another
// selection, duty or station; the message of that action itself stays.
func TestMessageGoesWithTheNextAction(t *testing.T) {
	b := newBench(t)
	b.Open("")
	b.solved()
	edit := func() {
		err := b.doc.Edit("Rename", func(f *audit.File) error { return f.Set("As found/RV1.crack", "201 bar") })
		if err != nil {
			t.Fatal(err)
		}
		b.drain()
	}
	for name, act := range map[string]func(){
		"a selection": func() { b.Select(0, "RV1") },
		"no block":    func() { b.Select(-1, "") },
		"a station":   func() { b.show(1) },
		"an edit":     edit,
		"undo":        func() { b.doc.Undo(); b.drain() },
	} {
		if name == "undo" || name == "no block" {
			edit()
			b.Select(0, "P1")
		}
		b.Say("told just now")
		act()
		if b.status.Text != "told just now" {
			t.Errorf("%s takes its own message away: %q", name, b.status.Text)
		}
		b.show(0)
		b.doc.Undo()
		b.drain()
		b.Select(-1, "")
		if name == "undo" || name == "no block" {
			edit()
			b.Select(0, "P1")
		}
		b.Say("told before")
		b.status.said = b.status.said.Add(-2 * time.Second)
		act()
		if b.status.Text != "" {
			t.Errorf("after %s the line still says %q", name, b.status.Text)
		}
		b.show(0)
	}
}

// Without an action a message goes after a while; one that came later stays.
func TestMessageFades(t *testing.T) {
	if short, long := readingTime("Saved", false), readingTime("A message of some length, which takes longer to read", false); short < 5*time.Second || long <= short {
		t.Errorf("a short message stays %v, a long one %v", short, long)
	}
	if readingTime("no", true) < 30*time.Second {
		t.Error("what went wrong goes too soon")
	}
	b := newBench(t)
	b.Say("first")
	if b.status.fade == nil {
		t.Fatal("nothing takes the message away")
	}
	b.status.fade.Reset(time.Millisecond)
	b.until("the message is gone", func() bool { return b.status.Text == "" })
	b.Say("first")
	b.status.fade.Reset(time.Millisecond)
	waiting := <-b.queue
	b.Say("second")
	waiting()
	if b.status.Text != "second" {
		t.Errorf("the first message takes %q away", b.status.Text)
	}
	b.Fail(errors.New("no"))
	b.status.acted(time.Now().Add(time.Hour))
	if b.status.Text != "" {
		t.Errorf("a failure still stands: %q", b.status.Text)
	}
}
