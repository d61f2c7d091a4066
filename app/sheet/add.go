package sheet

import (
	"strings"

	"barlitre/audit"
	"barlitre/circuit"
)

// add puts a new block on the sheet, on the free place nearest to a point, and selects
// it. Where the sheet has no circuit yet, one begins with it.
func (e *editor) add(kind string, at [2]float64) {
	doc := e.s.ctx.Doc()
	if e.sheet != nil {
		at[0], at[1] = e.sheet.FreePlace(kind, at[0], at[1])
	}
	var id string
	var err error
	if e.circuit >= 0 {
		id, err = doc.AddBlock(e.name, kind, at)
	} else {
		id, err = e.begin(kind, at)
	}
	if err != nil {
		e.s.refused(err)
		return
	}
	first, zoom, x, y := e.circuit < 0, e.zoom, e.x, e.y
	e.take([]string{id})
	if first { // it stays at the pointer
		e.zoom, e.x, e.y = zoom, x, y
		e.redraw()
	}
	e.s.ctx.Say("Added " + id + ", " + circuit.InSentence(circuit.KindNamed(kind).Title) + ". Drag from a port to a port to connect; its values stand on the right; F2 renames it.")
}

// begin adds a circuit with a first block, as one step of undo.
func (e *editor) begin(kind string, at [2]float64) (id string, err error) {
	name, role := "As found", audit.AsFound
	if e.index == 1 {
		name, role = "Proposal", audit.Proposal
	}
	err = e.s.ctx.Doc().Edit("Add "+strings.ToLower(circuit.KindNamed(kind).Title), func(f *audit.File) (err error) {
		if err = f.AddCircuit(name, role); err != nil {
			return err
		}
		id, err = f.AddBlock(name, kind, at, "")
		return err
	})
	return id, err
}
