package document

import (
	"context"
	"time"

	"barlitre/audit"
	"barlitre/audit/fixfirst"
	"barlitre/audit/sitecheck"
	"barlitre/machines/units"
)

// Advice is what is to be put right first in the circuits as found of a solution, and what to measure at them.
type Advice struct {
	Of      *audit.Solution
	System  units.System // that its words are written in
	Ladders []*fixfirst.Ladder
	Plans   []*sitecheck.Plan
}

// adviser makes advice behind the window. What was solved for one text is kept for the next.
type adviser struct {
	prices *fixfirst.Cache
	plans  *sitecheck.Cache
	last   *Advice
	err    error // of the last attempt
	asked  *asked
	done   int
	total  int
}

// asked is one request for advice.
type asked struct {
	of     *audit.Solution
	system units.System
	ctx    context.Context
	stop   context.CancelFunc
}

// Advice returns the last advice made, and whether it belongs to the last solution; nil when there is none. It is only to
// be read.
func (d *Document) Advice() (a *Advice, current bool) {
	d.mu.Lock()
	defer d.mu.Unlock()
	return d.advice.last, d.advice.last != nil && d.advice.last.Of == d.solution
}

// Advising reports whether advice is being made, how far that is, and what went wrong with the last.
func (d *Document) Advising() (running bool, done, total int, err error) {
	d.mu.Lock()
	defer d.mu.Unlock()
	return d.advice.asked != nil, d.advice.done, d.advice.total, d.advice.err
}

// AdviceFollows reports whether advice waits for what is being solved: it can be asked for when that is there.
func (d *Document) AdviceFollows() bool {
	d.mu.Lock()
	defer d.mu.Unlock()
	return d.wanted != 0 || d.warming
}

// Advise asks for advice on the last solution, in words of a family of units. Events Advising and Advised tell of it; what
// is there or being made already is not made again. While a revision is being solved or its oil temperatures are to follow there is
// nothing to ask: the solution before is gone soon, and temperatures are evidence.
func (d *Document) Advise(system units.System) {
	d.mu.Lock()
	defer d.mu.Unlock()
	a := &d.advice
	switch {
	case d.solution == nil || d.closed || d.wanted != 0 || d.solution.Pending,
		a.last != nil && a.last.Of == d.solution && a.last.System == system,
		a.asked != nil && a.asked.of == d.solution && a.asked.system == system:
		return
	}
	d.stopAdvice()
	ctx, stop := context.WithCancel(context.Background())
	now := &asked{d.solution, system, ctx, stop}
	a.asked, a.done, a.total, a.err = now, 0, 0, nil
	d.running.Add(1)
	go d.advise(now)
}

// stopAdvice gives up what is being made. mu is held.
func (d *Document) stopAdvice() {
	if d.advice.asked != nil {
		d.advice.asked.stop()
		d.advice.asked = nil
	}
}

// CancelAdvice gives up what is being made, until it is asked for again.
func (d *Document) CancelAdvice() {
	d.mu.Lock()
	d.stopAdvice()
	d.mu.Unlock()
	d.emit(Event{Kind: Advised})
}

func (d *Document) advise(now *asked) {
	defer d.running.Done()
	defer now.stop()
	var made *Advice
	err := guarded(func() (err error) {
		made, err = d.AdviceOn(now.ctx, now.of, now.system, d.advising(now))
		return err
	})
	d.mu.Lock()
	asked := d.advice.asked == now
	if asked {
		d.advice.asked, d.advice.err = nil, err
		if err == nil {
			d.advice.last = made
		}
	}
	d.mu.Unlock()
	if asked {
		d.emit(Event{Kind: Advised, Err: err})
	}
}

// advising returns the receiver of the progress of one request.
func (d *Document) advising(now *asked) func(done, total int) {
	var last time.Time
	return func(done, total int) {
		d.mu.Lock()
		asked := d.advice.asked == now
		if asked {
			d.advice.done, d.advice.total = done, total
		}
		due := asked && time.Since(last) >= progressEvery
		if due {
			last = time.Now()
		}
		d.mu.Unlock()
		if due {
			d.emit(Event{Kind: Advising, Done: done, Total: total})
		}
	}
}

// AdviceOn makes advice on a solution at once, for who can wait. The error is that of the context.
func (d *Document) AdviceOn(ctx context.Context, s *audit.Solution, system units.System, progress func(done, total int)) (*Advice, error) {
	a := &Advice{Of: s, System: system}
	var err error
	if a.Ladders, err = fixfirst.All(ctx, s, fixfirst.Options{System: system, Cache: d.advice.prices, Progress: progress}); err != nil {
		return nil, err
	}
	a.Plans, err = sitecheck.All(ctx, s, sitecheck.Options{System: system, Cache: d.advice.plans, Ladders: a.Ladders, Progress: progress})
	return a, err
}
