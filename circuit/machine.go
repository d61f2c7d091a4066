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
	chart      *machines.Map // of measured points that stand in for the law, or nil
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
	if b.Fit != nil && KindNamed(b.Kind).WordOf(b, "points_as") == "map" {
		m.chart = machines.NewMap(b.Fit)
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

// worn gives the law the slip of a worn machine.
func (m *machine) worn(b *binding) {
	w := wear{factor: b.get(m.wear, 1), share: m.kc}
	if m.drainQ >= 0 {
		w.drain, w.pressure, w.theta = b.p[m.drainQ], b.p[m.drainP], b.get(m.drainT, b.cond.Temperature)
	}
	m.law = w.of(m.law, &b.cond)
}
