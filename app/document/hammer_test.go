package document

import (
	"bytes"
	"context"
	"fmt"
	"math/rand"
	"path/filepath"
	"sync"
	"sync/atomic"
	"testing"
	"time"

	"barlitre/audit"
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
