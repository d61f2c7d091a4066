package cycles

import (
	"math"
	"slices"
)

// State says what a machine does.
type State string

// The states.
const (
	Work State = "work" // something moves
	Hold State = "hold" // nothing moves, something is under pressure or load
	Idle State = "idle" // nothing moves and nothing is held; the pump turns
	Off  State = "off"  // nothing at all
)

// Stretch is a stretch of one state.
type Stretch struct {
	State    State
	From, To float64 // s
	a, b     int     // rows
}

// Limits as shares of the top of a channel, our choice, to be changed by Options.
const (
	defaultMoving = 0.03
	defaultHeld   = 0.30
	defaultOff    = 0.02
)

// topOf is the value that is passed in a thousandth of the rows only: a spike does not count.
func topOf(v []float64) float64 {
	stride := max(1, len(v)/50000)
	var s []float64
	for i := 0; i < len(v); i += stride {
		s = append(s, math.Abs(v[i]))
	}
	if len(s) == 0 {
		return 0
	}
	slices.Sort(s)
	return s[min(len(s)-1, int(0.999*float64(len(s))))]
}

// states finds the state of every stretch; stretches shorter than o.Shortest join the one before.
func states(in Input, o Options) []Stretch {
	motion, level := tops(in.Motion), tops(in.Level)
	power := 0.0
	if in.Supply != nil {
		power = topOf(in.Supply)
	}
	at := func(i int) State {
		for k, v := range in.Motion {
			if motion[k] > 0 && math.Abs(v[i]) > o.Moving*motion[k] {
				return Work
			}
		}
		dead := true
		for k, v := range in.Level {
			x := math.Abs(v[i])
			if level[k] > 0 && x > o.Held*level[k] {
				return Hold
			}
			dead = dead && x <= o.Off*level[k]
		}
		if in.Supply != nil {
			dead = math.Abs(in.Supply[i]) <= o.Off*power
		}
		if dead && !o.Turns && (in.Supply != nil || len(in.Level) > 0) {
			return Off
		}
		return Idle
	}
	var out []Stretch
	for i := range in.T {
		s := at(i)
		if n := len(out); n == 0 || out[n-1].State != s {
			out = append(out, Stretch{State: s, a: i})
		}
		out[len(out)-1].b = i + 1
	}
	return joined(in.T, out, o.Shortest)
}

func tops(v [][]float64) (out []float64) {
	for _, c := range v {
		out = append(out, topOf(c))
	}
	return out
}

// joined lets stretches that are too short go on as the one before, and joins neighbours of one state.
func joined(t []float64, in []Stretch, shortest float64) (out []Stretch) {
	end := func(s Stretch) float64 { return t[min(s.b, len(t)-1)] }
	for _, s := range in {
		if n := len(out); n > 0 && (end(s)-t[s.a] < shortest || out[n-1].State == s.State) {
			out[n-1].b = s.b
			continue
		}
		out = append(out, s)
	}
	for i := range out {
		out[i].From, out[i].To = t[out[i].a], end(out[i])
	}
	return out
}

// Share is the time in a state.
type Share struct {
	State  State
	Time   float64 // s
	Energy float64 // J, of Input.Energy
	Times  int     // stretches
}
