package logged

import (
	"context"
	"math"
	"slices"

	"barlitre/circuit/duty"
	"barlitre/circuit/recording/cycles"
	"barlitre/circuit/recording/rate"
)

// Rated is what the rate of a recording means for the energy of an axis.
type Rated struct {
	Axis string
	rate.Check
}

// rateRows bounds the rows by which a rate is judged: those in the middle of a longer recording.
const rateRows = 400_000

// Rates checks each axis that has motion and load. means says that rows are means over
// their intervals. A duty that repeats is one cycle.
func Rates(d *duty.Duty, means bool) (out []Rated) {
	cycle := 0.0
	if d.Repeats {
		cycle = d.Cycle()
	}
	if n := len(d.Time); n > rateRows {
		from, to := n/2-rateRows/2, n/2+rateRows/2
		middle := duty.Duty{Time: d.Time[from:to], Tracks: slices.Clone(d.Tracks)}
		for i, t := range middle.Tracks {
			middle.Tracks[i].Values = t.Values[from:to]
		}
		d = &middle
	}
	for _, w := range Works(d) {
		out = append(out, Rated{w.Axis, rate.Of(d.Time, w.Load, w.Speed, means, cycle)})
	}
	return out
}

// Cycles finds cycles and states: by the speeds of the axes, their loads, the power that
// both make, and what tells whether the pump turns. works are the Works of the duty; the end of ctx is that of the search.
func Cycles(ctx context.Context, d *duty.Duty, works []Moved) (*cycles.Result, error) {
	in := cycles.Input{T: d.Time}
	for _, w := range works {
		in.Motion = append(in.Motion, w.Speed)
		if slices.Min(w.Load) != slices.Max(w.Load) { // a load that is the same throughout tells no cycle
			in.Level = append(in.Level, w.Load)
		}
	}
	if len(works) > 0 {
		in.Power = Power(works)
	} else {
		for _, t := range d.Tracks {
			if t.What == duty.Speed {
				in.Motion = append(in.Motion, t.Values)
			}
		}
	}
	in.Supply = supplied(d)
	return cycles.Find(in, cycles.Options{Context: ctx, Turns: in.Supply == nil})
}

// supplied is what tells whether the pump turns: the power taken from the mains, else the highest of
// the pressures measured; nil where a duty has neither, for loads alone do not tell.
func supplied(d *duty.Duty) []float64 {
	for _, what := range []duty.What{duty.MeasuredPower, duty.MeasuredPressure} {
		var out []float64
		for _, t := range d.Tracks {
			switch {
			case t.What != what:
			case out == nil:
				out = slices.Clone(t.Values)
			default:
				for i, v := range t.Values {
					out[i] = max(out[i], v)
				}
			}
		}
		if out != nil {
			return out
		}
	}
	return nil
}

// Power is what all axes do at each row [W]; of one axis at least.
func Power(works []Moved) []float64 {
	out := make([]float64, len(works[0].Power))
	for _, w := range works {
		for i, p := range w.Power {
			out[i] += p
		}
	}
	return out
}

// PartOf is the stretch of a cycle.
func PartOf(c cycles.Cycle, is string) Part {
	return Part{From: math.Max(0, c.From), To: c.To, Is: is}
}
