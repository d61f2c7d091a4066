package circuit

import "barlitre/circuit/duty"

// safety gives the cautions that a drawing asks for.
func (k *checker) safety() {
	for _, b := range sorted(k.c.Blocks) {
		switch {
		case b.Kind == kindAccumulator:
			k.relieved(b, "P", "the oil side")
			k.say(Caution, b, "", "it stays charged when the machine is off: before any work it must be shut off and discharged, and zero read on a gauge; it needs its own shut-off, relief, discharge and gauge, and the inspections of the local rules for pressure vessels")
		case isPump(b):
			k.relieved(b, "P", "its outlet")
			if n := k.of[PortRef{b.ID, "S"}]; n != nil && n.tank == "" && KindNamed(b.Kind).WordOf(b, "both_directions") == "yes" {
				k.relieved(b, "S", "its other side")
			}
			k.relievedAbove(b)
		case b.Kind == kindCylinder:
			k.relieved(b, "A", "the bore side")
			k.relieved(b, "B", "the rod side")
			k.suspended(b)
		case movesAlong(b.Kind):
			k.relieved(b, "A", "side A")
			k.relieved(b, "B", "side B")
			k.suspended(b)
		case b.Kind == kindHydraulicMotor && b.Word("axis") != "":
			k.relieved(b, "A", "side A")
			k.relieved(b, "B", "side B")
			k.suspended(b)
		}
	}
}

// relieved cautions where a volume can be shut off from every relief valve.
func (k *checker) relieved(b *Block, port, name string) {
	n := k.of[PortRef{b.ID, port}]
	if n == nil || n.tank != "" || k.hasRelief(n) {
		return
	}
	if n.src != "" {
		return
	}
	k.say(Caution, b, "", "%s (%s.%s) can be closed off from every relief valve: pressure there has no limit. Put a relief valve on it; who may set it and how is for the maker of the machine and the local rules", name, b.ID, port).because(NoRelief, port)
}

// free lists the ways through parts that cannot close in their free direction.
var free = map[string]map[string][]string{
	kindLine: {"A": {"B"}, "B": {"A"}}, kindFilter: {"A": {"B"}, "B": {"A"}}, kindOrifice: {"A": {"B"}, "B": {"A"}},
	kindCheck: {"in": {"out"}}, kindPilotCheck: {"V": {"C"}}, kindCounterbalance: {"V": {"C"}},
	kindCooler: {"A": {"B"}, "B": {"A"}}, kindFlowPoint: {"A": {"B"}, "B": {"A"}},
	kindThrottleCheck: {"A": {"B"}, "B": {"A"}}, kindFlowControl: {"B": {"A"}},
}

// hasRelief reports whether oil reaches a relief valve, tank or source from a node
// without passing a part that can close. A counterbalance valve opens by itself.
func (k *checker) hasRelief(start *net) bool {
	ways := func(b *Block, port string) []string { return free[b.Kind][port] }
	return flood(k.c, k.of, start, ways, func(n *net, _ int) bool {
		for _, p := range n.ports {
			switch kind := k.c.Block(p.Block).Kind; {
			case (kind == kindRelief || kind == kindChargePump) && p.Port == "P", kind == kindCounterbalance && p.Port == "C":
				return true
			}
		}
		return n.tank != "" || n.src != ""
	})
}

// suspended cautions where a load stands on a hydraulic lock that leaks or on a pump.
func (k *checker) suspended(b *Block) {
	hold := KindNamed(b.Kind).WordOf(b, "hold")
	loaded := false
	for _, d := range k.duties {
		loaded = loaded || k.standsUnderLoad(d, b.Word("axis"))
	}
	if !loaded || hold == "brake" {
		return
	}
	if hold == "pump" {
		k.say(Caution, b, "hold", "a load stands on the pump alone: when power or drive fails it comes down. A pump does not hold a load; keep a load-holding valve at the actuator or a brake, with its own proof").because(LoadNotHeld, "")
		return
	}
	for _, port := range []string{"A", "B"} {
		if n := k.of[PortRef{b.ID, port}]; n != nil && k.locked(n) {
			return
		}
	}
	k.say(Caution, b, "hold", "a load stands on a spool valve without a load-holding valve (pilot-operated check or counterbalance valve) at the actuator: spools leak and hoses burst. Fit one, or say that a brake holds it").because(LoadNotHeld, "")
}

// standsUnderLoad reports whether a duty has an axis stand under a load.
func (k *checker) standsUnderLoad(d *duty.Duty, axis string) bool {
	for _, a := range k.axes {
		if a.Name == axis {
			return d.StandsUnder(a, 0.01) // what is left of a ramp at the threshold of standstill is no load
		}
	}
	return false
}

// locked reports whether a load-holding valve sits on a node, or behind a line.
func (k *checker) locked(n *net) bool {
	for _, p := range n.ports {
		b := k.c.Block(p.Block)
		if (b.Kind == kindPilotCheck || b.Kind == kindCounterbalance) && p.Port == "C" {
			return true
		}
	}
	return false
}
