// Package look reads a solved circuit as one reads a machine: what stands at a port while it works, holds or idles, how
// high, when, and for how much of the year.
package look

import (
	"math"
	"slices"

	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// State is what a machine does at an instant.
type State int

// The states.
const (
	Idling  State = iota // nothing moves, no axis is under a load
	Holding              // nothing moves, an axis is under a load
	Working              // an axis moves
)

// When says which states count.
type When func(State) bool

// The usual choices.
func Always(State) bool     { return true }
func Moving(s State) bool   { return s == Working }
func Standing(s State) bool { return s != Working }

// Only counts one state.
func Only(s State) When { return func(o State) bool { return o == s } }

// Plant is a solved circuit.
type Plant struct {
	S      *audit.Solution
	Run    *audit.CircuitRun
	C      *circuit.Circuit
	System units.System // that words are written in
	states map[*audit.DutyRun]*Course
}

// Course says of each instant of a duty what the machine does.
type Course struct {
	T     []float64
	State []State
}

// New looks at a circuit of a solution.
func New(s *audit.Solution, run *audit.CircuitRun, system units.System) *Plant {
	return &Plant{S: s, Run: run, C: run.Circuit, System: system, states: map[*audit.DutyRun]*Course{}}
}

// Shown writes a quantity in the units of the plant.
func (p *Plant) Shown(x float64, d units.Dim) string {
	return units.Format(x, units.Preferred(d, p.System), 3)
}

// Value is a number of a block, given or by default; NaN where it has none.
func Value(b *circuit.Block, key string) float64 {
	v, _, ok := circuit.KindNamed(b.Kind).Value(b, key)
	if !ok {
		return math.NaN()
	}
	return v.SI
}

// Word is a choice of a block, given or by default.
func Word(b *circuit.Block, key string) string { return circuit.KindNamed(b.Kind).WordOf(b, key) }

// Blocks returns the blocks of some kinds, by their order in the file.
func (p *Plant) Blocks(kinds ...string) []*circuit.Block {
	var out []*circuit.Block
	for i := range p.C.Blocks {
		if slices.Contains(kinds, p.C.Blocks[i].Kind) {
			out = append(out, &p.C.Blocks[i])
		}
	}
	return out
}

// At returns the blocks of a kind that have the named port on the node of ref.
func (p *Plant) At(ref circuit.PortRef, kind, port string) []*circuit.Block {
	var out []*circuit.Block
	for _, r := range p.C.Joined(ref) {
		if b := p.C.Block(r.Block); b != nil && b.Kind == kind && r.Port == port {
			out = append(out, b)
		}
	}
	return out
}

// Supply follows the pressure line of a pump past lines, filters, flow meters and check valves: all ports that stand at
// nearly its pressure.
func (p *Plant) Supply(pump *circuit.Block) []circuit.PortRef {
	through := map[string][2]string{"line": {"A", "B"}, "filter": {"A", "B"}, "cooler": {"A", "B"}, "flow_point": {"A", "B"}, "check": {"in", "out"}, "unloading": {"P", "A"}}
	done, seen := map[circuit.PortRef]bool{}, []circuit.PortRef{}
	for queue := []circuit.PortRef{{Block: pump.ID, Port: "P"}}; len(queue) > 0; queue = queue[1:] {
		for _, r := range p.C.Joined(queue[0]) {
			if done[r] {
				continue
			}
			done[r], seen = true, append(seen, r)
			b := p.C.Block(r.Block)
			if b == nil {
				continue
			}
			if ways, ok := through[b.Kind]; ok && r.Port == ways[0] {
				queue = append(queue, circuit.PortRef{Block: b.ID, Port: ways[1]})
			}
			if ways, ok := through[b.Kind]; ok && r.Port == ways[1] && b.Kind != "check" && b.Kind != "unloading" {
				queue = append(queue, circuit.PortRef{Block: b.ID, Port: ways[0]})
			}
		}
	}
	return seen
}

// ReliefsOf returns the relief valves on the pressure line of a pump.
func (p *Plant) ReliefsOf(pump *circuit.Block) []*circuit.Block {
	var out []*circuit.Block
	for _, r := range p.Supply(pump) {
		if b := p.C.Block(r.Block); b != nil && b.Kind == "relief" && r.Port == "P" && !slices.Contains(out, b) {
			out = append(out, b)
		}
	}
	return out
}

// Track returns a signal of a duty, or nil.
func Track(d *audit.DutyRun, name string) *audit.Track {
	if d.Plot == nil {
		return nil
	}
	return d.Plot.Signal(name)
}

// Course finds out what the machine does over a duty.
func (p *Plant) Course(d *audit.DutyRun) *Course {
	if s := p.states[d]; s != nil {
		return s
	}
	s := &Course{}
	p.states[d] = s
	if d.Plot == nil || len(d.Plot.Signals) == 0 {
		return s
	}
	if s.T = d.Plot.Steps; !d.Plot.Thinned {
		s.T = d.Plot.Signals[0].T
	}
	s.State = make([]State, len(s.T))
	for i := range p.C.Blocks {
		b := &p.C.Blocks[i]
		if b.Word("axis") == "" {
			continue
		}
		s.raise(either(d, b.ID+".v", b.ID+".w"), Working)
		s.raise(either(d, b.ID+".F", b.ID+".load"), Holding)
	}
	return s
}

// raise gives the instants at which a track stands above a thousandth of its top a state, unless they have a higher one.
func (c *Course) raise(k *audit.Track, to State) {
	if k == nil {
		return
	}
	top := 0.0
	for _, v := range k.V {
		top = math.Max(top, math.Abs(v))
	}
	for i := range c.T {
		if math.Abs(ValueOf(k, c, i)) > 1e-3*top {
			c.State[i] = max(c.State[i], to)
		}
	}
}

func either(d *audit.DutyRun, a, b string) *audit.Track {
	if k := Track(d, a); k != nil {
		return k
	}
	return Track(d, b)
}

// ValueOf is the value of a track at an instant of a course, as it was there: values of tracks at one instant belong together.
func ValueOf(k *audit.Track, s *Course, i int) float64 {
	switch {
	case k.Steps != nil:
		return k.Steps[i]
	case i < len(k.T) && k.T[i] == s.T[i]:
		return k.V[i]
	}
	return k.At(s.T[i]) // a constant has two points
}

// Moment is a value, and when it was met.
type Moment struct {
	V, T float64
	Duty string
	OK   bool
}

// Top is the largest value of a function of the instant over all duties.
func (p *Plant) Top(w When, of func(d *audit.DutyRun, s *Course, i int) float64) Moment {
	best := Moment{V: math.Inf(-1)}
	for _, d := range p.Run.Duties {
		s := p.Course(d)
		for i := range s.T {
			if !w(s.State[i]) {
				continue
			}
			if v := of(d, s, i); v > best.V {
				best = Moment{v, s.T[i], d.Duty.Name, true}
			}
		}
	}
	return best
}

// Highest is the largest value of a signal.
func (p *Plant) Highest(name string, w When) Moment { return p.extreme(name, w, 1) }

// Lowest is the smallest value of a signal.
func (p *Plant) Lowest(name string, w When) Moment { return p.extreme(name, w, -1) }

// extreme is the largest value of a signal times a sign, of all points that its tracks keep; those between two
// instants of a course count where both do.
func (p *Plant) extreme(name string, w When, sign float64) Moment {
	best := Moment{V: math.Inf(-1)}
	for _, d := range p.Run.Duties {
		k, c := Track(d, name), p.Course(d)
		if k == nil {
			continue
		}
		at := 0
		for i, t := range k.T {
			if k.Steps == nil {
				at = i
			}
			for at < len(c.T)-1 && c.T[at] < t {
				at++
			}
			if v := sign * k.V[i]; v > best.V && w(c.State[at]) && (k.Steps == nil || w(c.State[max(0, at-1)])) {
				best = Moment{v, t, d.Duty.Name, true}
			}
		}
	}
	best.V *= sign
	return best
}

// Of is what is read of a duty at the instants of its course; nil where the duty has no such value.
type Of func(d *audit.DutyRun, c *Course) func(i int) float64

// Signal reads a signal by its name.
func Signal(name string) Of {
	return func(d *audit.DutyRun, c *Course) func(i int) float64 {
		k := Track(d, name)
		if k == nil {
			return nil
		}
		return func(i int) float64 { return ValueOf(k, c, i) }
	}
}

// Intervals hands over the time between every two instants of all duties that run in the year: the mean of a value over it, how
// long it is in the year [s], and whether both its ends count. Where the value is not a number nothing is handed over.
func (p *Plant) Intervals(w When, of Of, take func(mean, dt float64, counts bool)) {
	for _, d := range p.Run.Duties {
		if d.Plot == nil || d.Duty.Hours <= 0 {
			continue
		}
		c := p.Course(d)
		value := of(d, c)
		if value == nil || len(c.T) < 2 {
			continue
		}
		n := d.Duty.Hours / (c.T[len(c.T)-1] - c.T[0])
		before := value(0)
		for i := 1; i < len(c.T); i++ {
			now := value(i)
			if mean := (before + now) / 2; !math.IsNaN(mean) {
				take(mean, n*(c.T[i]-c.T[i-1]), w(c.State[i]) && w(c.State[i-1]))
			}
			before = now
		}
	}
}

// Mean is the mean of a signal over the time that counts, of all duties by their hours, and that time as a share.
func (p *Plant) Mean(name string, w When) (mean, share float64) {
	return p.above(name, w, math.Inf(-1))
}

// Above is the mean of a signal over the time in which nothing moves and it stands above a limit, of all duties by their
// hours, and that time as a share of all.
func (p *Plant) Above(name string, limit float64) (mean, share float64) {
	return p.above(name, Standing, limit)
}

func (p *Plant) above(name string, w When, limit float64) (mean, share float64) {
	var sum, time, all float64
	p.Intervals(w, Signal(name), func(v, dt float64, counts bool) {
		all += dt
		if counts && v > limit {
			sum, time = sum+dt*v, time+dt
		}
	})
	if time == 0 {
		return math.NaN(), 0
	}
	return sum / time, time / all
}

// Lost is what blocks lose a year, by kind of loss ("" = all).
func (p *Plant) Lost(kind string, ids ...string) audit.Split {
	var sum audit.Split
	for _, l := range p.Run.Year.Losses {
		if slices.Contains(ids, l.Block) && (kind == "" || l.Kind == kind) {
			sum = sum.Plus(l.Energy)
		}
	}
	return sum
}

// Drawn is what the circuit draws a year [J].
func (p *Plant) Drawn() float64 { return p.Run.Year.Drawn.Total() }
