package circuit

import (
	"math"

	"barlitre/machines"
	"barlitre/machines/units"
)

// switchedKeys are the parameters of a cylinder-switched machine that go into its law, besides those of every machine.
var switchedKeys = [...]string{"cylinders", "slip", "friction", "viscous", "drag", "idle_loss", "cylinder_dead_volume", "returned", "event_energy", "events_active", "events_idle"}

// SwitchedLaw returns the law of a cylinder-switched block with the numbers it has; ok = false for other kinds and
// without a displacement.
func SwitchedLaw(b *Block) (law machines.Switched, ok bool) {
	k := KindNamed(b.Kind)
	full, has := b.Values["displacement"]
	if b.Kind != kindSwitched || k == nil || !has {
		return law, false
	}
	var v [len(switchedKeys)]float64
	for i, key := range switchedKeys {
		x, _, _ := k.Value(b, key)
		v[i] = x.SI
	}
	law = switchedLaw(full.SI, v)
	return law, law.Check() == nil
}

func switchedLaw(d float64, v [len(switchedKeys)]float64) machines.Switched {
	return machines.Switched{D: d, N: v[0], Cs: v[1], Cf: v[2], Cv: v[3], Tc: v[4], Idle: v[5], Dead: v[6], Returned: v[7], Switch: v[8], Active: v[9], Rest: v[10]}
}

// switchedLosses are what a cylinder-switched machine loses in place of slip and pressure friction of the full
// displacement; its viscous and constant friction are those of every machine.
type switchedLosses struct {
	on                bool
	keys              [len(switchedKeys)]int // parameters
	law               machines.Switched
	slip              float64 // conductance with every cylinder working, scaled
	idle, dead, coils int     // channels
	volume            int     // parameter, −1 = not given
	events, strokes   int     // signals
	squeezed, ripple  int
	trapped           float64 // oil volume at the outlet, m³
}

// switched makes a machine a cylinder-switched one.
func (k *compiler) switched(m *machine, b *Block) {
	s := switchedLosses{on: true, idle: k.channel(Loss, b, "idle cylinders"), dead: k.channel(Loss, b, "dead volume"), coils: k.channel(Loss, b, "valve switching"),
		events:   k.signal(b, "events", "valve events a second, each valve", units.Count),
		strokes:  k.signal(b, "strokes", "working strokes a second", units.Count),
		squeezed: k.signal(b, "squeezed", "share of a stroke that only compresses oil", units.Ratio), volume: k.param(b, "outlet_volume"), ripple: -1}
	if s.volume >= 0 {
		s.ripple = k.signal(b, "ripple", "pressure ripple at P, upper estimate", units.Pressure)
	}
	for i, key := range switchedKeys {
		s.keys[i] = k.param(b, key)
	}
	for i, key := range coefficientKeys {
		if key == "slip" || key == "friction" { // those scale with the fraction
			m.coef[i] = -1
		}
	}
	m.switched = s
}

func (m *machine) bindSwitched(b *binding) {
	s := &m.switched
	var v [len(switchedKeys)]float64
	for i, at := range s.keys {
		v[i] = b.get(at, 0)
	}
	s.law = switchedLaw(m.law.D, v)
	s.trapped = b.get(s.volume, 0)
	s.slip = s.law.Cs * s.law.D / b.cond.Viscosity * b.scales.p / b.scales.q
}

// laminar returns the slip conductances P to S and of each port to the case, scaled.
func (m *machine) laminar(set float64) (across, drain float64) {
	if !m.switched.on {
		return m.across, m.drain
	}
	k := m.switched.slip * math.Abs(set)
	return k * (1 - m.kc), k * m.kc
}

// evalSwitched adds the slip of the working cylinders.
func (m *machine) evalSwitched(e *eval) {
	set := e.val(m.e)
	across, drain := m.laminar(set)
	for _, way := range [...]struct {
		a, b     slot
		k, share float64
	}{{m.P, m.S, across, 1 - m.kc}, {m.P, m.D, drain, m.kc}, {m.S, m.D, drain, m.kc}} {
		if way.share == 0 {
			continue
		}
		drop := e.val(way.a) - e.val(way.b)
		e.pass(way.a, way.b, way.k*drop, way.k)
		byE := m.switched.slip * way.share * machines.Sign(set) * drop
		e.d(way.a, m.e, byE)
		e.d(way.b, m.e, -byE)
	}
}

// switchedTorque adds what opposes the motion with the fraction, and its slopes.
func (m *machine) switchedTorque(t *torque, set, dp, sg float64) {
	drag := m.switched.law.Drag(set, dp*m.scale.p, m.oil.bulk(), m.oil.Air).Sum() / m.tPer
	byX, byDP := m.switched.law.DragSlopes(set, dp*m.scale.p, m.oil.bulk(), m.oil.Air)
	t.need += sg * drag
	t.e += sg * byX / m.tPer
	t.p += sg * byDP * m.scale.p / m.tPer
	t.sigma += drag
}

// bookSwitched books those losses and returns their torque [N·m]; dir is the way of turning, w the speed [rad/s].
func (m *machine) bookSwitched(k *booking, set, dp, dir, w float64) float64 {
	s := &m.switched
	if !s.on {
		return 0
	}
	d := s.law.Drag(set, dp, m.oil.bulk(), m.oil.Air)
	k.lose(m.rub, d.Pressure*dir*w)
	k.lose(s.idle, d.Idle*dir*w)
	k.lose(s.dead, d.Compression*dir*w)
	k.lose(s.coils, d.Valves*dir*w)
	k.put(s.events, s.law.EventsOfOne(set, w))
	k.put(s.strokes, s.law.Strokes(set, w))
	squeezed := 0.0
	if math.Abs(set) > noFraction {
		squeezed = s.law.Squeezed(dp, m.oil.bulk(), m.oil.Air)
	}
	k.put(s.squeezed, squeezed)
	if s.ripple >= 0 {
		_, slope := machines.Compression(dp, m.oil.bulk(), m.oil.Air)
		k.put(s.ripple, s.law.PressureRipple(set, s.trapped, 1/slope))
	}
	return d.Sum() * dir
}
