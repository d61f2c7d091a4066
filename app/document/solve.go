package document

import (
	"context"
	"time"

	"barlitre/audit"
)

// solver is audit.SolveEnergy.
type solver func(ctx context.Context, f *audit.File, opt audit.Options) (*audit.Solution, error)

// progressEvery keeps progress from flooding a window's event queue.
const progressEvery = 50 * time.Millisecond

// settleEvery is how often what waits for a solution looks for it.
const settleEvery = 10 * time.Millisecond

// Solution returns the last solution that finished and its revision; nil and 0 when
// there is none of the present audit. It is only to be read.
func (d *Document) Solution() (s *audit.Solution, revision int) {
	d.mu.Lock()
	defer d.mu.Unlock()
	return d.solution, d.solved
}

// Current reports whether Solution belongs to the present revision.
func (d *Document) Current() bool {
	d.mu.Lock()
	defer d.mu.Unlock()
	return d.current()
}

func (d *Document) current() bool { return d.solution != nil && d.solved == d.now.revision }

// Settled returns the solution of the audit as it stands when it is called, with its oil
// temperatures, for what is handed over: the one that is there or is being worked out, which is
// waited for, or else it is worked out here. It never is that of another revision. The error is
// that of audit.Solve.
func (d *Document) Settled(ctx context.Context, progress func(done, total int)) (*audit.Solution, error) {
	d.mu.Lock()
	now := d.now
	d.mu.Unlock()
	for {
		d.mu.Lock()
		s, same, current := d.solution, d.now.revision == now.revision, d.current()
		coming, done, total := (d.wanted != 0 || d.warming) && !d.closed, d.done, d.total
		d.mu.Unlock()
		switch {
		case !same || !current && !coming:
			return audit.Solve(ctx, now.file, audit.Options{Progress: progress})
		case !coming:
			return s.Warm(ctx)
		case progress != nil:
			progress(done, total)
		}
		select {
		case <-ctx.Done():
			return nil, ctx.Err()
		case <-time.After(settleEvery):
		}
	}
}

// Solving reports whether the present revision is being solved, and how far that is;
// total is 0 until it is known.
func (d *Document) Solving() (running bool, done, total int) {
	d.mu.Lock()
	defer d.mu.Unlock()
	return d.wanted != 0, d.done, d.total
}

// Warming reports whether the oil temperatures of the present solution are being worked out.
func (d *Document) Warming() bool {
	d.mu.Lock()
	defer d.mu.Unlock()
	return d.warming
}

// Failure returns why the present revision could not be solved, or nil.
func (d *Document) Failure() error {
	d.mu.Lock()
	defer d.mu.Unlock()
	return d.failure
}

// CancelSolve gives up solving the present revision, or working out its oil temperatures; the next edit, or Resolve,
// begins again.
func (d *Document) CancelSolve() {
	d.mu.Lock()
	was, revision := d.wanted != 0 || d.warming, d.now.revision
	d.wanted, d.warming = 0, false
	d.stop()
	d.mu.Unlock()
	if was {
		d.emit(Event{Kind: SolveCancelled, Revision: revision})
	}
}

// Resolve solves the present revision, once more if it was solved before.
func (d *Document) Resolve() {
	d.mu.Lock()
	d.request()
	ticket := d.ticket
	d.mu.Unlock()
	d.release(ticket)
}

// request asks for the present revision to be solved instead of what is being
// solved now; advice that is being made on the one before is given up. mu is held.
func (d *Document) request() {
	d.ticket++
	d.wanted, d.ready = d.ticket, false
	d.done, d.total, d.failure = 0, 0, nil
	d.stop()
	d.stopAdvice()
}

// release lets the solver begin, after the edit behind the ticket was told: so no
// screen hears of a solution before it hears of the revision.
func (d *Document) release(ticket int) {
	d.mu.Lock()
	if d.wanted == ticket && !d.closed {
		d.ready = true
	}
	d.mu.Unlock()
	poke(d.wake)
}

func poke(c chan struct{}) {
	select {
	case c <- struct{}{}:
	default:
	}
}

func (d *Document) solveAll() {
	defer d.running.Done()
	for {
		select {
		case <-d.quit:
			return
		case <-d.wake:
		}
		for d.solveNext() {
		}
	}
}

// solveNext solves what is wanted, if anything is.
func (d *Document) solveNext() bool {
	d.mu.Lock()
	if d.wanted == 0 || !d.ready {
		d.mu.Unlock()
		return false
	}
	ticket, now, before := d.wanted, d.now, d.solution
	ctx, stop := context.WithCancel(context.Background())
	defer stop()
	d.stop = stop
	d.mu.Unlock()

	var s *audit.Solution
	err := guarded(func() (err error) {
		s, err = d.solve(ctx, now.file, audit.Options{Progress: d.progress(ticket, now.revision), Before: before})
		return err
	})
	if d.finish(ticket, now.revision, s, err) {
		d.warm(ctx, now.revision, s)
	}
	return true
}

// warm works out the oil temperatures of a solution whose energy is on the screens already; the next edit ends it.
func (d *Document) warm(ctx context.Context, revision int, s *audit.Solution) {
	var warm *audit.Solution
	err := guarded(func() (err error) {
		warm, err = s.Warm(ctx)
		return err
	})
	d.mu.Lock()
	d.warming = false
	there := d.solution == s && !d.closed
	if there && err == nil {
		d.solution = warm
	}
	d.mu.Unlock()
	if there && ctx.Err() == nil {
		d.emit(Event{Kind: Warmed, Revision: revision, Err: err})
	}
}

// progress returns the receiver of the progress of one solve; audit calls it from
// one goroutine at a time.
func (d *Document) progress(ticket, revision int) func(done, total int) {
	var last time.Time
	return func(done, total int) {
		d.mu.Lock()
		asked := d.wanted == ticket
		if asked {
			d.done, d.total = done, total
		}
		d.mu.Unlock()
		if now := time.Now(); asked && now.Sub(last) >= progressEvery {
			last = now
			d.emit(Event{Kind: Solving, Revision: revision, Done: done, Total: total})
		}
	}
}

// finish keeps a result. One that was overtaken by an edit just as it finished is a
// result of its own revision all the same; one of an audit that is no longer open is
// not. Solves end in the order of their revisions, as there is one at a time. more says that oil temperatures are to follow.
func (d *Document) finish(ticket, revision int, s *audit.Solution, err error) (more bool) {
	e := Event{Revision: revision}
	d.mu.Lock()
	asked := d.wanted == ticket
	if asked {
		d.wanted = 0
	}
	switch {
	case err == nil && revision >= d.opened && !d.closed:
		d.solution, d.solved = s, revision
		more = s.Pending && d.wanted == 0
		d.warming = more
		e.Kind = Solved
	case err != nil && asked:
		d.failure = err
		e.Kind, e.Err = SolveFailed, err
	}
	d.mu.Unlock()
	if e.Kind != 0 {
		d.emit(e)
	}
	return more
}
