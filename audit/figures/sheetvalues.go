package figures

import (
	"math"
	"strings"

	"barlitre/circuit"
	"barlitre/circuit/drawing"
	"barlitre/machines/units"
)

// telling names the parameters that tell most of a kind of block, the first that a
// block has being shown; several in one entry are shown together, put into words by
// the pattern, "%" standing for a value.
var telling = map[string][]struct {
	pattern string
	keys    []string
}{
	"pressure_source":  {{"%", []string{"pressure"}}},
	"electric_motor":   {{"%", []string{"rated_power"}}},
	"engine":           {{"%", []string{"rated_power"}}},
	"converter":        {{"%", []string{"rated_power"}}},
	"pump":             {{"% · %", []string{"displacement", "set_pressure"}}, {"% · %", []string{"displacement", "power_limit"}}, {"%", []string{"displacement"}}},
	"charge_pump":      {{"% · %", []string{"displacement", "charge"}}},
	"switched_machine": {{"% · %", []string{"displacement", "set_pressure"}}, {"%", []string{"displacement"}}},
	"motor":            {{"%", []string{"displacement"}}},
	"cylinder":         {{"%/% × %", []string{"bore", "rod", "stroke"}}, {"%/%", []string{"bore", "rod"}}},
	"valve":            {{"%", []string{"nominal_flow"}}},
	"relief":           {{"%", []string{"set"}}, {"%", []string{"crack"}}},
	"check":            {{"%", []string{"opens"}}},
	"pilot_check":      {{"1 : %", []string{"pilot_ratio"}}},
	"counterbalance":   {{"%", []string{"setting"}}},
	"compensator":      {{"%", []string{"drop"}}},
	"unloading_pilot":  {{"%", []string{"setting"}}},
	"orifice":          {{"ø %", []string{"diameter"}}, {"%", []string{"nominal_flow"}}},
	"line":             {{"% × %", []string{"diameter", "length"}}},
	"double_rod":       {{"%/% × %", []string{"bore", "rod", "stroke"}}, {"%/%", []string{"bore", "rod"}}},
	"plunger":          {{"ø %", []string{"diameter"}}},
	"accumulator":      {{"% · %", []string{"volume", "precharge"}}},
	"unloading":        {{"% / %", []string{"unloads", "loads"}}},
	"flywheel":         {{"%", []string{"inertia"}}},
	"reducing":         {{"%", []string{"set"}}},
	"sequence":         {{"%", []string{"set"}}},
	"flow_control":     {{"%", []string{"set_flow"}}},
	"flow_control_3":   {{"%", []string{"set_flow"}}},
	"throttle_check":   {{"%", []string{"nominal_flow"}}},
	"section_6_3":      {{"%", []string{"nominal_flow"}}},
	"flow_divider":     {{"%", []string{"displacement"}}},
	"gearbox":          {{"i = %", []string{"ratio"}}},
	"flushing":         {{"%", []string{"opens"}}},
	"cooler":           {{"%", []string{"nominal_flow"}}},
	"filter":           {{"%", []string{"nominal_flow"}}},
}

// value is the setting or size that tells most of a block, "" if it has none.
func (p *part) value(sys units.System) string {
	if p.kind == nil {
		return p.block.Kind
	}
	for _, t := range telling[p.block.Kind] {
		var parts []circuit.Value
		var dims []units.Dim
		for _, key := range t.keys {
			if v, _, ok := p.kind.Value(p.block, key); ok && finite(v.SI) {
				parts, dims = append(parts, v), append(dims, p.kind.Param(key).Dim)
			}
		}
		if len(parts) == len(t.keys) {
			return joinValues(t.pattern, parts, dims, sys)
		}
	}
	return ""
}

// joinValues fills a pattern. Of values in one unit side by side only the last
// carries it.
func joinValues(pattern string, values []circuit.Value, dims []units.Dim, sys units.System) string {
	out := pattern
	for i, v := range values {
		u := shownUnit(v, dims[i], sys)
		text := settingText(u.FromSI(v.SI))
		if i+1 == len(values) || shownUnit(values[i+1], dims[i+1], sys) != u {
			text += unitText(u)
		}
		out = strings.Replace(out, "%", text, 1)
	}
	return out
}

// settingText is a number as it is set or printed on a plate: no zeros at its end.
func settingText(x float64) string {
	text := units.Number(x, 4)
	if strings.Contains(text, ".") && !strings.Contains(text, "e") {
		text = strings.TrimRight(strings.TrimRight(text, "0"), ".")
	}
	return text
}

// unitText is the label of a unit with the gap before it.
func unitText(u units.Unit) string {
	if u.Label() == "" {
		return ""
	}
	return "\u202f" + u.Label()
}

// shownUnit is the unit a value was given in if that belongs to the reader's system,
// else the one that system prefers.
func shownUnit(v circuit.Value, d units.Dim, sys units.System) units.Unit {
	if v.Unit.Factor != 0 && (v.Unit.System == sys || sys == units.Metric && v.Unit.System == units.SI) {
		return v.Unit
	}
	return units.Preferred(d, sys)
}

// moves tells whether the block has an axis of the duty on it.
func (p *part) moves() bool {
	return (p.isCylinder() || p.block.Kind == "motor") && p.block.Word("axis") != ""
}

// isCylinder tells whether the block moves along a line.
func (p *part) isCylinder() bool {
	switch p.block.Kind {
	case "cylinder", "double_rod", "plunger":
		return true
	}
	return false
}

// isMachine tells whether the block is an actuator or a pump.
func (p *part) isMachine() bool {
	passes := p.block.Passes()
	return p.isCylinder() || passes == circuit.PumpShaft || passes == circuit.HydraulicMotor
}

// varies tells whether a pump or electric motor is set by a control, so that its
// setting or speed is worth showing.
func (p *part) varies() bool {
	control := p.block.Word("control")
	switch p.block.Kind {
	case "pump", "switched_machine", "motor":
		return p.block.Word("follows") != "" || control != "" && control != "fixed"
	case "electric_motor":
		return p.block.Word("follows") != "" || control == "commanded"
	}
	return false
}

// atRest is below what any quantity of a block is worth a number: a micrometre a second,
// a microradian a second, a millionth of a setting [SI].
const atRest = 1e-6

// live is what a block does at the instant shown, "" for a block that only stands
// there. With a nil state it is a text as wide as any.
func (p *part) live(st *SheetState, sys units.System) string {
	show := func(signal string, d units.Dim, typical float64) (string, bool) {
		v, ok := st.Signal(p.id + "." + signal)
		if st == nil {
			v, ok = typical, true
		}
		if math.Abs(v) < atRest {
			v = 0
		}
		u, digits := units.Preferred(d, sys), 3
		if d == units.Ratio {
			u, digits = units.Percent, 2
			if math.Abs(v) >= 0.995 {
				digits = 3
			}
		}
		return units.Format(v, u, digits), ok
	}
	switch {
	case p.block.Kind == "valve", p.block.Kind == "section_6_3":
		text, ok := show("u", units.Ratio, -0.888)
		return given("open "+strings.TrimPrefix(text, "−"), ok)
	case p.isCylinder():
		v, ok := show("v", units.Velocity, -0.888)
		f, ok2 := show("F", units.Force, -888e3)
		return given(v+" · "+f, ok && ok2)
	case p.moves():
		w, ok := show("w", units.AngularSpeed, -1888*units.RPM)
		f, ok2 := show("load", units.Torque, -8888)
		return given(w+" · "+f, ok && ok2)
	case p.block.Kind == "electric_motor" && p.varies():
		w, ok := show("w", units.AngularSpeed, -1888*units.RPM)
		return given(w, ok)
	case p.varies():
		e, ok := show("e", units.Ratio, -0.888)
		return given("setting "+e, ok)
	}
	return ""
}

func given(text string, ok bool) string {
	if !ok {
		return ""
	}
	return text
}

// rodReach is the room that the rod of a cylinder and the arrow of its motion need.
func (p *part) rodReach() (drawing.Box, bool) {
	if p.base.Name != "cylinder" {
		return drawing.Box{}, false
	}
	s := drawing.Symbol{Prims: []drawing.Prim{{Kind: drawing.Line, Pts: []drawing.Pt{{X: 6.5, Y: -2.2}, {X: 17.2, Y: 1}}}}}
	return s.Placed(p.at, p.block.Turn, p.block.Mirror).Box(), true
}
