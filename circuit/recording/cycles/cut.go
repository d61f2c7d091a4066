package cycles

import "math"

// drift is how far a cycle may start from where it is expected, as a share of the period.
const drift = 0.25

// Both are our choice: how much of a period the work of the last cycle of a run may end early
// for that cycle to be whole, and what the recording may lack of the pause after it, besides
// two rows.
const (
	shortest = 0.1
	lacking  = 0.01
)

// cut goes from cycle to cycle, from the start of a run to the end of its work: the next one
// starts where what follows is most like the template. The last one is whole if its work is
// and if there is room for the pause after it.
func (r *Result) cut(from, to, room, period float64, template []float64) {
	t := r.in.T
	slack := lacking*period + 2*(t[len(t)-1]-t[0])/float64(len(t)-1)
	for start := from; start+r.works-shortest*period <= to && start+period <= room+slack && r.ctx.Err() == nil; {
		at := start + period // of the last one no next one tells where it ends
		if start+period+r.works/2 <= to {
			at = r.next(start, to, period, template)
		}
		if r.in.likeAt(start, period, template) >= leastHeight {
			r.Cycles = append(r.Cycles, Cycle{From: start, To: math.Min(at, room)})
		}
		start = at
	}
}

// likeAt compares what starts at s with the template.
func (in Input) likeAt(s, period float64, template []float64) float64 {
	return likeness(in.shape(s, math.Min(s+period, in.T[len(in.T)-1])), template)
}

// next finds where the cycle after the one at start begins, by means of rows, and refines it
// by the rows themselves; of places alike, the one where it is expected. Places lie as far
// apart as points of the scanned template, so every channel is read once for all of them.
func (r *Result) next(start, to, period float64, template []float64) float64 {
	const places = 2 * drift * points
	from := start + period*(1-drift)
	windows := r.coarse.channels(from, from+period*(places+points)/points, places+points+1)
	best, at := math.Inf(-1), start+period
	for k := 0; k <= places; k++ {
		s := from + period*float64(k)/points
		if s+r.works/2 > to {
			break
		}
		l := 0.0
		for c, w := range windows {
			l += correlation(w[k:k+points], r.scanned[c*points:(c+1)*points]) / float64(len(windows))
		}
		if l -= 0.02 * math.Abs(2*float64(k)/places-1); l > best {
			best, at = l, s
		}
	}
	return r.refined(at, period, template)
}

// correlation is that of values with a shape, which has no mean and length 1.
func correlation(v, shape []float64) float64 {
	sum, mean, power := 0.0, 0.0, 0.0
	for i, x := range v {
		sum, mean = sum+x*shape[i], mean+x
	}
	mean /= float64(len(v))
	for _, x := range v {
		power += (x - mean) * (x - mean)
	}
	if power == 0 {
		return 0
	}
	return sum / math.Sqrt(power)
}

// refined finds the start between the places that were tried.
func (r *Result) refined(at, period float64, template []float64) float64 {
	step := period / points
	here := r.in.likeAt(at, period, template)
	for range 5 {
		step /= 2
		before, after := r.in.likeAt(at-step, period, template), r.in.likeAt(at+step, period, template)
		switch {
		case before > here && before >= after:
			at, here = at-step, before
		case after > here:
			at, here = at+step, after
		}
	}
	return at
}
