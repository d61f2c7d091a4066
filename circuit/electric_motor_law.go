package circuit

import (
	"math"

	"barlitre/machines"
	"barlitre/machines/units"
)

// motorLaw is the loss law of an electric motor.
type motorLaw struct {
	rated, eta, n, fixedShare, kT, R, P0 int  // parameters
	wound                                bool // a servo motor of known torque constant and resistance
	older                                bool // law in shaft power

	induction machines.InductionMotor
	servo     machines.PermanentMagnetMotor
}

func (k *compiler) motorLaw(b *Block) motorLaw {
	l := motorLaw{rated: k.param(b, "rated_power"), eta: k.param(b, "efficiency"), n: k.param(b, "speed"), fixedShare: k.param(b, "fixed_share"),
		kT: k.param(b, "torque_constant"), R: k.param(b, "resistance"), P0: k.param(b, "speed_loss"),
		older: KindNamed(b.Kind).WordOf(b, "loss") == "power"}
	l.wound = isServo(b) && l.kT >= 0 && l.R >= 0
	return l
}

func (l *motorLaw) bind(b *binding) {
	l.induction = machines.InductionMotor{RatedPower: b.p[l.rated], RatedSpeed: b.p[l.n], Efficiency: b.get(l.eta, 1), FixedShare: b.p[l.fixedShare]}
	if l.wound {
		l.servo = machines.PermanentMagnetMotor{RatedPower: b.p[l.rated], RatedSpeed: b.p[l.n],
			TorqueConstant: b.p[l.kT], Resistance: b.p[l.R], SpeedLoss: b.get(l.P0, 0)}
	}
}

// loss is what the motor loses at a torque and a speed [W].
func (l *motorLaw) loss(T, w float64) float64 {
	switch {
	case l.wound:
		return l.servo.LossTorqueSpeed(T, w)
	case l.older:
		return l.induction.LossPower(T * w)
	}
	return l.induction.LossTorqueSpeed(T, w)
}

// motorElectric is the electric side of a motor: current and power factor.
type motorElectric struct {
	U, cos            int     // parameters
	sigI, sigPF       int     // signals, −1 where not known
	voltage, reactive float64 // V; var at rated load
}

func (k *compiler) motorElectric(b *Block, converter bool) motorElectric {
	m := motorElectric{U: k.param(b, "voltage"), cos: k.param(b, "power_factor"), sigI: -1, sigPF: -1}
	_, kT := b.Values["torque_constant"]
	if !isServo(b) || kT {
		m.sigI = k.signal(b, "I", "current", units.Current)
	}
	if !isServo(b) && !converter {
		m.sigPF = k.signal(b, "pf", "power factor", units.Ratio)
	}
	return m
}

// bind follows that of the law.
func (m *motorElectric) bind(b *binding, l *motorLaw) {
	m.voltage, m.reactive = b.p[m.U], l.induction.RatedReactivePower(b.p[m.cos])
}

// book writes current and power factor at torque T, speed w and power P at the terminals. A motor that neither
// turns nor holds is without current.
func (m *motorElectric) book(k *booking, l *motorLaw, T, w, P float64, off bool) {
	switch {
	case off, w == 0 && math.Abs(T) < 1e-9*l.induction.RatedPower/l.induction.RatedSpeed:
		k.put(m.sigI, 0)
		k.put(m.sigPF, 0)
	case l.wound:
		k.put(m.sigI, l.servo.Current(T))
	default:
		Q := m.reactive * l.induction.ReactiveShare(T)
		k.put(m.sigI, m.current(l, T, Q))
		k.put(m.sigPF, math.Abs(P)/max(math.Sqrt(P*P+Q*Q), 1e-9))
	}
}

// current is that of an induction motor at a torque, with a reactive power of Q, its voltage falling with its speed
// below the rated one, so that the current is that at rated speed.
func (m *motorElectric) current(l *motorLaw, T, Q float64) float64 {
	w := l.induction.RatedSpeed
	P := T*w + l.induction.LossTorqueSpeed(T, w)
	return math.Sqrt(P*P+Q*Q) / (math.Sqrt(3) * m.voltage)
}

// motorStart is what it costs to leave standstill or soft idle.
type motorStart struct {
	inertia, share, speed, idleAt int // parameters
	loss                          int // channel, −1 where it never rests
	idles                         bool
	J, ks, w, idle                float64
}

func (k *compiler) motorStart(b *Block, converter bool) motorStart {
	m := motorStart{inertia: k.param(b, "inertia"), share: k.param(b, "start_loss"), speed: k.param(b, "speed"), idleAt: k.param(b, "idle_speed"), loss: -1}
	m.idles = m.idleAt >= 0
	m.ks = 1
	if converter {
		m.ks = 0.1
	}
	if !varies(b) && (m.idles || k.circuit.PumpAtRest == Stop) {
		m.loss = k.channel(Loss, b, "starting")
	}
	return m
}

func (m *motorStart) bind(b *binding) {
	m.J, m.w, m.idle = b.get(m.inertia, 0), b.p[m.speed], b.get(m.idleAt, 0)
	m.ks *= b.p[m.share]
}

// book books the energy of a start where the motor leaves what it does at rest.
func (m *motorStart) book(k *booking, el, supply int) {
	if m.loss < 0 || !k.step.startsUp() {
		return
	}
	from := m.idle
	if k.step.atRest == Stop {
		from = 0
	}
	E := (1 + m.ks) * m.J * (m.w*m.w - from*from) / 2
	k.strike(m.loss, E)
	if el >= 0 {
		k.elJ[el] += E
	} else {
		k.strike(supply, E)
	}
}
