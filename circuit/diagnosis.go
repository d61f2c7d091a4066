package circuit

import (
	"fmt"
	"math"

	"barlitre/circuit/balance"
	"barlitre/circuit/duty"
	"barlitre/machines/units"
)

// unsolved describes the step that was given up last: worst is its worst row.
func (r *run) unsolved(worst int) Unsolved {
	return Unsolved{T: r.step.t, Where: r.rows[worst].where, Residual: r.residuals(), Tried: balance.Tried(), Cause: r.cause()}
}

// residuals writes what is left of flows and of pressures.
func (r *run) residuals() string {
	q, p := 0.0, 0.0
	for i := range r.rows {
		left := math.Abs(r.solver.Residual(i))
		switch r.rows[i].kind {
		case flowRow, passRow:
			q = math.Max(q, left*r.scales.q)
		default:
			p = math.Max(p, left*r.scales.p)
		}
	}
	return show(q, units.Flow) + " and " + show(p, units.Pressure)
}

// beyond is a pressure that no part of the trade is made for.
const beyond = 1000e5

// cause says in words of the trade why a step most likely withstood: what is most out
// of the ordinary at the nearest point found.
func (r *run) cause() string {
	for i := range r.axes {
		a := &r.step.axes[i]
		if p := math.Abs(a.load) / r.volumes[i]; a.given != duty.MotionCommand && p > beyond {
			return fmt.Sprintf("the load of axis %s alone asks %s of %s: is the load too large for its area, or a unit wrong?", r.axes[i].Name, show(p, units.Pressure), r.movers[i].block)
		}
	}
	top, at := 0.0, ""
	for _, n := range r.nodes {
		if p := r.step.val(n.slot) * r.scales.p; p > top {
			top, at = p, n.name
		}
	}
	if top > beyond {
		return fmt.Sprintf("%s at %s, higher than any relief valve or rating allows: is oil shut in there between closed valves, or does a load push it together?", show(top, units.Pressure), at)
	}
	for i := range r.axes {
		a := &r.step.axes[i]
		if d, v := a.scaledDemand, r.movers[i].speed; v >= 0 && a.given == duty.MotionLoad && !a.standing && math.Abs(d) > 1 {
			return fmt.Sprintf("axis %s asks for %s, more than all pumps give: is its speed or the size of %s right?", r.axes[i].Name, show(math.Abs(d)*r.scales.q, units.Flow), r.movers[i].block)
		}
	}
	for i := range r.axes {
		a := &r.step.axes[i]
		if !a.standing && a.load*a.demand < 0 {
			return fmt.Sprintf("the load of axis %s drives %s ahead: does a valve hold it back, and is its other side fed?", r.axes[i].Name, r.movers[i].block)
		}
	}
	return "nothing stands out; compare the sizes of the valves with the flows of their axes, and shorten the time steps around this instant"
}
