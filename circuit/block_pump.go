package circuit

import (
	"math"

	"barlitre/circuit/duty"
	"barlitre/machines/units"
)

// pumpKind is a displacement pump, fixed or variable, in four quadrants.
var pumpKind = &Kind{
	Name: kindPump, Title: "Pump", Group: "pumps and motors",
	Text: "Displacement pump or pump-motor. `control` says what sets its displacement: fixed; pressure (holds the set pressure at P); load_sensing (holds the load pressure plus the margin at P); commanded (a track of the duty, or `setting`). With `follows` its displacement is whatever makes the axis move as the duty says.",
	Ports: []Port{
		{Name: "shaft", Type: Shaft, Text: "drive shaft"},
		{Name: "S", Type: Oil, Text: "suction"},
		{Name: "P", Type: Oil, Text: "outlet"},
		{Name: "D", Type: Oil, Optional: true, Text: "case drain; unconnected it goes to tank"},
		{Name: "LS", Type: Pilot, Optional: true, Text: "load pressure signal"},
	},
	Params: append(machineParams("0.5"),
		Param{Key: "control", Title: "Control", Type: Choice, Default: "fixed", Choices: []string{"fixed", "pressure", "load_sensing", "commanded"}, Text: "what sets the displacement"},
		Param{Key: "follows", Title: "Follows axis", Type: AxisRef, Text: "its displacement is found from the motion of this axis"},
		Param{Key: "both_directions", Title: "Over centre", Type: Choice, Default: "no", Choices: []string{"no", "yes"}, Text: "the setting may go below zero"},
		Param{Key: "setting", Title: "Setting", Symbol: "e", Dim: units.Ratio, Default: "1", Origin: Assumed, Source: "full displacement", Min: -1, Max: 1, Text: "of a commanded pump without a track"},
		Param{Key: "set_pressure", Title: "Set pressure", Symbol: "ps", Dim: units.Pressure, Above: true, Max: 1000e5, Text: "of a pressure-compensated pump"},
		Param{Key: "unloaded_pressure", Title: "Unloaded pressure", Symbol: "pu", Dim: units.Pressure, Max: 1000e5, Text: "set pressure while unloaded at rest"},
		Param{Key: "margin", Title: "Margin", Symbol: "Δpm", Dim: units.Pressure, Default: "20 bar", Origin: Assumed, Source: "load-sensing margin, common practice 14 to 25 bar", Above: true, Max: 200e5, Text: "of a load-sensing pump, above the load pressure"},
		Param{Key: "min_setting", Title: "Lowest setting", Symbol: "e1", Dim: units.Ratio, Default: "0", Origin: Assumed, Source: "strokes back to zero", Max: 1, Text: "stop of a pressure-compensated or load-sensing pump"},
	),
	Losses:    machineLosses,
	Equations: append(machineEquations, Equation{"pressure control: p = ps while e1 < e < 1; load sensing: p = pLS + Δpm while e1 < e < 1", "ideal regulator, complementarity of set point and stop"}),
	Rating:    "rating",
	Symbol: func(b *Block) string {
		switch {
		case b.Word("control") == "pressure":
			return "pump_var_pc"
		case b.Word("control") == "load_sensing":
			return "pump_var_ls"
		case b.Word("both_directions") == "yes":
			return "pump_var_2"
		case follows(b) != "" || b.Word("control") == "commanded":
			return "pump_var_1"
		}
		return "pump_fixed_1"
	},
	check: func(k *Kind, b *Block, bad func(Level, string, string, ...any)) {
		control := k.WordOf(b, "control")
		if follows(b) != "" && b.Word("control") != "" {
			bad(Stops, "control", "it follows an axis and has a control of its own; keep one of `follows` and `control`")
		}
		if _, ok := b.Values["set_pressure"]; control == "pressure" && !ok {
			bad(Stops, "set_pressure", "a pressure-compensated pump needs its set_pressure")
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
	unloaded int
	margin   int
	minSet   int
	hold     string
	k        *Compiled

	target, unloadedAt, eMin, eMax, given float64
	goal                                  float64 // of the step
	tracking                              bool
	dir                                   float64
	wanted                                float64
	vel                                   slot
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
	case "commanded":
		m.ctl = takesTrack
	}
	if f := follows(b); f != "" {
		m.ctl, m.axis = followsAxis, k.axisOf[f]
		m.vel = k.movers[m.axis].speed
		m.hold = k.movers[m.axis].hold
		m.polarity = k.polarityOf(PortRef{b.ID, "P"}, m.axis)
	}
	var e slot
	if found := m.ctl == holdsPressure || m.ctl == sensesLoad || (m.ctl == followsAxis && k.movers[m.axis].given == duty.MotionLoad); found {
		e = k.unknown(otherRow, b.ID+" setting")
	} else {
		e = k.fixed()
	}
	m.machine = k.machine(b, "P", "S", k.shaftAt(b), e)
	m.setting, m.set, m.unloaded = k.param(b, "setting"), k.param(b, "set_pressure"), k.param(b, "unloaded_pressure")
	m.margin, m.minSet = k.param(b, "margin"), k.param(b, "min_setting")
	m.eMin, m.eMax = 0, 1
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
	m.unloadedAt = b.get(m.unloaded, b.get(m.set, 0)) / b.scales.p
	if m.ctl == sensesLoad {
		m.target = b.p[m.margin] / b.scales.p
	}
	m.given = b.get(m.setting, 1)
	if m.ctl == holdsPressure || m.ctl == sensesLoad {
		m.eMin = b.get(m.minSet, 0)
	}
	if m.e >= 0 {
		b.bound.Weight[m.e] = 10
	}
}

func (m *pumpModel) begin(s *step) {
	m.tracking = false
	switch m.ctl {
	case heldConstant:
		s.set(m.e, 1)
	case takesTrack:
		v := m.given
		if tr := s.commands[m.id]; tr != nil {
			v = tr[s.k]
		}
		s.set(m.e, math.Max(m.eMin, v))
	case holdsPressure, sensesLoad:
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
		s.set(m.e, math.Max(m.eMin, m.dir*a.command))
	case a.standing && m.hold != "pump":
		s.set(m.e, 0)
	default:
		s.bounds(m.e, m.eMin, 1)
		m.tracking, m.wanted = true, a.scaledDemand
	}
}

func (m *pumpModel) eval(e *eval) {
	m.evalMachine(e)
	switch {
	case m.tracking:
		e.add(m.e, m.dir*(e.val(m.vel)-m.wanted))
		e.d(m.e, m.vel, m.dir)
	case m.ctl == holdsPressure:
		e.add(m.e, e.val(m.P)-m.goal)
		e.d(m.e, m.P, 1)
	case m.ctl == sensesLoad:
		load := e.val(m.ls)
		e.add(m.e, e.val(m.P)-math.Max(load, 0)-m.goal)
		e.d(m.e, m.P, 1)
		if load > 0 {
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
