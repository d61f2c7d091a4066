package duty

import (
	"fmt"
	"strings"

	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/machines/units"
)

// fillStandby shows what each circuit draws while the machine is off, where that is not what the
// calendar says of all.
func (y *year) fillStandby(all string) {
	list := y.s.ctx.Doc().File().Circuits
	if !y.hasFields(list) {
		y.perCircuit.Objects, y.standby = nil, map[string]*widgets.Field{}
		for i, c := range list {
			name := c.Name
			field := widgets.Name(widgets.NewField("", func(text string) error { return y.setStandby(name, text) }), fmt.Sprintf("duty.year.standby%d", i+1))
			y.standby[name] = field
			y.perCircuit.Add(widgets.FieldRow("While off, "+name, field))
		}
		y.perCircuit.Refresh()
	}
	hint := "nothing"
	if all != "" {
		hint = y.s.ctx.Local(all) + ", as above"
	}
	watt, _ := units.ParseUnit("W", units.Power)
	for _, c := range list {
		value, says := "", hint
		if c.HasStandby {
			value, says = y.s.ctx.Local(units.FileText(c.Standby, watt)), ""
		}
		y.standby[c.Name].SetValue(value, says)
	}
}

// hasFields reports whether there is a field for each circuit and for no other.
func (y *year) hasFields(list []audit.CircuitEntry) bool {
	for _, c := range list {
		if y.standby[c.Name] == nil {
			return false
		}
	}
	return len(list) == len(y.standby)
}

// setStandby takes what a circuit draws while off; nothing is what the calendar says.
func (y *year) setStandby(circuit, text string) error {
	text = withUnit(strings.ReplaceAll(strings.TrimSpace(text), ",", "."), "W")
	return y.s.panel.took(y.s.ctx.Doc().EditYear("standby of "+circuit, func(f *audit.File) error {
		if text == "" {
			return f.Drop(circuit + "/standby")
		}
		return f.Set(circuit+"/standby", text)
	}))
}
