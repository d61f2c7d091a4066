package circuit

import (
	"math"

	"barlitre/circuit/duty"
	"barlitre/machines"
	"barlitre/machines/units"
)

type electricModel struct {
	id                          string
	k                           *Compiled
	shaft                       int
	speed                       slot
	ctl                         controlKind
	axis                        int
	vel                         slot
	hold                        string
	polarity                    polarity
	back                        bool
	limit                       int  // parameter, −1 none
	sigma                       slot // friction of the machines on a limited shaft
	torque                      slot // unknown of a limited motor that follows an axis
	el                          int  // electric node, −1 on the mains
	rated, n, nMax              int
	loss, supply                int
	sigW, sigT, sigShaft, sigEl int
	electric                    motorElectric
	start                       motorStart
	slips                       bool // its speed falls with torque
	gives                       bool // its torque is commanded
	poles, frequency            int

	law         motorLaw
	told        column // commands
	wPer        float64
	w, lo, hi   float64
	tracking    bool
	dir, wanted float64
	most, tPer  float64 // scaled torque limit; N·m of one scaled unit
	way         float64 // in which it is told to turn
	off         bool
	field, grip float64 // scaled: speed of the field, torque by slip speed
	given       float64 // scaled torque commanded
}

func buildElectricMotor(k *compiler, b *Block) model {
	m := &electricModel{id: b.ID, k: k.Compiled, shaft: k.shaftAt(b), axis: -1, el: -1,
		rated: k.param(b, "rated_power"), n: k.param(b, "speed"), nMax: k.param(b, "max_speed"),
		loss: k.channel(Loss, b, "electric motor"), supply: -1,
		sigW: k.signal(b, "w", "speed", units.AngularSpeed), sigT: k.signal(b, "T", "shaft torque", units.Torque),
		sigShaft: k.signal(b, "shaft", "shaft power", units.Power), sigEl: k.signal(b, "electric", "power at the terminals", units.Power),
		slips: slips(b), gives: commandsTorque(b), poles: k.param(b, "poles"), frequency: k.param(b, "frequency"),
		limit: k.param(b, "torque_limit"), torque: noSlot,
		back: KindNamed(b.Kind).WordOf(b, "both_directions") == "yes",
	}
	m.speed, m.sigma = k.shafts[m.shaft].speed, k.shafts[m.shaft].sigma
	if n := k.of[PortRef{b.ID, "E"}]; n != nil && len(n.ports) > 1 {
		m.el = k.elOf[n.id]
	} else {
		m.supply = k.channel(Supply, b, "supply")
	}
	m.law, m.electric, m.start = k.motorLaw(b), k.motorElectric(b, m.el >= 0), k.motorStart(b, m.el >= 0)
	switch {
	case follows(b) != "":
		m.ctl, m.axis = followsAxis, k.axisOf[follows(b)]
		m.vel, m.hold = k.movers[m.axis].speed, k.movers[m.axis].hold
		m.polarity = k.shaftPolarity(b, m.axis)
		if (m.limit >= 0 || m.gives) && k.movers[m.axis].given == duty.MotionLoad {
			m.torque = k.unknown(otherRow, b.ID+" torque")
		}
	case KindNamed(b.Kind).WordOf(b, "control") == "commanded":
		m.ctl = takesTrack
	}
	return m
}

func (m *electricModel) clone() model { c := *m; return &c }

func (m *electricModel) bind(b *binding) {
	w := b.p[m.n]
	m.law.bind(b)
	m.told = b.commanded(m.id, duty.Command)
	m.electric.bind(b, &m.law)
	m.start.bind(b)
	size := m.k.shafts[m.shaft].size(b.p)
	m.wPer = b.scales.q / size
	m.w = w / m.wPer
	m.hi = b.get(m.nMax, w) / m.wPer
	if m.back {
		m.lo = -m.hi
	}
	m.tPer = size * b.scales.p
	rated := b.p[m.rated] / w
	m.most = b.get(m.limit, rated) / m.tPer
	m.field = machines.SynchronousSpeed(b.p[m.frequency], int(math.Round(b.p[m.poles]))) / m.wPer
	m.grip = rated / m.tPer / (m.field - m.w)
	if m.speed >= 0 && !m.free() {
		b.bound.Weight[m.speed] = 10
	}
}

// free reports whether its speed is found from the torques on its shaft.
func (m *electricModel) free() bool { return m.limit >= 0 || m.slips || m.gives }

func (m *electricModel) begin(s *step) {
	m.tracking, m.off = false, s.off()
	switch m.ctl {
	case heldConstant:
		switch {
		case m.off:
			m.turn(s, 0)
		case s.standing && m.start.idles:
			m.turn(s, m.start.idle/m.wPer)
		default:
			m.turn(s, m.w)
		}
	case takesTrack:
		v := m.told.at(s, 1)
		switch {
		case m.off:
			m.turn(s, 0)
		case m.gives:
			m.push(s, v*m.most)
		default:
			m.turn(s, max(m.lo, v*m.hi))
		}
	case followsAxis:
		a := &s.axes[m.axis]
		m.dir = m.polarity.sign(a)
		switch {
		case m.off, a.standing && m.hold != "pump":
			m.turn(s, 0)
		case a.given != duty.MotionLoad && m.gives:
			m.push(s, m.dir*a.command*m.most)
		case a.given != duty.MotionLoad:
			m.turn(s, max(m.lo, m.dir*a.command*m.hi))
		default:
			s.bounds(m.speed, m.lo, m.hi)
			m.tracking, m.wanted = true, a.scaledDemand
			if m.torque >= 0 {
				most := m.most
				if m.limit < 0 {
					most = inf
				}
				s.bounds(m.torque, -most, most)
				s.bounds(m.sigma, -1, 1)
			}
		}
	}
}

// turn tells the motor its speed, which a torque limit may keep it from.
func (m *electricModel) turn(s *step, w float64) {
	if !m.free() {
		s.set(m.speed, w)
		return
	}
	m.way, m.given = 0, 0
	if w != 0 {
		m.way = machines.Sign(w)
	}
	s.bounds(m.speed, min(0, w), max(0, w))
	if m.slips && w != 0 {
		s.bounds(m.speed, 0, 2*m.field)
	}
	s.set(m.sigma, m.way)
	if m.torque >= 0 {
		s.set(m.torque, 0)
	}
}

// push gives the shaft a torque [scaled]; a machine that turns one way is not pulled back by it.
func (m *electricModel) push(s *step, t float64) {
	m.given = t
	s.bounds(m.sigma, -1, 1)
	s.bounds(m.speed, runaway*m.lo, runaway*m.hi)
}

func (m *electricModel) eval(e *eval) {
	switch {
	case m.tracking && m.torque >= 0:
		e.add(m.speed, -e.val(m.torque))
		e.d(m.speed, m.torque, -1)
		e.add(m.torque, m.dir*(e.val(m.vel)-m.wanted)) // more torque, more speed
		e.d(m.torque, m.vel, m.dir)
	case m.tracking:
		e.add(m.speed, m.dir*(e.val(m.vel)-m.wanted))
		e.d(m.speed, m.vel, m.dir)
	case m.slips && m.way != 0:
		e.add(m.speed, -m.grip*(m.field-e.val(m.speed)))
		e.d(m.speed, m.speed, m.grip)
	case m.gives:
		e.add(m.speed, -m.given)
	case m.limit >= 0:
		e.add(m.speed, -m.way*m.most)
	}
}

func (m *electricModel) book(*booking) {} // after all machines: bookShaft

// bookShaft books the motor once the torque of its shaft is summed.
func (m *electricModel) bookShaft(k *booking) {
	w, T := k.val(m.speed)*m.wPer, k.shaft[m.shaft].torque
	if m.limit >= 0 && math.Abs(k.val(m.speed)) <= stalled*m.hi { // it gives what it can
		T = max(-m.most*m.tPer, min(m.most*m.tPer, T))
	}
	P := T * w
	loss := 0.0
	if !m.off { // switched off it neither turns nor draws
		loss = m.law.loss(T, w)
	}
	k.put(m.sigW, w)
	k.put(m.sigT, T)
	k.put(m.sigShaft, P)
	k.put(m.sigEl, P+loss)
	k.pow[m.loss] += loss
	if m.el >= 0 {
		k.el[m.el] += P + loss
		k.each[m.el] += math.Abs(P + loss)
	} else {
		k.pow[m.supply] += P + loss
	}
	m.electric.book(k, &m.law, T, w, P+loss, m.off)
	if m.ctl == heldConstant {
		m.start.book(k, m.el, m.supply)
	}
}

func (m *electricModel) cold(s *step, level int, x []float64) {
	if m.speed >= 0 {
		x[m.speed] = (m.lo + m.hi) / 2
		if m.free() && !m.tracking && !m.gives {
			x[m.speed] = m.w
		}
	}
}
