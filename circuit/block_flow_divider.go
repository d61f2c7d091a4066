package circuit

import "barlitre/machines/units"

const gearSection = "external gear, 93 % volumetric and 90 % mechanical at 180 bar and 1500 rpm, common practice"

// flowDividerKind is a gear-type flow divider.
var flowDividerKind = &Kind{
	Name: kindFlowDivider, Title: "Flow divider, gear type", Group: "valves",
	Letter: "FD", Typical: []Setting{{"displacement", "32 cm3/rev"}},
	Text: "Two gear sections on one shaft: oil into P leaves by A and B in the ratio of the sections, whatever the pressures there. The section with the lower pressure drives the other, so that one side can be above P. It joins flows as it divides them.",
	Ports: []Port{
		{Name: "P", Type: Oil, Text: "common side"},
		{Name: "A", Type: Oil, Text: "first section"},
		{Name: "B", Type: Oil, Text: "second section"},
	},
	Params: []Param{
		{Key: "displacement", Title: "Displacement", Symbol: "V", Dim: units.DisplacementPerRev, Need: true, Above: true, Max: 0.02, Text: "geometric, of both sections together"},
		{Key: "ratio", Title: "Share of A", Symbol: "r", Dim: units.Ratio, Default: "0.5", Origin: Assumed, Source: "equal sections", Min: 0.01, Max: 0.99, Text: "displacement of the first section over that of both"},
		{Key: "slip", Title: "Slip coefficient", Symbol: "Cs", Dim: units.Ratio, Default: "1.6e-8", Origin: Assumed, Source: gearSection, Max: 1e-4, Text: "laminar leakage past each section, of displacement, pressure and 1/viscosity"},
		{Key: "friction", Title: "Pressure friction", Symbol: "Cf", Dim: units.Ratio, Default: "0.05", Origin: Assumed, Source: gearSection, Max: 0.9, Text: "share of the ideal torque of each section"},
		{Key: "viscous", Title: "Viscous friction", Symbol: "Cv", Dim: units.Ratio, Default: "1.8e5", Origin: Assumed, Source: gearSection, Max: 1e8, Text: "torque by displacement, viscosity and speed"},
		{Key: "drag", Title: "Constant friction", Symbol: "Tc", Dim: units.Torque, Default: "1 N m", Origin: Assumed, Source: "seals and bearings, common practice", Max: 1e4, Text: "of both sections together"},
		ratedPressure,
		{Key: "max_speed", Title: "Highest speed", Symbol: "n2", Dim: units.AngularSpeed, Above: true, Max: 2000, Text: "highest permitted speed"},
	},
	Losses: []LossKind{
		{"slip", ToOil, "P = Σ k·Δp² over both sections, k = Cs·D/μ"},
		{"friction", ToOil, "P = Σ (Cf·D·|Δp| + Cv·D·μ·|ω|)·|ω| + Tc·|ω|"},
	},
	Equations: []Equation{
		{"qA = r·D·ω + Cs·r·D·(pP − pA)/μ, qB = (1 − r)·D·ω + Cs·(1 − r)·D·(pP − pB)/μ, D = V/2π", "Wilson, Rotary-pump theory, Trans. ASME 68 (1946), for each section as a motor"},
		{"r·D·(pP − pA) + (1 − r)·D·(pP − pB) = Σ friction·sign ω", "torque balance of the common shaft"},
	},
	Rating: "rating",
	Symbol: func(*Block) string { return "flow_divider_gear" },
	build:  buildFlowDivider,
}

type flowDividerModel struct {
	k       *Compiled
	ratio   int
	a, b    machine // each as a motor from P
	qP      int
	setting slot
}

func buildFlowDivider(k *compiler, b *Block) model {
	shaft := k.shaftAt(b)
	s := &k.shafts[shaft]
	m := &flowDividerModel{k: k.Compiled, ratio: k.param(b, "ratio"), setting: k.fixed(), qP: k.port(b, "P")}
	m.a = machine{P: k.node(b, "P"), D: k.air, e: m.setting, shaft: shaft, speed: s.speed, sigma: s.sigma, row: s.row, free: true,
		disp: k.param(b, "displacement"), coef: k.coefficients(b), wear: -1, share: -1, drainQ: -1,
		qP: -1, qD: -1, sigT: -1, sigP: -1, sigE: -1, slip: k.channel(Loss, b, "slip"), rub: k.channel(Loss, b, "friction")}
	m.a.turb, m.a.comp, m.a.inert = m.a.slip, m.a.slip, m.a.rub
	s.sizes = append(s.sizes, m.a.disp)
	m.b = m.a
	m.a.S, m.a.qS = k.node(b, "A"), k.port(b, "A")
	m.b.S, m.b.qS = k.node(b, "B"), k.port(b, "B")
	m.a.sigW, m.b.sigW = k.signal(b, "w", "speed", units.AngularSpeed), -1
	return m
}

func (m *flowDividerModel) clone() model { c := *m; return &c }

func (m *flowDividerModel) bind(b *binding) {
	m.a.part = b.p[m.ratio]
	m.b.part = 1 - m.a.part
	m.a.bindMachine(b, m.k.shafts)
	m.b.bindMachine(b, m.k.shafts)
}

func (m *flowDividerModel) begin(s *step) { s.set(m.setting, -1) }

func (m *flowDividerModel) eval(e *eval) {
	m.a.evalMachine(e)
	m.b.evalMachine(e)
}

func (m *flowDividerModel) book(k *booking) {
	m.a.bookMachine(k)
	m.b.bookMachine(k)
	k.put(m.qP, -k.sig[m.a.qS]-k.sig[m.b.qS])
}
