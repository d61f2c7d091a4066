package cycles

import (
	"context"
	"fmt"
	"math"
	"slices"
)

// Input is a recording: rows in rising time. Motion is what moves (speeds, flows), Level
// what is held (pressures, forces); each in its own unit. Power [W] is summed up to the
// energy of a cycle, its negative part apart; Supply [W] tells what is off, and may be nil.
type Input struct {
	T      []float64
	Motion [][]float64
	Level  [][]float64
	Power  []float64
	Supply []float64
}

// Options changes how cycles are found; the zero value takes the defaults.
type Options struct {
	Moving, Held, Off float64         // shares of the top of a channel: above it moves, is held; below it is off
	Turns             bool            // nothing tells when the pump is off: it is taken to turn
	Shortest          float64         // s, of a state; a hundredth of the period when not given
	Period            float64         // s; 0 = to be found
	Context           context.Context // its end is that of the search, as an error; nil = none
}

// Cycle is one cycle.
type Cycle struct {
	From, To           float64 // s
	Positive, Negative float64 // J
	Likeness           float64 // to the typical cycle, correlation -1..1
}

// Energy returns what a cycle takes, J: positive less what comes back.
func (c Cycle) Energy() float64 { return c.Positive + c.Negative }

// Length returns how long a cycle takes, s.
func (c Cycle) Length() float64 { return c.To - c.From }

// Spread tells how a quantity scatters over the cycles.
type Spread struct{ Mean, Deviation, Least, Most, P10, P50, P90 float64 }

// Result is what was found.
type Result struct {
	Period  float64 // s, mean over the cycles; 0 = nothing repeats
	Height  float64 // of the peak of the autocorrelation, 1 = each cycle like the other
	Cycles  []Cycle
	States  []Stretch
	Shares  []Share
	Typical int // index of the cycle nearest to all others, -1 without cycles
	Extreme int // index of the cycle that takes the most energy
	Odd     int // index of the cycle least like the typical one
	Energy  Spread
	Length  Spread

	in, coarse Input     // as it is, and with fewer rows
	scanned    []float64 // a cycle as coarse has it, to scan by
	works      float64   // s, from the start of a cycle until its work ends
	ctx        context.Context
}

// points is how many points a cycle is compared by.
const points = 128

// Find finds cycles and states.
func Find(in Input, o Options) (*Result, error) {
	if err := in.check(); err != nil {
		return nil, err
	}
	o = o.filled()
	r := &Result{in: in, Typical: -1, Extreme: -1, Odd: -1, ctx: o.Context}
	coarse := states(in, o)
	runs := runsOf(in, coarse, o)
	if len(runs) > 0 && r.ctx.Err() == nil {
		r.repeat(runs, coarse, o)
	}
	if r.ctx.Err() != nil {
		return nil, r.ctx.Err()
	}
	if o.Shortest == 0 && r.Period > 0 {
		o.Shortest = r.Period / 100
	}
	r.States = states(in, o)
	r.shares()
	r.judge()
	return r, r.ctx.Err()
}

func (o Options) filled() Options {
	for _, x := range []struct {
		v *float64
		d float64
	}{{&o.Moving, defaultMoving}, {&o.Held, defaultHeld}, {&o.Off, defaultOff}} {
		if !(*x.v > 0) {
			*x.v = x.d
		}
	}
	if o.Context == nil {
		o.Context = context.Background()
	}
	return o
}

func (in Input) check() error {
	if len(in.T) < 16 || !(in.T[len(in.T)-1] > in.T[0]) {
		return fmt.Errorf("%d rows are too few to find cycles in", len(in.T))
	}
	if len(in.Motion) == 0 {
		return fmt.Errorf("name a channel that moves, such as a speed or a flow: cycles are found by it")
	}
	for _, v := range append(slices.Concat(in.Motion, in.Level), in.Power, in.Supply) {
		if v != nil && len(v) != len(in.T) {
			return fmt.Errorf("a channel has %d values for %d rows", len(v), len(in.T))
		}
	}
	return nil
}

// run is a stretch of work with the short stands within it.
type run struct{ a, b int } // rows

// runsOf joins work over stands that are no longer than a few of the usual ones.
func runsOf(in Input, s []Stretch, o Options) (out []run) {
	var stands []float64
	for i, x := range s {
		if x.State != Work && i > 0 && i+1 < len(s) {
			stands = append(stands, x.To-x.From)
		}
	}
	longest := math.Inf(1)
	if len(stands) > 0 {
		slices.Sort(stands)
		longest = 4 * stands[len(stands)*3/4]
		if o.Period > 0 {
			longest = math.Min(longest, o.Period)
		}
	}
	last := math.Inf(-1)
	for _, x := range s {
		if x.State != Work {
			continue
		}
		if n := len(out); n > 0 && x.From-last <= longest {
			out[n-1].b = x.b
		} else {
			out = append(out, run{x.a, x.b})
		}
		last = x.To
	}
	return out
}

// repeat finds the period in the longest run and cuts all runs into cycles.
func (r *Result) repeat(runs []run, coarse []Stretch, o Options) {
	t := r.in.T
	long := slices.MaxFunc(runs, func(a, b run) int { return compare(t[a.b-1]-t[a.a], t[b.b-1]-t[b.a]) })
	from, to := t[long.a], t[min(long.b, len(t)-1)]
	if long.b-long.a < 16 {
		return
	}
	guess, height := o.Period, 1.0
	if guess == 0 {
		guess, height = r.in.period(from, to, long.b-long.a)
	}
	if guess <= 0 {
		return
	}
	r.Height = height
	r.coarse = r.in.thinned(int(guess / coarsePoints / (to - from) * float64(long.b-long.a)))
	from = begin(r.in, coarse, from, guess)
	template := r.in.shape(from, from+guess)
	r.scanned = r.coarse.shape(from, from+guess*(points-1)/points)
	r.works = worksFor(coarse, from, guess)
	for i, run := range runs {
		room := t[len(t)-1]
		if i+1 < len(runs) {
			room = t[runs[i+1].a]
		}
		r.cut(begin(r.in, coarse, t[run.a], guess), t[min(run.b, len(t)-1)], room, guess, template)
	}
	if len(r.Cycles) < 2 {
		r.Cycles = nil
		return
	}
	for _, c := range r.Cycles {
		r.Period += c.Length() / float64(len(r.Cycles))
	}
}

func compare(a, b float64) int {
	switch {
	case a < b:
		return -1
	case a > b:
		return 1
	}
	return 0
}

// channels resamples what moves and what is held, each in shares of its top.
func (in Input) channels(a, b float64, n int) (out [][]float64) {
	lo, hi := in.rows(a, b)
	for _, v := range slices.Concat(in.Motion, in.Level) {
		out = append(out, even(in.T[lo:hi], v[lo:hi], a, b, n))
	}
	return out
}

// rows returns the rows around a stretch, two at least.
func (in Input) rows(a, b float64) (lo, hi int) {
	t := in.T
	lo, _ = slices.BinarySearch(t, a)
	hi, _ = slices.BinarySearch(t, b)
	lo, hi = max(0, lo-1), min(len(t), hi+1)
	if hi-lo < 2 {
		lo = max(0, hi-2)
	}
	return lo, hi
}

// shape is a cycle as one vector to compare by, each channel without its mean and of length 1.
func (in Input) shape(a, b float64) []float64 {
	out := make([]float64, 0, points*(len(in.Motion)+len(in.Level)))
	for _, c := range in.channels(a, b, points) {
		mean, power := 0.0, 0.0
		for _, x := range c {
			mean += x / points
		}
		for i := range c {
			c[i] -= mean
			power += c[i] * c[i]
		}
		for i := range c {
			if power > 0 {
				c[i] /= math.Sqrt(power)
			}
		}
		out = append(out, c...)
	}
	return out
}

// likeness is the mean correlation of the channels of two shapes.
func likeness(a, b []float64) float64 {
	sum := 0.0
	for i := range a {
		sum += a[i] * b[i]
	}
	return sum * points / float64(len(a))
}

// judge finds the typical and the extreme cycle and how energies scatter.
func (r *Result) judge() {
	if len(r.Cycles) == 0 || r.ctx.Err() != nil {
		return
	}
	r.energies()
	stride := max(1, len(r.Cycles)/400)
	var shapes [][]float64
	var of []int
	for i := 0; i < len(r.Cycles); i += stride {
		shapes, of = append(shapes, r.in.shape(r.Cycles[i].From, r.Cycles[i].To)), append(of, i)
	}
	best := math.Inf(-1)
	for i, a := range shapes {
		sum := 0.0
		for _, b := range shapes {
			sum += likeness(a, b)
		}
		if sum > best {
			best, r.Typical = sum, of[i]
		}
	}
	typical := r.in.shape(r.Cycles[r.Typical].From, r.Cycles[r.Typical].To)
	r.Extreme, r.Odd = 0, 0
	var energy, length []float64
	for i := range r.Cycles {
		c := &r.Cycles[i]
		c.Likeness = likeness(r.in.shape(c.From, c.To), typical)
		if c.Energy() > r.Cycles[r.Extreme].Energy() {
			r.Extreme = i
		}
		if c.Likeness < r.Cycles[r.Odd].Likeness {
			r.Odd = i
		}
		energy, length = append(energy, c.Energy()), append(length, c.Length())
	}
	r.Energy, r.Length = spreadOf(energy), spreadOf(length)
}

func spreadOf(v []float64) (s Spread) {
	n := float64(len(v))
	for _, x := range v {
		s.Mean += x / n
	}
	for _, x := range v {
		s.Deviation += (x - s.Mean) * (x - s.Mean)
	}
	if s.Deviation = math.Sqrt(s.Deviation / math.Max(1, n-1)); n < 2 {
		s.Deviation = 0
	}
	v = slices.Clone(v)
	slices.Sort(v)
	q := func(p float64) float64 { return v[int(math.Round(p*(n-1)))] }
	s.Least, s.Most, s.P10, s.P50, s.P90 = v[0], v[len(v)-1], q(0.1), q(0.5), q(0.9)
	return s
}

// Overlay returns a channel of the recording over each cycle at n points, cycle after
// cycle, to be drawn on top of each other.
func (r *Result) Overlay(channel []float64, n int) [][]float64 {
	out := make([][]float64, 0, len(r.Cycles))
	for _, c := range r.Cycles {
		lo, hi := r.in.rows(c.From, c.To)
		out = append(out, even(r.in.T[lo:hi], channel[lo:hi], c.From, c.To, n))
	}
	return out
}
