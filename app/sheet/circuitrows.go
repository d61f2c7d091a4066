package sheet

import (
	"math"
	"strings"

	"fyne.io/fyne/v2/container"

	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// circuitRows makes the rows of a circuit: its note, what its pumps do at rest, and
// the oil that all circuits share.
func (p *panel) circuitRows(c *audit.CircuitEntry) {
	name, doc := c.Name, p.s.ctx.Doc()
	note := newFieldRow(p, "Note", "field.note", name+"/note", func(text string) error { return doc.Set(name+"/note", text) })
	note.value = func() (string, string, string, string) {
		if c := doc.File().Circuit(name); c != nil {
			return c.Note, "", "what this circuit is", ""
		}
		return "", "", "", ""
	}
	note.field.Scroll = container.ScrollHorizontalOnly
	note.stack(note.field)
	rest := newSelectRow(p, "Pumps while every axis stands", "field.pump_at_rest", name+"/pump_at_rest",
		[]string{string(circuit.Keep), string(circuit.Unload), string(circuit.Stop)})
	rest.value = func() (string, string) {
		c := doc.File().Circuit(name)
		if c == nil {
			return "", ""
		}
		return string(c.PumpAtRest), map[circuit.AtRest]string{
			circuit.Keep:   "they keep turning, settings stay",
			circuit.Unload: "they keep turning, vented relief valves unload them",
			circuit.Stop:   "they are switched off",
		}[c.PumpAtRest]
	}
	p.rows = append(p.rows, note, rest, p.oilGrade(), p.oilTemperature())
}

func (p *panel) oilGrade() *fieldRow {
	doc := p.s.ctx.Doc()
	r := newFieldRow(p, "Oil", "field.oil.grade", "oil.grade", func(text string) error { return doc.Set("oil.grade", text) })
	r.value = func() (string, string, string, string) {
		return doc.File().Oil.Grade, "both circuits have the same oil", "given by its viscosity", ""
	}
	r.stack(r.field)
	return r
}

func (p *panel) oilTemperature() *fieldRow {
	doc := p.s.ctx.Doc()
	unit := func() units.Unit {
		if o := doc.File().Oil; o.HasTemperature {
			return o.Temperature.Unit
		}
		return units.Preferred(units.Temperature, p.s.ctx.System())
	}
	number := func(si float64) string {
		if math.IsNaN(si) {
			return ""
		}
		return p.s.ctx.Local(strings.TrimSuffix(units.FileText(si, unit()), " "+unit().Symbol))
	}
	r := newFieldRow(p, "Oil temperature", "field.oil.temperature", "oil.temperature", func(text string) error {
		if text == "" {
			return errEmpty
		}
		si, u, err := units.ParseLoose(text, units.Temperature, unit())
		if err != nil {
			return err
		}
		return doc.Set("oil.temperature", units.FileText(si, u))
	})
	r.value = func() (string, string, string, string) {
		o, hint := doc.File().Oil, ""
		if !o.HasTemperature {
			return "", "not given", "", unit().Label()
		}
		low, high := number(o.Temperature.Low), number(o.Temperature.High)
		hint = strings.TrimSpace(join("low ", low) + join(" high ", high))
		return number(o.Temperature.SI), strings.TrimPrefix(hint+join(" · ", o.Temperature.Note), " · "), "", unit().Label()
	}
	r.stack(r.field)
	return r
}
