package circuit

import (
	"slices"
	"sort"
	"strings"
)

// ports checks that what must be connected is.
func (k *checker) ports() {
	for i := range k.c.Blocks {
		b := &k.c.Blocks[i]
		kind := KindNamed(b.Kind)
		joined := 0
		for _, p := range kind.Ports {
			n := k.of[PortRef{b.ID, p.Name}]
			if n != nil && len(n.ports) > 1 {
				joined++
			} else if !p.Optional {
				k.say(Stops, b, "", "port %s (%s) is not connected", p.Name, p.Text).because(OpenPort, p.Name)
			}
		}
		if isPump(b) && kind.WordOf(b, "control") == "load_sensing" && k.of[PortRef{b.ID, "LS"}] == nil {
			k.say(Stops, b, "control", "a load-sensing pump needs a pilot line at its port LS").because(NoLoadSignal, "LS")
		}
		if b.Kind == kindPump && kind.WordOf(b, "control") == "negative_flow" && k.of[PortRef{b.ID, "LS"}] == nil {
			k.say(Stops, b, "control", "a pump with negative flow control needs a pilot line at its port LS, from the line before an orifice in the return of the open centre")
		}
		if x := k.of[PortRef{b.ID, "X"}] != nil; b.Kind == kindSequence && x != (kind.WordOf(b, "pilot") == "external") {
			k.say(Stops, b, "pilot", "piloted from outside (pilot: external) it needs a pilot line at its port X, piloted from its inlet (pilot: inlet) none")
		}
		if b.Kind == kindJunction && joined == 0 {
			k.say(Warns, b, "", "the junction joins nothing").because(JoinsNothing, "")
		}
	}
}

// joints checks what meets in each line.
func (k *checker) joints() {
	for _, n := range k.nets {
		m := k.c.meets(n.ports)
		line := 0
		if len(n.lines) > 0 {
			line = n.lines[0]
		}
		bad := func(block, text string) {
			k.found = append(k.found, Finding{Level: Stops, Circuit: k.c.Name, Block: block, Text: text, Line: line})
		}
		at := n.ports[0].Block
		if text := m.clash(); text != "" {
			bad(at, text)
		} else if m.needsSignal() {
			bad(at, "nothing gives a pressure to the pilot line at "+n.name()+"; lead it to an oil line, to LS of a valve or to A of a shuttle valve")
		}
		if text := m.heldTwice(); text != "" {
			bad(n.src, text)
		}
	}
	k.pressureControls()
}

// pressureControls refuses two pumps that each want to hold the pressure of one line.
func (k *checker) pressureControls() {
	at := map[*net]*Block{}
	for _, b := range sorted(k.c.Blocks) {
		c := KindNamed(b.Kind).WordOf(b, "control")
		if !isPump(b) || (c != "pressure" && c != "load_sensing" && c != "pq") {
			continue
		}
		n := k.of[PortRef{b.ID, "P"}]
		if o := at[n]; o != nil && n != nil {
			k.say(Stops, b, "control", "%s and %s both hold the pressure of one line; which gives how much is not determined. Make one of them fixed or separate them by check valves", o.ID, b.ID)
		}
		at[n] = b
		if n != nil && n.src != "" {
			k.say(Stops, b, "control", "%s holds a pressure on a line that %s already holds; separate them", b.ID, n.src)
		}
	}
}

// shafts checks who drives whom.
func (k *checker) shafts() {
	for _, n := range k.nets {
		switch n.typ {
		case Shaft:
			k.train(n)
		case Electric:
			var feeds []string
			for _, p := range n.ports {
				if k.c.Block(p.Block).Kind == kindConverter {
					feeds = append(feeds, p.Block)
				}
			}
			if len(feeds) > 1 {
				k.say(Stops, k.c.Block(feeds[1]), "", "%s feed one line; keep one converter", join(feeds, "and"))
			} else if len(feeds) == 1 && len(n.ports) == 1 {
				k.say(Stops, k.c.Block(feeds[0]), "", "no motor is connected to it")
			}
		}
	}
	for _, b := range sorted(k.c.Blocks) {
		k.reference(b)
		if b.Kind == kindHydraulicMotor && b.Word("axis") == "" {
			if n := k.of[PortRef{b.ID, "shaft"}]; n == nil || len(n.ports) < 2 {
				k.say(Stops, b, "axis", "it drives nothing: give it an axis, or join its shaft to another machine")
			}
		}
		if b.Kind == kindElectricMotor {
			k.terminals(b)
		}
	}
}

// train checks who drives a shaft and those that gearboxes join to it, once for all of them.
func (k *checker) train(n *net) {
	nets, _, ring := train(k.c, k.of, n)
	var prime, movers, loads []string
	var axes []*Block
	for _, m := range nets {
		if m.id < n.id {
			return
		}
		for _, p := range m.ports {
			switch b := k.c.Block(p.Block); b.Kind {
			case kindElectricMotor, kindEngine:
				prime = append(prime, b.ID)
				k.slows(nets, b)
			case kindHydraulicMotor:
				movers = append(movers, b.ID)
				if b.Word("axis") != "" {
					axes = append(axes, b)
				}
			default:
				if !slices.Contains(loads, b.ID) {
					loads = append(loads, b.ID)
				}
			}
		}
	}
	if ring != "" {
		k.say(Stops, k.c.Block(ring), "", "it closes a ring of gearboxes, which cannot turn freely; take it out or join the shafts")
	}
	if len(prime) > 1 {
		k.say(Stops, k.c.Block(prime[1]), "", "%s each give the same shaft a speed; keep one", join(prime, "and"))
	}
	if len(prime) > 0 && len(axes) > 0 {
		k.say(Stops, axes[0], "axis", "it drives axis %s, but %s gives its shaft a speed; take one of them off the shaft", axes[0].Word("axis"), prime[0])
	}
	if len(prime)+len(movers) == 0 {
		k.say(Stops, k.c.Block(loads[0]), "", "nothing drives the shaft of %s; connect an electric motor or an engine to it", join(loads, "and")).because(NoDrive, shaftOf(nets, loads[0]))
	}
}

// islands refuses oil that has no way to a tank or source: its pressure would be anything.
func (k *checker) islands() {
	group := map[*net]*net{}
	var find func(n *net) *net
	find = func(n *net) *net {
		if g := group[n]; g != nil && g != n {
			return find(g)
		}
		return n
	}
	for _, b := range k.c.Blocks {
		var first *net
		for _, p := range KindNamed(b.Kind).Ports {
			n := k.of[PortRef{b.ID, p.Name}]
			if p.Type != Oil || n == nil || n.typ != Oil || b.Kind == kindTank {
				continue
			}
			if first == nil {
				first = n
			} else if a, z := find(first), find(n); a != z {
				group[z] = a
			}
		}
	}
	fed := map[*net]bool{}
	for _, n := range k.nets {
		if n.tank != "" || n.src != "" || n.acc != "" {
			fed[find(n)] = true
		}
	}
	names := map[*net][]string{}
	for _, n := range k.nets {
		if n.typ == Oil && !fed[find(n)] {
			for _, p := range n.ports {
				names[find(n)] = append(names[find(n)], p.String())
			}
		}
	}
	var roots []*net
	for r := range names {
		roots = append(roots, r)
	}
	sort.Slice(roots, func(i, j int) bool { return roots[i].id < roots[j].id })
	for _, r := range roots {
		list := names[r]
		if len(list) > 6 {
			list = append(list[:6:6], "…")
		}
		b := k.c.Block(r.ports[0].Block)
		var back PortRef
		for _, n := range k.nets { // a port that leads to a tank by trade is named first
			if n.typ != Oil || find(n) != r || back.Port != "" {
				continue
			}
			for _, p := range n.ports {
				if back.Port == "" && k.c.ReturnsAt(p) {
					back = p
				}
			}
		}
		k.say(Stops, b, "", "the oil at %s has no way to a tank or to a low-pressure source; its pressure is not determined. Connect a tank, or a charge pump through check valves", strings.Join(list, ", ")).because(NoTank, "")
		k.found[len(k.found)-1].Port = back
	}
}

// shaftOf names the port with which a block sits on one of some shafts.
func shaftOf(nets []*net, block string) string {
	for _, n := range nets {
		for _, p := range n.ports {
			if p.Block == block {
				return p.Port
			}
		}
	}
	return ""
}
