package circuit

import "barlitre/machines/units"

// tankKind is the reservoir: a node at zero gauge pressure that takes and gives oil.
var tankKind = &Kind{
	Name: kindTank, Title: "Tank", Group: "supply",
	Text:      "Open reservoir at zero gauge pressure. Its port may stand in any number of lines.",
	Ports:     []Port{{Name: "T", Type: Oil, Text: "oil to and from the tank"}},
	Equations: []Equation{{"p = 0 (gauge)", "definition"}},
	Symbol:    func(*Block) string { return "tank_return" },
}

// pressureSourceKind is a reservoir held at a pressure, such as a pre-loaded
// low-pressure tank. What flows in or out is booked as stored energy.
var pressureSourceKind = &Kind{
	Name: kindPressureSource, Title: "Low-pressure source", Group: "supply",
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

// book: gfix is the flow that leaves the node into the other blocks.
func (m *sourceModel) book(k *booking) {
	in := -k.gfix[-1-m.node]
	k.put(m.q, k.m3s(in))
	k.pow[m.stored] += k.watts(m.reference * in)
}

// junctionKind joins lines; it has no law of its own.
var junctionKind = &Kind{
	Name: kindJunction, Title: "Junction", Group: "lines and conditioning",
	Text: "Joins lines without any drop. Lines that meet in it are one node.",
	Ports: []Port{
		{Name: "1", Type: Oil, Optional: true, Text: "joined"}, {Name: "2", Type: Oil, Optional: true, Text: "joined"},
		{Name: "3", Type: Oil, Optional: true, Text: "joined"}, {Name: "4", Type: Oil, Optional: true, Text: "joined"},
	},
	Equations: []Equation{{"p1 = p2 = p3 = p4; Σq = 0", "continuity"}},
	Symbol:    func(*Block) string { return "junction" },
}
