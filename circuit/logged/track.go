package logged

import (
	"fmt"
	"math"
	"sort"
	"strings"

	"barlitre/circuit/duty"
	"barlitre/circuit/recording/channels"
	"barlitre/machines/units"
)

// Track says how a track is made of channels.
type Track struct {
	Name string            // as a duty names it: "ram.load"
	Law  string            // Law.Word; AsMeasured for a channel that is the track
	Says map[string]string // by Channel.Key and Number.Key: names of channels, numbers as typed
}

// Split parts the name of a track.
func (t Track) Split() (of string, what duty.What, err error) {
	of, word, _ := strings.Cut(t.Name, ".")
	what, ok := duty.WhatNamed(word)
	if of == "" || !ok {
		return "", 0, fmt.Errorf("%q is not a track; write an axis or block and what is given of it, as in ram.speed", t.Name)
	}
	return of, what, nil
}

// Part is the stretch of a recording that makes a duty; To == From is all of it.
type Part struct {
	From, To float64 // s
	Is       string  // what it is, for people: "typical cycle"
}

// Whole reports whether all rows count.
func (p Part) Whole() bool { return !(p.To > p.From) }

// Cut keeps a part of a duty, its ends between rows, and starts its time at 0. The columns
// that the duty had are not changed.
func (p Part) Cut(d *duty.Duty) error {
	t := d.Time
	if p.Whole() || len(t) == 0 {
		return nil
	}
	first, last := t[0], t[len(t)-1]
	if !(p.From < last && p.To > first) {
		return fmt.Errorf("from %s to %s is not in the recording, which lasts from %s to %s", units.Seconds(p.From, 4), units.Seconds(p.To, 4), units.Seconds(first, 4), units.Seconds(last, 4))
	}
	from, to := math.Max(p.From, first), math.Min(p.To, last)
	pick := func(v []float64) (out []float64) {
		out = append(out, at(t, v, from))
		for i := range t {
			if t[i] > from && t[i] < to {
				out = append(out, v[i])
			}
		}
		return append(out, at(t, v, to))
	}
	for k := range d.Tracks {
		d.Tracks[k].Values = pick(d.Tracks[k].Values)
	}
	d.Time = pick(t)
	for i := range d.Time {
		d.Time[i] -= from
	}
	return nil
}

// at is the value at x, straight between rows.
func at(t, v []float64, x float64) float64 {
	lo := sort.SearchFloat64s(t, x)
	if lo == 0 || lo == len(t) || t[lo] == t[lo-1] {
		return v[min(lo, len(t)-1)]
	}
	return v[lo-1] + (v[lo]-v[lo-1])*(x-t[lo-1])/(t[lo]-t[lo-1])
}

// Moved is what is known of an axis that has motion and load.
type Moved struct {
	Axis               string
	Speed, Load, Power []float64
	Positive, Negative float64 // J; see Works
}

// window is how long the parabolas are by which a position is differentiated to be looked at [s].
const window = 0.1

// Works returns the axes of a duty that have motion and load, with their work counted at the
// rows: what is above and what is below zero there, each for half the time to the rows beside
// it. A sum over rows in a spreadsheet gives the same.
func Works(d *duty.Duty) (out []Moved) {
	for _, t := range d.Tracks {
		load := d.Track(t.Of, duty.Load)
		if t.What != duty.Speed && t.What != duty.Position || load == nil {
			continue
		}
		x := Moved{Axis: t.Of, Speed: t.Values, Load: load.Values, Power: make([]float64, len(d.Time))}
		if t.What == duty.Position {
			x.Speed, _ = channels.Slope(d.Time, t.Values, window)
		}
		for i := range d.Time {
			x.Power[i] = x.Speed[i] * x.Load[i]
			if i > 0 {
				h, p, q := (d.Time[i]-d.Time[i-1])/2, x.Power[i-1], x.Power[i]
				x.Positive += h * (math.Max(p, 0) + math.Max(q, 0))
				x.Negative += h * (math.Min(p, 0) + math.Min(q, 0))
			}
		}
		out = append(out, x)
	}
	return out
}
