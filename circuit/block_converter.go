package circuit

import (
	"math"

	"barlitre/machines"
	"barlitre/machines/units"
)

const (
	converterFit  = "fitted to a published table of part-load efficiencies, row by size"
	converterFrom = "by size, fitted to a published table of part-load efficiencies"
)

// converterKind is a frequency converter between the mains and a motor.
var converterKind = &Kind{
	Name: kindConverter, Title: "Frequency converter", Group: "supply",
	Passes: Inverter, Letter: "U", Typical: []Setting{{"rated_power", "15 kW"}},
	Text: "Feeds motors of variable speed. What a driving load sends back goes first to the other motors on its line (one link of direct current), and what they do not take to its brake resistor, or to the mains if the converter can return it.",
	Ports: []Port{
		{Name: "M", Type: Electric, Text: "to the motors; its other side is the mains"},
	},
	Params: sectioned([]Param{
		{Key: "rated_power", Title: "Rated power", Symbol: "PN", Dim: units.Power, Need: true, Above: true, Max: 5e6, Text: "rated output"},
		{Key: "no_load", Title: "No-load loss", Symbol: "k0", Dim: units.Ratio, Derived: converterFrom, Max: 0.2, Text: "share of the rated power"},
		{Key: "linear", Title: "Linear loss", Symbol: "k1", Dim: units.Ratio, Derived: converterFrom, Max: 0.5, Text: "share of the output"},
		{Key: "square", Title: "Square loss", Symbol: "k2", Dim: units.Ratio, Derived: converterFrom, Max: 0.5, Text: "share of the rated power at rated output"},
		{Key: "returned", Title: "What comes back goes to", Type: Choice, Default: "resistor", Choices: []string{"resistor", "mains"}, Text: "what the neighbours on the link do not take: to a brake resistor, or to the mains through an active front end"},
		{Key: "resistor_power", Title: "Brake resistor", Symbol: "PR", Dim: units.Power, Above: true, Max: 5e6, Text: "mean power it stands; the report then says whether it does"},
		{Key: "voltage", Title: "Voltage", Symbol: "U", Dim: units.Voltage, Default: "400 V", Origin: Assumed, Source: "low-voltage mains in Europe", Above: true, Max: 15e3, Text: "of the mains between phases; for the current"},
		{Key: "power_factor", Title: "Power factor", Symbol: "λ", Dim: units.Ratio, Default: "0.93", Origin: Assumed, Source: "six-pulse rectifier with a choke, harmonics included, common practice, no source; an active front end near 1", Above: true, Max: 1, Text: "on the side of the mains; the motors' own is not seen there"},
	}, map[Section][]string{
		Governing:    {"returned"},
		Coefficients: {"no_load", "linear", "square"},
		Limits:       {"resistor_power"},
	}),
	Losses: []LossKind{
		{"converter", ToAir, "P = PN·(k0 + k1·x + k2·x²), x = Σ|P|/PN over its motors"},
		{"brake resistor", ToResistor, "what the motors send back, less the converter loss"},
	},
	Equations: []Equation{
		{"loss = PN·(k0 + k1·x + k2·x²), x = Σ|P|/PN over its motors", "no-load, linear and square part fitted to published part-load efficiencies"},
		{"link: what passes from motor to motor is (Σ|P| − |Σ P|)/2", "sum of powers on the link; it passes the inverters of both, our choice of loss"},
		{"I = |P|/(√3·U·λ)", "current from the mains"},
	},
	derive: converterDefault,
	Symbol: func(*Block) string { return "converter" },
	build: func(k *compiler, b *Block) model {
		return &converterModel{el: k.elOf[k.of[PortRef{b.ID, "M"}].id], mains: KindNamed(b.Kind).WordOf(b, "returned") == "mains",
			rated: k.param(b, "rated_power"), k0: k.param(b, "no_load"), k1: k.param(b, "linear"), k2: k.param(b, "square"),
			loss: k.channel(Loss, b, "converter"), resistor: k.channel(Loss, b, "brake resistor"), supply: k.channel(Supply, b, "supply"),
			sigIn: k.signal(b, "electric", "power drawn from the mains", units.Power), sigLink: k.signal(b, "link", "power passed between its motors", units.Power),
			sigI: k.signal(b, "I", "current from the mains", units.Current), voltage: k.param(b, "voltage"), factor: k.param(b, "power_factor")}
	},
}

// converterDefault is the derive of converterKind: the loss law by size.
func converterDefault(k *Kind, b *Block, key string) (Value, bool) {
	v, ok := b.Values["rated_power"]
	if !ok || v.SI <= 0 {
		return Value{}, false
	}
	law := machines.UsualConverter(v.SI)
	switch key {
	case "no_load":
		return derived(k.Param(key), law.NoLoad, Assumed, converterFit), true
	case "linear":
		return derived(k.Param(key), law.Linear, Assumed, converterFit), true
	case "square":
		return derived(k.Param(key), law.Square, Assumed, converterFit), true
	}
	return Value{}, false
}

type converterModel struct {
	el, rated, k0, k1, k2  int
	mains                  bool
	loss, resistor, supply int
	sigIn, sigLink, sigI   int
	voltage, factor        int
	law                    machines.Converter
	power, U, cos          float64
}

func (m *converterModel) clone() model { c := *m; return &c }
func (m *converterModel) bind(b *binding) {
	m.law = machines.Converter{NoLoad: b.p[m.k0], Linear: b.p[m.k1], Square: b.p[m.k2]}
	m.power, m.U, m.cos = b.p[m.rated], b.p[m.voltage], b.p[m.factor]
}
func (m *converterModel) begin(*step)   {}
func (m *converterModel) eval(*eval)    {}
func (m *converterModel) book(*booking) {}

// bookSupply books the converter once its motors are booked.
func (m *converterModel) bookSupply(k *booking) {
	out, each := k.el[m.el], k.each[m.el]
	loss := m.law.Loss(each, m.power)
	if k.step.off() {
		loss = 0
	}
	in := out + loss
	k.pow[m.loss] += loss
	if in < 0 && !m.mains {
		k.pow[m.resistor] += -in
		in = 0
	}
	k.put(m.sigIn, in)
	k.put(m.sigLink, (each-math.Abs(out))/2)
	k.put(m.sigI, math.Abs(in)/(math.Sqrt(3)*m.U*m.cos))
	k.pow[m.supply] += in
	k.strike(m.supply, k.elJ[m.el])
}
