package circuit

import (
	"barlitre/machines/units"
)

// pilotCheckKind is a pilot-operated check valve.
var pilotCheckKind = &Kind{
	Name: kindPilotCheck, Title: "Pilot-operated check valve", Group: "valves",
	Letter: "PC",
	Text:   "Passes oil from V to C freely, and from C to V once the pilot pressure at X lifts it.",
	Ports: []Port{
		{Name: "V", Type: Oil, Text: "valve side"},
		{Name: "C", Type: Oil, Text: "cylinder side, held"},
		{Name: "X", Type: Pilot, Text: "pilot that opens it"},
	},
	Params: append(openingParams(),
		Param{Key: "pilot_ratio", Title: "Pilot ratio", Symbol: "φ", Dim: units.Ratio, Default: "3", Origin: Assumed, Source: "common practice 3 to 4", Above: true, Max: 50, Text: "pilot area over seat area"},
		Param{Key: "band", Title: "Opening band", Symbol: "Δpb", Dim: units.Pressure, Default: "2 bar", Origin: Assumed, Source: "seat pressure from closed to fully open, our choice", Above: true, Max: 50e5, Text: "from closed to fully open"},
	),
	Losses: []LossKind{{"check valve", ToOil, "P = Δp·q"}},
	Equations: []Equation{
		{"V to C: as a check valve", "orifice law beyond the opening pressure"},
		{"C to V: s = clip((φ·(pX − pV) − (pC − pV) − po)/Δpb, 0, 1); Δp·s = ΔpN·(q/qN)² + (1 − s)·Δp1·q/qN, Δp1 = 100 bar", "force balance of the seat; throttling while it opens is our simplification"},
	},
	Symbol: func(*Block) string { return "check_pilot" },
	build: func(k *compiler, b *Block) model {
		m := &pilotCheckModel{pilot: k.node(b, "X"), ratio: k.param(b, "pilot_ratio"), band: k.param(b, "band"), po: k.param(b, "opens")}
		qN, dN := k.param(b, "nominal_flow"), k.param(b, "nominal_drop")
		qV, qC, loss := k.port(b, "V"), k.port(b, "C"), k.channel(Loss, b, "check valve")
		m.gate = newGate(k, b, "V", "C", m.po, qN, dN, qV, qC, loss)
		k.port(b, "X")
		return m
	},
}

type pilotCheckModel struct {
	gate
	pilot       slot
	ratio, band int
	po          int
	phi, width  float64
}

func (m *pilotCheckModel) clone() model { c := *m; return &c }

func (m *pilotCheckModel) bind(b *binding) {
	m.bindGate(b)
	m.phi, m.width = b.p[m.ratio], b.p[m.band]/b.scales.p
}

func (m *pilotCheckModel) begin(*step) {}

func (m *pilotCheckModel) eval(e *eval) {
	m.evalGate(e)
	pX, pV, pC := e.val(m.pilot), e.val(m.V), e.val(m.C)
	e.add(m.s, e.val(m.s)-(m.phi*(pX-pV)-(pC-pV)-m.opens)/m.width)
	e.d(m.s, m.s, 1)
	e.d(m.s, m.pilot, -m.phi/m.width)
	e.d(m.s, m.V, (m.phi-1)/m.width)
	e.d(m.s, m.C, 1/m.width)
}

func (m *pilotCheckModel) book(k *booking) { m.bookGate(k) }
