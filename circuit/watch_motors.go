package circuit

import (
	"fmt"
	"math"

	"barlitre/machines"
	"barlitre/machines/units"
)

// motorWatch follows the torque and speed of an electric motor.
type motorWatch struct {
	b             *Block
	torque, speed int // signals
	current       int // −1 where not known
	pole          int
	rated, wN     float64
	breakdown     float64 // N m
	selfCooled    bool
	line          bool // straight on the mains

	square, amps, heated   float64 // ∫T², ∫I², ∫(T/share of cooling)² dt
	last, lastI, lastH     float64
	peak, tPeak            float64
	ampere                 float64 // highest
	hold, held, most, tMax float64 // ∫T² and time at standstill, highest torque there
	still                  bool
	fast, tFast            float64
}

func (w *Watch) motor(b *Block, get func(string) int) motorWatch {
	p, n := w.value(b, "rated_power"), w.value(b, "speed")
	_, of := netsOf(w.c.circuit)
	t := of[PortRef{b.ID, "E"}]
	return motorWatch{b: b, torque: get(b.ID + ".T"), speed: get(b.ID + ".w"), current: get(b.ID + ".I"), rated: p / n, wN: n,
		breakdown: w.value(b, "breakdown") * p / n, selfCooled: selfCooled(b), line: t == nil || len(t.ports) < 2}
}

// selfCooled reports whether a fan on the shaft of a motor cools it; a servo motor has none unless it is said.
func selfCooled(b *Block) bool {
	if isServo(b) {
		return b.Word("cooling") == "self"
	}
	return KindNamed(b.Kind).WordOf(b, "cooling") == "self"
}

// slowlyTurning is the share of its rated speed below which a motor counts as standing.
const slowlyTurning = 0.01

// cooled is the share of the rated torque that a motor stands at a speed: with a fan on its shaft
// it falls below half speed on a line to half of it at standstill (common practice, no source).
func (m *motorWatch) cooled(w float64) float64 {
	if !m.selfCooled || w >= m.wN/2 {
		return 1
	}
	return 0.5 + w/m.wN
}

func (m *motorWatch) take(s *Sample, dt float64) {
	T, w := s.Signals[m.torque], math.Abs(s.Signals[m.speed])
	h := T / m.cooled(w)
	if s.Stopped {
		T, h = 0, 0
	}
	I := 0.0
	if m.current >= 0 {
		I = s.Signals[m.current]
	}
	m.square += dt * (T*T + m.last*m.last) / 2
	m.heated += dt * (h*h + m.lastH*m.lastH) / 2
	m.amps += dt * (I*I + m.lastI*m.lastI) / 2
	m.ampere = max(m.ampere, I)
	if math.Abs(T) > m.peak {
		m.peak, m.tPeak = math.Abs(T), s.T
	}
	still := !s.Stopped && w < slowlyTurning*m.wN
	if still && m.still {
		m.hold += dt * (T*T + m.last*m.last) / 2
		m.held += dt
	}
	if still && math.Abs(T) > m.most {
		m.most, m.tMax = math.Abs(T), s.T
	}
	if w > m.fast {
		m.fast, m.tFast = w, s.T
	}
	m.still, m.last, m.lastH, m.lastI = still, T, h, I
}

func (m *motorWatch) gates(w *Watch) []Gate {
	if m.rated <= 0 || w.span <= 0 || m.peak < 1e-6*m.rated {
		return nil // nothing is asked of it
	}
	tor := func(x float64) string { return show(x, units.Torque) }
	rms, hot := math.Sqrt(m.square/w.span), math.Sqrt(m.heated/w.span)
	why := "root mean square of the torque over the cycle against the rated torque"
	said := fmt.Sprintf("its mean square torque of %s is above the rated %s; it will overheat, choose a larger motor", tor(rms), tor(m.rated))
	if hot > rms*1.001 {
		why = fmt.Sprintf("root mean square torque %s, counted higher below half speed, where the fan on its shaft cools less", tor(rms))
		if rms <= m.rated {
			said = fmt.Sprintf("its mean square torque of %s counts as %s with the fan on its shaft turning slowly, above the rated %s; give it a fan of its own (cooling: forced) or choose a larger motor", tor(rms), tor(hot), tor(m.rated))
		}
	}
	out := []Gate{gateOf(m.b, "rated_power", "mean square torque", hot, m.rated, units.Torque, 0, why).or(Warns, said)}
	out = append(out, m.peakGate())
	if m.held > 0 && m.most > 1e-3*m.rated {
		limit := m.rated * m.cooled(0)
		v := math.Sqrt(m.hold / m.held)
		out = append(out, gateOf(m.b, "cooling", "holding torque at standstill", v, limit, units.Torque, m.tMax,
			fmt.Sprintf("mean square over %s of standstill, where the copper heats; %s", clock(m.held), map[bool]string{true: "the fan on its shaft stands: half the rated torque (common practice)", false: "no fan on its shaft is missed"}[m.selfCooled])).
			or(Warns, fmt.Sprintf("it holds %s at standstill for %s a cycle, more than the %s it stands there for long; hold the load by a valve or brake, or cool it by a fan of its own", tor(v), clock(m.held), tor(limit))))
	}
	if m.current >= 0 {
		out = append(out, m.currentGate(w))
	}
	if w.starts > 0 && m.line && !varies(m.b) {
		out = append(out, m.startsGate(w))
	}
	if commandsTorque(m.b) {
		top := m.wN
		if v, ok := m.b.Values["max_speed"]; ok {
			top = v.SI
		}
		out = append(out, gateOf(m.b, "max_speed", "highest speed", m.fast, top, units.AngularSpeed, m.tFast, "its torque is commanded, so that its speed is what load and oil make it").
			or(Caution, fmt.Sprintf("it turns at up to %s, above its highest speed of %s: the torque commanded does not hold the load back", show(m.fast, units.AngularSpeed), show(top, units.AngularSpeed))))
	}
	return out
}

func (m *motorWatch) peakGate() Gate {
	r := m.peak / m.rated
	g := gateOf(m.b, "breakdown", "peak torque", m.peak, m.breakdown, units.Torque, m.tPeak, units.Number(m.breakdown/m.rated, 3)+" times the rated torque of "+show(m.rated, units.Torque))
	return g.or(Warns, fmt.Sprintf("peak torque %s is %s times the rated one, above its breakdown torque of %s times; most induction motors pull out near 2 to 3 times (common practice)",
		show(m.peak, units.Torque), units.Number(r, 2), units.Number(m.breakdown/m.rated, 3)))
}

// currentGate sets the mean square current against the rated one.
func (m *motorWatch) currentGate(w *Watch) Gate {
	l := motorLaw{}
	var rated float64
	if kT, ok := m.b.Values["torque_constant"]; ok {
		rated = m.rated / kT.SI
	} else {
		l.induction = machines.InductionMotor{RatedPower: w.value(m.b, "rated_power"), RatedSpeed: m.wN, Efficiency: w.value(m.b, "efficiency"), FixedShare: w.value(m.b, "fixed_share")}
		e := motorElectric{voltage: w.value(m.b, "voltage")}
		rated = e.current(&l, m.rated, l.induction.ReactivePower(m.rated, w.value(m.b, "power_factor")))
	}
	rms := math.Sqrt(m.amps / w.span)
	return gateOf(m.b, "power_factor", "mean square current", rms, rated, units.Current, 0, "from torque, name plate and a generic part-load curve (assumed); at most "+show(m.ampere, units.Current))
}

func (m *motorWatch) startsGate(w *Watch) Gate {
	perHour, limit := float64(w.starts)*3600/w.span, w.value(m.b, "starts_per_hour")
	v, isDefault, _ := KindNamed(m.b.Kind).Value(m.b, "starts_per_hour")
	from := "as its maker permits"
	if isDefault {
		from = v.Note
	}
	g := gateOf(m.b, "starts_per_hour", "starts an hour", perHour, limit, units.Count, 0, "switched off at rest (pump_at_rest: stop), it is started straight on the mains after each rest; limit: "+from)
	return g.or(Warns, fmt.Sprintf("it is started %s times an hour, more than the %s it stands (%s); unload instead, or put a converter before it", units.Number(perHour, 3), units.Number(limit, 3), from))
}

// gates tells how fast a load drives an engine.
func (d *driveWatch) gates() []Gate {
	if d.b.Kind != kindEngine || d.brakes == 0 {
		return nil
	}
	g := gateOf(d.b, "idle_share", "torque that drives it", d.brakes, d.drag, units.Torque, d.tBrakes,
		"what comes back turns the engine without fuel, up to its drag k·PN/(s·n); beyond that it overspeeds")
	g.Passed = d.fastest == 0 // drivesHeld tells of it
	return []Gate{g}
}
