package circuit

// polarity says in which direction a control moves its axis: +1 or −1, or by
// the demand where a directing valve stands between.
type polarity int

const byDemand polarity = 0

// sign returns the direction for the demand of a step, +1 where it stands.
func (p polarity) sign(a *axisStep) float64 {
	if p != byDemand {
		return float64(p)
	}
	want := a.demand
	if a.command != 0 {
		want = a.command
	}
	if want < 0 {
		return -1
	}
	return 1
}

// fixed returns the polarity of a part that is itself the directing valve.
func (p polarity) fixed() float64 {
	if p < 0 {
		return -1
	}
	return 1
}

// passes lists the ways through parts that oil can pass at all.
var passes = map[string]map[string][]string{
	kindLine: {"A": {"B"}, "B": {"A"}}, kindFilter: {"A": {"B"}, "B": {"A"}}, kindOrifice: {"A": {"B"}, "B": {"A"}},
	kindCheck: {"in": {"out"}, "out": {"in"}}, kindPilotCheck: {"V": {"C"}, "C": {"V"}}, kindCounterbalance: {"V": {"C"}, "C": {"V"}},
	kindFlowSharing: {"P": {"A"}, "A": {"P"}}, kindReducing: {"P": {"A"}, "A": {"P"}}, kindSequence: {"P": {"A"}, "A": {"P"}},
	kindFlowControl: {"A": {"B"}, "B": {"A"}}, kindFlowControl3: {"P": {"A"}, "A": {"P"}}, kindThrottleCheck: {"A": {"B"}, "B": {"A"}},
	kindShuttleFlow: {"X": {"A"}, "Y": {"A"}, "A": {"X", "Y"}}, kindSection63: {"C1": {"C2"}, "C2": {"C1"}},
	kindCooler: {"A": {"B"}, "B": {"A"}}, kindFlowPoint: {"A": {"B"}, "B": {"A"}}, kindFlowDivider: {"P": {"A", "B"}, "A": {"P"}, "B": {"P"}},
	kindCompensator: {"P": {"A"}, "A": {"P"}}, kindUnloading: {"P": {"A"}, "A": {"P"}},
}

// polarityOf finds which port of an axis' actuator the port from is nearest to:
// the one that moves it forwards (+1) or backwards (−1). Valves between are
// crossed only when there is no other way; the direction is then theirs to choose.
func (k *compiler) polarityOf(from PortRef, axis int) polarity {
	b := k.circuit.Block(k.movers[axis].block)
	if b == nil {
		return 1
	}
	near := reach(k.circuit, k.of, from)
	nearest := func(port string) (d int, ok bool) { // of the actuator and of motors that turn with it
		for _, id := range append(k.turning(b), b.ID) {
			if e, found := near[k.of[PortRef{id, port}]]; found && (!ok || e < d) {
				d, ok = e, true
			}
		}
		return
	}
	dA, okA := nearest("A")
	dB, okB := nearest("B")
	switch {
	case okA && (!okB || dA <= dB):
		return 1
	case okB:
		return -1
	}
	return byDemand
}

// turning lists the hydraulic motors on the shafts that turn with a block's shaft.
func (k *compiler) turning(b *Block) (ids []string) {
	for _, p := range trainPorts(k.circuit, k.of, b) {
		if k.circuit.Block(p.Block).Kind == kindHydraulicMotor {
			ids = append(ids, p.Block)
		}
	}
	return
}

// shaftPolarity is the polarity of the pumps on a motor's shaft.
func (k *compiler) shaftPolarity(b *Block, axis int) polarity {
	for _, p := range trainPorts(k.circuit, k.of, b) {
		if o := k.circuit.Block(p.Block); isPump(o) {
			q := PortRef{o.ID, "P"}
			if p := k.polarityOf(q, axis); p != byDemand || k.directed(axis) {
				return p
			}
		}
	}
	return 1
}

// directed reports whether a valve chooses the direction of an axis.
func (k *compiler) directed(axis int) bool {
	for i := range k.circuit.Blocks {
		if k.circuit.Blocks[i].Word("directs") == k.axes[axis].Name {
			return true
		}
	}
	return false
}

// reach returns the nets that oil can get to from a port, with the number of
// blocks on the way; not through tanks, sources or the block it starts from.
func reach(c *Circuit, of map[PortRef]*net, from PortRef) map[*net]int {
	dist := map[*net]int{}
	start := of[from]
	if start == nil {
		return dist
	}
	ways := func(b *Block, port string) []string {
		if n := of[PortRef{b.ID, port}]; b.ID == from.Block || n.tank != "" || n.src != "" {
			return nil
		}
		return passes[b.Kind][port]
	}
	flood(c, of, start, ways, func(n *net, blocks int) bool {
		dist[n] = blocks
		return false
	})
	return dist
}
