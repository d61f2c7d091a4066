// Package duty holds the duty cycle: what the axes of a machine must do over time.
//
// An axis is a place where the machine does work, at the load side: a ram, a
// winch drum, a swing. A duty is a table of time stamps and tracks, linear
// between the rows; two rows with one time stamp are a step. Each axis is given
// exactly two of motion, load and command; the balance finds the third.
//
// Signs: speed > 0 extends a cylinder or hoists; load is the force or torque
// the piston or shaft must give to the outside, > 0 when it resists positive
// motion. All values are SI: s, m/s or rad/s, N or N·m.
package duty

import (
	"fmt"
	"math"

	"barlitre/machines/units"
)

// AxisKind says whether an axis moves along a line or turns.
type AxisKind int

// The two kinds of axis.
const (
	Linear AxisKind = iota // speed m/s, load N
	Rotary                 // speed rad/s, load N·m
)

func (k AxisKind) String() string {
	if k == Rotary {
		return "rotary"
	}
	return "linear"
}

// Axis names a place where work is done.
type Axis struct {
	Name string
	Kind AxisKind
	Load string // what stands at the load side, for people: "platen and bale"
}

// What says which quantity of an axis a track gives.
type What int

// The quantities a track may give.
const (
	Speed            What = iota // m/s or rad/s
	Position                     // m or rad; speed is taken from it by central differences
	Load                         // N or N·m
	Command                      // −1..1: opening of a valve, setting of a pump, share of top speed of a motor
	SetPressure                  // Pa, >= 0; of a block
	SetFlow                      // m³/s, >= 0; of a block
	MeasuredPressure             // Pa; of a measuring point: compared with what is found, and no demand
	MeasuredFlow                 // m³/s; of a measuring point, as MeasuredPressure
	MeasuredPower                // W, taken from the mains by an electric motor, as MeasuredPressure
)

var whatNames = [...]string{"speed", "position", "load", "command", "set_pressure", "set_flow", "pressure", "flow", "power"}

func (w What) String() string { return whatNames[w] }

// OfAxis reports whether an axis may have a track of this quantity.
func (w What) OfAxis() bool { return w <= Command }

// OfBlock reports whether a block may have a track of this quantity.
func (w What) OfBlock() bool { return w >= Command }

// Measured reports whether tracks of this quantity only tell what was measured.
func (w What) Measured() bool { return w >= MeasuredPressure }

// Dim returns the dimension of a quantity, of a kind of axis where it is of one.
func (w What) Dim(k AxisKind) units.Dim {
	rotary := k == Rotary
	switch {
	case w == Command:
		return units.Ratio
	case w == SetPressure || w == MeasuredPressure:
		return units.Pressure
	case w == SetFlow || w == MeasuredFlow:
		return units.Flow
	case w == MeasuredPower:
		return units.Power
	case w == Speed && rotary:
		return units.AngularSpeed
	case w == Speed:
		return units.Velocity
	case w == Position && rotary:
		return units.Angle
	case w == Position:
		return units.Length
	case rotary:
		return units.Torque
	}
	return units.Force
}

// WhatNamed finds a quantity by the word used in files.
func WhatNamed(word string) (What, bool) {
	for i, n := range whatNames {
		if n == word {
			return What(i), true
		}
	}
	return 0, false
}

// Track is one quantity of one axis (or one commanded control) over the rows of a duty.
type Track struct {
	Of     string // name of the axis, or id of the commanded block
	What   What
	Values []float64 // SI, len == len(Duty.Time)
}

// Phase names a stretch of a duty, for people.
type Phase struct {
	Name string
	From float64 // s
}

// Duty is one duty cycle.
type Duty struct {
	Name    string
	Hours   float64 // s a year in which the duty runs
	Repeats bool    // the cycle repeats without pause while it runs
	Step    float64 // s, spacing of time steps between the rows; 0 = rows only
	// Standstill gives the speed [m/s or rad/s] up to which an axis counts as
	// standing, by axis; StandstillShare of its largest speed where it gives none.
	Standstill map[string]float64
	// Sampled leaves out the instants at which an axis comes to rest or sets off:
	// the energies are then those of a plain sum over samples, as calculations on
	// recorded samples give them. Only meant for comparing with such calculations.
	Sampled bool
	Time    []float64
	Tracks  []Track
	Phases  []Phase
}

// Cycle returns the length of the duty [s].
func (d *Duty) Cycle() float64 {
	if len(d.Time) < 2 {
		return 0
	}
	return d.Time[len(d.Time)-1] - d.Time[0]
}

// Track returns the track of an axis or block, or nil.
func (d *Duty) Track(of string, w What) *Track {
	for i := range d.Tracks {
		if d.Tracks[i].Of == of && d.Tracks[i].What == w {
			return &d.Tracks[i]
		}
	}
	return nil
}

// Given says which two of motion, load and command a duty gives for an axis.
type Given int

// The three ways an axis can be given, and the faulty ones.
const (
	None          Given = iota // the duty says nothing of the axis
	MotionLoad                 // the command is found: the usual audit
	LoadCommand                // the motion is found: a recorded command
	MotionCommand              // the load is found: a driven machine
	TooFew
	TooMany
)

// Given reports which two quantities are given for an axis.
func (d *Duty) Given(axis string) Given {
	m := d.Track(axis, Speed) != nil || d.Track(axis, Position) != nil
	l := d.Track(axis, Load) != nil
	c := d.Track(axis, Command) != nil
	switch {
	case m && l && c:
		return TooMany
	case m && l:
		return MotionLoad
	case l && c:
		return LoadCommand
	case m && c:
		return MotionCommand
	case m || l || c:
		return TooFew
	}
	return None
}

// Problem is one fault of a duty, in words that say what to do.
type Problem struct {
	Duty, Track string
	Text        string
}

func (p Problem) Error() string {
	if p.Track == "" {
		return fmt.Sprintf("duty %q: %s", p.Duty, p.Text)
	}
	return fmt.Sprintf("duty %q, track %s: %s", p.Duty, p.Track, p.Text)
}

// Check lists everything that is wrong with the table: time stamps that run
// backwards, tracks of another length, numbers that are not finite.
func (d *Duty) Check() []Problem {
	var out []Problem
	bad := func(track, format string, args ...any) {
		out = append(out, Problem{d.Name, track, fmt.Sprintf(format, args...)})
	}
	if len(d.Time) < 2 {
		bad("", "has %d time stamps; give at least two", len(d.Time))
	} else if d.Cycle() <= 0 {
		bad("", "lasts %g s; the last time stamp must come after the first", d.Cycle())
	}
	sound := func(column []float64, what fact, look func()) {
		if _, ok := recall(column, what); ok {
			return
		}
		before := len(out)
		if look(); len(out) == before {
			keep(column, what, 1)
		}
	}
	sound(d.Time, inOrder, func() {
		for i, t := range d.Time {
			if math.IsNaN(t) || math.IsInf(t, 0) {
				bad("", "time stamp %d is not a number", i+1)
			} else if i > 0 && t < d.Time[i-1] {
				bad("", "time runs backwards from %g s to %g s (row %d); sort the rows", d.Time[i-1], t, i+1)
			} else if i > 1 && t == d.Time[i-1] && t == d.Time[i-2] {
				bad("", "three rows at %g s; a step is two rows at one time", t)
			}
		}
	})
	for _, tr := range d.Tracks {
		name := tr.Of + "." + tr.What.String()
		if len(tr.Values) != len(d.Time) {
			bad(name, "has %s for %s; each value needs a time stamp", counted(len(tr.Values), "value"), counted(len(d.Time), "time stamp"))
		}
		sound(tr.Values, tr.What.bounded(), func() {
			if i, text := tr.fault(); text != "" {
				bad(name, "value %d %s", i+1, text)
			}
		})
	}
	for _, tr := range d.Tracks {
		if tr.What == Position && d.Track(tr.Of, Speed) != nil {
			bad(tr.Of, "speed and position are both given; keep one")
		}
	}
	return out
}

// bounded is what the values of a track must be.
func (w What) bounded() fact {
	switch w {
	case Command:
		return asCommand
	case SetPressure, SetFlow:
		return notBelowZero
	}
	return finite
}

// fault finds the first value of a track that it must not have, and says what is wrong with it.
func (tr *Track) fault() (row int, text string) {
	bounds := tr.What.bounded()
	for i, v := range tr.Values {
		switch {
		case math.IsNaN(v) || math.IsInf(v, 0):
			return i, "is not a number"
		case bounds == asCommand && math.Abs(v) > 1+1e-9:
			return i, fmt.Sprintf("is %g; a command lies between -1 and 1", v)
		case bounds == notBelowZero && v < 0:
			return i, "is below 0; a set pressure or set flow starts at 0"
		}
	}
	return 0, ""
}

func counted(n int, one string) string {
	if n == 1 {
		return "1 " + one
	}
	return fmt.Sprintf("%d %ss", n, one)
}
