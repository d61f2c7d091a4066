package circuit

import (
	"slices"

	"barlitre/machines/units"
)

// section63Kind is a section of an open-centre stack.
var section63Kind = &Kind{
	Name: kindSection63, Title: "Open-centre section 6/3", Group: "valves",
	Letter: "S", Typical: []Setting{{"nominal_flow", "60 L/min"}},
	Text: "Section of a stack of six-way valves. The through-channel C1 to C2 is open in the centre and closes in the measure in which the section opens; P feeds the section in parallel to the others. `follows`, `directs` and commands as a directional valve. Put a check valve before P where the section has a load check.",
	Ports: append([]Port{
		{Name: "C1", Type: Oil, Text: "through-channel, from the pump or the section before"},
		{Name: "C2", Type: Oil, Text: "through-channel, to the next section or tank"},
	}, edgePorts...),
	Params: slices.Concat(steered, edgeSizes, []Param{
		{Key: "flow_bypass", Title: "Nominal flow of the through-channel", Symbol: "qC", Dim: units.Flow, Above: true, Max: 10, Text: "in the centre, at the nominal drop; default: as the edges"},
		ratedPressure,
	}),
	Losses: append(slices.Clone(edgeLosses),
		LossKind{"through-channel", ToOil, "P = (pC1 − pC2)·q"}),
	Equations: []Equation{
		{"q = u·qN·√(Δp/ΔpN) for each edge, the same u on both edges that are open", "orifice law from the nominal point of the edge"},
		{"C1 to C2: q = (1 − u)·qC·√(Δp/ΔpN)", "linear overlap of through-channel and edges, our simplification"},
	},
	Rating: "rating",
	Symbol: func(*Block) string { return "dcv_6_3" },
	check:  checkValve,
	build: func(k *compiler, b *Block) model {
		return &sectionModel{valveModel: newValve(k, b, "through-channel"), C1: k.node(b, "C1"), C2: k.node(b, "C2"), qC: k.unknown(passRow, b.ID+" through-channel"),
			size: k.param(b, "flow_bypass"), sig1: k.port(b, "C1"), sig2: k.port(b, "C2")}
	},
}

// sectionModel is a directional valve with closed centre and a channel that
// closes as it opens.
type sectionModel struct {
	valveModel
	C1, C2, qC       slot
	size, sig1, sig2 int
	channel          throat
}

func (m *sectionModel) clone() model { c := *m; return &c }

func (m *sectionModel) bind(b *binding) {
	m.valveModel.bind(b)
	m.channel = throatOf(b.get(m.size, b.p[m.qN])/b.scales.q, b.p[m.dN]/b.scales.p)
}

// left is how far the through-channel is still open.
func (m *sectionModel) left(e *eval) float64 {
	if m.dir == 0 {
		return 1
	}
	return 1 - m.opening(e)
}

func (m *sectionModel) eval(e *eval) {
	m.valveModel.eval(e)
	v, u := e.branch(m.C1, m.C2, m.qC), m.left(e)
	full, slope := m.channel.flow(e.val(m.C1) - e.val(m.C2))
	e.add(m.qC, v-u*full)
	e.d(m.qC, m.qC, 1)
	e.d(m.qC, m.C1, -u*slope)
	e.d(m.qC, m.C2, u*slope)
	if m.now {
		e.d(m.qC, m.open, full)
	}
}

func (m *sectionModel) book(k *booking) {
	m.valveModel.book(k)
	k.through(m.C1, m.C2, k.val(m.qC), m.sig1, m.sig2, m.around)
}

func (m *sectionModel) cold(s *step, level int, x []float64) {
	m.valveModel.cold(s, level, x)
	x[m.qC] = 0.3
}
