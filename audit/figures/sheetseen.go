package figures

import (
	"math"

	"barlitre/audit"
)

// seen is what the results of a circuit ever show, so that labels keep room for that
// and for nothing else. Of a nil seen everything may be shown.
type seen struct {
	heat     map[string]bool // by block
	flow     []bool          // by stretch
	pressure []bool          // by stretch
}

// seenTimes is how many instants of a duty are looked at.
const seenTimes = 240

// Labelled returns the sheet with its labels laid anew for these results: blocks that
// never turn a share worth showing into heat, and lines that never carry flow, need no
// room for it. Placement and lines stay. Runs that were not solved are passed over.
func (s *Sheet) Labelled(runs ...*audit.DutyRun) *Sheet {
	out := *s
	out.seen = nil
	for _, run := range runs {
		if run != nil && run.Plot != nil && run.Duty != nil {
			out.look(run)
		}
	}
	out.placeLabels()
	out.measure()
	return &out
}

// look notes what one run shows at evenly spaced instants, and over its cycle.
func (s *Sheet) look(run *audit.DutyRun) {
	if s.seen == nil {
		s.seen = &seen{heat: map[string]bool{}, flow: make([]bool, len(s.stretches)), pressure: make([]bool, len(s.stretches))}
	}
	most := ScalesOf(run)
	if run.Balance != nil {
		for block, j := range cycleHeat(run) {
			s.seen.heat[block] = s.seen.heat[block] || ratio(j, most.Energy) >= heatShown
		}
	}
	from, length := 0.0, run.Duty.Cycle()
	if len(run.Duty.Time) > 0 {
		from = run.Duty.Time[0]
	}
	for i := range seenTimes + 1 {
		st := StateAt(run, from+length*float64(i)/seenTimes)
		for block, w := range st.heat {
			s.seen.heat[block] = s.seen.heat[block] || ratio(w, most.Heat) >= heatShown
		}
		now := s.flows(st)
		for k := range s.stretches {
			n := now[s.stretches[k].net]
			s.seen.flow[k] = s.seen.flow[k] || ratio(math.Abs(s.stretches[k].along(n)), most.Flow) >= flowNumber
			s.seen.pressure[k] = s.seen.pressure[k] || ratio(n.pressure, most.Pressure) >= pressureShown
		}
	}
}

// hot tells whether the heat of a block may be worth a number.
func (k *seen) hot(p *part) bool { return p.heats() && !p.copied && (k == nil || k.heat[p.id]) }

// flows tells whether a stretch may carry flow.
func (k *seen) flows(stretch int) bool { return k == nil || k.flow[stretch] }

// worth tells whether there may be anything to say of a stretch.
func (k *seen) worth(stretch int) bool {
	return k == nil || k.flow[stretch] || k.pressure[stretch]
}
