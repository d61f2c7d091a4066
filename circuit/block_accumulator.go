package circuit

import (
	"math"

	"barlitre/machines/units"
)

// accumulatorKind is a gas-loaded accumulator.
var accumulatorKind = &Kind{
	Name: kindAccumulator, Title: "Accumulator, gas-loaded", Group: "supply",
	Text: "Stores oil against gas. The pre-charge is stated at 20 °C gauge, as it is filled, and corrected to the gas temperature. Energy in the gas is booked as stored.",
	Ports: []Port{
		{Name: "P", Type: Oil, Text: "oil"},
	},
	Params: []Param{
		{Key: "volume", Title: "Gas volume", Symbol: "V0", Dim: units.Volume, Need: true, Above: true, Max: 10, Text: "of the empty accumulator"},
		{Key: "precharge", Title: "Pre-charge at 20 °C", Symbol: "p0", Dim: units.Pressure, Need: true, Above: true, Max: 1000e5, Text: "gauge pressure without oil"},
		{Key: "exponent", Title: "Polytropic exponent", Symbol: "n", Dim: units.Ratio, Default: "1.3", Origin: Assumed, Source: "cycles of seconds to a minute; 1 for slow, 1.4 for fast changes, common practice", Min: 1, Max: 2, Text: "of the gas"},
		{Key: "gas_temperature", Title: "Gas temperature", Symbol: "θg", Dim: units.Temperature, Default: "40 C", Origin: Assumed, Source: "between oil and air, common practice", Min: 230, Max: 400, Text: "corrects the pre-charge"},
		{Key: "start_pressure", Title: "Pressure at the start", Symbol: "p1", Dim: units.Pressure, Max: 1000e5, Text: "where a single recording begins; without it the accumulator starts empty"},
		{Key: "rating", Title: "Rated pressure", Symbol: "pr", Dim: units.Pressure, Above: true, Max: 2000e5, Text: "highest permitted working pressure"},
	},
	Equations: []Equation{
		{"pabs·V^n = p0,abs·V0^n, pabs = p + 1.01325 bar", "polytropic change of an ideal gas; absolute pressures"},
		{"p0,abs(θg) = p0,abs(20 °C)·θg/293.15 K", "ideal gas at constant volume"},
		{"dE/dt = p·q", "work on the gas"},
	},
	Rating: "rating",
	Symbol: func(*Block) string { return "accumulator_gas" },
	build: func(k *compiler, b *Block) model {
		m := &accumulatorModel{P: k.node(b, "P"), q: k.unknown(otherRow, b.ID), volume: k.param(b, "volume"), pre: k.param(b, "precharge"),
			exponent: k.param(b, "exponent"), theta: k.param(b, "gas_temperature"), first: k.param(b, "start_pressure"),
			qP: k.port(b, "P"), sigV: k.signal(b, "V", "gas volume", units.Volume), stored: k.channel(Stored, b, "accumulator")}
		m.state = k.newSlow(slowState{block: b.ID, name: "gas volume", start: func(p []float64) float64 {
			g := m.gas(p)
			if m.first < 0 {
				return g.v0
			}
			return g.volumeAt(p[m.first])
		}, scale: func(p []float64) float64 { return p[m.volume] }})
		return m
	},
}

// gas is the filling of an accumulator: pAbs·V^n = p0·v0^n.
type gas struct{ p0, v0, n float64 } // Pa absolute, m³

// pressure returns the gauge pressure at a gas volume [Pa].
func (g gas) pressure(v float64) float64 {
	return g.p0*math.Pow(g.v0/v, g.n) - units.AtmosphericPressure
}

// volumeAt returns the gas volume at a gauge pressure [m³], the whole volume below the pre-charge.
func (g gas) volumeAt(p float64) float64 {
	return math.Min(g.v0, g.v0*math.Pow(g.p0/(p+units.AtmosphericPressure), 1/g.n))
}

type accumulatorModel struct {
	P, q                                slot
	volume, pre, exponent, theta, first int
	qP, sigV, stored                    int
	state                               int

	filling gas
	v, dt   float64 // gas volume at the point before; s
	qs, ps  float64
}

func (m *accumulatorModel) gas(p []float64) gas {
	p0 := (p[m.pre] + units.AtmosphericPressure) * p[m.theta] / 293.15
	return gas{p0, p[m.volume], p[m.exponent]}
}

func (m *accumulatorModel) clone() model { c := *m; return &c }

func (m *accumulatorModel) bind(b *binding) {
	m.filling = m.gas(b.p)
	m.qs, m.ps = b.scales.q, b.scales.p
}

// begin: oil can leave only as long as there is some; at both sides of a step the
// volume stands, and any flow is possible that the rest of the circuit asks for.
func (m *accumulatorModel) begin(s *step) {
	m.v, m.dt = s.slow[m.state], s.dt
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
	p := m.filling.pressure(v)
	slope := m.filling.n * (p + units.AtmosphericPressure) / v * m.qs * m.dt / m.ps
	// The row rises with q: filling raises the pressure.
	e.add(m.q, p/m.ps-e.val(m.P)+minResistance*q)
	e.d(m.q, m.q, slope+minResistance)
	e.d(m.q, m.P, -1)
}

func (m *accumulatorModel) book(k *booking) {
	q := k.m3s(k.val(m.q))
	k.put(m.qP, q)
	k.put(m.sigV, m.v-q*m.dt)
	k.pow[m.stored] += q * k.pa(m.P)
}

func (m *accumulatorModel) advance(k *booking) {
	k.next[m.state] = m.v - k.m3s(k.val(m.q))*m.dt
}

func (m *accumulatorModel) cold(s *step, level int, x []float64) { x[m.q] = 0 }
