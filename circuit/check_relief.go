package circuit

import (
	"math"
	"slices"

	"barlitre/machines/units"
)

// ReliefAbove is where a relief valve should begin to open beside a working pressure p
// [Pa]: a tenth above it, and at least 15 bar. Common practice, no source; what the
// machine's maker sets comes first.
func ReliefAbove(p float64) float64 { return p + math.Max(0.1*p, 15*units.Bar) }

// ReliefOpens returns the pressure drop [Pa] at which a relief valve begins to open; ok
// is false where its setting is not given, or the block is no relief valve.
func ReliefOpens(b *Block) (crack float64, ok bool) {
	if b.Kind != kindRelief {
		return 0, false
	}
	if v, _, given := reliefKind.Value(b, "crack"); given {
		return v.SI, true
	}
	set, _, given := reliefKind.Value(b, "set")
	flow, _, _ := reliefKind.Value(b, "set_flow")
	rise, _, _ := reliefKind.Value(b, "override")
	return set.SI - rise.SI*flow.SI, given
}

// HoldsPressure returns the pressure [Pa] at which a pump stops delivering by itself; ok
// is false for one that does not, or whose pressure is a track of the duty.
func HoldsPressure(b *Block) (p float64, ok bool) {
	if !isPump(b) || !slices.Contains([]string{"pressure", "load_sensing", "pq"}, KindNamed(b.Kind).WordOf(b, "control")) {
		return 0, false
	}
	v, _, given := KindNamed(b.Kind).Value(b, "set_pressure")
	return v.SI, given
}

// relievedAbove warns of relief valves that open before a pump stops delivering.
func (k *checker) relievedAbove(pump *Block) {
	p, ok := HoldsPressure(pump)
	n := k.of[PortRef{pump.ID, "P"}]
	if !ok || n == nil {
		return
	}
	ways := func(b *Block, port string) []string { return free[b.Kind][port] }
	flood(k.c, k.of, n, ways, func(n *net, _ int) bool {
		for _, at := range n.ports {
			b := k.c.Block(at.Block)
			opens, is := ReliefOpens(b)
			if !is || at.Port != "P" || opens > p {
				continue
			}
			key := "crack"
			if b.lacks(key) {
				key = "set"
			}
			k.say(Warns, b, key, "it begins to open at %s, not above the %s that %s holds: the pump goes on delivering, and what it delivers turns to heat here. Such a valve is for faults; common practice opens it 10 %% above, at least 15 bar (%s), as far as the ratings permit",
				show(opens, units.Pressure), show(p, units.Pressure), pump.ID, show(ReliefAbove(p), units.Pressure)).because(ReliefTooLow, "P")
			k.found[len(k.found)-1].Port = PortRef{pump.ID, "P"}
		}
		return false
	})
}

// lacks reports whether neither a number nor a word is given for a parameter.
func (b *Block) lacks(key string) bool {
	_, number := b.Values[key]
	return !number && b.Word(key) == ""
}

// returning lists the ports that lead to a tank by trade, by kind of block.
var returning = map[string][]string{
	kindPump: {"S", "D"}, kindSwitched: {"S", "D"}, kindChargePump: {"S", "T"}, kindHydraulicMotor: {"D"},
	kindValve: {"T"}, kindSection63: {"T"}, kindRelief: {"T"}, kindReducing: {"T"}, kindUnloading: {"T"},
	kindUnloadingPilot: {"T"}, kindFlowControl3: {"T"}, kindFlushing: {"T"}, kindTank: {"T"},
}

// ReturnsAt reports whether a port leads to a tank in most circuits: returns, drains,
// and the suction of a pump that delivers one way only.
func (c *Circuit) ReturnsAt(p PortRef) bool {
	b := c.Block(p.Block)
	if b == nil || !slices.Contains(returning[b.Kind], p.Port) {
		return false
	}
	return p.Port != "S" || KindNamed(b.Kind).WordOf(b, "both_directions") != "yes"
}
