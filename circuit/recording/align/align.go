package align

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/dsp/fourier"

	"barlitre/machines/units"
)

// Found is a shift and how sure it is.
type Found struct {
	Offset     float64 // s, to be added to the times of the second recording
	Height     float64 // correlation there, -1..1
	Next       float64 // the highest correlation elsewhere, at least one width of the peak away
	NextAt     float64 // s, the shift there
	Resolution float64 // s, of the grid; Offset lies between its points by a parabola
	Drift      float64 // s per s by which the second clock runs slow, NaN where it cannot be told
}

// Limits of what is taken for an agreement: our choice. Unrelated courses of a machine
// that works in cycles reach 0.5 or so.
const (
	leastHeight = 0.7
	clearBy     = 0.05 // above the next best
	maxSamples  = 1 << 20
)

// Sure reports whether the shift stands out.
func (f Found) Sure() bool { return f.Height >= leastHeight && f.Height-f.Next >= clearBy }

// String says it in numbers.
func (f Found) String() string {
	s := fmt.Sprintf("%s are added to its times, where the correlation is %.3f", units.Seconds(f.Offset, 4), f.Height)
	if f.Next > -1 {
		s += fmt.Sprintf(" (next best %.3f at %s)", f.Next, units.Seconds(f.NextAt, 4))
	}
	if !math.IsNaN(f.Drift) {
		s += fmt.Sprintf("; over the recording the clocks drift apart by %s an hour", units.Seconds(3600*f.Drift, 2))
	}
	if !f.Sure() {
		s += "; that is not clear: the events repeat or differ, so give the offset"
	}
	return s
}

// Offset finds the shift of the second recording, of at most within [s] to either side.
func Offset(t1, v1, t2, v2 []float64, within float64) (Found, error) {
	if len(t1) < 16 || len(t2) < 16 {
		return Found{}, fmt.Errorf("%d and %d rows are too few to be compared", len(t1), len(t2))
	}
	if !(within > 0) {
		return Found{}, fmt.Errorf("the shift to look for must be above %s", units.Seconds(0, 1))
	}
	f, err := search(t1, v1, t2, v2, 0, within)
	if err != nil {
		return f, err
	}
	f.Drift = drift(t1, v1, t2, v2, f)
	return f, nil
}

// search looks around a shift.
func search(t1, v1, t2, v2 []float64, around, within float64) (Found, error) {
	low := math.Min(t1[0], t2[0]+around-within)
	high := math.Max(t1[len(t1)-1], t2[len(t2)-1]+around+within)
	h := math.Max(step(t1), step(t2))
	h = math.Max(h/2, (high-low)/(maxSamples/2))
	a, b := grid(t1, v1, t1[0], h), grid(t2, v2, t2[0], h)
	if a == nil || b == nil {
		return Found{}, fmt.Errorf("the channel does not change, so there is nothing to align by")
	}
	base := t1[0] - t2[0] // shift at lag 0
	r, least := correlate(a, b)
	ok := func(lag int) bool { return math.Abs(base+float64(lag)*h-around) <= within }
	best, found := 0, math.Inf(-1)
	for lag, x := range r {
		if ok(lag-least) && x > found {
			best, found = lag, x
		}
	}
	if math.IsInf(found, -1) || found == -1 {
		return Found{}, fmt.Errorf("the recordings do not overlap within %s of one another", units.Seconds(within, 6))
	}
	out := Found{Height: found, Next: -1, Resolution: h, Drift: math.NaN()}
	out.Offset = base + (float64(best-least)+vertex(r, best))*h
	left, right := best, best
	for left > 0 && r[left-1] < r[left] {
		left--
	}
	for right+1 < len(r) && r[right+1] < r[right] {
		right++
	}
	for lag, x := range r {
		if (lag < left || lag > right) && ok(lag-least) && x > out.Next {
			out.Next, out.NextAt = x, base+float64(lag-least)*h
		}
	}
	return out, nil
}

// vertex is where a parabola through a peak and its neighbours is highest, in steps.
func vertex(r []float64, i int) float64 {
	if i == 0 || i+1 == len(r) {
		return 0
	}
	if d := r[i-1] - 2*r[i] + r[i+1]; d < 0 {
		return (r[i-1] - r[i+1]) / (2 * d)
	}
	return 0
}

// drift compares the shifts of the first and the last third.
func drift(t1, v1, t2, v2 []float64, f Found) float64 {
	n := len(t2) / 3
	if n < 50 || !f.Sure() {
		return math.NaN()
	}
	near := math.Max(20*f.Resolution, 0.002*(t2[len(t2)-1]-t2[0]))
	at := func(a, b int) (Found, error) {
		lo, hi := t2[a]+f.Offset-near, t2[b-1]+f.Offset+near
		i, k := 0, len(t1)
		for i < k && t1[i] < lo {
			i++
		}
		for k > i && t1[k-1] > hi {
			k--
		}
		if k-i < 50 {
			return Found{}, fmt.Errorf("they do not overlap")
		}
		return search(t1[i:k], v1[i:k], t2[a:b], v2[a:b], f.Offset, near)
	}
	first, e1 := at(0, n)
	last, e2 := at(len(t2)-n, len(t2))
	if e1 != nil || e2 != nil || first.Height < leastHeight || last.Height < leastHeight {
		return math.NaN()
	}
	between := (t2[len(t2)-1] + t2[len(t2)-n] - t2[n-1] - t2[0]) / 2
	return (last.Offset - first.Offset) / between
}

// grid resamples a channel evenly, straight between rows, and takes off its mean; nil where it does not change.
func grid(t, v []float64, from, h float64) []float64 {
	n := int((t[len(t)-1]-from)/h) + 1
	out := make([]float64, n)
	k, mean := 0, 0.0
	for i := range out {
		x := from + float64(i)*h
		for k+2 < len(t) && t[k+1] < x {
			k++
		}
		out[i] = v[k]
		if d := t[k+1] - t[k]; d > 0 {
			out[i] += (v[k+1] - v[k]) * math.Min(1, (x-t[k])/d)
		}
		mean += out[i] / float64(n)
	}
	power := 0.0
	for i := range out {
		out[i] -= mean
		power += out[i] * out[i]
	}
	if !(power > 1e-18*mean*mean*float64(n)) {
		return nil
	}
	return out
}

// leastOverlap is the share of the shorter recording that must overlap.
const leastOverlap = 0.25

// correlate returns the correlation of a with b for lags from -least on, each over what
// overlaps; -1 where that is too little.
func correlate(a, b []float64) (r []float64, least int) {
	size := 1
	for size < len(a)+len(b) {
		size *= 2
	}
	fft := fourier.NewFFT(size)
	spectrum := func(v []float64) []complex128 {
		p := make([]float64, size)
		copy(p, v)
		return fft.Coefficients(nil, p)
	}
	fa, fb := spectrum(a), spectrum(b)
	for i := range fa {
		fa[i] *= complex(real(fb[i]), -imag(fb[i]))
	}
	c := fft.Sequence(nil, fa)
	sa, qa := sums(a)
	sb, qb := sums(b)
	least = len(b) - 1
	r = make([]float64, len(a)+least)
	for i := range r {
		lag := i - least // b[0] stands at a[lag]
		from, to := max(0, lag), min(len(a), lag+len(b))
		n := float64(to - from)
		r[i] = -1
		if n < leastOverlap*float64(min(len(a), len(b))) {
			continue
		}
		ma, mb := (sa[to]-sa[from])/n, (sb[to-lag]-sb[from-lag])/n
		va, vb := qa[to]-qa[from]-n*ma*ma, qb[to-lag]-qb[from-lag]-n*mb*mb
		if va <= 1e-9*qa[len(a)] || vb <= 1e-9*qb[len(b)] {
			continue
		}
		r[i] = (c[(lag+size)%size]/float64(size) - n*ma*mb) / math.Sqrt(va*vb)
	}
	return r, least
}

// sums are the running sums of values and of their squares.
func sums(v []float64) (s, q []float64) {
	s, q = make([]float64, len(v)+1), make([]float64, len(v)+1)
	for i, x := range v {
		s[i+1], q[i+1] = s[i]+x, q[i]+x*x
	}
	return s, q
}

func step(t []float64) float64 { return (t[len(t)-1] - t[0]) / float64(len(t)-1) }
