package audit

import (
	"math"
	"slices"

	"barlitre/audit/thermal"
	"barlitre/circuit"
)

// frictionToCase is the share of the friction of a machine that its case oil carries away; the rest warms what it displaces.
// Assumed, common practice, no source.
const frictionToCase = 0.5

// lineFlows is the circuit.Receiver that tells how much oil and heat the lines to the tank carry, by place of a cooler. At each
// time step the heat into the oil is shared out without rest:
//
//	case     of each machine with a drain: p·q of its drain and half of its friction, at most what it loses
//	flushing where flushing oil flows, all that is not in the case and not lost in a block that leads straight to the tank
//	return   the rest, where oil comes back to the tank
//
// What no line carries stays where it is and warms the tank.
type lineFlows struct {
	interval
	oil      []int // channels that warm the oil
	machines []caseOf
	flushes  []int // signals: flow at the tank port of flushing valves
	inflows  []int // signals: flows of ports that stand on the tank
	open     []int // signals: drains that are not drawn, which lead to the tank
	direct   []int // channels of blocks that lead straight to the tank

	now, last [3]flowHeat
	bins      [3]map[int]*thermal.Bin // share as seconds
	seconds   float64
}

type flowHeat struct{ flow, heat float64 }

type caseOf struct {
	drain, pP, pS, pD int // signals
	slip, friction    []int
}

func newLineFlows(c *circuit.Compiled) *lineFlows {
	l := &lineFlows{}
	for i := range l.bins {
		l.bins[i] = map[int]*thermal.Bin{}
	}
	circ, signals := c.Circuit(), c.Signals()
	find := func(block, port, what string) int {
		for i, s := range signals {
			if s.Block == block && s.Port == port && s.What == what {
				return i
			}
		}
		return -1
	}
	channels := func(of func(ch circuit.Channel) bool) (out []int) {
		for i, ch := range c.Channels() {
			if ch.Role == circuit.Loss && ch.Sink == circuit.ToOil && of(ch) {
				out = append(out, i)
			}
		}
		return out
	}
	l.oil = channels(func(circuit.Channel) bool { return true })
	onTank, drawn := tankPorts(circ)
	straight := map[string]bool{}
	for p := range onTank {
		b := circ.Block(p.Block)
		if i := find(p.Block, p.Port, "q"); i >= 0 && b != nil {
			l.inflows = append(l.inflows, i)
			straight[p.Block] = b.Passes() == circuit.NoPassage && b.Kind != "flushing"
		}
	}
	slices.Sort(l.inflows) // a sum depends on its order in the last bit
	for i := range circ.Blocks {
		b := &circ.Blocks[i]
		if b.Kind == "flushing" {
			if q := find(b.ID, "T", "q"); q >= 0 {
				l.flushes = append(l.flushes, q)
			}
		}
		drain := find(b.ID, "D", "q")
		if drain < 0 || b.Passes() == circuit.NoPassage {
			continue
		}
		if !drawn[circuit.PortRef{Block: b.ID, Port: "D"}] {
			l.open = append(l.open, drain)
		}
		m := caseOf{drain: drain, pP: -1, pS: -1, pD: find(b.ID, "D", "p")}
		for _, s := range signals {
			if s.Block == b.ID && s.What == "p" && s.Port != "D" && s.Port != "LS" && s.Port != "" {
				i := find(b.ID, s.Port, "p")
				if m.pP < 0 {
					m.pP = i
				} else {
					m.pS = i
				}
			}
		}
		m.slip = channels(func(ch circuit.Channel) bool { return ch.Block == b.ID && ch.Kind == "slip" })
		m.friction = channels(func(ch circuit.Channel) bool { return ch.Block == b.ID && ch.Kind == "friction" })
		l.machines = append(l.machines, m)
	}
	l.direct = channels(func(ch circuit.Channel) bool { return straight[ch.Block] })
	return l
}

// tankPorts returns the ports on lines that a tank stands on, and all ports that are drawn.
func tankPorts(c *circuit.Circuit) (onTank, drawn map[circuit.PortRef]bool) {
	onTank, drawn = map[circuit.PortRef]bool{}, map[circuit.PortRef]bool{}
	kind := func(id, of string) bool { b := c.Block(id); return b != nil && b.Kind == of }
	tanks := map[circuit.PortRef]bool{}
	for grown := true; grown; { // lines join where they share a port, and in junctions
		grown = false
		for _, l := range c.Lines {
			reached := false
			for _, p := range l.Ports {
				drawn[p] = true
				junction := circuit.PortRef{}
				if kind(p.Block, "junction") {
					junction = circuit.PortRef{Block: p.Block}
				}
				reached = reached || kind(p.Block, "tank") || tanks[p] || tanks[junction]
			}
			if !reached {
				continue
			}
			for _, p := range l.Ports {
				if kind(p.Block, "junction") {
					p = circuit.PortRef{Block: p.Block}
				}
				if !tanks[p] {
					tanks[p], grown = true, true
				}
			}
		}
	}
	for p := range tanks {
		if p.Port != "" && !kind(p.Block, "tank") {
			onTank[p] = true
		}
	}
	return onTank, drawn
}

// Sample takes one time step.
func (l *lineFlows) Sample(s *circuit.Sample) error {
	half := l.to(s.T) / 2
	l.split(s)
	l.book(&l.last, half)
	l.book(&l.now, half)
	l.seconds += 2 * half
	l.last = l.now
	return nil
}

func powerOf(s *circuit.Sample, channels []int) (sum float64) {
	for _, i := range channels {
		sum += s.Power[i]
	}
	return sum
}

// outOf is what flows out of ports into the tank; what flows the other way is another matter.
func outOf(s *circuit.Sample, ports []int) (sum float64) {
	for _, i := range ports {
		sum += math.Max(0, -s.Signals[i])
	}
	return sum
}

// split fills now.
func (l *lineFlows) split(s *circuit.Sample) {
	all := math.Max(0, powerOf(s, l.oil))
	var drained flowHeat
	for _, m := range l.machines {
		q := -s.Signals[m.drain]
		if q <= 0 {
			continue
		}
		slip, friction := powerOf(s, m.slip), powerOf(s, m.friction)
		carried := frictionToCase * friction
		if m.pP >= 0 && m.pD >= 0 {
			p := s.Signals[m.pP]
			if m.pS >= 0 {
				p = math.Max(p, s.Signals[m.pS])
			}
			carried += q * math.Max(0, p-s.Signals[m.pD])
		}
		drained.flow += q
		drained.heat += math.Min(carried, slip+friction)
	}
	flush := flowHeat{flow: outOf(s, l.flushes)}
	back := flowHeat{flow: math.Max(0, outOf(s, l.inflows)+outOf(s, l.open)-drained.flow-flush.flow)}
	drained.heat = math.Min(drained.heat, all)
	rest := all - drained.heat
	switch {
	case flush.flow > leastFlow:
		back.heat = math.Min(rest, powerOf(s, l.direct))
		flush.heat = rest - back.heat
	case back.flow > leastFlow:
		back.heat = rest
	case drained.flow > leastFlow:
		drained.heat = all
	}
	l.now = [3]flowHeat{thermal.ReturnLine: back, thermal.CaseDrain: drained, thermal.Flushing: flush}
}

// leastFlow [m³/s] is what counts as flow: below a drop a second a line cools nothing.
const leastFlow = 5e-8

func (l *lineFlows) book(at *[3]flowHeat, seconds float64) {
	if seconds <= 0 {
		return
	}
	for i, x := range at {
		if x.flow <= leastFlow {
			continue
		}
		k := int(math.Floor(2 * math.Log2(x.flow/leastFlow))) // two bins for a doubling of the flow
		b := l.bins[i][k]
		if b == nil {
			b = &thermal.Bin{}
			l.bins[i][k] = b
		}
		b.Share += seconds
		b.Flow += seconds * x.flow
		b.Heat += seconds * x.heat
	}
}

// line returns what a line carries over the run.
func (l *lineFlows) line(p thermal.Place) thermal.Line {
	var out thermal.Line
	for k := -1; k < 120; k++ {
		if b := l.bins[p][k]; b != nil && l.seconds > 0 {
			out = append(out, thermal.Bin{Share: b.Share / l.seconds, Flow: b.Flow / b.Share, Heat: b.Heat / b.Share})
		}
	}
	return out
}
