package circuit

import (
	"math"

	"barlitre/machines"
	"barlitre/machines/units"
)

// machine is a displacement machine in the balance: pump and hydraulic motor
// share one law in four quadrants. e > 0 with w > 0 carries oil from S to P.
type machine struct {
	P, S, D      slot
	e            slot
	speed, sigma slot
	row          slot // torque balance of a free shaft
	shaft        int
	free         bool
	disp         int                       // parameters
	coef         [len(coefficientKeys)]int // in the order of coefficientKeys; −1 = 0
	wear, share  int                       // −1 = 1 and 0
	drainQ       int                       // measured case drain: flow, pressure, temperature
	drainP       int
	drainT       int
	qP, qS, qD   int // signals
	sigW, sigT   int
	sigP, sigE   int
	slip, rub    int // channels
	turb, comp   int // those of the slip where the machine has no such term
	inert        int // that of the friction

	switched   switchedLosses // of a cylinder-switched machine
	part       float64        // of the parameters' displacement and drag that this section has; 0 = all
	law        machines.Displacement
	d          float64 // displacement over that of the shaft's largest machine: flow per scaled speed
	across     float64 // slip conductance P to S, scaled
	drain      float64 // and of each port to the case
	kc         float64 // share of the slip that leaves by the case
	visc, tc1  float64 // scaled friction terms
	cf1        float64
	wPer, tPer float64 // rad/s and N·m of one scaled unit
	oil        Conditions
	scale      scales
}

// coefficientKeys are the parameters of the loss law.
var coefficientKeys = [...]string{"slip", "turbulent_slip", "compression", "dead_volume", "friction", "viscous", "hydrodynamic", "drag"}

// coefficients finds the parameters of the loss law of a block.
func (k *compiler) coefficients(b *Block) (at [len(coefficientKeys)]int) {
	for i, key := range coefficientKeys {
		at[i] = -1
		if KindNamed(b.Kind).Param(key) != nil {
			at[i] = k.param(b, key)
		}
	}
	return at
}

// machine wires the common part; P and S are the port names of outlet and inlet.
func (k *compiler) machine(b *Block, P, S string, shaft int, e slot) machine {
	s := &k.shafts[shaft]
	m := machine{P: k.node(b, P), S: k.node(b, S), D: k.node(b, "D"), e: e, shaft: shaft, speed: s.speed, sigma: s.sigma, row: s.row, free: s.free,
		disp: k.param(b, "displacement"), coef: k.coefficients(b), wear: k.param(b, "wear"), share: k.param(b, "case_share"),
		drainQ: k.param(b, "drain_flow"), drainP: k.param(b, "drain_pressure"), drainT: k.param(b, "drain_temperature"),
		qP: k.port(b, P), qS: k.port(b, S), qD: k.port(b, "D"),
		sigW: k.signal(b, "w", "speed", units.AngularSpeed), sigT: k.signal(b, "T", "shaft torque", units.Torque),
		sigP: k.signal(b, "shaft", "shaft power", units.Power), sigE: k.signal(b, "e", "setting", units.Ratio),
		slip: k.channel(Loss, b, "slip"), rub: k.channel(Loss, b, "friction"),
	}
	m.turb, m.comp, m.inert = m.slip, m.slip, m.rub
	has := func(key string) bool { v, _, _ := KindNamed(b.Kind).Value(b, key); return v.SI > 0 }
	if has("turbulent_slip") {
		m.turb = k.channel(Loss, b, "turbulent slip")
	}
	if has("compression") || has("dead_volume") {
		m.comp = k.channel(Loss, b, "compression")
	}
	if has("hydrodynamic") {
		m.inert = k.channel(Loss, b, "hydrodynamic torque")
	}
	s.sizes = append(s.sizes, m.disp)
	return m
}

// usualSize [m³/rad] stands for the machines of a shaft without any, between a motor
// and a gearbox: 50 cm³ a revolution. It is a scale, no result depends on it.
const usualSize = 50e-6 / (2 * math.Pi)

// size returns the largest displacement on a shaft [m³/rad], its scale; of shafts that
// turn together, one for all as seen from this one's speed.
func (s *shaft) size(p []float64) float64 {
	if s.train == nil {
		return s.largest(p)
	}
	d := 0.0
	for _, i := range s.train {
		o := &s.all.shafts[i]
		d = math.Max(d, o.largest(p)/slower(o.way, p))
	}
	if d == 0 {
		d = usualSize
	}
	return d * slower(s.way, p)
}

// largest returns the largest displacement on a shaft [m³/rad].
func (s *shaft) largest(p []float64) float64 {
	d := 0.0
	for _, i := range s.sizes {
		d = math.Max(d, p[i])
	}
	return d
}

func (m *machine) bindMachine(b *binding, shafts []shaft) {
	part := m.part
	if part == 0 {
		part = 1
	}
	D := part * b.p[m.disp]
	c := func(i int) float64 { return b.get(m.coef[i], 0) }
	m.kc = b.get(m.share, 0)
	m.law = machines.Displacement{D: D, Cs: c(0), Cst: c(1), K: c(2), Kd: c(3), Cf: c(4), Cv: c(5), Ch: c(6), Tc: part * c(7)}
	m.oil, m.scale = b.cond, b.scales
	m.worn(b)
	size := shafts[m.shaft].size(b.p)
	m.wPer = b.scales.q / size
	m.tPer = size * b.scales.p
	m.d = D / size
	k := m.law.Cs * D / b.cond.Viscosity * b.scales.p / b.scales.q
	m.across, m.drain = k*(1-m.kc), k*m.kc
	m.cf1 = m.law.Cf * m.d
	m.visc = m.law.Cv * D * b.cond.Viscosity * m.wPer / m.tPer
	m.tc1 = m.law.Tc / m.tPer
	if m.switched.on {
		m.bindSwitched(b)
	}
}

// worn multiplies the slip by the wear, or makes it that of a measured case drain.
func (m *machine) worn(b *binding) {
	w := b.get(m.wear, 1)
	if m.drainQ >= 0 {
		mu := b.cond.Viscosity
		if m.drainT >= 0 {
			mu = b.cond.ViscosityAt(b.p[m.drainT])
		}
		dp := b.p[m.drainP]
		turbulent, _ := m.law.TurbulentSlip(dp, b.cond.Density)
		if new := m.kc * (m.law.Cs*m.law.D*dp/mu + turbulent); new > 0 {
			w = b.p[m.drainQ] / new
		} else {
			m.law = m.law.WithLeakage(b.p[m.drainQ]/m.kc, dp, mu)
		}
	}
	m.law.Cs, m.law.Cst = w*m.law.Cs, w*m.law.Cst
}

func (m *machine) evalMachine(e *eval) {
	set, w := e.val(m.e), e.val(m.speed)
	q := set * w * m.d // ideal flow, S to P
	e.add(m.S, q)
	e.d(m.S, m.e, w*m.d)
	e.d(m.S, m.speed, set*m.d)
	e.add(m.P, -q)
	e.d(m.P, m.e, -w*m.d)
	e.d(m.P, m.speed, -set*m.d)
	if m.across > 0 {
		e.conduct(m.P, m.S, m.across)
	}
	if m.drain > 0 {
		e.conduct(m.P, m.D, m.drain)
		e.conduct(m.S, m.D, m.drain)
	}
	if m.law.Cst > 0 {
		m.evalTurbulent(e, m.P, m.S, 1-m.kc)
		m.evalTurbulent(e, m.P, m.D, m.kc)
		m.evalTurbulent(e, m.S, m.D, m.kc)
	}
	if m.law.K > 0 || m.law.Kd > 0 {
		m.evalCompression(e)
	}
	if m.switched.on {
		m.evalSwitched(e)
	}
	if m.free { // the torque row of the shaft sums them
		m.addTorque(e, m.row, 1, m.torque(e))
	}
}

// turbulent is a share of the turbulent slip from a to b and its slope, scaled.
func (m *machine) turbulent(dp, share float64) (q, slope float64) {
	q, slope = m.law.TurbulentSlip(dp*m.scale.p, m.oil.Density)
	return share * q / m.scale.q, share * slope * m.scale.p / m.scale.q
}

func (m *machine) evalTurbulent(e *eval, a, b slot, share float64) {
	if share == 0 {
		return
	}
	q, k := m.turbulent(e.val(a)-e.val(b), share)
	e.add(a, q)
	e.d(a, a, k)
	e.d(a, b, -k)
	e.add(b, -q)
	e.d(b, a, -k)
	e.d(b, b, k)
}

// compression is the flow lost to compression from P to S and its slopes by drop, setting and speed, scaled.
func (m *machine) compression(set, w, dp float64) (q, byDP, byE, byW float64) {
	q, byDP, byE, byW = m.law.CompressionFlow(set, w*m.wPer, dp*m.scale.p, m.oil.bulk(), m.oil.Air)
	return q / m.scale.q, byDP * m.scale.p / m.scale.q, byE / m.scale.q, byW * m.wPer / m.scale.q
}

func (m *machine) evalCompression(e *eval) {
	q, k, byE, byW := m.compression(e.val(m.e), e.val(m.speed), e.val(m.P)-e.val(m.S))
	for _, side := range [...]struct {
		row  slot
		sign float64
	}{{m.P, 1}, {m.S, -1}} {
		e.add(side.row, side.sign*q)
		e.d(side.row, m.P, side.sign*k)
		e.d(side.row, m.S, -side.sign*k)
		e.d(side.row, m.e, side.sign*byE)
		e.d(side.row, m.speed, side.sign*byW)
	}
}

// torque is what a machine needs from its shaft, scaled, and its slopes by setting,
// speed, pressure at P (at S the negative) and friction sign.
type torque struct{ need, e, w, p, sigma float64 }

func (m *machine) torque(e *eval) torque {
	set, w, dp := e.val(m.e), e.val(m.speed), e.val(m.P)-e.val(m.S)
	sg := sign(w)
	if m.free {
		sg = e.val(m.sigma)
	}
	dry, slope := m.cf1*math.Abs(dp)+m.tc1, m.cf1*sign(dp)
	t := torque{set*m.d*dp + sg*dry + m.visc*w, m.d * dp, m.visc, set*m.d + sg*slope, dry}
	if m.switched.on {
		m.switchedTorque(&t, set, dp, sg)
	}
	if m.law.Ch > 0 {
		T, byE, byW := m.law.InertialTorque(set, w*m.wPer, m.oil.Density)
		t.need += T / m.tPer
		t.e += byE / m.tPer
		t.w += byW * m.wPer / m.tPer
	}
	return t
}

// addTorque adds k times a torque of the machine to a row.
func (m *machine) addTorque(e *eval, row slot, k float64, t torque) {
	e.add(row, k*t.need)
	e.d(row, m.e, k*t.e)
	e.d(row, m.speed, k*t.w)
	e.d(row, m.P, k*t.p)
	e.d(row, m.S, -k*t.p)
	if m.free {
		e.d(row, m.sigma, k*t.sigma)
	}
}

// bookMachine books slip and friction and returns the torque needed at the shaft.
func (m *machine) bookMachine(k *booking) {
	set, ws := k.val(m.e), k.val(m.speed)
	w := ws * m.wPer
	pP, pS := k.val(m.P), k.val(m.S)
	q := set * ws * m.d
	flow := func(a, b slot, share, laminar float64) float64 { // along a path of slip, booked
		dp := k.val(a) - k.val(b)
		t, _ := m.turbulent(dp, share)
		k.lose(m.slip, k.watts(laminar*dp*dp))
		k.lose(m.turb, k.watts(t*dp))
		return laminar*dp + t
	}
	across, drain := m.laminar(set)
	a, dP, dS := flow(m.P, m.S, 1-m.kc, across), flow(m.P, m.D, m.kc, drain), flow(m.S, m.D, m.kc, drain)
	c, _, _, _ := m.compression(set, ws, pP-pS)
	k.lose(m.comp, k.watts(c*(pP-pS)))
	k.put(m.qP, k.m3s(-q+a+c+dP))
	k.put(m.qS, k.m3s(q-a-c+dS))
	k.put(m.qD, k.m3s(-dP-dS))
	dp := (pP - pS) * k.scales.p
	dir := sign(w)
	if m.free {
		dir = k.val(m.sigma)
	}
	friction := (m.law.Cf*m.law.D*math.Abs(dp)+m.law.Tc)*dir + m.law.Cv*m.law.D*k.cond.Viscosity*w
	inertial, _, _ := m.law.InertialTorque(set, w, k.cond.Density)
	T := set*m.law.D*dp + friction + inertial + m.bookSwitched(k, set, dp, dir, w)
	k.lose(m.rub, friction*w)
	k.lose(m.inert, inertial*w)
	k.put(m.sigW, w)
	k.put(m.sigT, T)
	k.put(m.sigP, T*w)
	k.put(m.sigE, set)
	k.shaft[m.shaft].torque += T
	k.shaft[m.shaft].speed = w
}
