package document

import (
	"context"
	"errors"
	"sync/atomic"
	"testing"
	"time"

	"barlitre/audit"
)

// What is handed over waits for the solution that is being worked out, and does not work it out a
// second time; that of a later edit it does not take.
func TestSettledWaitsForWhatIsSolved(t *testing.T) {
	g := newGate()
	b := newBench(t, g.solve, Options{})
	b.openPress(t)
	<-g.begun
	type result struct {
		s   *audit.Solution
		err error
	}
	settle := func(ctx context.Context) (chan result, *atomic.Int64) {
		got, told := make(chan result, 1), &atomic.Int64{}
		go func() {
			s, err := b.Settled(ctx, func(done, total int) { told.Store(int64(10*done + total)) })
			got <- result{s, err}
		}()
		return got, told
	}
	got, told := settle(context.Background())
	one := func(told *atomic.Int64) { // until 1 of 4 is told
		for told.Load() != 14 {
			time.Sleep(time.Millisecond)
		}
	}
	one(told)
	g.let <- nil
	r := <-got
	if now, _ := b.Solution(); r.err != nil || r.s != now || g.calls != 1 {
		t.Errorf("it is another solution than the one of the screens, %v, solved %d times", r.err, g.calls)
	}

	check(t, b.Set("As found/RV1.crack", "180 bar"))
	<-g.begun
	ctx, stop := context.WithCancel(context.Background())
	got, told = settle(ctx)
	one(told)
	stop()
	if r := <-got; !errors.Is(r.err, context.Canceled) {
		t.Errorf("cancelled, it ends with %v", r.err)
	}

	file := b.File()
	got, told = settle(context.Background())
	one(told)
	check(t, b.Set("As found/RV1.crack", "190 bar"))
	if r := <-got; r.err != nil || r.s.File != file {
		t.Errorf("edited meanwhile, it is not the solution of what was asked for: %v", r.err)
	}
}
