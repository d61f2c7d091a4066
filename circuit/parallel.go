package circuit

import (
	"context"
	"runtime"
	"strings"
	"sync"

	"barlitre/circuit/duty"
)

// RunParallel balances a long duty on several goroutines, as many as there are
// processors when workers is 0. It is cut into chunks that are balanced at the same
// time; the result does not hang on how many goroutines there are. A receiver that is
// a PartReceiver is filled by all of them; any other gets the time steps in order,
// from one goroutine. Short duties, and circuits with slow states, are balanced as by
// Run; of a long duty the certificate then says why.
func RunParallel(ctx context.Context, c *Compiled, params []float64, s *duty.Series, cond Conditions, workers int, to Receiver) (State, Certificate, error) {
	if c.HasSlowStates() || len(s.T) < 2*chunkSteps {
		st, cert, err := Run(ctx, c, params, s, cond, State{}, to)
		cert.Sequential = c.sequential(s)
		return st, cert, err
	}
	if err := c.fits(params, s); err != nil {
		return State{}, Certificate{}, err
	}
	if workers <= 0 {
		workers = runtime.GOMAXPROCS(0)
	}
	return newParallel(c, params, s, cond).all(ctx, workers, to)
}

// sequential names what keeps a long duty from being cut into chunks, "" if nothing does.
func (c *Compiled) sequential(s *duty.Series) string {
	var names []string
	for _, x := range c.slow {
		names = append(names, x.block+" ("+x.name+")")
	}
	if len(s.T) < 2*chunkSteps {
		return ""
	}
	return strings.Join(names, ", ")
}

// parallel is one call of RunParallel.
type parallel struct {
	c      *Compiled
	params []float64
	s      *duty.Series
	cond   Conditions
	cuts   []int       // first step of each chunk, and the end
	ways   [][]float64 // of the axes up to each cut
	redone int
}

func newParallel(c *Compiled, params []float64, s *duty.Series, cond Conditions) *parallel {
	p := &parallel{c: c, params: params, s: s, cond: cond, cuts: cutsOf(s)}
	p.ways = waysOf(s, p.cuts)
	return p
}

// all balances every chunk on one of the workers and joins them in order. Chunks begin
// in order too, and few at a time, so what waits to be joined stays small.
func (p *parallel) all(ctx context.Context, workers int, to Receiver) (State, Certificate, error) {
	ctx, cancel := context.WithCancel(ctx)
	var wait sync.WaitGroup
	defer wait.Wait()
	defer cancel()
	parts := partsOf(to)
	chunks := make([]*chunk, len(p.cuts)-1)
	for i := range chunks {
		chunks[i] = &chunk{done: make(chan struct{})}
	}
	room, work := make(chan struct{}, workers+2), make(chan int)
	wait.Add(1 + workers)
	go func() {
		defer wait.Done()
		defer close(work)
		for i := range chunks {
			select {
			case room <- struct{}{}:
			case <-ctx.Done():
				return
			}
			select {
			case work <- i:
			case <-ctx.Done():
				return
			}
		}
	}()
	for range workers {
		go func() {
			defer wait.Done()
			for i := range work {
				p.guess(ctx, chunks[i], i, parts)
				close(chunks[i].done)
			}
		}()
	}
	return p.join(ctx, chunks, room, parts)
}

// join takes the chunks over in order, each once its start is known to be right.
func (p *parallel) join(ctx context.Context, chunks []*chunk, room <-chan struct{}, parts PartReceiver) (State, Certificate, error) {
	var st State
	var cert Certificate
	for i, ch := range chunks {
		select {
		case <-ch.done:
		case <-ctx.Done():
			return st, cert, ctx.Err()
		}
		if i > 0 && (ch.err != nil || !ch.startsAt(st)) {
			p.redone++
			ch.start = st
			r := p.newRun()
			ch.run(ctx, r, p.cuts[i], p.cuts[i+1], parts.Part(p.cuts[i], p.cuts[i+1], chunks[i-1].last))
			r.end()
		}
		cert = cert.plus(ch.cert)
		if err := parts.Join(ch.part); err != nil {
			return st, cert, err
		}
		for k := range st.travel {
			ch.end.travel[k] += st.travel[k] - ch.start.travel[k]
		}
		st = ch.end
		if ch.err != nil {
			return st, cert, ch.err
		}
		ch.part = nil
		if i > 0 {
			chunks[i-1] = nil
		}
		<-room
	}
	return st, cert, nil
}

// guess balances a chunk from a start of its own.
func (p *parallel) guess(ctx context.Context, ch *chunk, i int, parts PartReceiver) {
	from, r := p.cuts[i], p.newRun()
	var before *Sample
	if from > 0 {
		if ch.start, _, ch.err = r.all(ctx, State{}, from-leadSteps, from, Receivers{}); ch.err != nil {
			ch.part = parts.Part(from, p.cuts[i+1], nil)
			return
		}
		copy(ch.start.travel, p.ways[i])
		before = r.sample.clone()
	}
	ch.run(ctx, r, from, p.cuts[i+1], parts.Part(from, p.cuts[i+1], before))
	r.end()
}

func (p *parallel) newRun() *run { return newRun(p.c, p.params, p.cond, p.s) }
