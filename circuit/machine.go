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
	disp         int // parameters
	cs, cf, cv   int
	tc, share    int
	qP, qS, qD   int // signals
	sigW, sigT   int
	sigP, sigE   int
	slip, rub    int // channels

	part       float64 // of the parameters' displacement and drag that this section has; 0 = all
	law        machines.Displacement
	d          float64 // displacement over that of the shaft's largest machine: flow per scaled speed
	across     float64 // slip conductance P to S, scaled
	drain      float64 // and of each port to the case
	visc, tc1  float64 // scaled friction terms
	cf1        float64
	wPer, tPer float64 // rad/s and N·m of one scaled unit
}

// machineParams are the parameters that every displacement machine has.
func machineParams(share string) []Param {
	return []Param{
		{Key: "displacement", Title: "Displacement", Symbol: "V", Dim: units.DisplacementPerRev, Need: true, Above: true, Max: 0.02, Text: "geometric, at full setting"},
		{Key: "slip", Title: "Slip coefficient", Symbol: "Cs", Dim: units.Ratio, Default: "1.5e-8", Origin: Assumed, Source: "piston machine in good order, common practice", Max: 1e-4, Text: "laminar leakage, of displacement, pressure and 1/viscosity"},
		{Key: "friction", Title: "Pressure friction", Symbol: "Cf", Dim: units.Ratio, Default: "0.03", Origin: Assumed, Source: "piston machine in good order, common practice", Max: 0.9, Text: "share of the ideal torque at full displacement"},
		{Key: "viscous", Title: "Viscous friction", Symbol: "Cv", Dim: units.Ratio, Default: "6.5e4", Origin: Assumed, Source: "piston machine in good order, common practice", Max: 1e8, Text: "torque by displacement, viscosity and speed"},
		{Key: "drag", Title: "Constant friction", Symbol: "Tc", Dim: units.Torque, Default: "1.5 N m", Origin: Assumed, Source: "seals and bearings, common practice", Max: 1e4, Text: "torque that does not depend on pressure or speed"},
		{Key: "case_share", Title: "Slip to the case", Symbol: "kc", Dim: units.Ratio, Default: share, Origin: Assumed, Source: "share of the slip that leaves by the case drain, common practice", Max: 1, Text: "the rest slips from port to port; an open drain goes to tank"},
		{Key: "rating", Title: "Rated pressure", Symbol: "pr", Dim: units.Pressure, Above: true, Max: 2000e5, Text: "highest permitted working pressure"},
		{Key: "max_speed", Title: "Highest speed", Symbol: "n2", Dim: units.AngularSpeed, Above: true, Max: 2000, Text: "highest permitted speed"},
		{Key: "min_speed", Title: "Lowest speed", Symbol: "n1", Dim: units.AngularSpeed, Max: 2000, Text: "lowest permitted speed while it carries pressure"},
	}
}

var machineLosses = []LossKind{
	{"slip", ToOil, "P = Σ k·Δp² over the leakage paths, k = Cs·D/μ"},
	{"friction", ToOil, "P = (Cf·D·|Δp| + Cv·D·μ·|ω| + Tc)·|ω|"},
}

var machineEquations = []Equation{
	{"q = e·D·ω − Cs·D·Δp/μ, D = V/2π", "Wilson, Rotary-pump theory, Trans. ASME 68 (1946); slip split between port to port and port to case"},
	{"T = e·D·Δp + (Cf·D·|Δp| + Cv·D·μ·|ω| + Tc)·sign ω", "Wilson 1946, with full D in the friction terms"},
}

// machine wires the common part; P and S are the port names of outlet and inlet.
func (k *compiler) machine(b *Block, P, S string, shaft int, e slot) machine {
	s := &k.shafts[shaft]
	m := machine{P: k.node(b, P), S: k.node(b, S), D: k.node(b, "D"), e: e, shaft: shaft, speed: s.speed, sigma: s.sigma, row: s.row, free: s.free,
		disp: k.param(b, "displacement"), cs: k.param(b, "slip"), cf: k.param(b, "friction"), cv: k.param(b, "viscous"),
		tc: k.param(b, "drag"), share: k.param(b, "case_share"),
		qP: k.port(b, P), qS: k.port(b, S), qD: k.port(b, "D"),
		sigW: k.signal(b, "w", "speed", units.AngularSpeed), sigT: k.signal(b, "T", "shaft torque", units.Torque),
		sigP: k.signal(b, "shaft", "shaft power", units.Power), sigE: k.signal(b, "e", "setting", units.Ratio),
		slip: k.channel(Loss, b, "slip"), rub: k.channel(Loss, b, "friction"),
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
		d = max(d, o.largest(p)/slower(o.way, p))
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
		d = max(d, p[i])
	}
	return d
}

func (m *machine) bindMachine(b *binding, shafts []shaft) {
	part := m.part
	if part == 0 {
		part = 1
	}
	D := part * b.p[m.disp]
	m.law = machines.Displacement{D: D, Cs: b.p[m.cs], Cf: b.p[m.cf], Cv: b.p[m.cv], Tc: part * b.p[m.tc]}
	size := shafts[m.shaft].size(b.p)
	m.wPer = b.scales.q / size
	m.tPer = size * b.scales.p
	m.d = D / size
	k := m.law.Cs * D / b.cond.Viscosity * b.scales.p / b.scales.q
	share := b.get(m.share, 0)
	m.across, m.drain = k*(1-share), k*share
	m.cf1 = m.law.Cf * m.d
	m.visc = m.law.Cv * D * b.cond.Viscosity * m.wPer / m.tPer
	m.tc1 = m.law.Tc / m.tPer
}

func (m *machine) evalMachine(e *eval) {
	set, w := e.val(m.e), e.val(m.speed)
	q := set * w * m.d // ideal flow, S to P
	e.add(m.S, q)
	e.add(m.P, -q)
	if !e.plain() {
		e.d(m.S, m.e, w*m.d)
		e.d(m.S, m.speed, set*m.d)
		e.d(m.P, m.e, -w*m.d)
		e.d(m.P, m.speed, -set*m.d)
	}
	if m.across > 0 {
		e.conduct(m.P, m.S, m.across)
	}
	if m.drain > 0 {
		e.conduct(m.P, m.D, m.drain)
		e.conduct(m.S, m.D, m.drain)
	}
	if m.free { // the torque row of the shaft sums them
		m.addTorque(e, m.row, 1, m.torque(e))
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
	return torque{set*m.d*dp + sg*dry + m.visc*w, m.d * dp, m.visc, set*m.d + sg*slope, dry}
}

// addTorque adds k times a torque of the machine to a row.
func (m *machine) addTorque(e *eval, row slot, k float64, t torque) {
	e.add(row, k*t.need)
	if e.plain() {
		return
	}
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
	pP, pS, pD := k.val(m.P), k.val(m.S), k.val(m.D)
	q := set * ws * m.d
	a, dP, dS := m.across*(pP-pS), m.drain*(pP-pD), m.drain*(pS-pD)
	k.put(m.qP, k.m3s(-q+a+dP))
	k.put(m.qS, k.m3s(q-a+dS))
	k.put(m.qD, k.m3s(-dP-dS))
	k.pow[m.slip] += k.watts(a*(pP-pS) + dP*(pP-pD) + dS*(pS-pD))
	dp := (pP - pS) * k.scales.p
	dir := sign(w)
	if m.free {
		dir = k.val(m.sigma)
	}
	friction := (m.law.Cf*m.law.D*math.Abs(dp)+m.law.Tc)*dir + m.law.Cv*m.law.D*k.cond.Viscosity*w
	T := set*m.law.D*dp + friction
	k.pow[m.rub] += friction * w
	k.put(m.sigW, w)
	k.put(m.sigT, T)
	k.put(m.sigP, T*w)
	k.put(m.sigE, set)
	k.shaft[m.shaft].torque += T
	k.shaft[m.shaft].speed = w
}
