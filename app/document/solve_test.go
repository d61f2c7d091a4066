package document

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"math/rand"
	"path/filepath"
	"strings"
	"sync"
	"sync/atomic"
	"testing"
	"time"

	"barlitre/audit"
	"barlitre/circuit"
)

func resultOf(t testing.TB, s *audit.Solution) string {
	t.Helper()
	var b bytes.Buffer
	check(t, s.Result().Write(&b))
	return b.String()
}

// However edits fall on the solver, results come in the order of their revisions,
// each is that of its own text, and the last is that of the last text.
func TestHammer(t *testing.T) {
	var at atomic.Int32
	solve := func(ctx context.Context, f *audit.File, opt audit.Options) (*audit.Solution, error) {
		if at.Add(1) != 1 {
			t.Error("two solves run at once")
		}
		defer at.Add(-1)
		return audit.Solve(ctx, f, opt)
	}
	b := newBench(t, solve, Options{})
	b.openPress(t)
	b.events.wait(t, Solved, b.Revision())
	r := rand.New(rand.NewSource(2))
	edits := 200
	if testing.Short() {
		edits = 40
	}
	texts := map[int]string{}
	for i := range edits {
		switch r.Intn(8) {
		case 0:
			b.Undo()
		case 1:
			b.Redo()
		default:
			check(t, randomEdit(b.Document, r))
		}
		texts[b.Revision()] = string(b.File().Bytes())
		if s, revision := b.Solution(); s != nil && (revision > b.Revision() || b.Current() != (revision == b.Revision())) {
			t.Fatalf("solution of revision %d at %d, current %v", revision, b.Revision(), b.Current())
		} else if text, ok := texts[revision]; ok && string(s.File.Bytes()) != text {
			t.Fatalf("the solution of revision %d is of another text", revision)
		}
		switch {
		case i%25 == 0:
			b.events.wait(t, Solved, b.Revision())
		case i%5 == 0:
			b.Findings()
		default:
			time.Sleep(time.Duration(r.Intn(50)) * time.Millisecond) // about as long as a solve
		}
	}
	b.events.wait(t, Solved, b.Revision())
	last, solved := 0, 0
	for _, e := range b.events.all() {
		switch e.Kind {
		case Solved:
			solved++
			if e.Revision < last {
				t.Errorf("revision %d solved after %d", e.Revision, last)
			}
			last = e.Revision
		case SolveFailed:
			t.Errorf("revision %d: %v", e.Revision, e.Err)
		}
	}
	s, revision := b.Solution()
	if running, _, _ := b.Solving(); running || !b.Current() || revision != b.Revision() || last != revision {
		t.Fatalf("solution of %d, last event %d, present %d, running %v", revision, last, b.Revision(), running)
	}
	f, _ := audit.Parse(b.File().Bytes(), nil, "")
	fresh, err := audit.Solve(context.Background(), f, audit.Options{})
	check(t, err)
	if resultOf(t, s) != resultOf(t, fresh) {
		t.Error("the solution is not that of the text")
	}
	t.Logf("%d edits, %d solved", edits, solved)
}

// Edits, undo, saves and readers from several goroutines at once, on a solver that is
// done sooner or later, or ends early when told to.
func TestManyGoroutines(t *testing.T) {
	solve := func(ctx context.Context, f *audit.File, _ audit.Options) (*audit.Solution, error) {
		select {
		case <-ctx.Done():
			if rand.Intn(2) == 0 {
				return nil, ctx.Err()
			}
		case <-time.After(time.Duration(rand.Intn(1000)) * time.Microsecond):
		}
		return &audit.Solution{File: f}, nil
	}
	b := newBench(t, solve, Options{AutosaveAfter: time.Millisecond})
	path := filepath.Join(b.dir, "a.yaml")
	check(t, b.SaveAs(path))
	var all sync.WaitGroup
	for n := range 4 {
		all.Add(1)
		go func() {
			defer all.Done()
			r := rand.New(rand.NewSource(int64(n)))
			for i := range 150 {
				if err := manyThings(b.Document, r, n*1000+i); err != nil {
					t.Error(err)
				}
			}
		}()
	}
	all.Wait()
	b.Resolve()
	for b.solvingNow() {
		time.Sleep(time.Millisecond)
	}
	if s, _ := b.Solution(); !b.Current() || s.File != b.File() {
		t.Error("the solution is not that of the present file")
	}
	last := 0
	for _, e := range b.events.all() {
		if e.Kind == Solved {
			if e.Revision < last {
				t.Errorf("revision %d solved after %d", e.Revision, last)
			}
			last = e.Revision
		}
	}
	check(t, b.Save())
	for ok := true; ok; {
		_, ok = b.Undo()
	}
	if string(b.File().Bytes()) != emptyText || readFile(t, path) == "" {
		t.Errorf("undone to\n%s", b.File().Bytes())
	}
}

func manyThings(d *Document, r *rand.Rand, n int) error {
	switch r.Intn(9) {
	case 0:
		d.Undo()
	case 1:
		d.Redo()
	case 2:
		return d.Save()
	case 3:
		d.CancelSolve()
	case 4:
		d.Findings()
		if s, revision := d.Solution(); s != nil && revision > d.Revision() {
			return fmt.Errorf("solution of revision %d before the revision", revision)
		}
	case 5:
		d.Recoverable()
		d.Title()
	case 6:
		return d.Step("site.name", fmt.Sprint("step ", n))
	default:
		return d.Set("site.name", fmt.Sprint("set ", n))
	}
	return nil
}

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

// From an edit of the first sample to its energy, and to its oil temperatures; and to the energy of the sample without tank and
// cooler, which is to be no faster. Each edit comes while the temperatures of the one before are being worked out.
func BenchmarkEditToVerdict(b *testing.B) {
	b.Run("energy", func(b *testing.B) { benchmarkEdits(b, Solved, nil) })
	b.Run("temperatures", func(b *testing.B) { benchmarkEdits(b, Warmed, nil) })
	b.Run("no heat section", func(b *testing.B) {
		benchmarkEdits(b, Solved, func(f *audit.File) error { f.Replace(withoutHeat(f.Bytes())); return nil })
	})
}

// withoutHeat is the text of a sample without its section heat.
func withoutHeat(text []byte) []byte {
	from := bytes.Index(text, []byte("\nheat:\n")) + 1
	to := from + len("heat:\n")
	for text[to] == ' ' {
		to += bytes.IndexByte(text[to:], '\n') + 1
	}
	return append(append([]byte{}, text[:from]...), text[to:]...)
}

func benchmarkEdits(b *testing.B, until EventKind, first func(f *audit.File) error) {
	told := make(chan int, 1000)
	d := New(Options{Notify: func(e Event) {
		if e.Kind == until {
			told <- e.Revision
		}
	}})
	defer d.Abandon()
	check(b, d.OpenSample(press))
	<-told
	if first != nil {
		check(b, d.Edit("Prepare", first))
	}
	b.ResetTimer()
	for i := range b.N {
		check(b, d.Set("As found/RV1.crack", fmt.Sprintf("%d bar", 231+i%2)))
		for <-told != d.Revision() {
		}
	}
	b.ReportMetric(float64(b.Elapsed().Microseconds())/1e3/float64(b.N), "ms/edit")
}

func BenchmarkSet(b *testing.B) {
	d := newDocument(Options{}, quick)
	defer d.Abandon()
	check(b, d.OpenSample(press))
	for i := range b.N {
		check(b, d.Set("As found/RV1.crack", fmt.Sprintf("%d bar", 231+i%2)))
	}
}
