package thermal

import (
	"math"
)

// Times of the calendar [s].
const (
	Day  = 86400.0
	Week = 7 * Day
)

// Span is a time of the week in which the machine runs, with what it does: an index of Plant.Loads.
type Span struct {
	From, To float64 // s from Monday 0:00, 0 <= From < To <= Week
	Load     int
}

// Shifts are the hours in which a machine runs, the same on each of its days.
type Shifts struct {
	Start float64 // s after midnight
	Hours float64 // s a day, 0 to Day
	Days  int     // of the week from Monday on, 1 to 7
}

// Spans returns the times of the week in which the machine runs, all with one load, in order. A shift that goes past midnight
// goes on in the next day, that of the last day in the Monday.
func (s Shifts) Spans(load int) []Span {
	var out, early []Span
	for d := range s.Days {
		from := float64(d)*Day + s.Start
		to := from + math.Min(s.Hours, Day)
		if to > Week {
			early = append(early, Span{0, to - Week, load})
			to = Week
		}
		if n := len(out); n > 0 && out[n-1].To >= from {
			out[n-1].To = to
		} else if to > from {
			out = append(out, Span{from, to, load})
		}
	}
	if len(early) > 0 && len(out) > 0 && early[0].To >= out[0].From {
		out[0].From = 0
		early = nil
	}
	return append(early, out...)
}

// Air is the course of a day's air temperature, Ta = Mean + Swing·cos(2π·(t − Warmest)/day).
type Air struct {
	Mean    float64 // K
	Swing   float64 // K, half of the difference between the warmest and the coldest hour
	Warmest float64 // s after midnight
}

// At returns the air temperature [K] at a time of the week [s].
func (a Air) At(t float64) float64 {
	if a.Swing == 0 {
		return a.Mean
	}
	return a.Mean + a.Swing*math.Cos(2*math.Pi*(t-a.Warmest)/Day)
}

// Highest returns the highest temperature of the day [K].
func (a Air) Highest() float64 { return a.Mean + math.Abs(a.Swing) }
