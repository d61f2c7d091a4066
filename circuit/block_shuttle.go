package circuit

import ()

// shuttleKind selects the higher of two pilot signals.
var shuttleKind = &Kind{
	Name: kindShuttle, Title: "Shuttle valve (signal)", Group: "valves",
	Letter: "SV",
	Text:   "Passes the higher of the pilot pressures at X and Y to A.",
	Ports: []Port{
		{Name: "X", Type: Pilot, Text: "one signal"},
		{Name: "Y", Type: Pilot, Text: "other signal"},
		{Name: "A", Type: Pilot, Source: true, Text: "the higher one"},
	},
	Equations: []Equation{{"pA = max(pX, pY)", "ideal shuttle valve"}},
	Symbol:    func(*Block) string { return "shuttle" },
	build: func(k *compiler, b *Block) model {
		m := &shuttleModel{x: k.node(b, "X"), y: k.node(b, "Y"), a: k.node(b, "A")}
		for _, p := range []string{"X", "Y", "A"} {
			k.port(b, p)
		}
		return m
	},
}

type shuttleModel struct{ x, y, a slot }

func (m *shuttleModel) clone() model  { c := *m; return &c }
func (m *shuttleModel) bind(*binding) {}
func (m *shuttleModel) begin(*step)   {}
func (m *shuttleModel) book(*booking) {}

func (m *shuttleModel) eval(e *eval) {
	from := m.x
	if e.val(m.y) > e.val(m.x) {
		from = m.y
	}
	e.add(m.a, e.val(m.a)-max(e.val(m.x), e.val(m.y)))
	e.same(m.a, m.a, 1)
	e.d(m.a, from, -1)
}
