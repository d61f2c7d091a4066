package circuit

import (
	"barlitre/machines/units"
)

// reducingKind is a pressure reducing valve.
var reducingKind = &Kind{
	Name: kindReducing, Title: "Pressure reducing valve", Group: "valves",
	Letter: "RD", Typical: []Setting{{"set", "60 bar"}},
	Text: "Open at rest; throttles from P to A as soon as A reaches the setting, counted from the pressure at T. A relieving (three-way) valve lets oil from A to T when A is pushed above it. It passes oil from A to P only through a built-in check valve.",
	Ports: []Port{
		{Name: "P", Type: Oil, Text: "supply"},
		{Name: "A", Type: Oil, Text: "outlet, held at the setting"},
		{Name: "T", Type: Oil, Optional: true, Text: "drain of the spring, outlet when relieving; unconnected it goes to tank"},
	},
	Params: append([]Param{
		{Key: "set", Title: "Set to", Symbol: "ps", Dim: units.Pressure, Need: true, Above: true, Max: 1000e5, Text: "pressure at A above that at T"},
		{Key: "nominal_flow", Title: "Nominal flow", Symbol: "qN", Dim: units.Flow, Default: "60 L/min", Origin: Assumed, Source: "state the size of the valve", Above: true, Max: 10, Text: "wide open, at the nominal drop"},
		{Key: "nominal_drop", Title: "Nominal drop", Symbol: "ΔpN", Dim: units.Pressure, Default: "5 bar", Origin: Assumed, Source: "common practice, no source", Max: 100e5, Text: "wide open, at the nominal flow; 0 bar makes it lossless"},
		{Key: "relieving", Title: "Relieving", Type: Choice, Default: "no", Choices: []string{"no", "yes"}, Text: "yes: three-way, lets A out to T above the setting"},
		{Key: "relief_step", Title: "Relieves above setting by", Symbol: "Δpr", Dim: units.Pressure, Default: "5 bar", Origin: Assumed, Source: "overlap of the spool, common practice 2 to 10 bar, no source", Max: 200e5, Text: "rise of A over the setting at which A to T opens"},
		{Key: "relief_override", Title: "Override when relieving", Symbol: "R", Dim: units.FlowResistance, Default: "10 bar per 100 L/min", Origin: Assumed, Source: "as a relief valve, common practice", Max: 1e12, Text: "pressure rise by flow from A to T"},
	}, returnParams("blocked", "free")...),
	Losses: []LossKind{
		{"reducing", ToOil, "P = (pP − pA)·q"},
		{"relieving", ToOil, "P = (pA − pT)·q from A to T"},
		returnLoss,
	},
	Equations: []Equation{
		{"pP − pA = ΔpN·(q/qN)² + z, z >= 0; pA − pT = ps while z > 0, below while z = 0; q >= 0", "ideal pressure regulator, complementarity of throttling and setting"},
		{"relieving: q = 0 for pA − pT <= ps + Δpr, above pA − pT = ps + Δpr + R·q", "as a relief valve with linear override"},
		returnEquation,
	},
	check: func(k *Kind, b *Block, bad func(Level, string, string, ...any)) {
		for _, key := range []string{"relief_step", "relief_override"} {
			if _, given := b.Values[key]; given && k.WordOf(b, "relieving") == "no" {
				bad(Warns, key, "it only counts with relieving: yes")
			}
		}
	},
	Symbol: reducingSymbol,
	build: func(k *compiler, b *Block) model {
		m := &reducingModel{way: k.regulated(b, "P", "A"), T: k.node(b, "T"), out: noSlot,
			set: k.param(b, "set"), qN: k.param(b, "nominal_flow"), dN: k.param(b, "nominal_drop"), step: k.param(b, "relief_step"), over: k.param(b, "relief_override"),
			qP: k.port(b, "P"), qA: k.port(b, "A"), qT: k.port(b, "T"),
			loss: k.channel(Loss, b, "reducing"), spill: k.channel(Loss, b, "relieving"), back: k.returnCheck(b, "A", "P")}
		if KindNamed(b.Kind).WordOf(b, "relieving") == "yes" {
			m.out = k.unknown(otherRow, b.ID+" relieving")
		}
		return m
	},
}

func reducingSymbol(b *Block) string {
	name := "reducing"
	if b.Word("relieving") == "yes" {
		name = "reducing_3way"
	}
	return checked(b, name)
}

type reducingModel struct {
	way                     regulated
	back                    returnCheck
	T, out                  slot // out: flow from A to T when relieving
	set, qN, dN, step, over int
	qP, qA, qT, loss, spill int
	held, opens, slope      float64
}

func (m *reducingModel) clone() model { c := *m; return &c }

func (m *reducingModel) bind(b *binding) {
	m.held = b.p[m.set] / b.scales.p
	m.way.bind(b, throatOf(b.p[m.qN]/b.scales.q, b.p[m.dN]/b.scales.p))
	m.back.bind(b)
	m.opens = m.held + b.p[m.step]/b.scales.p
	m.slope = b.p[m.over] * b.scales.q / b.scales.p
	if m.out >= 0 {
		b.bound.Lo[m.out] = 0
	}
}

func (m *reducingModel) begin(*step) {}

func (m *reducingModel) eval(e *eval) {
	m.way.eval(e)
	// More throttling lowers pA: the row rises with z.
	e.add(m.way.z, m.held-(e.val(m.way.b)-e.val(m.T)))
	e.d(m.way.z, m.way.b, -1)
	e.d(m.way.z, m.T, 1)
	m.back.eval(e)
	if m.out >= 0 {
		q := e.branch(m.way.b, m.T, m.out)
		e.drop(m.way.b, m.T, m.out, m.opens+m.slope*q, m.slope)
	}
}

func (m *reducingModel) book(k *booking) {
	q, out, pA := k.val(m.way.q), 0.0, k.val(m.way.b)
	k.lose(m.loss, k.watts((k.val(m.way.a)-pA)*q))
	if m.out >= 0 {
		out = k.val(m.out)
		k.lose(m.spill, k.watts((pA-k.val(m.T))*out))
	}
	q -= m.back.book(k)
	k.put(m.qP, k.m3s(q))
	k.put(m.qA, k.m3s(out-q))
	k.put(m.qT, -k.m3s(out))
}

func (m *reducingModel) cold(s *step, level int, x []float64) {
	m.way.cold(x)
	m.back.cold(x)
	if m.out >= 0 {
		x[m.out] = 0
	}
}
