package circuit

import (
	"context"
	"errors"
	"fmt"
	"math"

	"barlitre/circuit/duty"
)

// Slow states change between time steps, not within the balance of one: the gas
// volume of an accumulator, the speed of a flywheel, the position of a switching
// valve. Blocks step them implicitly: the value at a point is part of its balance.

// slowState is one slow state of a circuit.
type slowState struct {
	block, name string
	start       func(p []float64) float64 // before the first step
	scale       func(p []float64) float64 // what counts as a change of order one
	discrete    bool                      // a switch, 0 or 1
}

// slowModel is a model with slow states; advance writes them to k.next once a point is balanced.
type slowModel interface{ advance(k *booking) }

// switching is a model that changes its position by itself. due is below 0 while it
// stays, and reaches 0 where it switches; toggle puts it over.
type switching interface {
	due(k *booking) float64
	toggle(slow []float64)
}

// newSlow adds a slow state and returns its index.
func (k *compiler) newSlow(s slowState) int {
	k.slow = append(k.slow, s)
	return len(k.slow) - 1
}

// beginSlow takes the slow states of an earlier call, or their start.
func (r *run) beginSlow(st State) {
	r.state.slow = append([]float64(nil), st.slow...)
	if len(st.slow) != len(r.Compiled.slow) {
		r.state.slow = make([]float64, len(r.Compiled.slow))
		for i, s := range r.Compiled.slow {
			r.state.slow[i] = s.start(r.params)
		}
	}
	r.step.slow = r.state.slow
	r.book.next = make([]float64, len(r.state.slow))
	r.switches = r.switches[:0]
	for _, m := range r.models {
		if s, ok := m.(switching); ok {
			r.switches = append(r.switches, s)
		}
	}
}

// maxEvents bounds the switchings inside one step; more are chatter, and the step
// ends where it is.
const maxEvents = 50

// through goes from step k−1 to k. Where a valve switches on the way, the instant is
// found and stands as two points of its own, before and after.
func (r *run) through(k int, x, good []float64, point func(k int, share float64) error) error {
	if len(r.switches) == 0 {
		return point(k, 1)
	}
	from := 0.0
	for n := 0; n < maxEvents; n++ {
		if i := r.firstDue(k, 1, x, good); i < 0 {
			break
		}
		share, i := r.instant(k, from, x, good)
		if err := point(k, share); err != nil {
			return err
		}
		r.switches[i].toggle(r.state.slow)
		if err := point(k, share); err != nil {
			return err
		}
		from = share
		if share >= 1 {
			return nil
		}
	}
	return point(k, 1)
}

// firstDue balances a point without handing it over and returns the switch that is due there, −1 if none is.
func (r *run) firstDue(k int, share float64, x, good []float64) int {
	r.solve(k, share, x, good, r.state.begun)
	r.bookAll()
	at, most := -1, 0.0
	for i, s := range r.switches {
		if d := s.due(&r.book); d >= 0 && (at < 0 || d > most) {
			at, most = i, d
		}
	}
	return at
}

// instant finds by bisection where between a share of step k and its end a switch
// comes due, to a thousandth of a millisecond or a billionth of the step.
func (r *run) instant(k int, from float64, x, good []float64) (share float64, which int) {
	lo, hi := from, 1.0
	which = r.firstDue(k, 1, x, good)
	if i := r.firstDue(k, from, x, good); i >= 0 {
		return from, i // already due where it starts
	}
	length := 0.0
	if k > 0 {
		length = r.series.T[k] - r.series.T[k-1]
	}
	for n := 0; n < 60 && (hi-lo)*length > 1e-6 && hi-lo > 1e-9; n++ {
		mid := (lo + hi) / 2
		if i := r.firstDue(k, mid, x, good); i >= 0 {
			hi, which = mid, i
		} else {
			lo = mid
		}
	}
	return hi, which
}

// ErrNoPeriod says that a circuit did not come to repeat itself.
var ErrNoPeriod = errors.New("the cycle does not come to repeat itself")

// Periodic limits: how many cycles may pass until the states return, and how close
// they must come, as a share of each state's scale.
const (
	maxCycles   = 400
	maxPeriod   = 24
	periodClose = 1e-6
)

// HasSlowStates reports whether a circuit remembers anything from one cycle to the next.
func (c *Compiled) HasSlowStates() bool { return len(c.slow) > 0 }

// RunPeriodic runs a repeating duty until its slow states return, and then hands one
// true period to the receiver: one cycle, or as many as it takes until the states
// are what they were (a charging valve may switch only every other cycle). Times run on
// from cycle to cycle. It returns how many cycles the period has. Circuits without
// slow states are run once, as by RunParallel. settle receives the cycles that pass
// until then.
func RunPeriodic(ctx context.Context, c *Compiled, params []float64, s *duty.Series, cond Conditions, settle, to Receiver) (cycles int, st State, cert Certificate, err error) {
	if !c.HasSlowStates() {
		st, cert, err = RunParallel(ctx, c, params, s, cond, 0, to)
		return 1, st, cert, err
	}
	var past [][]float64
	for n := 0; n < maxCycles; n++ {
		st.travel = nil // every cycle begins where its axes stand at the start
		if st, cert, err = Run(ctx, c, params, s, cond, st, settle); err != nil {
			return 0, st, cert, err
		}
		now := append([]float64(nil), st.slow...)
		for back := 1; back <= min(maxPeriod, len(past)); back++ {
			if c.close(params, past[len(past)-back], now) {
				cycles = back
				break
			}
		}
		past = append(past, now)
		if cycles > 0 {
			break
		}
	}
	if cycles == 0 {
		// The average over many cycles is the honest answer; that it is one is said.
		cycles, err = maxPeriod, fmt.Errorf("%w within %d cycles; the figures are the average of %d", ErrNoPeriod, maxCycles, maxPeriod)
	}
	total := Certificate{}
	length := s.T[len(s.T)-1] - s.T[0]
	for n := 0; n < cycles; n++ {
		later := *s
		if n > 0 {
			later.T = make([]float64, len(s.T))
			for i, t := range s.T {
				later.T[i] = t + float64(n)*length
			}
			st.lastT = later.T[0]
		} else {
			st.begun = false // the first point of the period has no time before it
		}
		st.travel = nil
		var one Certificate
		var runErr error
		if st, one, runErr = Run(ctx, c, params, &later, cond, st, to); runErr != nil {
			return cycles, st, total, runErr
		}
		total = total.plus(one)
	}
	total.Sequential = c.sequential(s)
	return cycles, st, total, err
}

// close reports whether two sets of slow states are the same for the period.
func (c *Compiled) close(p, a, b []float64) bool {
	for i, s := range c.slow {
		if s.discrete && a[i] != b[i] || math.Abs(a[i]-b[i]) > periodClose*s.scale(p) {
			return false
		}
	}
	return true
}

// plus joins the certificates of two runs that follow each other.
func (c Certificate) plus(o Certificate) Certificate {
	c.Steps += o.Steps
	c.Fallbacks += o.Fallbacks
	c.Unbalanced += o.Unbalanced
	if o.Worst > c.Worst {
		c.Worst, c.WorstAt = o.Worst, o.WorstAt
	}
	c.Force = math.Max(c.Force, o.Force)
	for _, n := range o.Loose {
		c.Loose = with(c.Loose, n)
	}
	for _, u := range o.Unsolved {
		if len(c.Unsolved) < 8 {
			c.Unsolved = append(c.Unsolved, u)
		}
	}
	return c
}
