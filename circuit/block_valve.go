package circuit

import (
	"math"
	"slices"

	"barlitre/circuit/duty"
	"barlitre/machines"
	"barlitre/machines/units"
)

// valveKind is a 4/3 directional or proportional valve.
var valveKind = &Kind{
	Name: kindValve, Title: "Directional valve 4/3", Group: "valves",
	Letter: "V", Typical: []Setting{{"nominal_flow", "60 L/min"}},
	Text: "Four edges, any centre. With `follows` it throttles so that the axis moves as the duty says (the same opening on both edges, or with `meter_out: separate` one of its own on the edge to tank); with `directs` it only chooses the direction, fully open; otherwise a track of the duty commands it.",
	Ports: append(slices.Clone(edgePorts),
		Port{Name: "LS", Type: Pilot, Optional: true, Source: true, Text: "pressure of the port that is fed; zero in the centre"}),
	Params: slices.Concat(steered, []Param{
		{Key: "centre", Title: "Centre", Type: Choice, Default: "closed", Choices: []string{"closed", "open", "tandem", "float"}, Called: map[string]string{"float": "floating"}, Text: "closed; open: all joined; tandem: P to T, A and B closed; float: A and B to T, P closed"},
		{Key: "extend", Title: "Position that feeds A", Type: Choice, Default: "normal", Choices: []string{"normal", "regenerative"}, Text: "normal: P to A, B to T; regenerative: A and B both joined to P, so that a cylinder with its bore side at A extends fast, pushed by the rod area alone"},
	}, edgeSizes, []Param{
		{Key: "flow_centre", Title: "Nominal flow in the centre", Symbol: "qC", Dim: units.Flow, Above: true, Max: 10, Text: "of each path that is open in the centre; default: as the edges"},
		ratedPressure,
	}, meterOutParams),
	Losses: append(slices.Clone(edgeLosses),
		LossKind{"unloaded circulation", ToOil, "P = (pP − pT)·q in the centre"}),
	Equations: []Equation{
		{"q = u·qN·√(Δp/ΔpN) for each edge, the same u on both edges that are open; regenerative: those are P-A and P-B", "orifice law from the nominal point of the edge"},
		{"separate: w on the edge to tank; w = 1 while the port fed is above pi, else it is at pi", "ideal meter-out control, complementarity"},
	},
	Rating: "rating",
	Symbol: func(b *Block) string {
		centre := b.Word("centre")
		if centre == "" {
			centre = "closed"
		}
		name := "dcv_4_3_"
		if b.Word("directs") == "" {
			name += "prop_"
		}
		if b.Word("extend") == "regenerative" {
			name += "regen_"
		}
		return name + centre
	},
	check: func(k *Kind, b *Block, bad func(Level, string, string, ...any)) {
		checkValve(k, b, bad)
		checkMeterOut(k, b, bad)
	},
	build: func(k *compiler, b *Block) model {
		m := newValve(k, b, "unloaded circulation")
		return &m
	},
}

func checkValve(k *Kind, b *Block, bad func(Level, string, string, ...any)) {
	if follows(b) != "" && b.Word("directs") != "" {
		bad(Stops, "directs", "it follows an axis and directs one; keep one of the two (follows, directs)")
	}
}

// leastOpening keeps a throttling valve from closing altogether, where nothing
// would answer to its opening any more. At it a millionth of the open flow passes.
const leastOpening = 1e-6

// The four edges and their ports.
const (
	edgePA = iota
	edgePB
	edgeAT
	edgeBT
	edges
)

// valveModel keeps a flow unknown for each of two branches that can be open at
// once, and two more where the centre opens all four edges.
type valveModel struct {
	id         string
	P, A, B, T slot
	ls         slot
	axis       int
	vel        slot
	given      duty.Given
	polarity   polarity
	directs    bool
	tracks     bool // it is the control that is found
	regen      bool // feeding A joins B to P
	centre     string
	q          [4]slot
	passes     int  // how many of q there are
	open       slot // opening of a valve that follows an axis
	out        meterOut
	qN, dN, qC int
	per        [edges]int
	sig        [4]int // port flows P A B T
	sigU       int
	loss       [edges]int
	around     int

	told   column // commands
	full   [edges]throat
	mid    throat
	branch [4]branch // of the step
	dir    float64
	wanted float64
	flow   float64 // about what passes
	u      float64 // commanded opening
	now    bool    // throttling is found in this step
	was    float64
}

type branch struct {
	a, b slot
	t    throat
	edge int // −1: centre P to T
	on   bool
}

// newValve makes the edges of a valve; around names the loss of what passes beside them.
func newValve(k *compiler, b *Block, around string) valveModel {
	m := valveModel{id: b.ID, P: k.node(b, "P"), A: k.node(b, "A"), B: k.node(b, "B"), T: k.node(b, "T"), ls: noSlot, axis: -1, vel: noSlot, open: noSlot,
		regen: KindNamed(b.Kind).WordOf(b, "extend") == "regenerative", centre: KindNamed(b.Kind).WordOf(b, "centre"), qN: k.param(b, "nominal_flow"), dN: k.param(b, "nominal_drop"), qC: k.param(b, "flow_centre"),
		per:  [edges]int{k.param(b, "flow_PA"), k.param(b, "flow_PB"), k.param(b, "flow_AT"), k.param(b, "flow_BT")},
		sig:  [4]int{k.port(b, "P"), k.port(b, "A"), k.port(b, "B"), k.port(b, "T")},
		sigU: k.signal(b, "u", "opening", units.Ratio), around: k.channel(Loss, b, around)}
	for i, name := range []string{"metering P-A", "metering P-B", "metering A-T", "metering B-T"} {
		m.loss[i] = k.channel(Loss, b, name)
	}
	if k.joined(b, "LS") {
		m.ls = k.node(b, "LS")
		k.port(b, "LS")
	}
	m.passes = 2
	if m.centre == "open" {
		m.passes = 4
	}
	for i := range m.passes {
		m.q[i] = k.unknown(passRow, b.ID)
	}
	axis := follows(b)
	if d := b.Word("directs"); d != "" {
		axis, m.directs = d, true
	}
	if axis != "" {
		m.axis = k.axisOf[axis]
		mv := k.movers[m.axis]
		m.vel, m.given = mv.speed, mv.given
		m.polarity = k.polarityOf(PortRef{b.ID, "A"}, m.axis)
		m.tracks = !m.directs && m.given == duty.MotionLoad
	}
	if m.tracks {
		m.open = k.unknown(otherRow, b.ID+" opening")
	}
	m.out = k.meterOut(b)
	return m
}

func (m *valveModel) clone() model { c := *m; return &c }

func (m *valveModel) bind(b *binding) {
	qN, dp := b.p[m.qN], b.p[m.dN]/b.scales.p
	for i := range m.full {
		m.full[i] = throatOf(b.get(m.per[i], qN)/b.scales.q, dp)
	}
	m.mid = throatOf(b.get(m.qC, qN)/b.scales.q, dp)
	if m.open >= 0 {
		b.bound.Lo[m.open], b.bound.Hi[m.open] = leastOpening, 1
	}
	m.told = b.commanded(m.id, duty.Command)
	m.out.bind(b)
	m.was = math.NaN()
}

// begin opens the edges that the direction asks for.
func (m *valveModel) begin(s *step) {
	was := m.now
	m.position(s)
	if m.dir == m.was && m.now == was { // all stands as it is
		return
	}
	s.changes()
	m.branch = [4]branch{}
	pick := func(i int, a, b slot, t throat, edge int) { m.branch[i] = branch{a, b, t, edge, true} }
	switch {
	case m.dir > 0:
		pick(0, m.P, m.A, m.full[edgePA], edgePA)
		if m.regen {
			pick(1, m.P, m.B, m.full[edgePB], edgePB)
		} else {
			pick(1, m.B, m.T, m.full[edgeBT], edgeBT)
		}
	case m.dir < 0:
		pick(0, m.P, m.B, m.full[edgePB], edgePB)
		pick(1, m.A, m.T, m.full[edgeAT], edgeAT)
	case m.centre == "tandem":
		pick(0, m.P, m.T, m.mid, -1)
	case m.centre == "float":
		pick(0, m.A, m.T, m.mid, edgeAT)
		pick(1, m.B, m.T, m.mid, edgeBT)
	case m.centre == "open":
		pick(0, m.P, m.A, m.mid, edgePA)
		pick(1, m.P, m.B, m.mid, edgePB)
		pick(2, m.A, m.T, m.mid, edgeAT)
		pick(3, m.B, m.T, m.mid, edgeBT)
	}
	for i, q := range m.q[:m.passes] {
		if m.branch[i].on {
			s.bounds(q, math.Inf(-1), math.Inf(1))
		} else {
			s.set(q, 0)
		}
	}
	if m.open >= 0 {
		if m.now {
			s.bounds(m.open, leastOpening, 1)
		} else {
			s.set(m.open, 0)
		}
	}
	m.out.begin(s, m.dir != 0)
	if m.dir != m.was { // another position: start its edges anew
		m.start(s.x)
		m.was = m.dir
	}
}

// position finds direction and opening from the demand or the command.
func (m *valveModel) position(s *step) {
	m.dir, m.u, m.now = 0, 1, false
	if m.axis < 0 {
		if v := m.told.at(s, 0); math.Abs(v) >= duty.StandstillShare {
			m.dir, m.u = machines.Sign(v), math.Abs(v)
		}
		return
	}
	a := &s.axes[m.axis]
	if a.standing {
		return
	}
	want := a.demand
	if m.given != duty.MotionLoad {
		want = a.command
		if !m.directs {
			m.u = max(math.Abs(want), duty.StandstillShare)
		}
	}
	m.dir = machines.Sign(want) * m.polarity.fixed()
	m.now, m.wanted, m.flow = m.tracks, a.scaledDemand, a.flow
}

// start gives the flows and the throttling of a new position a first value.
func (m *valveModel) start(x []float64) {
	for i, q := range m.q[:m.passes] {
		if m.branch[i].on {
			x[q] = min(0.05, math.Abs(m.wanted)+1e-3)
			if m.now {
				x[q] = m.flow
			}
		}
	}
	if m.now {
		x[m.open] = 0.3
	}
	if m.out.open >= 0 && m.dir != 0 {
		x[m.out.open] = 0.3
	}
}

func (m *valveModel) cold(s *step, level int, x []float64) {
	m.start(x)
	if m.now {
		x[m.open] = coldStartOf(level).opening
	}
}

// opening is how far the edges are open off the centre, 0..1.
func (m *valveModel) opening(e *eval) float64 {
	if m.now {
		return e.val(m.open)
	}
	return m.u
}

func (m *valveModel) eval(e *eval) {
	u := m.opening(e)
	for i := range m.passes {
		br, q := &m.branch[i], m.q[i]
		switch {
		case !br.on:
			e.add(q, e.val(q))
			e.same(q, q, 1)
		case m.dir == 0:
			e.throttle(br.a, br.b, q, &br.t, 0, math.Inf(-1))
		case i == 1 && m.out.open >= 0:
			m.evalEdge(e, br, q, e.val(m.out.open), m.out.open)
		case m.now:
			m.evalEdge(e, br, q, u, m.open)
		default:
			m.evalEdge(e, br, q, u, noSlot)
		}
	}
	if m.open >= 0 {
		if m.now { // more opening, more speed
			sg := machines.Sign(m.wanted)
			e.add(m.open, sg*(e.val(m.vel)-m.wanted))
			e.d(m.open, m.vel, sg)
		} else {
			e.add(m.open, e.val(m.open))
			e.same(m.open, m.open, 1)
		}
	}
	m.out.eval(e, m.loadPort(), m.dir != 0)
	if m.ls >= 0 {
		load := m.loadPort()
		e.add(m.ls, e.val(m.ls))
		e.same(m.ls, m.ls, 1)
		if load != noSlot {
			e.add(m.ls, -e.val(load))
			e.same(m.ls, load, -1)
		}
	}
}

// evalEdge adds an edge with an opening u, which is the unknown of if there is one. Off the
// centre its row is a flow, q = u·√…, so that closing the valve is no singular case.
func (m *valveModel) evalEdge(e *eval, br *branch, q slot, u float64, of slot) {
	v := e.branch(br.a, br.b, q)
	dp := e.val(br.a) - e.val(br.b)
	full, slope := br.t.flow(dp)
	e.add(q, v-u*full)
	if e.plain() {
		return
	}
	slope = u * br.t.chord(dp, full, v/u, slope)
	e.same(q, q, 1)
	e.d(q, br.a, -slope)
	e.d(q, br.b, slope)
	e.d(q, of, -full)
}

// loadPort is the port that is fed.
func (m *valveModel) loadPort() slot {
	switch {
	case m.dir > 0:
		return m.A
	case m.dir < 0:
		return m.B
	}
	return noSlot
}

func (m *valveModel) book(k *booking) {
	var q [4]float64 // into P A B T
	for i := range m.passes {
		br := &m.branch[i]
		if !br.on {
			continue
		}
		v := k.m3s(k.val(m.q[i]))
		channel := m.around
		switch br.edge {
		case edgePA:
			q[0], q[1] = q[0]+v, q[1]-v
		case edgePB:
			q[0], q[2] = q[0]+v, q[2]-v
		case edgeAT:
			q[1], q[3] = q[1]+v, q[3]-v
		case edgeBT:
			q[2], q[3] = q[2]+v, q[3]-v
		default:
			q[0], q[3] = q[0]+v, q[3]-v
		}
		if br.edge >= 0 {
			channel = m.loss[br.edge]
		}
		k.pow[channel] += v * (k.pa(br.a) - k.pa(br.b))
	}
	for i, s := range m.sig {
		k.put(s, q[i])
	}
	u := 0.0
	if m.dir != 0 {
		u = m.dir * m.opening(&k.eval)
	}
	k.put(m.sigU, u)
	m.out.book(k)
}
