package sitecheck

import (
	"cmp"
	"math"
	"slices"

	"barlitre/audit"
	"barlitre/audit/look"
	"barlitre/machines/units"
)

// State is one of the four in which a machine is read.
type State struct {
	Name string // as readings name it
	Text string // how to bring the machine into it
	when look.When
}

// States lists the four.
func States() []State {
	return []State{
		{"stopped", "motor off, locked, loads down", nil},
		{"idling", "motor on, nothing moves, no load held", look.Only(look.Idling)},
		{"holding", "motor on, nothing moves, load held", look.Only(look.Holding)},
		{"working", "the duty as drawn", look.Only(look.Working)},
	}
}

// Value is what a model says of a point in a state; NaN where it says nothing.
type Value struct{ Mean, Low, High float64 }

// none is no value.
var none = Value{math.NaN(), math.NaN(), math.NaN()}

// Model is what a solved circuit says of each point in each state, by state and point.
type Model map[string]Value

func at(state, point string) string { return state + "." + point }

// modelOf reads a solved circuit.
func modelOf(p *look.Plant, pts []Point) Model {
	m := Model{}
	for _, s := range States() {
		for _, pt := range pts {
			m[at(s.Name, pt.Name)] = valueOf(p, pt, s)
		}
	}
	return m
}

func valueOf(p *look.Plant, pt Point, s State) Value {
	switch {
	case pt.Dim == units.Temperature:
		if s.Name == "working" && !math.IsNaN(p.S.Oil) {
			return Value{p.S.Oil, p.S.Oil, p.S.Oil}
		}
		return none
	case s.when == nil:
		if len(p.Blocks("accumulator")) > 0 && pt.signal != "" {
			return none // it may stay charged
		}
		return Value{}
	}
	of := pt.read
	if pt.feed {
		of = pt.fed
	}
	v := mean(p, s.when, of)
	if pt.feed && len(p.Blocks("converter", "electric_motor", "engine")) == 1 && !math.IsNaN(v.Mean) {
		v.Mean = yearMean(p, s.Name) // of all cycles of a circuit that remembers; the plot keeps the first
	}
	return v
}

// yearMean is the mean power that the only drive draws in a state over the year: all that is drawn, less the fan and the
// pumps of the cooling, which hang on feeds of their own.
func yearMean(p *look.Plant, state string) float64 {
	e, t := p.Run.Year.Drawn.Plus(p.Run.Year.CoolingDrawn().Times(-1)), p.Run.Year.Seconds
	switch state {
	case "idling":
		return e.Idle / t.Idle
	case "holding":
		return e.Holding / t.Holding
	}
	return e.Working / t.Working
}

// share of the time in a state that a needle spends beyond its range as shown, on either side: a moment between two
// states is not a reading.
const beyond = 0.03

// read is the signal of a point, less the one that is to be taken off.
func (pt *Point) read(d *audit.DutyRun, c *look.Course) func(i int) float64 {
	value, less := look.Signal(pt.signal)(d, c), look.Signal(pt.minus)(d, c)
	switch {
	case value == nil:
		return nil
	case less == nil:
		return func(i int) float64 { return pt.sign * value(i) }
	}
	return func(i int) float64 { return pt.sign * (value(i) - less(i)) }
}

// fed is the power that the drive at a point draws from its supply.
func (pt *Point) fed(d *audit.DutyRun, c *look.Course) func(i int) float64 {
	var feeds []*audit.Track
	for k, ch := range d.Plot.Channels {
		if ch.Block == pt.Block && ch.Kind == "supply" {
			feeds = append(feeds, &d.Plot.Powers[k])
		}
	}
	if feeds == nil {
		return nil
	}
	return func(i int) float64 {
		sum := 0.0
		for _, k := range feeds {
			sum += look.ValueOf(k, c, i)
		}
		return sum
	}
}

// mean is the mean of a value over the time in a state, of all duties by their hours, and the range it keeps to.
func mean(p *look.Plant, w look.When, of look.Of) Value {
	type piece struct{ v, dt float64 }
	var pieces []piece
	sum, time := 0.0, 0.0
	p.Intervals(w, of, func(v, dt float64, counts bool) {
		if counts && dt > 0 {
			pieces = append(pieces, piece{v, dt})
			sum, time = sum+dt*v, time+dt
		}
	})
	if time == 0 {
		return none
	}
	slices.SortFunc(pieces, func(a, b piece) int { return cmp.Compare(a.v, b.v) })
	v, passed := Value{sum / time, pieces[0].v, pieces[len(pieces)-1].v}, 0.0
	for _, x := range pieces {
		if passed <= beyond*time {
			v.Low = x.v
		}
		if passed < (1-beyond)*time {
			v.High = x.v
		}
		passed += x.dt
	}
	return v
}
