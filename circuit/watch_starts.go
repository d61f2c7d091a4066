package circuit

import (
	"fmt"
	"math"

	"barlitre/circuit/duty"
	"barlitre/machines/units"
)

// startWatch follows what a hydraulic motor must break away with when its axis sets off.
type startWatch struct {
	b                 *Block
	axis              int
	D, gear, eta, tau float64
	A, B              int        // signals of pressure
	way               [2]float64 // pressure that may reach A and B, Pa; +Inf where nothing limits it
	still             bool
	need, avail, load float64 // worst
	t                 float64
	forwards          bool
}

func (w *Watch) startOf(b *Block) startWatch {
	s := startWatch{b: b, axis: -1, D: w.value(b, "displacement"), gear: w.value(b, "gear"), eta: w.value(b, "gear_efficiency"), tau: w.value(b, "starting_torque")}
	for i, a := range w.c.axes {
		if a.Name == b.Word("axis") {
			s.axis = i
		}
	}
	_, of := netsOf(w.c.circuit)
	if n := of[PortRef{b.ID, "shaft"}]; n != nil {
		s.help(w, n)
	}
	r := reachOf{w: w, of: of}
	s.way = [2]float64{r.available(b, "A"), r.available(b, "B")}
	return s
}

// help adds the other hydraulic motors on the shaft, taken to stand under the same pressure.
func (s *startWatch) help(w *Watch, shaft *net) {
	for _, p := range shaft.ports {
		o := w.c.circuit.Block(p.Block)
		if o.ID == s.b.ID || o.Kind != kindHydraulicMotor {
			continue
		}
		s.tau = s.tau*s.D + w.value(o, "starting_torque")*w.value(o, "displacement")
		s.D += w.value(o, "displacement")
		s.tau /= s.D // of all together
	}
}

// take notes the worst moment at which the axis leaves standstill against its load.
func (s *startWatch) take(now *Sample) {
	if s.axis < 0 {
		return
	}
	a := now.Axes[s.axis]
	off := s.still && !a.Standing
	s.still = a.Standing
	if !off || a.Load*a.Demand <= 0 { // a load that drives sets it off by itself
		return
	}
	need := math.Abs(a.Load) / (s.gear * s.eta) / (s.D * s.tau)
	avail := s.way[0]
	if a.Demand < 0 {
		avail = s.way[1]
	}
	if s.worse(need, avail) {
		s.need, s.avail, s.load, s.t, s.forwards = need, avail, math.Abs(a.Load), now.T, a.Demand > 0
	}
}

// worse reports whether a start asks for more, against what there is, than the worst so far.
func (s *startWatch) worse(need, avail float64) bool {
	return s.need == 0 || need-avail > s.need-s.avail || (math.IsInf(avail, 1) && need > s.need)
}

func (s *startWatch) gates() []Gate {
	if s.need == 0 {
		return nil
	}
	limit := s.avail
	if math.IsInf(limit, 1) {
		limit = math.NaN()
	}
	g := gateOf(s.b, "starting_torque", "pressure to break away", s.need, limit, units.Pressure, s.t, fmt.Sprintf(
		"%s at the axis, over gear ratio %s and its efficiency, against %s of D·Δp at standstill; limit: the lowest setting between supply and motor",
		show(s.load, units.Torque), units.Number(s.gear, 4), units.Format(s.tau, units.Percent, 3)))
	return []Gate{g.or(Warns, fmt.Sprintf("it does not break away at %s: %s at the axis ask for %s at standstill, where it gives only %s of its ideal torque, and %s are there. Choose a larger motor or gear ratio, or a motor with more starting torque",
		clock(s.t), show(s.load, units.Torque), show(s.need, units.Pressure), units.Format(s.tau, units.Percent, 3), show(limit, units.Pressure)))}
}

// reachOf finds what pressure can come to a port.
type reachOf struct {
	w  *Watch
	of map[PortRef]*net
}

// available is the highest pressure that a supply can bring to a port: of each source upstream of it what its own
// setting and the relief valves there allow, and what the relief valves at the port itself allow.
func (r reachOf) available(b *Block, port string) float64 {
	start := r.of[PortRef{b.ID, port}]
	if start == nil {
		return math.Inf(1)
	}
	best, found := 0.0, false
	flood(r.w.c.circuit, r.of, start, upstream, func(n *net, _ int) bool {
		for _, p := range n.ports {
			if p.Block == b.ID {
				continue
			}
			if v, ok := r.source(r.w.c.circuit.Block(p.Block), p.Port); ok {
				best, found = max(best, min(v, r.relieved(n))), true
			}
		}
		return false
	})
	if !found {
		best = math.Inf(1)
	}
	return min(best, r.relieved(start))
}

// source is the pressure a block can give at a port, +Inf where only valves limit it.
func (r reachOf) source(b *Block, port string) (float64, bool) {
	switch {
	case isPump(b) && (port == "P" || (port == "S" && b.Word("both_directions") == "yes")):
		if c := KindNamed(b.Kind).WordOf(b, "control"); c == "pressure" || c == "pq" {
			if _, ok := b.Values["set_pressure"]; ok {
				return r.w.value(b, "set_pressure"), true
			}
		}
		return math.Inf(1), true
	case b.Kind == kindChargePump && port == "P":
		return r.w.value(b, "charge"), true
	case b.Kind == kindPressureSource:
		return r.w.value(b, "pressure"), true
	case b.Kind == kindAccumulator && port == "P":
		return math.Inf(1), true
	}
	return 0, false
}

// relieved is the lowest setting of the relief valves that oil at a node reaches past nothing that can close.
func (r reachOf) relieved(n *net) float64 {
	low := math.Inf(1)
	ways := func(b *Block, port string) []string { return free[b.Kind][port] }
	flood(r.w.c.circuit, r.of, n, ways, func(m *net, _ int) bool {
		for _, p := range m.ports {
			b := r.w.c.circuit.Block(p.Block)
			if b.Kind != kindRelief || p.Port != "P" {
				continue
			}
			for _, key := range []string{"set", "crack"} {
				if _, ok := b.Values[key]; ok {
					low = min(low, r.w.value(b, key))
				}
			}
		}
		return false
	})
	return low
}

// upstream lists the ports that oil at a port of a block may come from.
func upstream(b *Block, port string) (from []string) {
	if onShaft(b) || b.Kind == kindRelief || movesAlong(b.Kind) {
		return nil
	}
	for in, outs := range outlets[b.Kind] {
		for _, o := range outs {
			if o == port && o != "T" && in != "T" {
				from = append(from, in)
			}
		}
	}
	return from
}

// creeps notes how an axis moves while it should stand, where the balance finds it: not where the
// motion is given and the load is found.
func (a *axisWatch) creeps(now AxisNow, given duty.Given, t, dt float64) {
	still := now.Standing && given != duty.MotionCommand
	if still && a.wasStill {
		a.crept += dt * (math.Abs(now.Speed) + math.Abs(a.lastV)) / 2
		a.stood += dt
	}
	if v := math.Abs(now.Speed); still && v > a.creep {
		a.creep, a.tCreep = v, t
	}
	a.wasStill = still
}

// holdWords says what leaks where an axis creeps.
var holdWords = map[string]string{
	"valve": "oil leaks past the valves and the seals or slip of its actuator",
	"pump":  "the slip of the pump and the actuator is not made up for",
}

// creepGates tells how far a held axis moves by itself. It may creep by what counts as
// standing still: a thousandth of its highest speed.
func (w *Watch) creepGates(i int) []Gate {
	a, s := &w.axes[i], &w.series.Axes[i]
	b := w.c.circuit.Block(w.c.movers[i].block)
	if b == nil || a.stood <= 0 || w.c.movers[i].hold == "brake" {
		return nil
	}
	top := s.Top
	if s.Given == duty.LoadCommand {
		top = w.fastest(i)
	}
	u := units.Unit{Symbol: "mm/min", Dim: units.Velocity, Factor: 1e-3 / 60}
	if w.c.axes[i].Kind == duty.Rotary {
		u = units.Unit{Symbol: "rad/min", Dim: units.AngularSpeed, Factor: 1.0 / 60}
	}
	limit := max(duty.StandstillShare*top, stillSpeed)
	mean := a.crept / a.stood
	g := Gate{Block: b.ID, Parameter: "hold", Name: "creep while held", Value: mean, Limit: limit, Unit: u, T: a.tCreep, Passed: mean <= limit, level: Caution,
		Reason: fmt.Sprintf("mean over %s of standstill a cycle, at most %s; %s; limit: a thousandth of its highest speed, what counts as standing", clock(a.stood/float64(max(w.cycles, 1))), units.Format(a.creep, u, 3), holdWords[w.c.movers[i].hold])}
	if s.Given != duty.MotionLoad { // else motions tells of it
		g.missed = fmt.Sprintf("it creeps at %s on average while it should stand, more than %s: %s. Fit a load-holding valve or a brake", units.Format(mean, u, 3), units.Format(limit, u, 3), holdWords[w.c.movers[i].hold])
	}
	return []Gate{g}
}

// fastest is the highest speed of an axis in the run.
func (w *Watch) fastest(i int) float64 {
	for j, s := range w.c.signals {
		if s.Block == w.c.movers[i].block && (s.What == "v" || s.What == "w") {
			v := max(math.Abs(w.ext.min[j]), math.Abs(w.ext.max[j]))
			if s.What == "w" {
				v /= w.value(w.c.circuit.Block(s.Block), "gear")
			}
			return v
		}
	}
	return 0
}
