package circuit

import (
	"context"
	"math"

	"barlitre/circuit/duty"
)

// Chunks of a long duty start cold a little before their first step and take the way of
// their axes from the duty. When the chunk before has ended, what was assumed is compared
// with what was found; a chunk that assumed something else is done again.
const (
	chunkSteps = 8192
	leadSteps  = 64   // balanced before a chunk, to come from a cold start to where the chunk begins
	seam       = 1e-9 // largest difference of a start from the end before it, relative, of scaled unknowns
)

// chunk is what was found between two cuts.
type chunk struct {
	part       Receiver
	start, end State
	last       *Sample
	strokes    []stroke
	cert       Certificate
	err        error
	done       chan struct{}
}

// run balances the steps from up to but not with to.
func (ch *chunk) run(ctx context.Context, r *run, from, to int, part Receiver) {
	r.cert = Certificate{}
	ch.part = part
	ch.end, ch.cert, ch.err = r.all(ctx, ch.start, from, to, part)
	ch.last, ch.strokes = &r.sample, r.strokes
}

// startsAt reports whether a chunk may follow a state: it started there, but perhaps for
// where its axes stood on strokes whose ends are out of reach all the same.
func (ch *chunk) startsAt(st State) bool {
	if !alike(ch.start.x, st.x) || !alike(ch.start.speed, st.speed) {
		return false
	}
	if alike(ch.start.travel, st.travel) {
		return true
	}
	for i := range ch.strokes {
		k := &ch.strokes[i]
		if !k.clear(0) || !k.clear(st.travel[k.axis]-ch.start.travel[k.axis]) {
			return false
		}
	}
	return true
}

func alike(a, b []float64) bool {
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

// stroke is where an axis with ends was during a run [m].
type stroke struct {
	axis     int
	lo, hi   float64 // way from where the duty starts to each end
	unit     float64 // m/s, one unit of scaled speed
	from, to float64 // range of the ways gone
	margin   float64 // nearer than this an end is felt
}

// ended is a model whose axis has ends; reach gives the way to them [m] and what one
// unit of scaled speed is worth [m/s].
type ended interface {
	reach() (axis int, lo, hi, unit float64, has bool)
}

// clear reports whether the ends stay out of reach if the axis stands by shift further out.
func (k *stroke) clear(shift float64) bool {
	return k.from > k.to || k.from+shift > k.lo+k.margin && k.to+shift < k.hi-k.margin
}

// meet takes a point in time: the way gone to it, and that foretold from the speed before.
func (k *stroke) meet(travel, foretold, margin float64) {
	k.from = min(k.from, min(travel, foretold))
	k.to = max(k.to, max(travel, foretold))
	k.margin = max(k.margin, margin)
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

// waysOf is how far the axes are at each cut if they move as the duty says.
func waysOf(s *duty.Series, cuts []int) [][]float64 {
	ways := make([][]float64, len(cuts))
	for i := range ways {
		ways[i] = make([]float64, len(s.Axes))
	}
	for i := range s.Axes {
		a, way, k, last := &s.Axes[i], 0.0, 0, 0.0
		for j := range s.T {
			if j == cuts[k] {
				ways[k][i] = way
				k++
			}
			v := a.SpeedAt(j)
			if j > 0 {
				way += max(0, s.T[j]-s.T[j-1]) * (last + v) / 2
			}
			last = v
		}
	}
	return ways
}
