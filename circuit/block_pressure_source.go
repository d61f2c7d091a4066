package circuit

import (
	"barlitre/machines/units"
)

// pressureSourceKind is a reservoir held at a pressure, such as a pre-loaded
// low-pressure tank. What flows in or out is booked as stored energy.
var pressureSourceKind = &Kind{
	Name: kindPressureSource, Title: "Low-pressure source", Group: "supply",
	Letter: "LP", Typical: []Setting{{"pressure", "5 bar"}},
	Text:  "Reservoir at constant pressure, such as a pre-loaded tank of a pump-controlled cylinder. Oil exchanged with it is booked as stored energy.",
	Ports: []Port{{Name: "P", Type: Oil, Text: "oil to and from the source"}},
	Params: []Param{
		{Key: "pressure", Title: "Pressure", Symbol: "p", Dim: units.Pressure, Need: true, Min: 0, Max: 60e5, Text: "gauge pressure it is held at"},
	},
	Equations: []Equation{{"p = constant; dE/dt = p·q", "definition"}},
	Symbol:    func(*Block) string { return "pressure_source" },
	build: func(k *compiler, b *Block) model {
		return &sourceModel{node: k.node(b, "P"), p: k.param(b, "pressure"), q: k.port(b, "P"), stored: k.channel(Stored, b, "pressure source")}
	},
}

type sourceModel struct {
	node      slot
	p, q      int
	stored    int
	reference float64
}

func (m *sourceModel) clone() model    { c := *m; return &c }
func (m *sourceModel) bind(b *binding) { m.reference = b.p[m.p] / b.scales.p }
func (m *sourceModel) begin(s *step)   { s.set(m.node, m.reference) }
func (m *sourceModel) eval(*eval)      {}

// book: its row is the flow that leaves the node into the other blocks.
func (m *sourceModel) book(k *booking) {
	in := -k.row(m.node)
	k.put(m.q, k.m3s(in))
	k.pow[m.stored] += k.watts(m.reference * in)
}
