package circuit

// pressurePointKind is a measuring point for a pressure.
var pressurePointKind = &Kind{
	Name: kindPressurePoint, Title: "Pressure measuring point", Group: "measuring",
	Letter:    "X",
	Text:      "Test port of a gauge or transducer on a line, also on a signal line. It takes no oil and changes nothing. What was measured there may stand in the duty as a track X1.pressure: it changes nothing and is compared with what is computed.",
	Ports:     []Port{{Name: "P", Type: Pilot, Text: "the pressure read"}},
	Equations: []Equation{{"q = 0; the reading is pP", "definition"}},
	Symbol:    func(*Block) string { return "gauge" },
	build: func(k *compiler, b *Block) model {
		k.port(b, "P")
		return pointModel{}
	},
}

// pointModel has no law: the pressure of its port is a signal like any other.
type pointModel struct{}

func (m pointModel) clone() model  { return m }
func (m pointModel) bind(*binding) {}
func (m pointModel) begin(*step)   {}
func (m pointModel) eval(*eval)    {}
func (m pointModel) book(*booking) {}
