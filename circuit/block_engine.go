package circuit

import (
	"math"

	"barlitre/machines"
	"barlitre/machines/units"
)

// engineKind is a combustion engine: its governor holds the set speed as far as its
// torque reaches.
var engineKind = &Kind{
	Name: kindEngine, Title: "Combustion engine", Group: "supply",
	Passes: PrimeMover, Letter: "DE", Typical: []Setting{{"rated_power", "55 kW"}, {"speed", "2200 rpm"}},
	Text: "Diesel engine. Its governor holds the set speed; asked for more than its torque limit it slows down until both are equal, and driven by a load it brakes with its drag and then overspeeds. What it draws is the energy of its fuel, priced as the fuel_price of the audit file says. With `idle_speed` it idles while every axis stands.",
	Ports: []Port{
		{Name: "shaft", Type: Shaft, Text: "drive shaft"},
	},
	Params: sectioned([]Param{
		{Key: "rated_power", Title: "Rated power", Symbol: "PN", Dim: units.Power, Need: true, Above: true, Max: 5e6, Text: "shaft power at the set speed"},
		{Key: "speed", Title: "Set speed", Symbol: "n", Dim: units.AngularSpeed, Need: true, Above: true, Max: 1000, Text: "speed at full load"},
		{Key: "droop", Title: "Droop", Symbol: "δ", Dim: units.Ratio, Default: "0", Origin: Assumed, Source: "electronic governor that holds its speed; mechanical ones 3 to 8 %, common practice", Max: 0.5, Text: "rise of the speed from full load to full drag, as share of the set speed"},
		{Key: "torque_limit", Title: "Torque limit", Symbol: "TL", Dim: units.Torque, Above: true, Max: 1e5, Text: "at the set speed; default: rated power over set speed"},
		{Key: "torque_rise", Title: "Torque rise", Symbol: "ρ", Dim: units.Ratio, Default: "0", Origin: Assumed, Source: "constant torque; state the curve of the engine", Max: 3, Text: "the torque limit grows on a line by this share from the set speed to standstill"},
		{Key: "min_speed", Title: "Lowest speed", Symbol: "n1", Dim: units.AngularSpeed, Default: "700 rpm", Origin: Assumed, Source: "common practice, no source", Max: 1000, Text: "below it the engine stalls"},
		{Key: "idle_share", Title: "Fuel without load", Symbol: "k", Dim: units.Ratio, Default: "0.4", Origin: Assumed, Source: "38 % efficiency at full load, common practice, no source; from its fuel consumption at two loads it follows", Max: 5, Text: "fuel power without load at the set speed, as share of the rated power"},
		{Key: "slope", Title: "Slope of the Willans line", Symbol: "s", Dim: units.Ratio, Default: "2.2", Origin: Assumed, Source: "38 % efficiency at full load, common practice, no source", Min: 1, Max: 10, Text: "fuel power for each further watt at the shaft"},
		{Key: "idle_speed", Title: "Soft idle speed", Symbol: "n0", Dim: units.AngularSpeed, Above: true, Max: 1000, Text: "its governor holds this speed while every axis stands, unless pumps are switched off at rest"},
		{Key: "start_idling", Title: "Fuel of a start", Symbol: "t0", Dim: units.Time, Default: "10 s", Origin: Assumed, Source: "a start takes as much fuel as so long idling, from memory of idling studies", Max: 600, Text: "of an engine that is switched off at rest: as idling without load at its lowest speed for this time"},
	}, map[Section][]string{
		Governing: {"droop", "idle_speed"},
		LossBasis: {"idle_share", "slope", "start_idling"},
		Limits:    {"torque_limit", "torque_rise", "min_speed"},
	}),
	Losses: []LossKind{
		{"engine", ToAir, "P = max(0, s·T·ω + k·PN·ω/n) − T·ω; with exhaust and its own cooler; driven by a load, what it brakes"},
		{"starting", ToAir, "E = k·PN·n1/n·t0 a start"},
	},
	Equations: []Equation{
		{"fuel = max(0, s·T·ω + k·PN·ω/n)", "Willans line; what it needs to turn itself grows with speed"},
		{"T = y·TL(ω) − (1 − y)·TD, 0 <= y <= 1, TD = k·PN/(s·n)", "torque limit and drag, complementarity with the governor"},
		{"ω = n·(1 + δ·(1 − y)) while 0 < y < 1", "governor with droop"},
		{"TL(ω) = TL·(1 + ρ·(1 − ω/n)) below n", "falling line"},
	},
	Symbol: func(*Block) string { return "diesel_engine" },
	check: func(k *Kind, b *Block, bad func(Level, string, string, ...any)) {
		low, _ := number(b, "min_speed")
		if v, ok := b.Values["idle_speed"]; ok && (v.SI < low || v.SI > b.Values["speed"].SI) {
			bad(Stops, "idle_speed", "its idle speed must lie between its lowest speed of %s and its set speed", show(low, units.AngularSpeed))
		}
	},
	build: func(k *compiler, b *Block) model {
		m := &engineModel{k: k.Compiled, shaft: k.shaftAt(b), rack: k.unknown(otherRow, b.ID+" governor"),
			rated: k.param(b, "rated_power"), n: k.param(b, "speed"), droop: k.param(b, "droop"), limit: k.param(b, "torque_limit"),
			rise: k.param(b, "torque_rise"), idle: k.param(b, "idle_share"), slope: k.param(b, "slope"),
			sigW: k.signal(b, "w", "speed", units.AngularSpeed), sigT: k.signal(b, "T", "shaft torque", units.Torque),
			sigShaft: k.signal(b, "shaft", "shaft power", units.Power), sigFuel: k.signal(b, "fuel", "fuel power", units.Power),
			loss: k.channel(Loss, b, "engine"), fuel: k.channel(Supply, b, "fuel"),
			idleAt: k.param(b, "idle_speed"), low: k.param(b, "min_speed"), startFor: k.param(b, "start_idling"), start: -1}
		if k.circuit.PumpAtRest == Stop {
			m.start = k.channel(Loss, b, "starting")
		}
		m.speed, m.sigma = k.shafts[m.shaft].speed, k.shafts[m.shaft].sigma
		return m
	},
}

// runaway bounds the speed of an engine that a load drives, over its set speed.
const runaway = 3

type engineModel struct {
	k                                          *Compiled
	shaft                                      int
	speed, sigma, rack                         slot
	rated, n, droop, limit, rise, idle, slope  int
	sigW, sigT, sigShaft, sigFuel, loss, fuel  int
	law                                        machines.Engine
	wPer, tPer, set, falls, most, grows, drags float64 // scaled but wPer and tPer
	off                                        bool
	idleAt, low, startFor, start               int
	working, idles, starts                     float64 // scaled set and idle speed; J of a start
}

func (m *engineModel) clone() model { c := *m; return &c }

func (m *engineModel) bind(b *binding) {
	m.law = machines.Engine{RatedPower: b.p[m.rated], RatedSpeed: b.p[m.n], Idle: b.p[m.idle], Slope: b.p[m.slope]}
	size := m.k.shafts[m.shaft].size(b.p)
	m.wPer, m.tPer = b.scales.q/size, size*b.scales.p
	m.set, m.falls, m.grows = b.p[m.n]/m.wPer, b.p[m.droop], b.p[m.rise]
	m.most = b.get(m.limit, b.p[m.rated]/b.p[m.n]) / m.tPer
	m.drags = m.law.Drag() / m.tPer
	m.working, m.idles = m.set, b.get(m.idleAt, b.p[m.n])/m.wPer
	m.starts = m.law.Fuel(0, b.p[m.low]) * b.p[m.startFor]
}

func (m *engineModel) begin(s *step) {
	if m.off = s.off(); m.off {
		s.set(m.speed, 0)
		s.set(m.sigma, 0)
		s.set(m.rack, 0)
		return
	}
	m.set = m.working
	if s.standing {
		m.set = m.idles
	}
	s.set(m.sigma, 1)
	s.bounds(m.speed, 0, runaway*m.working)
	s.bounds(m.rack, 0, 1)
}

// reach returns the torque limit at a speed, and its slope, scaled.
func (m *engineModel) reach(w float64) (t, dw float64) {
	if w >= m.working {
		return m.most, 0
	}
	return m.most * (1 + m.grows*(1-w/m.working)), -m.most * m.grows / m.working
}

func (m *engineModel) eval(e *eval) {
	w, y := e.val(m.speed), e.val(m.rack)
	t, dw := m.reach(w)
	e.add(m.speed, -y*t+(1-y)*m.drags)
	e.d(m.speed, m.speed, -y*dw)
	e.d(m.speed, m.rack, -t-m.drags)
	// more fuel, more speed
	e.add(m.rack, w-m.set*(1+m.falls*(1-y)))
	e.d(m.rack, m.speed, 1)
	e.d(m.rack, m.rack, m.set*m.falls)
}

func (m *engineModel) book(*booking) {} // after all machines: bookShaft

// bookShaft books the engine once the torque of its shaft is summed. A stalled one gives
// what it can.
func (m *engineModel) bookShaft(k *booking) {
	w, T := k.val(m.speed)*m.wPer, k.shaft[m.shaft].torque
	if t, _ := m.reach(0); k.val(m.speed) <= stalled*m.set {
		T = math.Min(T, t*m.tPer)
	}
	P, fuel := T*w, m.law.Fuel(T, w)
	k.put(m.sigW, w)
	k.put(m.sigT, T)
	k.put(m.sigShaft, P)
	k.put(m.sigFuel, fuel)
	k.pow[m.loss] += fuel - P
	k.pow[m.fuel] += fuel
	if m.start >= 0 && k.step.startsUp() {
		k.strike(m.start, m.starts)
		k.strike(m.fuel, m.starts)
	}
}

func (m *engineModel) cold(s *step, level int, x []float64) {
	x[m.speed], x[m.rack] = m.set, 0.5
}

// stalled is the share of its set speed below which a drive of limited torque stands.
const stalled = 1e-9
