package circuit

import (
	"math"

	"barlitre/circuit/duty"
	"barlitre/machines"
	"barlitre/machines/units"
)

// electricMotorKind is an induction motor: it gives its shaft a speed, and the
// machines on the shaft ask it for torque.
var electricMotorKind = &Kind{
	Name: kindElectricMotor, Title: "Electric motor", Group: "supply",
	Text: "Induction motor. It turns at constant speed, or, behind a frequency converter, at the speed that makes an axis move as the duty says (`follows`) or that a track commands. With a `torque_limit` it slows down when the machines on its shaft ask for more. Without a converter what comes back goes to the mains.",
	Ports: []Port{
		{Name: "shaft", Type: Shaft, Text: "drive shaft"},
		{Name: "E", Type: Electric, Optional: true, Text: "terminals; unconnected it hangs on the mains"},
	},
	Params: []Param{
		{Key: "rated_power", Title: "Rated power", Symbol: "PN", Dim: units.Power, Need: true, Above: true, Max: 5e6, Text: "shaft power on the name plate"},
		{Key: "efficiency", Title: "Efficiency at rated load", Symbol: "ηN", Dim: units.Ratio, Need: true, Above: true, Max: 1, Text: "on the name plate, or of its class by IEC 60034-30-1"},
		{Key: "speed", Title: "Speed", Symbol: "n", Dim: units.AngularSpeed, Default: "1480 rpm", Origin: Assumed, Source: "four poles, 50 Hz, loaded; common practice", Above: true, Max: 1000, Text: "rated speed; a motor of constant speed turns at it"},
		{Key: "control", Title: "Speed", Type: Choice, Default: "constant", Choices: []string{"constant", "commanded"}, Text: "what sets the speed"},
		{Key: "follows", Title: "Follows axis", Type: AxisRef, Text: "its speed is found from the motion of this axis"},
		{Key: "max_speed", Title: "Highest speed", Symbol: "n2", Dim: units.AngularSpeed, Above: true, Max: 2000, Text: "of a motor of variable speed; default: its speed"},
		{Key: "both_directions", Title: "Both directions", Type: Choice, Default: "no", Choices: []string{"no", "yes"}, Text: "a motor of variable speed may turn backwards"},
		{Key: "torque_limit", Title: "Torque limit", Symbol: "TL", Dim: units.Torque, Above: true, Max: 1e5, Text: "most it gives, as its converter or its pull-out torque limits it; without one it gives what is asked"},
		{Key: "fixed_share", Title: "Fixed losses", Symbol: "kf", Dim: units.Ratio, Default: "0.35", Origin: Assumed, Source: "iron, friction and windage at full speed as share of the rated loss, common practice", Max: 1, Text: "share of the rated loss that does not depend on load"},
		{Key: "loss", Title: "Loss law", Type: Choice, Default: "torque_speed", Choices: []string{"torque_speed", "power"}, Text: "torque_speed; or power, the older law in shaft power alone, which knows no loss of holding torque at standstill"},
	},
	Losses: []LossKind{{"electric motor", ToAir, "P = PV·(kf·|ω|/ωN + (1 − kf)·(T/TN)²), PV = PN·(1/ηN − 1)"}},
	Equations: []Equation{
		{"PV = PN·(1/ηN − 1); loss = PV·(kf·|ω|/ωN + (1 − kf)·(T/TN)²)", "loss separation, e.g. IEC 60034-2-1; fixed share assumed"},
		{"with a torque limit: ω = set speed while Σ T <= TL, else Σ T = TL", "complementarity of set speed and limit; the current at the limit is not described"},
		{"older law: loss = PV·(kf + (1 − kf)·(P/PN)²)", "part-load law in shaft power"},
	},
	Symbol: func(*Block) string { return "electric_motor" },
	check: func(k *Kind, b *Block, bad func(Level, string, string, ...any)) {
		if follows(b) != "" && b.Word("control") != "" {
			bad(Stops, "control", "it follows an axis and has a control of its own; keep one of `follows` and `control`")
		}
	},
	build: buildElectricMotor,
}

type electricModel struct {
	id                              string
	k                               *Compiled
	shaft                           int
	speed                           slot
	ctl                             controlKind
	axis                            int
	vel                             slot
	hold                            string
	polarity                        polarity
	back                            bool
	power                           bool // older loss law
	limit                           int  // parameter, −1 none
	sigma                           slot // friction of the machines on a limited shaft
	torque                          slot // unknown of a limited motor that follows an axis
	el                              int  // electric node, −1 on the mains
	rated, eta, n, nMax, fixedShare int
	loss, supply                    int
	sigW, sigT, sigShaft, sigEl     int

	law         machines.InductionMotor
	wPer        float64
	w, lo, hi   float64
	tracking    bool
	dir, wanted float64
	most, tPer  float64 // scaled torque limit; N·m of one scaled unit
	way         float64 // in which it is told to turn
	off         bool
}

func buildElectricMotor(k *compiler, b *Block) model {
	m := &electricModel{id: b.ID, k: k.Compiled, shaft: k.shaftAt(b), axis: -1, el: -1,
		rated: k.param(b, "rated_power"), eta: k.param(b, "efficiency"), n: k.param(b, "speed"), nMax: k.param(b, "max_speed"), fixedShare: k.param(b, "fixed_share"),
		loss: k.channel(Loss, b, "electric motor"), supply: -1,
		sigW: k.signal(b, "w", "speed", units.AngularSpeed), sigT: k.signal(b, "T", "shaft torque", units.Torque),
		sigShaft: k.signal(b, "shaft", "shaft power", units.Power), sigEl: k.signal(b, "electric", "power at the terminals", units.Power),
		limit: k.param(b, "torque_limit"), torque: noSlot,
		back: KindNamed(b.Kind).WordOf(b, "both_directions") == "yes", power: KindNamed(b.Kind).WordOf(b, "loss") == "power",
	}
	m.speed, m.sigma = k.shafts[m.shaft].speed, k.shafts[m.shaft].sigma
	if n := k.of[PortRef{b.ID, "E"}]; n != nil && len(n.ports) > 1 {
		m.el = k.elOf[n.id]
	} else {
		m.supply = k.channel(Supply, b, "supply")
	}
	switch {
	case follows(b) != "":
		m.ctl, m.axis = followsAxis, k.axisOf[follows(b)]
		m.vel, m.hold = k.movers[m.axis].speed, k.movers[m.axis].hold
		m.polarity = k.shaftPolarity(b, m.axis)
		if m.limit >= 0 && m.sigma >= 0 {
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
	m.law = machines.InductionMotor{RatedPower: b.p[m.rated], RatedSpeed: w, Efficiency: b.p[m.eta], FixedShare: b.p[m.fixedShare]}
	size := m.k.shafts[m.shaft].size(b.p)
	m.wPer = b.scales.q / size
	m.w = w / m.wPer
	m.hi = b.get(m.nMax, w) / m.wPer
	if m.back {
		m.lo = -m.hi
	}
	m.tPer = size * b.scales.p
	m.most = b.get(m.limit, 0) / m.tPer
	if m.speed >= 0 && m.limit < 0 {
		b.bound.Weight[m.speed] = 10
	}
}

func (m *electricModel) begin(s *step) {
	m.tracking, m.off = false, s.off()
	switch m.ctl {
	case heldConstant:
		if m.off {
			m.turn(s, 0)
		} else {
			m.turn(s, m.w)
		}
	case takesTrack:
		v := 1.0
		if c, ok := s.command(m.id, duty.Command); ok {
			v = c
		}
		if m.off {
			v = 0
		}
		m.turn(s, max(m.lo, v*m.hi))
	case followsAxis:
		a := &s.axes[m.axis]
		m.dir = m.polarity.sign(a)
		switch {
		case m.off, a.standing && m.hold != "pump":
			m.turn(s, 0)
		case a.given != duty.MotionLoad:
			m.turn(s, max(m.lo, m.dir*a.command*m.hi))
		default:
			s.bounds(m.speed, m.lo, m.hi)
			m.tracking, m.wanted = true, a.scaledDemand
			if m.torque >= 0 {
				s.bounds(m.torque, -m.most, m.most)
				s.bounds(m.sigma, -1, 1)
			}
		}
	}
}

// turn tells the motor its speed, which a torque limit may keep it from.
func (m *electricModel) turn(s *step, w float64) {
	if m.limit < 0 {
		s.set(m.speed, w)
		return
	}
	m.way = 0
	if w != 0 {
		m.way = sign(w)
	}
	s.bounds(m.speed, min(0, w), max(0, w))
	s.set(m.sigma, m.way)
	if m.torque >= 0 {
		s.set(m.torque, 0)
	}
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
	switch {
	case m.off: // switched off: neither turns nor draws
	case m.power:
		loss = m.law.LossPower(P)
	default:
		loss = m.law.LossTorqueSpeed(T, w)
	}
	k.put(m.sigW, w)
	k.put(m.sigT, T)
	k.put(m.sigShaft, P)
	k.put(m.sigEl, P+loss)
	k.pow[m.loss] += loss
	if m.el >= 0 {
		k.el[m.el] += P + loss
	} else {
		k.pow[m.supply] += P + loss
	}
}

func (m *electricModel) cold(s *step, level int, x []float64) {
	if m.speed >= 0 {
		x[m.speed] = (m.lo + m.hi) / 2
		if m.limit >= 0 && !m.tracking {
			x[m.speed] = m.w
		}
	}
}
