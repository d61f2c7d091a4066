package sheet

import (
	"fyne.io/fyne/v2/container"

	"barlitre/audit"
	"barlitre/circuit"
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
	var words []string
	for _, a := range circuit.AtRests {
		words = append(words, string(a))
	}
	rest := newSelectRow(p, "Pumps while every axis stands", "field.pump_at_rest", name+"/pump_at_rest",
		words, func(word string) string { return circuit.AtRest(word).Name() })
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
	p.rows = append(append(p.rows, note, rest), p.oilRows()...)
}
