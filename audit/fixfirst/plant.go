package fixfirst

import (
	"math"
	"slices"

	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// plant is a solved circuit as the rules look at it.
type plant struct {
	s      *audit.Solution
	run    *audit.CircuitRun
	c      *circuit.Circuit
	states map[*audit.DutyRun]*states
}

// states says of each instant of a duty whether an axis moves.
type states struct {
	t     []float64
	moves []bool
}

func newPlant(s *audit.Solution, run *audit.CircuitRun) *plant {
	return &plant{s: s, run: run, c: run.Circuit, states: map[*audit.DutyRun]*states{}}
}

// blocks returns the blocks of some kinds, by their order in the file.
func (p *plant) blocks(kinds ...string) []*circuit.Block {
	var out []*circuit.Block
	for i := range p.c.Blocks {
		if slices.Contains(kinds, p.c.Blocks[i].Kind) {
			out = append(out, &p.c.Blocks[i])
		}
	}
	return out
}

// value is a number of a block, given or by default; NaN where it has none.
func value(b *circuit.Block, key string) float64 {
	v, _, ok := circuit.KindNamed(b.Kind).Value(b, key)
	if !ok {
		return math.NaN()
	}
	return v.SI
}

func word(b *circuit.Block, key string) string { return circuit.KindNamed(b.Kind).WordOf(b, key) }

// at returns the blocks of a kind that have the named port on the node of ref.
func (p *plant) at(ref circuit.PortRef, kind, port string) []*circuit.Block {
	var out []*circuit.Block
	for _, r := range p.c.Joined(ref) {
		if b := p.c.Block(r.Block); b != nil && b.Kind == kind && r.Port == port {
			out = append(out, b)
		}
	}
	return out
}

// supply follows the pressure line of a pump past lines, filters, flow meters and check valves: all ports that stand at
// nearly its pressure.
func (p *plant) supply(pump *circuit.Block) []circuit.PortRef {
	through := map[string][2]string{"line": {"A", "B"}, "filter": {"A", "B"}, "cooler": {"A", "B"}, "flow_point": {"A", "B"}, "check": {"in", "out"}, "unloading": {"P", "A"}}
	done, seen := map[circuit.PortRef]bool{}, []circuit.PortRef{}
	for queue := []circuit.PortRef{{Block: pump.ID, Port: "P"}}; len(queue) > 0; queue = queue[1:] {
		for _, r := range p.c.Joined(queue[0]) {
			if done[r] {
				continue
			}
			done[r], seen = true, append(seen, r)
			b := p.c.Block(r.Block)
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

// reliefsOf returns the relief valves on the pressure line of a pump.
func (p *plant) reliefsOf(pump *circuit.Block) []*circuit.Block {
	var out []*circuit.Block
	for _, r := range p.supply(pump) {
		if b := p.c.Block(r.Block); b != nil && b.Kind == "relief" && r.Port == "P" && !slices.Contains(out, b) {
			out = append(out, b)
		}
	}
	return out
}

// cracks is the pressure at which a relief valve begins to open.
func cracks(b *circuit.Block) float64 {
	if _, ok := b.Values["crack"]; ok {
		return value(b, "crack")
	}
	return value(b, "set") - value(b, "set_flow")*value(b, "override")
}

// track returns a signal of a duty, or nil.
func track(d *audit.DutyRun, name string) *audit.Track {
	if d.Plot == nil {
		return nil
	}
	return d.Plot.Signal(name)
}

// state finds out when axes move in a duty.
func (p *plant) state(d *audit.DutyRun) *states {
	if s := p.states[d]; s != nil {
		return s
	}
	s := &states{}
	p.states[d] = s
	if d.Plot == nil || len(d.Plot.Signals) == 0 {
		return s
	}
	s.t = d.Plot.Signals[0].T
	for _, k := range d.Plot.Signals[1:] { // a thinned plot keeps other instants of each
		if len(k.T) > len(s.t) {
			s.t = k.T
		}
	}
	s.moves = make([]bool, len(s.t))
	for i := range p.c.Blocks {
		b := &p.c.Blocks[i]
		if b.Word("axis") == "" {
			continue
		}
		k := track(d, b.ID+".v")
		if k == nil {
			k = track(d, b.ID+".w")
		}
		if k == nil {
			continue
		}
		top := 0.0
		for _, v := range k.V {
			top = math.Max(top, math.Abs(v))
		}
		for j := range s.t {
			s.moves[j] = s.moves[j] || math.Abs(valueOf(k, s, j)) > 1e-3*top
		}
	}
	return s
}

func valueOf(k *audit.Track, s *states, i int) float64 {
	if len(k.T) == len(s.t) {
		return k.V[i]
	}
	return k.At(s.t[i])
}

// moment is a value, and when it was met.
type moment struct {
	v, t float64
	duty string
	ok   bool
}

// when says which instants count.
type when func(moving bool) bool

func always(bool) bool       { return true }
func moving(m bool) bool     { return m }
func standing(m bool) bool   { return !m }
func (m moment) bar() string { return bar(m.v) }

// top is the largest value of a function of the instant over all duties.
func (p *plant) top(w when, of func(d *audit.DutyRun, s *states, i int) float64) moment {
	best := moment{v: math.Inf(-1)}
	for _, d := range p.run.Duties {
		s := p.state(d)
		for i := range s.t {
			if !w(s.moves[i]) {
				continue
			}
			if v := of(d, s, i); v > best.v {
				best = moment{v, s.t[i], d.Duty.Name, true}
			}
		}
	}
	return best
}

// highest is the largest value of a signal.
func (p *plant) highest(name string, w when) moment {
	return p.top(w, func(d *audit.DutyRun, s *states, i int) float64 {
		if k := track(d, name); k != nil {
			return valueOf(k, s, i)
		}
		return math.Inf(-1)
	})
}

// lowest is the smallest value of a signal.
func (p *plant) lowest(name string, w when) moment {
	m := p.top(w, func(d *audit.DutyRun, s *states, i int) float64 {
		if k := track(d, name); k != nil {
			return -valueOf(k, s, i)
		}
		return math.Inf(-1)
	})
	m.v = -m.v
	return m
}

// mean is the mean of a signal over the time that counts, of all duties by their hours, and that time as a share.
func (p *plant) mean(name string, w when) (mean, share float64) {
	var sum, time, all float64
	for _, d := range p.run.Duties {
		k, s := track(d, name), p.state(d)
		if k == nil || len(s.t) < 2 || d.Duty.Hours <= 0 {
			continue
		}
		n := d.Duty.Hours / (s.t[len(s.t)-1] - s.t[0])
		for i := 1; i < len(s.t); i++ {
			dt := n * (s.t[i] - s.t[i-1])
			all += dt
			if w(s.moves[i]) && w(s.moves[i-1]) {
				sum += dt * (valueOf(k, s, i) + valueOf(k, s, i-1)) / 2
				time += dt
			}
		}
	}
	if time == 0 {
		return math.NaN(), 0
	}
	return sum / time, time / all
}

// above is the mean of a signal over the time in which nothing moves and it stands above a limit, of all duties by their
// hours, and that time as a share of all.
func (p *plant) above(name string, limit float64) (mean, share float64) {
	var sum, time, all float64
	for _, d := range p.run.Duties {
		k, s := track(d, name), p.state(d)
		if k == nil || len(s.t) < 2 || d.Duty.Hours <= 0 {
			continue
		}
		n := d.Duty.Hours / (s.t[len(s.t)-1] - s.t[0])
		for i := 1; i < len(s.t); i++ {
			dt, m := n*(s.t[i]-s.t[i-1]), (valueOf(k, s, i)+valueOf(k, s, i-1))/2
			all += dt
			if !s.moves[i] && !s.moves[i-1] && m > limit {
				sum, time = sum+dt*m, time+dt
			}
		}
	}
	if time == 0 {
		return math.NaN(), 0
	}
	return sum / time, time / all
}

// lost is what blocks lose a year, by kind of loss ("" = all).
func (p *plant) lost(kind string, ids ...string) audit.Split {
	var sum audit.Split
	for _, l := range p.run.Year.Losses {
		if slices.Contains(ids, l.Block) && (kind == "" || l.Kind == kind) {
			sum = sum.Plus(l.Energy)
		}
	}
	return sum
}

// drawn is what the circuit draws a year [J].
func (p *plant) drawn() float64 { return p.run.Year.Drawn.Total() }

func bar(pa float64) string {
	return units.Format(pa, units.Preferred(units.Pressure, units.Metric), 3)
}

func shown(x float64, d units.Dim) string {
	return units.Format(x, units.Preferred(d, units.Metric), 3)
}
func percent(x float64) string { return units.Format(x, units.Percent, 2) }

func kilowattHours(j float64) string {
	u, _ := units.ParseUnit("kWh", units.Energy)
	return units.Format(j, u, 3)
}

// target names a parameter of the circuit for an edit.
func (p *plant) target(b *circuit.Block, key string) string {
	return p.c.Name + "/" + b.ID + "." + key
}

// found begins a finding at a block.
func (p *plant) found(b *circuit.Block, rule string, class Class, effort Effort) *Finding {
	f := &Finding{Rule: rule, Class: class, Effort: effort, Circuit: p.c.Name}
	if b != nil {
		f.Block = b.ID
	}
	return f
}
