package logged

import (
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

// Rates checks each axis of a duty that has motion and load. means says that rows are means
// over their intervals.
func Rates(d *duty.Duty, means bool) (out []Rated) {
	for _, w := range Works(d) {
		out = append(out, Rated{w.Axis, RateOf(d, w.Load, w.Speed, means)})
	}
	return out
}

// RateOf checks one axis by its load and speed at the rows of a duty, which is one cycle where
// it repeats.
func RateOf(d *duty.Duty, load, speed []float64, means bool) rate.Check {
	cycle := 0.0
	if d.Repeats {
		cycle = d.Cycle()
	}
	from, to := 0, len(d.Time)
	if to > rateRows {
		from, to = to/2-rateRows/2, to/2+rateRows/2
	}
	return rate.Of(d.Time[from:to], load[from:to], speed[from:to], means, cycle)
}

// Cycles finds cycles and states: by the speeds of the axes, their loads, and the power that
// both make.
func Cycles(d *duty.Duty) (*cycles.Result, error) {
	in := cycles.Input{T: d.Time}
	for _, w := range Works(d) {
		in.Motion = append(in.Motion, w.Speed)
		if slices.Min(w.Load) != slices.Max(w.Load) { // a load that is the same throughout tells no cycle
			in.Level = append(in.Level, w.Load)
		}
		if in.Power == nil {
			in.Power = make([]float64, len(d.Time))
		}
		for i, p := range w.Power {
			in.Power[i] += p
		}
	}
	if in.Motion == nil {
		for _, t := range d.Tracks {
			if t.What == duty.Speed {
				in.Motion = append(in.Motion, t.Values)
			}
		}
	}
	return cycles.Find(in, cycles.Options{})
}

// Power is what all axes do at each row [W].
func Power(d *duty.Duty) []float64 {
	out := make([]float64, len(d.Time))
	for _, w := range Works(d) {
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
