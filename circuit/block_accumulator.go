package circuit

import (
	"math"

	"barlitre/machines/units"
)

// accumulatorKind is a gas-loaded accumulator.
var accumulatorKind = &Kind{
	Name: kindAccumulator, Title: "Accumulator, gas-loaded", Group: "supply",
	Letter: "AC", Typical: []Setting{{"volume", "10 L"}, {"precharge", "90 bar"}},
	Text: "Stores oil against gas. The pre-charge is stated at 20 °C gauge, as it is filled, and corrected to the gas temperature. Energy in the gas is booked as stored. The gas follows an exponent, or with a `thermal_time_constant` warms up as it is compressed and gives that heat to its wall in time; the heat that the wall keeps is then a loss. Ideal gas: above some 200 bar nitrogen is stiffer.",
	Ports: []Port{
		{Name: "P", Type: Oil, Text: "oil"},
	},
	Params: []Param{
		{Key: "volume", Title: "Gas volume", Symbol: "V0", Dim: units.Volume, Need: true, Above: true, Max: 10, Text: "of the empty accumulator"},
		{Key: "precharge", Title: "Pre-charge at 20 °C", Symbol: "p0", Dim: units.Pressure, Need: true, Above: true, Max: 1000e5, Text: "gauge pressure without oil"},
		{Key: "exponent", Title: "Polytropic exponent", Symbol: "n", Dim: units.Ratio, Default: "1.3", Origin: Assumed, Source: "cycles of seconds to a minute; 1 for slow, 1.4 for fast changes, common practice", Min: 1, Max: 2, Text: "of the gas; not with a thermal time constant"},
		{Key: "thermal_time_constant", Title: "Thermal time constant", Symbol: "τ", Dim: units.Time, Above: true, Max: 1e6, Text: "in which the gas comes to within 37 % of the temperature of its wall; takes the place of the exponent. Bladders of some litres have some ten seconds, large pistons minutes (from memory)"},
		{Key: "gas_temperature", Title: "Gas temperature", Symbol: "θg", Dim: units.Temperature, Default: "40 C", Origin: Assumed, Source: "between oil and air, common practice", Min: 230, Max: 400, Text: "corrects the pre-charge; with a thermal time constant that of the wall"},
		{Key: "start_pressure", Title: "Pressure at the start", Symbol: "p1", Dim: units.Pressure, Max: 1000e5, Text: "where a single recording begins; without it the accumulator starts empty"},
		ratedPressure,
	},
	Losses: []LossKind{{"gas heat", ToAir, "P = Q·(1 − θw/θ), Q = m·cv·(θ − θw)/τ; with a thermal time constant"}},
	Equations: []Equation{
		{"pabs·V^n = p0,abs·V0^n, pabs = p + 1.01325 bar", "polytropic change of an ideal gas; absolute pressures"},
		{"p0,abs(θg) = p0,abs(20 °C)·θg/293.15 K", "ideal gas at constant volume"},
		{"dE/dt = p·q", "work on the gas"},
		{"with τ: dθ/dt = (θw − θ)/τ − (γ − 1)·θ/V·dV/dt, pabs·V = m·R·θ, γ = 1.4", "thermal time constant: Otis and Pourmovahed, J. Dyn. Sys. Meas. Control 107 (1985), Rotthäuser 1993; from memory"},
		{"with τ: dE/dt = p·q − P, E = U − θw·S + patm·V", "first and second law: over a cycle E comes back and ∮P dt is the heat that the wall keeps"},
	},
	Rating: "rating",
	Symbol: func(*Block) string { return "accumulator_gas" },
	check: func(_ *Kind, b *Block, bad func(Level, string, string, ...any)) {
		_, n := b.Values["exponent"]
		if _, tau := b.Values["thermal_time_constant"]; n && tau {
			bad(Stops, "exponent", "exponent and thermal time constant are both given (exponent, thermal_time_constant), two laws of one gas; keep one of them")
		}
	},
	build: func(k *compiler, b *Block) model {
		m := &accumulatorModel{P: k.node(b, "P"), q: k.unknown(otherRow, b.ID), volume: k.param(b, "volume"), pre: k.param(b, "precharge"),
			exponent: k.param(b, "exponent"), tau: k.param(b, "thermal_time_constant"), warm: -1, lost: -1, sigTheta: -1, theta: k.param(b, "gas_temperature"), first: k.param(b, "start_pressure"),
			qP: k.port(b, "P"), sigV: k.signal(b, "V", "gas volume", units.Volume), stored: k.channel(Stored, b, "accumulator")}
		m.state = k.newSlow(slowState{block: b.ID, name: "gas volume", start: func(p []float64) float64 {
			g := m.gas(p)
			if m.tau >= 0 {
				g.n = 1 // the gas begins as warm as its wall
			}
			if m.first < 0 {
				return g.v0
			}
			return g.volumeAt(p[m.first])
		}, scale: func(p []float64) float64 { return p[m.volume] }})
		if m.tau >= 0 {
			wall := func(p []float64) float64 { return p[m.theta] }
			m.warm = k.newSlow(slowState{block: b.ID, name: "gas temperature", start: wall, scale: wall})
			m.lost = k.channel(Loss, b, "gas heat")
			m.sigTheta = k.signal(b, "theta", "gas temperature", units.Temperature)
		}
		return m
	},
}

type accumulatorModel struct {
	P, q                                slot
	volume, pre, exponent, theta, first int
	tau                                 int // −1: the exponent law
	qP, sigV, stored                    int
	sigTheta, lost                      int
	state, warm                         int

	filling gas
	thermal thermalGas
	v, dt   float64 // gas volume at the point before; s
	t       float64 // gas temperature at the point before, K
	qs, ps  float64
}

func (m *accumulatorModel) gas(p []float64) gas {
	p0 := (p[m.pre] + units.AtmosphericPressure) * p[m.theta] / 293.15
	return gas{p0, p[m.volume], p[m.exponent]}
}

func (m *accumulatorModel) clone() model { c := *m; return &c }

func (m *accumulatorModel) bind(b *binding) {
	m.filling = m.gas(b.p)
	m.thermal = thermalGas{mR: m.filling.p0 * m.filling.v0 / b.p[m.theta], wall: b.p[m.theta], tau: b.get(m.tau, 0)}
	m.qs, m.ps = b.scales.q, b.scales.p
}

// begin: oil can leave only as long as there is some; at both sides of a step the
// volume stands, and any flow is possible that the rest of the circuit asks for.
func (m *accumulatorModel) begin(s *step) {
	m.v, m.dt = s.slow[m.state], s.dt
	if m.tau >= 0 {
		m.t = s.slow[m.warm]
	}
	least := math.Inf(-1)
	if oil := m.filling.v0 - m.v; m.dt > 0 {
		least = -oil / m.dt / m.qs
	} else if oil <= 0 {
		least = 0
	}
	most := math.Inf(1)
	if m.dt > 0 { // the gas cannot vanish
		most = 0.999 * m.v / m.dt / m.qs
	}
	s.bounds(m.q, least, most)
}

func (m *accumulatorModel) eval(e *eval) {
	q := e.val(m.q) // into the accumulator
	e.add(m.P, q)
	e.d(m.P, m.q, 1)
	v := m.v - q*m.qs*m.dt
	v = math.Max(v, 1e-4*m.filling.v0)
	p, byVolume := m.pressure(v)
	slope := -byVolume * m.qs * m.dt / m.ps
	// The row rises with q: filling raises the pressure.
	e.add(m.q, p/m.ps-e.val(m.P)+minResistance*q)
	e.d(m.q, m.q, slope+minResistance)
	e.d(m.q, m.P, -1)
}

// pressure returns the gauge pressure [Pa] at a gas volume, and its slope by that.
func (m *accumulatorModel) pressure(v float64) (p, slope float64) {
	if m.tau < 0 {
		p = m.filling.pressure(v)
		return p, -m.filling.n * (p + units.AtmosphericPressure) / v
	}
	t, byVolume := m.thermal.warmed(m.t, m.v, v, m.dt)
	return m.thermal.pressure(t, v), m.thermal.mR * (byVolume/v - t/(v*v))
}

func (m *accumulatorModel) book(k *booking) {
	q := k.m3s(k.val(m.q))
	k.put(m.qP, q)
	k.put(m.sigV, m.v-q*m.dt)
	k.pow[m.stored] += q * k.pa(m.P)
	if m.tau >= 0 {
		t := m.temperature(k)
		k.put(m.sigTheta, t)
		lost := m.thermal.lost(t)
		k.pow[m.stored] -= lost
		k.lose(m.lost, lost)
	}
}

// temperature is that of the gas at the point that was balanced [K].
func (m *accumulatorModel) temperature(k *booking) float64 {
	t, _ := m.thermal.warmed(m.t, m.v, m.v-k.m3s(k.val(m.q))*m.dt, m.dt)
	return t
}

func (m *accumulatorModel) advance(k *booking) {
	k.next[m.state] = m.v - k.m3s(k.val(m.q))*m.dt
	if m.tau >= 0 {
		k.next[m.warm] = m.temperature(k)
	}
}

func (m *accumulatorModel) cold(s *step, level int, x []float64) { x[m.q] = 0 }
