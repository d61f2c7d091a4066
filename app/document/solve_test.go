package document

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"strings"
	"sync/atomic"
	"testing"
	"time"

	"barlitre/audit"
	"barlitre/circuit"
)

// gate is a solver that waits to be let through and does as it is told.
type gate struct {
	begun chan int // number of the call
	let   chan error
	calls int
}

func newGate() *gate { return &gate{begun: make(chan int, 100), let: make(chan error)} }

var errPanic = errors.New("panic")

func (g *gate) solve(ctx context.Context, f *audit.File, opt audit.Options) (*audit.Solution, error) {
	g.calls++
	g.begun <- g.calls
	opt.Progress(1, 4)
	select {
	case err := <-g.let:
		if err == errPanic {
			panic("index out of range")
		}
		return &audit.Solution{File: f}, err
	case <-ctx.Done():
		return nil, ctx.Err()
	}
}

func TestEditEndsSolve(t *testing.T) {
	g := newGate()
	b := newBench(t, g.solve, Options{})
	b.openPress(t)
	<-g.begun
	for i := range 5 {
		check(t, b.Set("As found/RV1.crack", fmt.Sprintf("%d bar", 231+i%4)))
		if running, _, _ := b.Solving(); !running {
			t.Error("not solving after an edit")
		}
	}
	revision := b.Revision()
	for done := false; !done; { // those before were ended; only the latest is waiting to be let through
		select {
		case <-g.begun:
		case g.let <- nil:
			done = true
		}
	}
	if e := b.events.wait(t, Solved, 1); e.Revision != revision {
		t.Errorf("solved revision %d, want %d", e.Revision, revision)
	}
	if _, got := b.Solution(); got != revision || !b.Current() {
		t.Errorf("solution of %d, want %d", got, revision)
	}
	b.Undo()
	if b.Current() {
		t.Error("the former solution passes for that of the undone text")
	}
}

func TestCancelAndResolve(t *testing.T) {
	g := newGate()
	b := newBench(t, g.solve, Options{})
	b.openPress(t)
	<-g.begun
	b.events.wait(t, Solving, b.Revision())
	if running, done, total := b.Solving(); !running || done != 1 || total != 4 {
		t.Errorf("solving %v, %d of %d", running, done, total)
	}
	b.CancelSolve()
	b.events.wait(t, SolveCancelled, b.Revision())
	if running, _, _ := b.Solving(); running || b.Current() || b.Failure() != nil {
		t.Error("still solving, or failed")
	}
	b.CancelSolve() // nothing to cancel
	b.Resolve()
	<-g.begun
	g.let <- nil
	b.events.wait(t, Solved, b.Revision())
	b.Resolve()
	<-g.begun
	g.let <- nil
	for b.solvingNow() {
		time.Sleep(time.Millisecond)
	}
	n := 0
	for _, e := range b.events.all() {
		if e.Kind == SolveCancelled {
			n++
		}
	}
	if n != 1 || !b.Current() {
		t.Errorf("%d cancelled, current %v", n, b.Current())
	}
}

func (b *bench) solvingNow() bool { running, _, _ := b.Solving(); return running }

// A panic and an error of the solver are events; the next edit is solved again.
func TestSolverFails(t *testing.T) {
	g := newGate()
	b := newBench(t, g.solve, Options{})
	b.openPress(t)
	for i, err := range []error{errPanic, errors.New("no oil")} {
		<-g.begun
		g.let <- err
		e := b.events.wait(t, SolveFailed, b.Revision())
		fault := (*Fault)(nil)
		if errors.As(e.Err, &fault) != (err == errPanic) || b.Failure() == nil || b.Current() || b.solvingNow() {
			t.Errorf("%v: told %v", err, e.Err)
		}
		if fault != nil && (!strings.Contains(fault.Error(), "index out of range") || !strings.Contains(fault.Stack, "solve_test.go")) {
			t.Errorf("%v\n%s", fault, fault.Stack)
		}
		check(t, b.Set("As found/RV1.crack", fmt.Sprintf("%d bar", 231+i)))
		if b.Failure() != nil {
			t.Error("a failure outlives an edit")
		}
	}
	<-g.begun
	g.let <- nil
	b.events.wait(t, Solved, b.Revision())
}

// A result that comes late for an audit that is no longer open is dropped.
func TestOpenDropsSolution(t *testing.T) {
	begun, let := make(chan struct{}, 10), make(chan struct{}, 10)
	stubborn := func(_ context.Context, f *audit.File, _ audit.Options) (*audit.Solution, error) { // deaf to cancel
		begun <- struct{}{}
		<-let
		return &audit.Solution{File: f}, nil
	}
	b := newBench(t, stubborn, Options{})
	b.openPress(t)
	<-begun
	check(t, b.OpenSample(press))
	first := b.Revision() - 1
	let <- struct{}{}
	<-begun
	if s, revision := b.Solution(); s != nil || revision != 0 {
		t.Errorf("solution of revision %d", revision)
	}
	let <- struct{}{}
	b.events.wait(t, Solved, b.Revision())
	for _, e := range b.events.all() {
		if e.Kind == Solved && e.Revision == first {
			t.Error("the dropped solution was told")
		}
	}
	check(t, b.Set("As found/RV1.crack", "231 bar"))
	if s, _ := b.Solution(); s == nil || b.Current() {
		t.Error("after an edit the last solution stays, out of date")
	}
	<-begun
	let <- struct{}{}
}

// Nobody hears of the solution of a revision before hearing of the revision, however
// quick the solver and slow the listener.
func TestEditedBeforeSolved(t *testing.T) {
	begun, let := make(chan struct{}, 10), make(chan struct{}, 10)
	solve := func(_ context.Context, f *audit.File, _ audit.Options) (*audit.Solution, error) {
		begun <- struct{}{}
		<-let
		return &audit.Solution{File: f}, nil
	}
	told := newEvents()
	d := newDocument(Options{Notify: func(e Event) {
		if e.Kind == Edited {
			let <- struct{}{} // the solver ends what it has
			let <- struct{}{} // and would be done with this revision at once
			time.Sleep(20 * time.Millisecond)
		}
		told.take(e)
	}}, solve)
	defer d.Abandon()
	check(t, d.OpenSample(press))
	<-begun
	check(t, d.Set("As found/RV1.crack", "231 bar"))
	told.wait(t, Solved, d.Revision())
	edited := false
	for _, e := range told.all() {
		edited = edited || e.Kind == Edited
		if e.Kind == Solved && e.Revision == d.Revision() && !edited {
			t.Error("solved before edited")
		}
	}
}

// Findings are those of the file at once, and those of the runs when they are done.
func TestFindings(t *testing.T) {
	b := newBench(t, audit.Solve, Options{})
	b.openPress(t)
	b.events.wait(t, Solved, b.Revision())
	s, _ := b.Solution()
	all := b.Findings()
	for _, c := range s.Circuits {
		for _, f := range c.Findings {
			if !hasFinding(all, f) {
				t.Errorf("left out: %v", f)
			}
		}
	}
	if checked := b.File().Check(); len(checked) == 0 || len(all) <= len(checked) {
		t.Errorf("%d found by checking, %d in all", len(checked), len(all))
	}
	for i, f := range all {
		if hasFinding(all[:i], f) {
			t.Errorf("twice: %v", f)
		}
	}
	check(t, b.Edit("Misspell", func(f *audit.File) error {
		f.Replace(bytes.Replace(f.Bytes(), []byte("axis: ram"), []byte("axis: arm"), 1))
		return nil
	}))
	if !circuit.AnyStops(b.Findings()) {
		t.Error("the fault is not found")
	}
	b.Undo()
	if circuit.AnyStops(b.Findings()) {
		t.Error("the fault outlives undo")
	}
}

// A receiver may do anything but close, from within an event.
func TestNotifyMayCall(t *testing.T) {
	var d *Document
	ready, finished := make(chan struct{}), make(chan struct{})
	var once atomic.Bool
	d = newDocument(Options{Config: t.TempDir(), AutosaveAfter: time.Millisecond, Notify: func(e Event) {
		<-ready
		d.Title()
		d.Findings()
		d.Recent()
		switch {
		case e.Kind == Opened:
			d.Set("As found/RV1.crack", "231 bar")
		case e.Kind == Autosaved:
			d.Undo()
			d.Resolve()
		case e.Kind == Solved && once.CompareAndSwap(false, true):
			d.SaveAs(t.TempDir() + "/a.yaml")
		case e.Kind == Saved:
			close(finished)
		}
	}}, quick)
	close(ready)
	defer d.Abandon()
	go d.OpenSample(press)
	select {
	case <-finished:
	case <-time.After(20 * time.Second):
		t.Fatal("an event that calls the document hangs")
	}
}
