package circuit

import (
	"barlitre/circuit/duty"
	"barlitre/machines/units"
)

// pumpKind is a displacement pump, fixed or variable, in four quadrants.
var pumpKind = &Kind{
	Name: kindPump, Title: "Pump", Group: "pumps and motors",
	Passes: PumpShaft, Letter: "P", Typical: []Setting{{"displacement", "45 cm3/rev"}},
	Text: "Displacement pump or pump-motor. `control` says what sets its displacement: fixed; pressure (holds the set pressure at P); load_sensing (holds the load pressure plus the margin at P); negative_flow (strokes back as the pilot pressure at LS rises: lead there the line before an orifice in the return of an open centre); pq (delivers the set flow until the set pressure is reached, then holds that; both may be tracks of the duty); power (full displacement, as far as its power limit lets it); commanded (a track of the duty, or `setting`). With a `power_limit` a torque limiter cuts back whatever its control wants. With `follows` its displacement is whatever makes the axis move as the duty says.",
	Ports: []Port{
		{Name: "shaft", Type: Shaft, Text: "drive shaft"},
		{Name: "S", Type: Oil, Text: "suction"},
		{Name: "P", Type: Oil, Text: "outlet"},
		{Name: "D", Type: Oil, Optional: true, Text: "case drain; unconnected it goes to tank"},
		{Name: "LS", Type: Pilot, Optional: true, Text: "load pressure signal; with control negative flow its pilot pressure"},
	},
	Params: append(machineParams("0.5"), Governing.of([]Param{
		{Key: "control", Title: "Control", Type: Choice, Default: "fixed", Choices: []string{"fixed", "pressure", "load_sensing", "negative_flow", "pq", "power", "commanded"},
			Called: map[string]string{"fixed": "fixed displacement", "pressure": "constant pressure", "pq": "p/Q control", "power": "constant power"}, Text: "what sets the displacement"},
		{Key: "follows", Title: "Follows axis", Type: AxisRef, Text: "its displacement is found from the motion of this axis"},
		{Key: "both_directions", Title: "Over centre", Type: Choice, Default: "no", Choices: []string{"no", "yes"}, Text: "the setting may go below zero"},
		{Key: "setting", Title: "Setting", Symbol: "e", Dim: units.Ratio, Default: "1", Origin: Assumed, Source: "full displacement", Min: -1, Max: 1, Text: "of a commanded pump without a track"},
		{Key: "set_pressure", Title: "Set pressure", Symbol: "ps", Dim: units.Pressure, Above: true, Max: 1000e5, Text: "of a pressure-compensated pump, or of a pump with p/Q control without a track"},
		{Key: "set_flow", Title: "Set flow", Symbol: "qs", Dim: units.Flow, Max: 10, Text: "of a pump with p/Q control without a track: its displacement is this share of what it displaces at the reference speed"},
		{Key: "power_limit", Title: "Power limit", Symbol: "PL", Dim: units.Power, Above: true, Max: 5e6, Text: "shaft power at the reference speed at which its torque limiter begins to stroke it back"},
		{Key: "reference_speed", Title: "Reference speed", Symbol: "nL", Dim: units.AngularSpeed, Above: true, Max: 2000, Text: "for power limit and set flow; default: the speed of its motor or engine"},
		{Key: "unloaded_pressure", Title: "Unloaded pressure", Symbol: "pu", Dim: units.Pressure, Max: 1000e5, Text: "set pressure while unloaded at rest"},
		{Key: "margin", Title: "Margin", Symbol: "Δpm", Dim: units.Pressure, Default: "20 bar", Origin: Assumed, Source: "load-sensing margin, common practice 14 to 25 bar", Above: true, Max: 200e5, Text: "of a load-sensing pump, above the load pressure"},
		{Key: "signal_start", Title: "Strokes back from", Symbol: "p1", Dim: units.Pressure, Default: "5 bar", Origin: Assumed, Source: "excavator pumps, common practice, no source", Max: 200e5, Text: "pilot pressure up to which a pump of negative flow stays at full setting"},
		{Key: "signal_end", Title: "Stroked back at", Symbol: "p2", Dim: units.Pressure, Default: "30 bar", Origin: Assumed, Source: "excavator pumps, common practice, no source", Above: true, Max: 200e5, Text: "pilot pressure from which it stands at its lowest setting"},
		{Key: "min_setting", Title: "Lowest setting", Symbol: "e1", Dim: units.Ratio, Default: "0", Origin: Assumed, Source: "strokes back to zero", Max: 1, Text: "stop of a pump whose displacement a pressure sets"},
	}...)...),
	Losses: machineLosses,
	Equations: append(machineEquations, Equation{"pressure control: p = ps while e1 < e < 1; load sensing: p = pLS + Δpm while e1 < e < 1", "ideal regulator, complementarity of set point and stop"},
		Equation{"pq: e = qs/(D·nL) while p < ps, then p = ps", "ideal regulator; the set flow is a displacement, slip is not made up for"},
		Equation{"power limit: e is cut back so that e·D·Δp + friction <= PL/nL", "torque limiter: an ideal hyperbola, complementarity with the control"},
		Equation{"negative flow: e = clip(1 − (1 − e1)·(pLS − p1)/(p2 − p1), e1, 1)", "linear regulator, no hysteresis; common practice, no source"}),
	Rating: "rating",
	Symbol: func(b *Block) string {
		switch {
		case b.Word("control") == "pressure":
			return "pump_var_pc"
		case b.Word("control") == "load_sensing":
			return "pump_var_ls"
		case b.Word("control") == "negative_flow":
			return "pump_var_nf"
		case b.Word("control") == "pq":
			return "pump_var_pq"
		case b.Word("control") == "power":
			return "pump_var_power"
		case b.Word("both_directions") == "yes":
			return "pump_var_2"
		case follows(b) != "" || b.Word("control") == "commanded":
			return "pump_var_1"
		}
		return "pump_fixed_1"
	},
	derive: deriveMachine,
	check: func(k *Kind, b *Block, bad func(Level, string, string, ...any)) {
		checkMachine(k, b, bad)
		control := k.WordOf(b, "control")
		if follows(b) != "" && b.Word("control") != "" {
			bad(Stops, "control", "it follows an axis and has a control of its own; keep one of the two (follows, control)")
		}
		if _, ok := b.Values["set_pressure"]; control == "pressure" && !ok {
			bad(Stops, "set_pressure", "a pressure-compensated pump needs its set pressure (set_pressure)")
		}
		_, limited := b.Values["power_limit"]
		switch {
		case limited && control == "fixed" && follows(b) == "":
			bad(Stops, "power_limit", "a fixed pump has no displacement to cut back; let its control be constant power (control: power), or drop the limit")
		case !limited && control == "power":
			bad(Stops, "power_limit", "a pump of constant power (control: power) needs its power limit (power_limit)")
		}
		p1, _, _ := k.Value(b, "signal_start")
		p2, _, _ := k.Value(b, "signal_end")
		if control == "negative_flow" && p2.SI <= p1.SI {
			bad(Stops, "signal_end", "it is stroked back (signal_end) at no more pressure than where its stroke begins to fall (signal_start); a pump strokes back as its pilot pressure rises")
		}
	},
	build: buildPump,
}

// control of a displacement or of a speed, as the balance sees it.
type controlKind int

const (
	heldConstant controlKind = iota
	holdsPressure
	sensesLoad
	sensesFlow
	holdsPressureFlow
	limitsPower
	followsAxis
	takesTrack
)

type pumpModel struct {
	machine
	ctl      controlKind
	id       string
	axis     int
	polarity polarity
	ls       slot
	setting  int
	set      int
	setFlow  int
	limit    int
	refSpeed int
	through  []gearStep // between the prime mover whose speed that is and the pump
	unloaded int
	margin   int
	minSet   int
	start    int
	end      int
	hold     string
	k        *Compiled

	told, toldP, toldQ              column // commands, set pressure [Pa] and set flow [m³/s]
	target, unloadedAt, eMin, given float64
	flowSet                         float64 // m³/s
	from, fall                      float64 // of negative_flow: pilot pressure and fall of the setting beyond it
	atRest                          bool    // it has an unloaded pressure
	most                            float64 // scaled torque at the power limit
	full                            float64 // m³/s at the reference speed
	goal                            float64 // of the step
	way                             float64 // in which its setting grows, 1 or −1
	tracking                        bool
	dir                             float64
	wanted                          float64
	vel                             slot
}

func buildPump(k *compiler, b *Block) model {
	kind := KindNamed(b.Kind)
	m := &pumpModel{id: b.ID, axis: -1, ls: noSlot, k: k.Compiled, vel: noSlot}
	switch kind.WordOf(b, "control") {
	case "pressure":
		m.ctl = holdsPressure
	case "load_sensing":
		m.ctl = sensesLoad
		m.ls = k.node(b, "LS")
	case "negative_flow":
		m.ctl = sensesFlow
		m.ls = k.node(b, "LS")
	case "pq":
		m.ctl = holdsPressureFlow
	case "power":
		m.ctl = limitsPower
	case "commanded":
		m.ctl = takesTrack
	}
	m.limit = k.param(b, "power_limit")
	m.refSpeed, m.through = k.referenceSpeed(b)
	if f := follows(b); f != "" {
		m.ctl, m.axis = followsAxis, k.axisOf[f]
		m.vel = k.movers[m.axis].speed
		m.hold = k.movers[m.axis].hold
		m.polarity = k.polarityOf(PortRef{b.ID, "P"}, m.axis)
	}
	var e slot
	if found := m.regulated() || m.limit >= 0 || (m.ctl == followsAxis && k.movers[m.axis].given == duty.MotionLoad); found {
		e = k.unknown(otherRow, b.ID+" setting")
	} else {
		e = k.fixed()
	}
	m.machine = k.machine(b, "P", "S", k.shaftAt(b), e)
	m.setting, m.set, m.unloaded = k.param(b, "setting"), k.param(b, "set_pressure"), k.param(b, "unloaded_pressure")
	m.setFlow = k.param(b, "set_flow")
	m.margin, m.minSet = k.param(b, "margin"), k.param(b, "min_setting")
	m.start, m.end = k.param(b, "signal_start"), k.param(b, "signal_end")
	m.eMin = 0
	if kind.WordOf(b, "both_directions") == "yes" {
		m.eMin = -1
	}
	if k.joined(b, "LS") {
		k.port(b, "LS")
	}
	return m
}

func (m *pumpModel) clone() model { c := *m; return &c }

func (m *pumpModel) bind(b *binding) {
	m.bindMachine(b, m.k.shafts)
	m.target = b.get(m.set, 0) / b.scales.p
	m.unloadedAt, m.atRest = b.get(m.unloaded, b.get(m.set, 0))/b.scales.p, m.unloaded >= 0
	ref := b.get(m.refSpeed, 1) / slower(m.through, b.p)
	m.full = m.law.D * ref
	m.most = b.get(m.limit, 0) / ref / m.tPer
	if m.ctl == sensesLoad {
		m.target = b.p[m.margin] / b.scales.p
	}
	m.told, m.toldP, m.toldQ = b.commanded(m.id, duty.Command), b.commanded(m.id, duty.SetPressure), b.commanded(m.id, duty.SetFlow)
	m.given, m.flowSet = b.get(m.setting, 1), b.get(m.setFlow, 0)
	if m.regulated() {
		m.eMin = b.get(m.minSet, 0)
	}
	if m.ctl == sensesFlow {
		m.from = b.p[m.start] / b.scales.p
		m.fall = (1 - m.eMin) * b.scales.p / (b.p[m.end] - b.p[m.start])
	}
	if m.e >= 0 {
		b.bound.Weight[m.e] = 10
	}
}

// regulated reports whether a pressure sets the displacement.
func (m *pumpModel) regulated() bool {
	return m.ctl == holdsPressure || m.ctl == sensesLoad || m.ctl == sensesFlow || m.ctl == holdsPressureFlow
}

func (m *pumpModel) begin(s *step) {
	m.tracking, m.way = false, 1
	switch m.ctl {
	case heldConstant, limitsPower:
		m.take(s, 1)
	case takesTrack:
		m.take(s, max(m.eMin, m.told.at(s, m.given)))
	case holdsPressureFlow:
		m.pressureFlow(s)
	case holdsPressure, sensesLoad, sensesFlow:
		s.bounds(m.e, m.eMin, 1)
		m.goal = m.target
		if m.ctl == holdsPressure && s.unloaded() {
			m.goal = m.unloadedAt
		}
	case followsAxis:
		m.follow(s)
	}
}

// follow prepares the setting of a pump that follows an axis.
func (m *pumpModel) follow(s *step) {
	a := &s.axes[m.axis]
	m.dir = m.polarity.sign(a)
	switch {
	case a.given != duty.MotionLoad:
		m.take(s, max(m.eMin, m.dir*a.command))
	case a.standing && m.hold != "pump":
		s.set(m.e, 0)
	default:
		s.bounds(m.e, m.eMin, 1)
		m.tracking, m.wanted = true, a.scaledDemand
		if m.dir*a.demand < 0 {
			m.way = -1
		}
	}
}

// take gives the pump a setting, which a power limit may cut back.
func (m *pumpModel) take(s *step, v float64) {
	if m.limit < 0 {
		s.set(m.e, v)
		return
	}
	if v < 0 {
		m.way = -1
	}
	s.bounds(m.e, min(0, v), max(0, v))
}

// pressureFlow takes set pressure and set flow, from tracks where the duty has them.
func (m *pumpModel) pressureFlow(s *step) {
	m.goal = m.target
	if m.toldP != nil {
		m.goal = m.toldP[s.k] / s.pScale
	}
	q := m.toldQ.at(s, m.flowSet)
	if s.unloaded() && m.atRest {
		m.goal = m.unloadedAt
	}
	s.bounds(m.e, m.eMin, max(m.eMin, min(1, q/m.full)))
}

func (m *pumpModel) eval(e *eval) {
	m.evalMachine(e)
	wants, holds := m.wants(e)
	if m.limit >= 0 {
		t := m.torque(e)
		turn := 1.0
		if e.val(m.speed) < 0 {
			turn = -1
		}
		// The smaller setting of the two: the row that is further above zero.
		if over := turn*t.need - m.most; !holds || over > m.way*wants {
			e.add(m.e, -m.way*m.most)
			m.addTorque(e, m.e, m.way*turn, t)
			return
		}
	}
	if holds {
		e.add(m.e, wants)
		m.slopes(e)
	}
}

// wants returns the row of the control: below zero while it asks for more setting.
// Without one the setting is given.
func (m *pumpModel) wants(e *eval) (row float64, holds bool) {
	switch {
	case m.tracking:
		return m.dir * (e.val(m.vel) - m.wanted), true
	case m.ctl == holdsPressure, m.ctl == holdsPressureFlow:
		return e.val(m.P) - m.goal, true
	case m.ctl == sensesLoad:
		return e.val(m.P) - max(e.val(m.ls), 0) - m.goal, true
	case m.ctl == sensesFlow:
		return e.val(m.e) - 1 + m.fall*(e.val(m.ls)-m.from), true
	}
	return 0, false
}

// slopes adds the derivatives of the row of the control.
func (m *pumpModel) slopes(e *eval) {
	switch {
	case m.tracking:
		e.d(m.e, m.vel, m.dir)
	case m.ctl == sensesFlow:
		e.d(m.e, m.e, 1)
		e.d(m.e, m.ls, m.fall)
	case m.ctl == holdsPressure, m.ctl == holdsPressureFlow:
		e.d(m.e, m.P, 1)
	case m.ctl == sensesLoad:
		e.d(m.e, m.P, 1)
		if e.val(m.ls) > 0 {
			e.d(m.e, m.ls, -1)
		}
	}
}

func (m *pumpModel) book(k *booking) { m.bookMachine(k) }

func (m *pumpModel) cold(s *step, level int, x []float64) {
	if m.e >= 0 {
		x[m.e] = coldStartOf(level).setting
		if m.eMin < 0 {
			x[m.e] = 0
		}
	}
}
