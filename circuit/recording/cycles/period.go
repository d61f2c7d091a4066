package cycles

import (
	"math"

	"gonum.org/v1/gonum/dsp/fourier"
)

// even resamples a channel at n times evenly from a to b, straight between rows. A row is
// looked for where it stands if rows are even, so that rows between cost nothing.
func even(t, v []float64, a, b float64, n int) []float64 {
	out := make([]float64, n)
	span := t[len(t)-1] - t[0]
	for i := range out {
		at := a + (b-a)*float64(i)/float64(max(1, n-1))
		k := 0
		if span > 0 {
			k = max(0, min(len(t)-2, int(float64(len(t)-1)*(at-t[0])/span)))
		}
		for k > 0 && t[k] > at {
			k--
		}
		for k+2 < len(t) && t[k+1] < at {
			k++
		}
		h := t[k+1] - t[k]
		u := 0.0
		if h > 0 {
			u = math.Min(1, math.Max(0, (at-t[k])/h))
		}
		out[i] = v[k] + u*(v[k+1]-v[k])
	}
	return out
}

// A stretch is transformed by so many points at most, and a period found in it holds if it
// has so many of them. Cycles are sought by so many means of rows a period. All are our choice.
const (
	maxLagSamples = 1 << 16
	leastLag      = 16
	fewPeriods    = 12
	coarsePoints  = 2 * points
)

// period finds the period of a stretch of so many rows [s], and its height. It takes the whole stretch
// by means of rows; where cycles are too short to be seen so, less and less of its middle. What
// was found is looked at again in a few of its periods, row by row: it may be several cycles.
func (in Input) period(from, to float64, rows int) (seconds, height float64) {
	step := (to - from) / float64(rows)
	thin := (rows + maxLagSamples - 1) / maxLagSamples
	for lag := 0.0; ; thin = (thin + 7) / 8 {
		seconds, lag, height = in.periodOf(from, to, rows, thin)
		if thin == 1 || lag >= leastLag {
			break
		}
	}
	if fine := int(math.Ceil(fewPeriods * seconds / step / maxLagSamples)); seconds > 0 && fine < thin {
		if s, _, h := in.periodOf(from, to, rows, fine); s > 0 {
			return s, h
		}
	}
	return seconds, height
}

// periodOf finds the period in the middle of a stretch by means of so many rows; lag is in means.
func (in Input) periodOf(from, to float64, rows, thin int) (seconds, lag, height float64) {
	span := min(rows, thin*maxLagSamples)
	if span < rows {
		middle, half := (from+to)/2, (to-from)/2*float64(span)/float64(rows)
		from, to = middle-half, middle+half
	}
	n := span / thin
	lag, height = period(autocorrelation(in.part(from, to).thinned(thin).channels(from, to, n)))
	return lag * (to - from) / float64(n-1), lag, height
}

// part is a stretch of the rows.
func (in Input) part(a, b float64) (out Input) {
	lo, hi := in.rows(a, b)
	out.T = in.T[lo:hi]
	for _, v := range in.Motion {
		out.Motion = append(out.Motion, v[lo:hi])
	}
	for _, v := range in.Level {
		out.Level = append(out.Level, v[lo:hi])
	}
	return out
}

// thinned puts the mean of n rows in their place.
func (in Input) thinned(n int) (out Input) {
	if n < 2 {
		return in
	}
	means := func(v []float64) []float64 {
		m := make([]float64, 0, len(v)/n+1)
		for i := 0; i < len(v); i += n {
			k, sum := min(i+n, len(v)), 0.0
			for _, x := range v[i:k] {
				sum += x
			}
			m = append(m, sum/float64(k-i))
		}
		return m
	}
	out.T = means(in.T)
	for _, v := range in.Motion {
		out.Motion = append(out.Motion, means(v))
	}
	for _, v := range in.Level {
		out.Level = append(out.Level, means(v))
	}
	return out
}

// autocorrelation returns that of several channels together, 1 at lag 0, each lag over
// what overlaps, for lags up to half of the stretch.
func autocorrelation(channels [][]float64) []float64 {
	n := len(channels[0])
	size := 1
	for size < 2*n {
		size *= 2
	}
	fft := fourier.NewFFT(size)
	sum := make([]float64, n/2+1)
	used := 0.0
	padded := make([]float64, size)
	for _, c := range channels {
		clear(padded)
		mean, power := 0.0, 0.0
		for _, x := range c {
			mean += x / float64(n)
		}
		for i, x := range c {
			padded[i] = x - mean
			power += (x - mean) * (x - mean)
		}
		if power == 0 {
			continue
		}
		f := fft.Coefficients(nil, padded)
		for i, x := range f {
			f[i] = complex(real(x)*real(x)+imag(x)*imag(x), 0)
		}
		r := fft.Sequence(nil, f)
		for lag := range sum {
			sum[lag] += r[lag] / float64(size) / power * float64(n) / float64(n-lag)
		}
		used++
	}
	if used > 0 {
		for i := range sum {
			sum[i] /= used
		}
	}
	return sum
}

// period returns the lag of the first high peak after the correlation has fallen, refined
// by a parabola through it, and its height; 0 when there is none.
func period(r []float64) (lag, height float64) {
	from := 1
	for from < len(r) && r[from] > 0.1 {
		from++
	}
	best := 0.0
	for i := from; i+1 < len(r); i++ {
		if r[i] >= r[i-1] && r[i] >= r[i+1] {
			best = math.Max(best, r[i])
		}
	}
	if best < leastHeight {
		return 0, 0
	}
	for i := from; i+1 < len(r); i++ {
		if r[i] >= r[i-1] && r[i] >= r[i+1] && r[i] >= firstPeak*best {
			a, b, c := r[i-1], r[i], r[i+1]
			shift := 0.0
			if d := a - 2*b + c; d < 0 {
				shift = (a - c) / (2 * d)
			}
			return float64(i) + shift, b
		}
	}
	return 0, 0
}

// Both are our choice. A stretch that does not repeat has peaks of chance below 0.3; a
// first peak of nine tenths of the highest is that of one cycle, where that of two may be a little higher.
const (
	leastHeight = 0.3
	firstPeak   = 0.85
)
