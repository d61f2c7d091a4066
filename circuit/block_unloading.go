package circuit

import "barlitre/machines/units"

// unloadingKind is the unloading (charging) valve of an accumulator circuit.
var unloadingKind = &Kind{
	Name: kindUnloading, Title: "Unloading valve", Group: "valves",
	Letter: "UV", Typical: []Setting{{"unloads", "180 bar"}, {"loads", "150 bar"}},
	Text: "Sends the pump to A, through its check valve, until A reaches the upper switching pressure; then unloads the pump to T until A has fallen to the lower one. It snaps between the two.",
	Ports: []Port{
		{Name: "P", Type: Oil, Text: "pump"},
		{Name: "A", Type: Oil, Text: "accumulator and users"},
		{Name: "T", Type: Oil, Text: "tank"},
	},
	Params: append([]Param{
		{Key: "unloads", Title: "Unloads above", Symbol: "p2", Dim: units.Pressure, Need: true, Above: true, Max: 1000e5, Text: "pressure at A"},
		{Key: "loads", Title: "Loads below", Symbol: "p1", Dim: units.Pressure, Need: true, Above: true, Max: 1000e5, Text: "pressure at A, below the other"},
		{Key: "unloaded_drop", Title: "Drop while unloaded", Symbol: "Δpu", Dim: units.Pressure, Default: "3 bar", Origin: Assumed, Source: "common practice 2 to 20 bar", Max: 100e5, Text: "from P to T at the nominal flow"},
	}, openingParams()...),
	Losses: []LossKind{{"unloaded circulation", ToOil, "P = (pP − pT)·q"}, {"check valve", ToOil, "P = (pP − pA)·q"}},
	Equations: []Equation{
		{"loaded: P to A as a check valve, P to T closed; unloaded: Δp = Δpu·(q/qN)² from P to T", "orifice law"},
		{"loaded becomes unloaded where pA reaches p2, unloaded becomes loaded where pA falls to p1", "hysteresis; the instant is found inside the time step"},
	},
	Symbol: func(*Block) string { return "unloading" },
	check: func(k *Kind, b *Block, bad func(Level, string, string, ...any)) {
		hi, _, ok1 := k.Value(b, "unloads")
		lo, _, ok2 := k.Value(b, "loads")
		if ok1 && ok2 && lo.SI >= hi.SI {
			bad(Stops, "loads", "it loads below %s, which is not below the %s at which it unloads", show(lo.SI, units.Pressure), show(hi.SI, units.Pressure))
		}
	},
	build: func(k *compiler, b *Block) model {
		m := &unloadingModel{P: k.node(b, "P"), A: k.node(b, "A"), T: k.node(b, "T"), qA: k.unknown(otherRow, b.ID), qT: k.unknown(otherRow, b.ID),
			hi: k.param(b, "unloads"), lo: k.param(b, "loads"), drop: k.param(b, "unloaded_drop"), po: k.param(b, "opens"), qN: k.param(b, "nominal_flow"), dN: k.param(b, "nominal_drop"),
			sigP: k.port(b, "P"), sigA: k.port(b, "A"), sigT: k.port(b, "T"),
			around: k.channel(Loss, b, "unloaded circulation"), loss: k.channel(Loss, b, "check valve")}
		m.state = k.newSlow(slowState{block: b.ID, name: "unloaded", start: func([]float64) float64 { return 0 }, scale: func([]float64) float64 { return 1 }, discrete: true})
		return m
	},
}

type unloadingModel struct {
	P, A, T, qA, qT          slot
	hi, lo, drop, po, qN, dN int
	sigP, sigA, sigT         int
	around, loss, state      int

	upper, lower, opens float64
	check, open         throat
	unloaded            bool
}

func (m *unloadingModel) clone() model { c := *m; return &c }

func (m *unloadingModel) bind(b *binding) {
	m.upper, m.lower = b.p[m.hi]/b.scales.p, b.p[m.lo]/b.scales.p
	m.opens = b.p[m.po] / b.scales.p
	q := b.p[m.qN] / b.scales.q
	m.check = throatOf(q, b.p[m.dN]/b.scales.p)
	m.open = throatOf(q, b.p[m.drop]/b.scales.p)
	b.bound.Lo[m.qA] = 0
}

func (m *unloadingModel) begin(s *step) {
	m.unloaded = s.slow[m.state] != 0
	if m.unloaded {
		s.bounds(m.qT, 0, inf)
	} else {
		s.set(m.qT, 0)
	}
}

func (m *unloadingModel) eval(e *eval) {
	e.throttle(m.P, m.A, m.qA, &m.check, m.opens, 0)
	e.throttle(m.P, m.T, m.qT, &m.open, 0, 0)
}

func (m *unloadingModel) book(k *booking) {
	qA, qT := k.val(m.qA), k.val(m.qT)
	k.put(m.sigP, k.m3s(qA+qT))
	k.put(m.sigA, -k.m3s(qA))
	k.put(m.sigT, -k.m3s(qT))
	k.pow[m.loss] += k.watts((k.val(m.P) - k.val(m.A)) * qA)
	k.pow[m.around] += k.watts((k.val(m.P) - k.val(m.T)) * qT)
}

func (m *unloadingModel) advance(*booking) {} // it switches between points only

func (m *unloadingModel) due(k *booking) float64 {
	if k.step.slow[m.state] != 0 {
		return m.lower - k.val(m.A)
	}
	return k.val(m.A) - m.upper
}

func (m *unloadingModel) toggle(slow []float64) { slow[m.state] = 1 - slow[m.state] }

func (m *unloadingModel) cold(s *step, level int, x []float64) { x[m.qA] = m.check.first() }
