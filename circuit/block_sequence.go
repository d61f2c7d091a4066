package circuit

import (
	"barlitre/machines/units"
)

// sequenceKind is a sequence valve.
var sequenceKind = &Kind{
	Name: kindSequence, Title: "Sequence valve", Group: "valves",
	Letter: "SQ", Typical: []Setting{{"set", "80 bar"}},
	Text: "Opens P to A once the pressure at P, or with `pilot: external` that at X, exceeds its setting. The spring chamber drains apart, so pressure at A does not add to the setting; pressure at D does.",
	Ports: []Port{
		{Name: "P", Type: Oil, Text: "inlet"},
		{Name: "A", Type: Oil, Text: "to what comes next"},
		{Name: "X", Type: Pilot, Optional: true, Text: "pilot, with pilot: external"},
		{Name: "D", Type: Pilot, Optional: true, Text: "drain of the spring, without flow; unconnected it goes to tank"},
	},
	Params: append([]Param{
		{Key: "set", Title: "Opens at", Symbol: "ps", Dim: units.Pressure, Need: true, Above: true, Max: 1000e5, Text: "pressure at P or X, above that at D, at which it begins to open"},
		{Key: "pilot", Title: "Opened by", Type: Choice, Default: "inlet", Choices: []string{"inlet", "external"}, Text: "inlet: the pressure at P; external: that at X"},
		{Key: "band", Title: "Opening band", Symbol: "Δpb", Dim: units.Pressure, Default: "5 bar", Origin: Assumed, Source: "from closed to fully open, common practice, no source", Above: true, Max: 200e5, Text: "rise of the pilot pressure from closed to fully open"},
		{Key: "nominal_flow", Title: "Nominal flow", Symbol: "qN", Dim: units.Flow, Default: "60 L/min", Origin: Assumed, Source: "state the size of the valve", Above: true, Max: 10, Text: "fully open, at the nominal drop"},
		{Key: "nominal_drop", Title: "Nominal drop", Symbol: "ΔpN", Dim: units.Pressure, Default: "5 bar", Origin: Assumed, Source: "common practice, no source", Above: true, Max: 100e5, Text: "fully open, at the nominal flow"},
	}, returnParams("blocked", "free")...),
	Losses: []LossKind{{"sequence", ToOil, "P = Δp·q"}},
	Equations: []Equation{
		{"s = clip((p − pD − ps)/Δpb, 0, 1), p = pP or pX", "force balance of spool and spring"},
		{"P to A: Δp·s = ΔpN·(q/qN)² + (1 − s)·Δp1·q/qN, Δp1 = 100 bar", "throttling while it opens is our simplification"},
		returnEquation,
	},
	Symbol: func(b *Block) string {
		name := "sequence"
		if b.Word("pilot") == "external" {
			name = "sequence_external"
		}
		return checked(b, name)
	},
	build: func(k *compiler, b *Block) model {
		m := &sequenceModel{pilot: k.node(b, "P"), drain: k.node(b, "D"), set: k.param(b, "set"), band: k.param(b, "band"), free: KindNamed(b.Kind).WordOf(b, "reverse") == "free"}
		if KindNamed(b.Kind).WordOf(b, "pilot") == "external" {
			m.pilot = k.node(b, "X")
		}
		m.gate = newGate(k, b, "A", "P", k.param(b, "check_opens"), k.param(b, "check_flow"), k.param(b, "check_drop"), k.port(b, "A"), k.port(b, "P"), k.channel(Loss, b, "sequence"))
		m.qN2, m.dN2 = k.param(b, "nominal_flow"), k.param(b, "nominal_drop")
		k.port(b, "X")
		k.port(b, "D")
		return m
	},
}

// sequenceModel is a gate whose controlled way runs from P to A.
type sequenceModel struct {
	gate
	pilot, drain slot
	set, band    int
	free         bool // built-in check valve
	ps, width    float64
}

func (m *sequenceModel) clone() model { c := *m; return &c }

func (m *sequenceModel) bind(b *binding) {
	m.bindGate(b)
	m.gate.closed = (100e5 / b.scales.p) / (b.p[m.qN2] / b.scales.q)
	if !m.free {
		b.bound.Hi[m.q1] = 0
	}
	m.ps, m.width = b.p[m.set]/b.scales.p, b.p[m.band]/b.scales.p
}

func (m *sequenceModel) begin(*step) {}

func (m *sequenceModel) eval(e *eval) {
	m.evalGate(e)
	e.add(m.s, e.val(m.s)-(e.val(m.pilot)-e.val(m.drain)-m.ps)/m.width)
	e.d(m.s, m.s, 1)
	e.d(m.s, m.pilot, -1/m.width)
	e.d(m.s, m.drain, 1/m.width)
}

func (m *sequenceModel) book(k *booking) { m.bookGate(k) }
