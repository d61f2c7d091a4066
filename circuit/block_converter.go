package circuit

import (
	"math"

	"barlitre/machines"
	"barlitre/machines/units"
)

const converterFit = "fitted to a published table of part-load efficiencies, 30 hp row"

// converterKind is a frequency converter between the mains and a motor.
var converterKind = &Kind{
	Name: kindConverter, Title: "Frequency converter", Group: "supply",
	Text: "Feeds motors of variable speed. What a driving load sends back goes to its brake resistor, unless the converter can return it to the mains.",
	Ports: []Port{
		{Name: "M", Type: Electric, Text: "to the motors; its other side is the mains"},
	},
	Params: []Param{
		{Key: "rated_power", Title: "Rated power", Symbol: "PN", Dim: units.Power, Need: true, Above: true, Max: 5e6, Text: "rated output"},
		{Key: "no_load", Title: "No-load loss", Symbol: "k0", Dim: units.Ratio, Default: "0.0157", Origin: Assumed, Source: converterFit, Max: 0.2, Text: "share of the rated power"},
		{Key: "linear", Title: "Linear loss", Symbol: "k1", Dim: units.Ratio, Default: "0.0129", Origin: Assumed, Source: converterFit, Max: 0.5, Text: "share of the output"},
		{Key: "square", Title: "Square loss", Symbol: "k2", Dim: units.Ratio, Default: "0.0061", Origin: Assumed, Source: converterFit, Max: 0.5, Text: "share of the rated power at rated output"},
		{Key: "returned", Title: "What comes back goes to", Type: Choice, Default: "resistor", Choices: []string{"resistor", "mains"}, Text: "brake resistor, or the mains through an active front end"},
	},
	Losses: []LossKind{
		{"converter", ToAir, "P = PN·(k0 + k1·|P|/PN + k2·(P/PN)²)"},
		{"brake resistor", ToResistor, "what the motors send back, less the converter loss"},
	},
	Equations: []Equation{{"loss = PN·(k0 + k1·|P|/PN + k2·(P/PN)²)", "no-load, linear and square part fitted to published part-load efficiencies"}},
	Symbol:    func(*Block) string { return "converter" },
	build: func(k *compiler, b *Block) model {
		return &converterModel{el: k.elOf[k.of[PortRef{b.ID, "M"}].id], mains: KindNamed(b.Kind).WordOf(b, "returned") == "mains",
			rated: k.param(b, "rated_power"), k0: k.param(b, "no_load"), k1: k.param(b, "linear"), k2: k.param(b, "square"),
			loss: k.channel(Loss, b, "converter"), resistor: k.channel(Loss, b, "brake resistor"), supply: k.channel(Supply, b, "supply"),
			sigIn: k.signal(b, "electric", "power drawn from the mains", units.Power)}
	},
}

type converterModel struct {
	el, rated, k0, k1, k2  int
	mains                  bool
	loss, resistor, supply int
	sigIn                  int
	law                    machines.Converter
	power                  float64
}

func (m *converterModel) clone() model { c := *m; return &c }
func (m *converterModel) bind(b *binding) {
	m.law = machines.Converter{NoLoad: b.p[m.k0], Linear: b.p[m.k1], Square: b.p[m.k2]}
	m.power = b.p[m.rated]
}
func (m *converterModel) begin(*step)   {}
func (m *converterModel) eval(*eval)    {}
func (m *converterModel) book(*booking) {}

// bookSupply books the converter once its motors are booked.
func (m *converterModel) bookSupply(k *booking) {
	out := k.el[m.el]
	loss := m.law.Loss(out, m.power)
	if k.step.off() {
		loss = 0
	}
	in := out + loss
	k.pow[m.loss] += loss
	if in < 0 && !m.mains {
		k.pow[m.resistor] += -in
		in = math.Max(in, 0)
	}
	k.put(m.sigIn, in)
	k.pow[m.supply] += in
}
