package document

import (
	"context"
	"os"
	"path/filepath"
	"sync"
	"testing"
	"time"

	"barlitre/audit"
	"barlitre/samples"
)

const press = "baling-press.yaml"

// TestMain lets the test binary be the program that is killed; see TestKilled.
func TestMain(m *testing.M) {
	if dir := os.Getenv(childEnv); dir != "" {
		childMain(dir)
		return
	}
	os.Exit(m.Run())
}

// events collects what a document tells.
type events struct {
	mu   sync.Mutex
	list []Event
	more chan struct{}
}

func newEvents() *events { return &events{more: make(chan struct{}, 1)} }

func (e *events) take(x Event) {
	e.mu.Lock()
	e.list = append(e.list, x)
	e.mu.Unlock()
	poke(e.more)
}

func (e *events) all() []Event {
	e.mu.Lock()
	defer e.mu.Unlock()
	return append([]Event(nil), e.list...)
}

// wait returns the first event of a kind at or after a revision.
func (e *events) wait(t testing.TB, kind EventKind, revision int) Event {
	t.Helper()
	end := time.After(60 * time.Second)
	for {
		for _, x := range e.all() {
			if x.Kind == kind && x.Revision >= revision {
				return x
			}
		}
		select {
		case <-e.more:
		case <-end:
			t.Fatalf("no event of kind %d at revision %d in %v", kind, revision, e.all())
		}
	}
}

// quick solves nothing, for tests of all else.
func quick(_ context.Context, f *audit.File, _ audit.Options) (*audit.Solution, error) {
	return &audit.Solution{File: f}, nil
}

// clock is a clock that tests move.
type clock struct {
	mu sync.Mutex
	t  time.Time
}

func (c *clock) now() time.Time {
	c.mu.Lock()
	defer c.mu.Unlock()
	return c.t
}

func (c *clock) pass(d time.Duration) {
	c.mu.Lock()
	c.t = c.t.Add(d)
	c.mu.Unlock()
}

type bench struct {
	*Document
	events *events
	clock  *clock
	dir    string // of the press
	config string
}

// newBench opens a document whose autosave is written only by settle, unless opt says otherwise.
func newBench(t testing.TB, solve solver, opt Options) *bench {
	t.Helper()
	b := &bench{events: newEvents(), clock: &clock{t: time.Unix(1e9, 0).UTC()}, dir: t.TempDir(), config: opt.Config}
	if b.config == "" {
		b.config = t.TempDir()
	}
	if opt.AutosaveAfter == 0 {
		opt.AutosaveAfter = time.Hour
	}
	opt.Config, opt.Now, opt.Notify = b.config, b.clock.now, b.events.take
	b.Document = newDocument(opt, solve)
	t.Cleanup(func() { b.Abandon() })
	return b
}

// path writes the press into the folder of the bench.
func (b *bench) path(t testing.TB) string {
	t.Helper()
	data, err := samples.Read(press)
	check(t, err)
	path := filepath.Join(b.dir, "press.yaml")
	check(t, os.WriteFile(path, data, 0o644))
	return path
}

// openPress opens a copy of the press and returns its path.
func (b *bench) openPress(t testing.TB) string {
	t.Helper()
	path := b.path(t)
	problems, err := b.Open(path)
	check(t, err)
	if len(problems) != 0 {
		t.Fatalf("problems %v", problems)
	}
	return path
}

// crash ends a document as a kill does: nothing is tidied up, locks are gone.
func (b *bench) crash(t testing.TB) {
	t.Helper()
	b.mu.Lock()
	b.closed, b.wanted = true, 0
	b.stop()
	b.mu.Unlock()
	close(b.quit)
	b.running.Wait()
	b.session.release()
	b.session = nil
}

func check(t testing.TB, err error) {
	t.Helper()
	if err != nil {
		t.Fatal(err)
	}
}

func readFile(t testing.TB, path string) string {
	t.Helper()
	data, err := os.ReadFile(path)
	check(t, err)
	return string(data)
}

// exists lists what is in a folder, hidden files too.
func exists(t testing.TB, dir string) []string {
	t.Helper()
	entries, err := os.ReadDir(dir)
	check(t, err)
	var names []string
	for _, e := range entries {
		names = append(names, e.Name())
	}
	return names
}
