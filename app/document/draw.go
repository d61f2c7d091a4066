package document

import (
	"fmt"
	"strings"

	"barlitre/audit"
	"barlitre/circuit"
)

// AddBlock draws a block of a kind, as audit.File.AddBlock does, and returns its id.
func (d *Document) AddBlock(circuitName, kind string, at [2]float64) (id string, err error) {
	title := kind
	if k := circuit.KindNamed(kind); k != nil {
		title = strings.ToLower(k.Title)
	}
	err = d.Edit("Add "+title+" "+d.File().FreeID(circuitName, kind), func(f *audit.File) (err error) {
		id, err = f.AddBlock(circuitName, kind, at, "")
		return err
	})
	return id, err
}

// Connect joins two ports, as audit.File.Connect does.
func (d *Document) Connect(circuitName, portA, portB string) error {
	return d.Edit("Connect "+portA+" and "+portB, func(f *audit.File) error { return f.Connect(circuitName, portA, portB) })
}

// ConnectLine leads a port to a line, by its place in Circuit.Lines.
func (d *Document) ConnectLine(circuitName, port string, line int) error {
	return d.Edit("Connect "+port, func(f *audit.File) error { return f.ConnectLine(circuitName, port, line) })
}

// JoinLines makes two lines one.
func (d *Document) JoinLines(circuitName string, first, second int) error {
	return d.Edit("Join two lines", func(f *audit.File) error { return f.JoinLines(circuitName, first, second) })
}

// AddJunction puts a junction on a line and returns its id.
func (d *Document) AddJunction(circuitName string, line int, at [2]float64) (id string, err error) {
	err = d.Edit("Add junction", func(f *audit.File) (err error) {
		id, err = f.AddJunction(circuitName, line, at)
		return err
	})
	return id, err
}

// Disconnect takes a port off its line.
func (d *Document) Disconnect(circuitName, port string) error {
	return d.Edit("Disconnect "+port, func(f *audit.File) error { return f.Disconnect(circuitName, port) })
}

// DisconnectFrom takes a port off one of its lines.
func (d *Document) DisconnectFrom(circuitName, port string, line int) error {
	return d.Edit("Disconnect "+port, func(f *audit.File) error { return f.DisconnectFrom(circuitName, port, line) })
}

// DeleteLine takes a line away; its blocks stay.
func (d *Document) DeleteLine(circuitName string, line int) error {
	return d.Edit("Delete line", func(f *audit.File) error { return f.DeleteLine(circuitName, line) })
}

// Delete takes blocks off a sheet, as audit.File.Delete does.
func (d *Document) Delete(circuitName string, heal bool, ids ...string) error {
	return d.Edit("Delete "+these(ids), func(f *audit.File) error { return f.Delete(circuitName, heal, ids...) })
}

// Rename gives a block another id.
func (d *Document) Rename(circuitName, old, id string) error {
	return d.Edit("Rename "+old, func(f *audit.File) error { return f.Rename(circuitName, old, id) })
}

// Paste puts copied blocks on a sheet, as audit.File.Paste does, and returns their new
// ids by the old ones.
func (d *Document) Paste(circuitName, text string, shift [2]float64) (ids map[string]string, err error) {
	err = d.Edit("Paste", func(f *audit.File) (err error) {
		ids, err = f.Paste(circuitName, text, shift)
		return err
	})
	return ids, err
}

// Duplicate copies blocks within a circuit.
func (d *Document) Duplicate(circuitName string, shift [2]float64, ids ...string) (copies map[string]string, err error) {
	err = d.Edit("Duplicate "+these(ids), func(f *audit.File) (err error) {
		copies, err = f.Duplicate(circuitName, shift, ids...)
		return err
	})
	return copies, err
}

// Rotate turns blocks clockwise by quarter turns.
func (d *Document) Rotate(circuitName string, quarters int, ids ...string) error {
	return d.Edit("Rotate "+these(ids), func(f *audit.File) error { return f.Rotate(circuitName, quarters, ids...) })
}

// Mirror flips blocks left to right.
func (d *Document) Mirror(circuitName string, ids ...string) error {
	return d.Edit("Mirror "+these(ids), func(f *audit.File) error { return f.Mirror(circuitName, ids...) })
}

// MoveBy shifts blocks, as with arrow keys; steps of the same blocks are undone together.
func (d *Document) MoveBy(circuitName string, by [2]float64, ids ...string) error {
	return d.EditMerging("move "+circuitName+"/"+strings.Join(ids, " "), "Move "+these(ids), func(f *audit.File) error {
		return f.MoveBy(circuitName, by, ids...)
	})
}

// these names blocks in the name of an edit.
func these(ids []string) string {
	if len(ids) == 1 {
		return ids[0]
	}
	return fmt.Sprintf("%d blocks", len(ids))
}
