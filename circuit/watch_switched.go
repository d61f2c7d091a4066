package circuit

import (
	"math"

	"barlitre/machines"
	"barlitre/machines/units"
)

// SwitchedUse is what one service of a cylinder-switched machine does in a run.
type SwitchedUse struct {
	Block  string
	Law    machines.Switched
	Events float64 // of one valve, a cycle
	Busy   float64 // s a cycle with a fraction of cylinders at work
	Low    float64 // s of those below its low-flow limit
}

// switchedWatch notes it.
type switchedWatch struct {
	b                        *Block
	law                      machines.Switched
	e, w, events             int // signals
	squeezed, ripple, pP, pS int
	limit                    float64

	sum, busy, low       float64
	lastEvents           float64
	lastBusy, lastLow    bool
	worst, at            float64 // ripple over pressure difference
	worstRipple, worstDP float64
}

// Fractions below noFraction are none.
const noFraction = 1e-6

// service watches a cylinder-switched machine; get finds a signal.
func (w *Watch) service(b *Block, get func(string) int) {
	if b.Kind != kindSwitched {
		return
	}
	law := switchedLaw(w.value(b, "displacement"), w.switchedValues(b))
	w.services = append(w.services, switchedWatch{b: b, law: law, e: get(b.ID + ".e"), w: get(b.ID + ".w"), events: get(b.ID + ".events"), squeezed: get(b.ID + ".squeezed"),
		ripple: get(b.ID + ".ripple"), pP: get(b.ID + ".P.p"), pS: get(b.ID + ".S.p"), limit: w.value(b, "low_flow")})
}

func (w *Watch) switchedValues(b *Block) (v [len(switchedKeys)]float64) {
	for i, key := range switchedKeys {
		v[i] = w.value(b, key)
	}
	return v
}

func (m *switchedWatch) take(s *Sample, dt float64) {
	x, ev := math.Abs(s.Signals[m.e]), s.Signals[m.events]
	m.sum += dt * (ev + m.lastEvents) / 2
	busy := x > noFraction && s.Signals[m.w] != 0
	low := busy && x < m.limit*(1-1e-9)
	m.busy += dt * (half(busy) + half(m.lastBusy))
	m.low += dt * (half(low) + half(m.lastLow))
	m.lastEvents, m.lastBusy, m.lastLow = ev, busy, low
	if m.ripple < 0 || !busy {
		return
	}
	dp := math.Abs(s.Signals[m.pP] - s.Signals[m.pS])
	if r := s.Signals[m.ripple] / dp; dp > 5*units.Bar && r > m.worst {
		m.worst, m.at, m.worstRipple, m.worstDP = r, s.T, s.Signals[m.ripple], dp
	}
}

func half(b bool) float64 {
	if b {
		return 0.5
	}
	return 0
}

// SwitchedUses lists what the services did, as the mean of the cycles watched.
func (w *Watch) SwitchedUses(cycles int) []SwitchedUse {
	var out []SwitchedUse
	k := 1 / float64(max(cycles, 1))
	for _, m := range w.services {
		out = append(out, SwitchedUse{Block: m.b.ID, Law: m.law, Events: k * m.sum, Busy: k * m.busy, Low: k * m.low})
	}
	return out
}

// Shares that are worth a finding, our choice.
const (
	lowNote     = 0.1 // of the time at work below the low-flow limit
	lowWarns    = 0.2
	mostSqueeze = 0.1 // of a stroke
	mostRipple  = 0.1 // of the pressure difference
)

// switchedFindings says where a cylinder-switched machine comes to the limits of its principle.
func (w *Watch) switchedFindings(f *findings) {
	for _, m := range w.services {
		if share := m.low / m.busy; share > lowNote {
			level := Note
			if share > lowWarns {
				level = Warns
			}
			f.add(level, m.b, "low_flow", 0, "for %s of the time in which it works, its fraction lies below %s: there single strokes are felt as pulses, and its mean flow is set in steps of %s of the whole. Put a smaller service or an accumulator there, or a throttle for fine motion",
				units.Format(share, units.Percent, 2), units.Format(m.limit, units.Percent, 2), units.Format(1/m.law.N, units.Percent, 2))
		}
		if most, at := w.ext.max[m.squeezed], w.ext.tMax[m.squeezed]; most > mostSqueeze {
			f.add(Warns, m.b, "cylinder_dead_volume", at, "%s of a stroke only compresses oil at %s, more than %s: the oil is too soft (air) or the dead volume too large for this pressure",
				units.Format(most, units.Percent, 2), clock(at), units.Format(mostSqueeze, units.Percent, 2))
		}
		if m.worst > mostRipple {
			f.add(Note, m.b, "outlet_volume", m.at, "single strokes make the pressure at its outlet swing by up to %s (upper estimate) at %s, %s of the %s there; more oil volume or an accumulator at the outlet smooths it",
				show(m.worstRipple, units.Pressure), clock(m.at), units.Format(m.worst, units.Percent, 2), show(m.worstDP, units.Pressure))
		}
	}
}
