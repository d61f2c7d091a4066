package logger

import (
	"fmt"
	"math"
	"time"

	"barlitre/machines/units"
)

const startForm = "2006-01-02 15:04:05.999"

// After returns by how much another recording begins later than this one by the dates of
// both [s]; 0 and false where one has none.
func (r *Recording) After(other *Recording) (float64, bool) {
	a, e1 := time.Parse(startForm, r.Start)
	b, e2 := time.Parse(startForm, other.Start)
	if e1 != nil || e2 != nil {
		return 0, false
	}
	return b.Sub(a).Seconds() - other.Time[0] + r.Time[0], true
}

// Attach returns this recording with the channels of another one, whose times have offset
// [s] added; how says where the offset comes from. They are read on straight lines at the rows of this one.
func (r *Recording) Attach(other *Recording, offset float64, how string) (*Recording, error) {
	first, last := other.Time[0]+offset, other.Time[len(other.Time)-1]+offset
	outside := 0
	for _, x := range r.Time {
		if x < first || x > last {
			outside++
		}
	}
	if outside > len(r.Time)-2 {
		return nil, fmt.Errorf("%s runs from %s to %s of %s, where that has no rows; give another offset", other.Name, units.Seconds(first, 6), units.Seconds(last, 6), r.Name)
	}
	out := *r
	out.Series, out.Corrections = append([]*Series{}, r.Series...), append([]Correction{}, r.Corrections...)
	out.Corrections = append(out.Corrections, Correction{Key: "second recording: " + other.Name, Count: len(other.Time), Warns: 10*outside > len(r.Time),
		Text: fmt.Sprintf("%s, %d rows, one every %s: %s", other.Name, len(other.Time), units.Seconds(other.Interval, 4), how),
		Done: fmt.Sprintf("its channels are read on straight lines at the rows of %s; %d of %d rows lie outside of it, where its first or last value holds", r.Name, outside, len(r.Time))})
	for _, c := range other.Corrections {
		c.Key, c.File = other.Name+": "+c.Key, other.Name
		out.Corrections = append(out.Corrections, c)
	}
	for _, s := range other.Series {
		t := *s
		t.index, t.time, t.raw, t.ready = nil, r.Time, column{}, readAt(r.Time, other.Time, s.Values(), offset)
		if out.Find(t.Column) != nil {
			t.Column += Of(other.Name)
		}
		out.Series = append(out.Series, &t)
	}
	return &out, nil
}

// Of is what the name of a channel ends in where another recording has one of the same name.
func Of(name string) string { return " of " + name }

// readAt reads values at times on straight lines, NaN outside.
func readAt(at, t, v []float64, offset float64) []float64 {
	out, k := make([]float64, len(at)), 0
	for i, x := range at {
		x -= offset
		if x < t[0] || x > t[len(t)-1] {
			out[i] = math.NaN()
			continue
		}
		for k+2 < len(t) && t[k+1] < x {
			k++
		}
		out[i] = v[k]
		if h := t[k+1] - t[k]; h > 0 {
			out[i] += (v[k+1] - v[k]) * math.Min(1, (x-t[k])/h)
		}
	}
	return out
}
