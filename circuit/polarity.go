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

// passes lists, for the kinds that oil passes, which of their ports are joined.
var passes = map[string][][2]string{
	"line": {{"A", "B"}}, "filter": {{"A", "B"}}, "orifice": {{"A", "B"}}, "check": {{"in", "out"}},
	"pilot_check": {{"V", "C"}}, "counterbalance": {{"V", "C"}}, "compensator": {{"P", "A"}},
}

// polarityOf finds which port of an axis' actuator the port from is nearest to:
// the one that moves it forwards (+1) or backwards (−1). Valves between are
// crossed only when there is no other way; the direction is then theirs to choose.
func (k *compiler) polarityOf(from PortRef, axis int) polarity {
	b := k.circuit.Block(k.movers[axis].block)
	if b == nil {
		return 1
	}
	reach := k.reach(from, false)
	dA, okA := reach[k.of[PortRef{b.ID, "A"}]]
	dB, okB := reach[k.of[PortRef{b.ID, "B"}]]
	switch {
	case okA && (!okB || dA <= dB):
		return 1
	case okB:
		return -1
	}
	return byDemand
}

// shaftPolarity is the polarity of the pumps on a motor's shaft.
func (k *compiler) shaftPolarity(b *Block, axis int) polarity {
	n := k.of[PortRef{b.ID, "shaft"}]
	if n == nil {
		return 1
	}
	for _, p := range n.ports {
		if o := k.circuit.Block(p.Block); o.Kind == kindPump {
			if q := (PortRef{o.ID, "P"}); len(k.reach(q, true)) > 1 {
				return k.polarityOf(q, axis)
			}
		}
	}
	return 1
}

// reach returns the nets that oil can get to from a port, with the number of
// blocks on the way; not through tanks, sources or the block it starts from.
func (k *compiler) reach(from PortRef, throughValves bool) map[*net]int {
	start := k.of[from]
	dist := map[*net]int{}
	if start == nil {
		return dist
	}
	dist[start] = 0
	queue := []*net{start}
	for len(queue) > 0 {
		n := queue[0]
		queue = queue[1:]
		if n.tank != "" || n.src != "" {
			continue
		}
		for _, p := range n.ports {
			b := k.circuit.Block(p.Block)
			if b.ID == from.Block {
				continue
			}
			ways := passes[b.Kind]
			if throughValves && b.Kind == kindValve {
				ways = [][2]string{{"P", "A"}, {"P", "B"}}
			}
			for _, w := range ways {
				other := ""
				switch p.Port {
				case w[0]:
					other = w[1]
				case w[1]:
					other = w[0]
				default:
					continue
				}
				o := k.of[PortRef{b.ID, other}]
				if o == nil {
					continue
				}
				if _, seen := dist[o]; !seen {
					dist[o] = dist[n] + 1
					queue = append(queue, o)
				}
			}
		}
	}
	return dist
}
