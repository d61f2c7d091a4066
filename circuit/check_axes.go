package circuit

import (
	"fmt"
	"strings"

	"barlitre/circuit/duty"
)

// actuator returns the block that moves an axis, or nil.
func (k *checker) actuator(axis string) *Block {
	for i := range k.c.Blocks {
		if k.c.Blocks[i].Word("axis") == axis {
			return &k.c.Blocks[i]
		}
	}
	return nil
}

// followers returns the controls that follow an axis, and the valves that only direct it.
func (k *checker) followers(axis string) (follow, direct []*Block) {
	for _, b := range sorted(k.c.Blocks) {
		if follows(b) == axis {
			follow = append(follow, b)
		}
		if b.Word("directs") == axis {
			direct = append(direct, b)
		}
	}
	return
}

func ids(bs []*Block) []string {
	var out []string
	for _, b := range bs {
		out = append(out, b.ID)
	}
	return out
}

// axisOf checks that an axis can be moved as the duty says.
func (k *checker) axisOf(d *duty.Duty, a duty.Axis) {
	given := d.Given(a.Name)
	bad := func(at []*Block, format string, args ...any) {
		f := Finding{Level: Stops, Circuit: k.c.Name, Duty: d.Name, Text: fmt.Sprintf(format, args...), Line: k.c.Line}
		if len(at) > 0 {
			f.Block, f.Line = at[0].ID, at[0].Line
		}
		k.found = append(k.found, f)
	}
	var movers []*Block
	for _, b := range sorted(k.c.Blocks) {
		if b.Word("axis") == a.Name {
			movers = append(movers, b)
		}
	}
	follow, direct := k.followers(a.Name)
	switch given {
	case duty.TooFew:
		bad(movers, "duty %q gives only one of motion, load and command for axis %s; give exactly two", d.Name, a.Name)
	case duty.TooMany:
		bad(movers, "duty %q gives motion, load and command for axis %s; give exactly two of them, the third is found", d.Name, a.Name)
	}
	k.joined(a, movers, bad)
	if len(movers) == 0 {
		if given != duty.None || len(follow) > 0 {
			who := ""
			if len(follow) > 0 {
				who = ", which " + join(ids(follow), "and") + " follows"
			}
			bad(follow, "no actuator in circuit %q moves axis %s%s; give a cylinder or motor that axis (axis: %s)", k.c.Name, a.Name, who, a.Name)
		}
		return
	}
	act := movers[0]
	if movesAlong(act.Kind) != (a.Kind == duty.Linear) {
		k.say(Stops, act, "axis", "axis %s is %s, which a %s cannot be", a.Name, a.Kind, strings.ToLower(KindNamed(act.Kind).Title))
	}
	if len(follow) > 1 {
		k.say(Stops, follow[1], "follows", "%s all follow axis %s; only one control can answer for its motion", join(ids(follow), "and"), a.Name)
	}
	if len(follow) == 0 && given != duty.None && given != duty.LoadCommand {
		k.nothingFollows(d, a, act, "its motion")
	}
	if len(follow) == 0 && given == duty.LoadCommand && len(direct) == 0 {
		k.nothingFollows(d, a, act, "its command")
	}
	if len(follow) == 1 {
		k.holding(act, follow[0], direct)
		k.fed(follow[0])
	}
	if given == duty.MotionLoad {
		for _, b := range movers {
			k.canMove(b, d, a)
		}
	}
}

// nothingFollows says of an axis that no control answers for what the duty gives of it, and
// names the control where only one can.
func (k *checker) nothingFollows(d *duty.Duty, a duty.Axis, act *Block, what string) {
	var free []*Block
	for _, valves := range []bool{true, false} { // a valve comes first: the pump that feeds it does not follow the axis too
		for _, b := range sorted(k.c.Blocks) {
			if KindNamed(b.Kind).Param("follows") != nil && isValve(b) == valves && follows(b) == "" && b.Word("directs") == "" {
				free = append(free, b)
			}
		}
		if len(free) > 0 {
			break
		}
	}
	f := Finding{Level: Stops, Circuit: k.c.Name, Duty: d.Name, Block: act.ID, Line: act.Line, Cause: NoFollower, Axis: a.Name}
	switch len(free) {
	case 0:
		f.Text = fmt.Sprintf("no control in circuit %q follows axis %s, so nothing gives %s; add the valve, pump or motor that controls it and choose the axis at 'Follows axis' in its values", k.c.Name, a.Name, what)
	case 1:
		f.Block, f.Line, f.Parameter = free[0].ID, free[0].Line, "follows"
		f.Text = fmt.Sprintf("%s has to follow axis %s, for nothing else in circuit %q gives %s: set 'Follows axis' in its values to %s (follows)", free[0].ID, a.Name, k.c.Name, what, a.Name)
	default:
		f.Text = fmt.Sprintf("no control in circuit %q follows axis %s, so nothing gives %s: choose the axis at 'Follows axis' (follows) in the values of the one that controls it: %s", k.c.Name, a.Name, what, join(ids(free), "or"))
	}
	k.found = append(k.found, f)
}

// joined checks that several actuators of an axis can move as one: cylinders joined
// rigidly can, machines that turn are joined by their shafts.
func (k *checker) joined(a duty.Axis, movers []*Block, bad func(at []*Block, format string, args ...any)) {
	if len(movers) < 2 {
		return
	}
	first := KindNamed(movers[0].Kind).WordOf(movers[0], "hold")
	for _, b := range movers {
		if !movesAlong(b.Kind) {
			bad(movers[1:], "axis %s is moved by %s; only cylinders can move an axis together. Name the axis at one motor and join the shafts of the others to it by a line", a.Name, join(ids(movers), "and"))
			return
		}
		if hold := KindNamed(b.Kind).WordOf(b, "hold"); hold != first {
			k.say(Stops, b, "hold", "it moves axis %s together with %s, which is held by the %s; give both the same hold", a.Name, movers[0].ID, first).because(HeldOtherwise, "")
		}
		if _, given := b.Values["start"]; given {
			k.say(Stops, b, "start", "%s move axis %s together, and their ends of stroke are not followed; take start out, stroke alone still checks the way of the duty", join(ids(movers), "and"), a.Name).because(NeedsNoValue, "")
		}
	}
}

// holding checks that what holds an axis fits what controls it.
func (k *checker) holding(act, control *Block, direct []*Block) {
	hold := KindNamed(act.Kind).WordOf(act, "hold")
	if hold == "pump" && isValve(control) {
		k.say(Stops, act, "hold", "it is held by the pump, but %s throttles it; let the valve or a brake hold it (hold: valve or brake)", control.ID).because(HeldByValve, "")
	}
	if hold == "pump" && k.c.PumpAtRest == Stop {
		k.say(Stops, act, "hold", "it is held by the pump, but pumps are switched off at rest (pump_at_rest: stop); let them keep turning, or hold it by a valve or brake (hold)")
	}
	if hold == "pump" && len(direct) > 0 {
		k.say(Stops, act, "hold", "it is held by the pump, but %s closes at rest; let the valve hold it (hold: valve)", direct[0].ID).because(HeldByValve, "")
	}
}

// isValve reports whether a block throttles or directs by edges.
func isValve(b *Block) bool { return b.Kind == kindValve || b.Kind == kindSection63 }

// fed checks that a throttling valve hangs on a supply.
func (k *checker) fed(control *Block) {
	if !isValve(control) {
		return
	}
	for n := range reach(k.c, k.of, PortRef{control.ID, "P"}) {
		if n.src != "" || n.acc != "" {
			return
		}
		for _, p := range n.ports {
			if delivers(k.c.Block(p.Block)) && p.Port != "D" && n.tank == "" {
				return
			}
		}
	}
	k.say(Stops, control, "", "no pump and no pressure source feeds its port P")
}

// canMove refuses an actuator whose oil cannot get out: it must move against a blocked port.
func (k *checker) canMove(act *Block, d *duty.Duty, a duty.Axis) {
	forwards, backwards := false, false
	for _, w := range []duty.What{duty.Speed, duty.Position} {
		if tr := d.Track(a.Name, w); tr != nil {
			for i, v := range tr.Values {
				if w == duty.Position {
					v = v - tr.Values[max(i-1, 0)]
				}
				forwards, backwards = forwards || v > 0, backwards || v < 0
			}
		}
	}
	for _, way := range []struct {
		moves bool
		port  string
	}{{forwards, "B"}, {backwards, "A"}} {
		if n := k.of[PortRef{act.ID, way.port}]; way.moves && n != nil && !k.escapes(n, act.ID) {
			k.say(Stops, act, "", "it must move, but the oil at its port %s has no way out; connect it to a valve, pump or tank", way.port)
		}
	}
}

// outlets lists the ways oil can leave a node through a block, by the port it enters.
var outlets = map[string]map[string][]string{
	kindLine: {"A": {"B"}, "B": {"A"}}, kindFilter: {"A": {"B"}, "B": {"A"}}, kindOrifice: {"A": {"B"}, "B": {"A"}},
	kindCheck: {"in": {"out"}}, kindPilotCheck: {"V": {"C"}, "C": {"V"}}, kindCounterbalance: {"V": {"C"}, "C": {"V"}},
	kindReducing: {"P": {"A"}, "A": {"P"}}, kindSequence: {"P": {"A"}, "A": {"P"}}, kindFlowSharing: {"P": {"A"}, "A": {"P"}},
	kindFlowControl: {"A": {"B"}, "B": {"A"}}, kindFlowControl3: {"P": {"A", "T"}, "A": {"P"}}, kindThrottleCheck: {"A": {"B"}, "B": {"A"}},
	kindShuttleFlow: {"X": {"A"}, "Y": {"A"}, "A": {"X", "Y"}}, kindSection63: {"P": {"A", "B"}, "A": {"T", "P"}, "B": {"T", "P"}, "C1": {"C2"}, "C2": {"C1"}},
	kindCooler: {"A": {"B"}, "B": {"A"}}, kindFlowPoint: {"A": {"B"}, "B": {"A"}}, kindFlowDivider: {"P": {"A", "B"}, "A": {"P"}, "B": {"P"}},
	kindCompensator: {"P": {"A"}}, kindValve: {"P": {"A", "B", "T"}, "A": {"T", "P"}, "B": {"T", "P"}},
	kindRelief: {"P": {"T"}}, kindPump: {"P": {"S"}, "S": {"P"}}, kindSwitched: {"P": {"S"}, "S": {"P"}}, kindHydraulicMotor: {"A": {"B"}, "B": {"A"}},
	kindUnloading: {"P": {"A", "T"}}, kindCylinder: {"A": {"B"}, "B": {"A"}}, kindDoubleRod: {"A": {"B"}, "B": {"A"}}, kindChargePump: {"P": {"T"}, "S": {"P"}},
}

// escapes reports whether oil can get from a node to a tank or source, not through
// the block it comes from. A pump takes it too: closed loops go round through it.
func (k *checker) escapes(start *net, not string) bool {
	pump := false
	ways := func(b *Block, port string) []string {
		pump = pump || isPump(b)
		if b.ID == not || b.Kind == kindRelief || (port == "A" && KindNamed(b.Kind).WordOf(b, "reverse") == "blocked") {
			return nil
		}
		return outlets[b.Kind][port]
	}
	return flood(k.c, k.of, start, ways, func(n *net, _ int) bool { return n.tank != "" || n.src != "" || n.acc != "" || pump }) || pump
}
