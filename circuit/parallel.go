package circuit

import (
	"context"
	"math"
	"runtime"
	"sync"

	"barlitre/circuit/duty"
)

// A long duty is cut into chunks that are balanced at the same time. Each starts
// cold a little before its first step and takes the way of its axes from the duty;
// when the chunk before it has ended, what it assumed is compared with what was
// found, and a chunk that assumed something else is done again. So the result does
// not hang on how many goroutines there are.
const (
	chunkSteps = 8192
	leadSteps  = 64   // balanced before a chunk, to come from a cold start to where the chunk begins
	seam       = 1e-9 // largest difference of a start from the end before it, relative, of scaled unknowns
)

// RunParallel balances a long duty on several goroutines, as many as there are
// processors when workers is 0. Time steps reach the receiver in order and from one
// goroutine at a time. Circuits with slow states, and short duties, are balanced as by Run.
func RunParallel(ctx context.Context, c *Compiled, params []float64, s *duty.Series, cond Conditions, workers int, to Receiver) (State, Certificate, error) {
	if c.HasSlowStates() || len(s.T) < 2*chunkSteps {
		return Run(ctx, c, params, s, cond, State{}, to)
	}
	if _, _, err := Run(ctx, c, params, part(s, 0, 0), cond, State{}, to); err != nil {
		return State{}, Certificate{}, err // parameters that do not fit
	}
	if workers <= 0 {
		workers = runtime.GOMAXPROCS(0)
	}
	p := newParallel(c, params, s, cond)
	return p.all(ctx, workers, to)
}

// parallel is one call of RunParallel.
type parallel struct {
	c       *Compiled
	params  []float64
	s       *duty.Series
	cond    Conditions
	cuts    []int       // first step of each chunk, and the end
	ways    [][]float64 // of the axes up to each cut
	topLoad []float64
	redone  int
}

func newParallel(c *Compiled, params []float64, s *duty.Series, cond Conditions) *parallel {
	p := &parallel{c: c, params: params, s: s, cond: cond, cuts: cutsOf(s), topLoad: newRun(c, params, cond, s).topLoad}
	p.ways = waysOf(s, p.cuts)
	return p
}

// chunk is what was found between two cuts.
type chunk struct {
	tape       *tape
	start, end State
	cert       Certificate
	err        error
	done       chan struct{}
}

// cutsOf cuts where every axis moves, if there is such a step near: there all
// pressures are determined.
func cutsOf(s *duty.Series) []int {
	cuts := []int{0}
	for at := chunkSteps; at < len(s.T)-chunkSteps/2; at += chunkSteps {
		cut := at
		for k := at; k < at+chunkSteps/4; k++ {
			if allMove(s, k) && allMove(s, k-leadSteps) {
				cut = k
				break
			}
		}
		cuts = append(cuts, cut)
	}
	return append(cuts, len(s.T))
}

func allMove(s *duty.Series, k int) bool {
	for i := range s.Axes {
		if s.Axes[i].Standing[k] {
			return false
		}
	}
	return true
}

func (p *parallel) all(ctx context.Context, workers int, to Receiver) (State, Certificate, error) {
	ctx, cancel := context.WithCancel(ctx)
	var wait sync.WaitGroup
	defer wait.Wait()
	defer cancel()
	chunks := make([]*chunk, len(p.cuts)-1)
	for i := range chunks {
		chunks[i] = &chunk{done: make(chan struct{})}
	}
	free, work := make(chan *tape, workers+1), make(chan int)
	for i := 0; i < cap(free); i++ {
		free <- &tape{}
	}
	wait.Add(1 + workers)
	go func() { // chunks begin in order, so the one that is waited for always has a tape
		defer wait.Done()
		defer close(work)
		for i := range chunks {
			select {
			case chunks[i].tape = <-free:
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
				ch := chunks[i]
				p.guess(ctx, ch, i)
				close(ch.done)
			}
		}()
	}
	return p.join(ctx, chunks, free, to)
}

// join hands the chunks over in order, each once its start is known to be right.
func (p *parallel) join(ctx context.Context, chunks []*chunk, free chan<- *tape, to Receiver) (State, Certificate, error) {
	var st State
	var cert Certificate
	for i, ch := range chunks {
		select {
		case <-ch.done:
		case <-ctx.Done():
			return st, cert, ctx.Err()
		}
		if i > 0 && (ch.err != nil || !sameStart(ch.start, st)) {
			p.redone++
			ch.tape.rewind()
			ch.start = st
			ch.end, ch.cert, ch.err = p.run(ctx, p.cuts[i], p.cuts[i+1], st, ch.tape)
		}
		cert = cert.plus(ch.cert)
		if err := ch.tape.play(to); err != nil {
			return st, cert, err
		}
		for k := range st.travel {
			ch.end.travel[k] += st.travel[k] - ch.start.travel[k]
		}
		st = ch.end
		if ch.err != nil {
			return st, cert, ch.err
		}
		free <- ch.tape
	}
	return st, cert, nil
}

// guess balances a chunk from a start of its own.
func (p *parallel) guess(ctx context.Context, ch *chunk, i int) {
	from := p.cuts[i]
	ch.tape.rewind()
	if from > 0 {
		lead := from - leadSteps
		if ch.start, _, ch.err = p.run(ctx, lead, from, State{}, Receivers{}); ch.err != nil {
			return
		}
		copy(ch.start.travel, p.ways[i])
	}
	ch.end, ch.cert, ch.err = p.run(ctx, from, p.cuts[i+1], ch.start, ch.tape)
}

// run balances the steps a to b−1 and leaves st as it is.
func (p *parallel) run(ctx context.Context, a, b int, st State, to Receiver) (State, Certificate, error) {
	r := newRun(p.c, p.params, p.cond, part(p.s, a, b))
	copy(r.topLoad, p.topLoad)
	return r.all(ctx, st, to)
}

// waysOf is how far the axes are at each cut if they move as the duty says.
func waysOf(s *duty.Series, cuts []int) [][]float64 {
	ways := make([][]float64, len(cuts))
	for i := range ways {
		ways[i] = make([]float64, len(s.Axes))
	}
	for i := range s.Axes {
		v, way, k := s.Axes[i].Speed, 0.0, 0
		for j := range s.T {
			if j == cuts[k] {
				ways[k][i] = way
				k++
			}
			if v != nil && j > 0 {
				way += math.Max(0, s.T[j]-s.T[j-1]) * (v[j-1] + v[j]) / 2
			}
		}
	}
	return ways
}

// sameStart reports whether two states are one, for what follows them.
func sameStart(a, b State) bool {
	near := func(a, b []float64) bool {
		if len(a) != len(b) {
			return false
		}
		for i, v := range a {
			if !(math.Abs(v-b[i]) <= seam*(1+math.Abs(v))) {
				return false
			}
		}
		return true
	}
	return near(a.x, b.x) && near(a.speed, b.speed) && near(a.travel, b.travel)
}

// part is the series of the steps a to b−1.
func part(s *duty.Series, a, b int) *duty.Series {
	cut := func(v []float64) []float64 {
		if v == nil {
			return nil
		}
		return v[a:b]
	}
	out := &duty.Series{T: s.T[a:b], Duty: s.Duty, Commands: make(map[duty.Control][]float64, len(s.Commands))}
	for c, v := range s.Commands {
		out.Commands[c] = cut(v)
	}
	for _, x := range s.Axes {
		x.Speed, x.Accel, x.Load, x.Command, x.Standing = cut(x.Speed), cut(x.Accel), cut(x.Load), cut(x.Command), x.Standing[a:b]
		out.Axes = append(out.Axes, x)
	}
	return out
}

// tape keeps the time steps of a chunk until their turn comes.
type tape struct {
	samples []Sample
	used    int
}

func (t *tape) rewind() { t.used = 0 }

// Sample keeps a copy of s.
func (t *tape) Sample(s *Sample) error {
	if t.used == len(t.samples) {
		t.samples = append(t.samples, Sample{})
	}
	k := &t.samples[t.used]
	t.used++
	sig, pow, axes, void := k.Signals, k.Power, k.Axes, k.Void
	*k = *s
	k.Signals, k.Power = append(sig[:0], s.Signals...), append(pow[:0], s.Power...)
	k.Axes, k.Void = append(axes[:0], s.Axes...), append(void[:0], s.Void...)
	return nil
}

func (t *tape) play(to Receiver) error {
	for i := range t.samples[:t.used] {
		if err := to.Sample(&t.samples[i]); err != nil {
			return err
		}
	}
	return nil
}
