package circuit

import (
	"barlitre/machines/units"
)

// chargePumpKind is the charge pump of a closed circuit with its own relief valve.
var chargePumpKind = &Kind{
	Name: kindChargePump, Title: "Charge pump with relief", Group: "pumps and motors",
	Passes: PumpShaft, Letter: "CP", Typical: []Setting{{"displacement", "16 cm3/rev"}, {"charge", "20 bar"}},
	Text: "Fixed pump with its own relief valve at the charge pressure, feeding the low side of a closed circuit through check valves.",
	Ports: []Port{
		{Name: "shaft", Type: Shaft, Text: "drive shaft"},
		{Name: "S", Type: Oil, Text: "suction"},
		{Name: "P", Type: Oil, Text: "charge line"},
		{Name: "T", Type: Oil, Text: "outlet of the relief valve"},
	},
	Params: append(machineParams("0"), Plate.of([]Param{
		{Key: "charge", Title: "Charge pressure", Symbol: "pc", Dim: units.Pressure, Need: true, Above: true, Max: 100e5, Text: "at which its relief valve opens"},
		{Key: "override", Title: "Override", Symbol: "R", Dim: units.FlowResistance, Default: "3 bar per 100 L/min", Origin: Assumed, Source: "common practice", Max: 1e12, Text: "pressure rise of the relief valve by flow"},
	}...)...),
	Losses:    append([]LossKind{{"charge relief", ToOil, "P = (p − pT)·q over the relief valve"}}, machineLosses...),
	Equations: append(machineEquations, Equation{"relief: q = 0 for p − pT <= pc, else p − pT = pc + R·q", "linear override"}),
	Rating:    "rating",
	Symbol:    func(*Block) string { return "charge_set" },
	derive:    deriveMachine,
	check:     checkMachine,
	build: func(k *compiler, b *Block) model {
		m := &chargeModel{}
		m.machine = k.machine(b, "P", "S", k.shaftAt(b), k.fixed())
		m.relief = reliefModel{P: m.P, T: k.node(b, "T"), q: k.unknown(otherRow, b.ID+" relief"), crack: k.param(b, "charge"), set: -1, setFlow: -1, vent: -1,
			override: k.param(b, "override"), qP: -1, qT: k.port(b, "T"), spill: k.channel(Loss, b, "charge relief"), around: -1}
		m.k = k.Compiled
		return m
	},
}

type chargeModel struct {
	machine
	relief reliefModel
	k      *Compiled
}

func (m *chargeModel) clone() model { c := *m; return &c }
func (m *chargeModel) bind(b *binding) {
	m.bindMachine(b, m.k.shafts)
	m.relief.bind(b)
}
func (m *chargeModel) begin(s *step) {
	s.set(m.e, 1)
	m.relief.begin(s)
}
func (m *chargeModel) eval(e *eval) {
	m.evalMachine(e)
	m.relief.eval(e)
}
func (m *chargeModel) book(k *booking) {
	m.bookMachine(k)
	m.relief.book(k)
	if m.qP >= 0 {
		k.sig[m.qP] += k.m3s(k.val(m.relief.q))
	}
}
func (m *chargeModel) cold(s *step, level int, x []float64) { m.relief.cold(s, level, x) }
