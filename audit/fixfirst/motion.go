package fixfirst

import (
	"fmt"
	"maps"
	"math"
	"slices"

	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// motion is whether a machine does its work: what a cure must not spoil.
type motion struct {
	short  map[string]float64 // s by which an axis falls short in a cycle, by duty and axis
	missed map[string]missed  // gates that are not passed, by duty, block and name
}

// missed is a gate that is not passed.
type missed struct {
	text string  // "HM1 does not pass \"pressure to break away\" in handling"
	by   float64 // what is asked over the limit; +Inf where the limit is none to divide by
}

// slower [s] is by how much an axis may fall short more, and worse by how much more of its limit a gate that was missed
// before may be asked: what two balances of one circuit differ by.
const (
	slower = 1e-3
	worse  = 1e-3
)

func motionOf(run *audit.CircuitRun) motion {
	m := motion{map[string]float64{}, map[string]missed{}}
	for _, d := range run.Duties {
		for _, s := range d.Shortfalls {
			m.short[d.Duty.Name+"|"+s.Axis] += s.Seconds
		}
		for _, g := range d.Gates {
			if g.Passed {
				continue
			}
			key := d.Duty.Name + "|" + g.Block + "|" + g.Name
			by := math.Inf(1)
			if g.Limit > 0 {
				by = g.Value / g.Limit
			}
			m.missed[key] = missed{gateMissed(d, g), by}
		}
	}
	return m
}

func gateMissed(d *audit.DutyRun, g circuit.Gate) string {
	return fmt.Sprintf("%s no longer passes %s in %s (%s asked, %s there)", g.Block, g.Name, d.Duty.Name, units.Format(g.Value, g.Unit, 3), units.Format(g.Limit, g.Unit, 3))
}

// spoils says in words what the motion after a cure lacks that was there before it; "" where nothing. Gates
// count where they are asked for.
func (m motion) spoils(before motion, gates bool) string {
	for _, key := range slices.Sorted(maps.Keys(m.missed)) {
		g := m.missed[key]
		if b, was := before.missed[key]; gates && (!was || g.by > b.by*(1+worse)) {
			return g.text
		}
	}
	for key, s := range m.short {
		if s > before.short[key]+slower {
			return "it makes an axis slower than it is"
		}
	}
	return ""
}
