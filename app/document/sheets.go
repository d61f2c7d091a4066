package document

import (
	"barlitre/audit"
	"barlitre/circuit/duty"
	"fmt"
)

// AddCircuit adds an empty sheet.
func (d *Document) AddCircuit(name string, role audit.Role) error {
	return d.Edit("Add circuit "+name, func(f *audit.File) error { return f.AddCircuit(name, role) })
}

// CopyCircuit adds a proposal that begins as a copy of another circuit.
func (d *Document) CopyCircuit(from, name string) error {
	return d.Edit("Copy "+from+" to "+name, func(f *audit.File) error { return f.CopyCircuit(from, name) })
}

// DeleteCircuit takes a proposal out.
func (d *Document) DeleteCircuit(name string) error {
	return d.Edit("Delete circuit "+name, func(f *audit.File) error { return f.DeleteCircuit(name) })
}

// RenameCircuit gives a circuit another name.
func (d *Document) RenameCircuit(old, name string) error {
	return d.Edit("Rename circuit "+old, func(f *audit.File) error { return f.RenameCircuit(old, name) })
}

// SwapRoles changes the circuit as found and a proposal about.
func (d *Document) SwapRoles(first, second string) error {
	return d.Edit("Swap "+first+" and "+second, func(f *audit.File) error { return f.SwapRoles(first, second) })
}

// AddNote writes a note on a sheet and returns its place in Notes.
func (d *Document) AddNote(circuitName, text string, at [2]float64) (note int, err error) {
	err = d.Edit("Add note", func(f *audit.File) (err error) {
		note, err = f.AddNote(circuitName, text, at)
		return err
	})
	return note, err
}

// SetNote changes what a note says and where it stands.
func (d *Document) SetNote(circuitName string, note int, text string, at [2]float64) error {
	return d.Edit("Change note", func(f *audit.File) error { return f.SetNote(circuitName, note, text, at) })
}

// DeleteNote takes a note off a sheet.
func (d *Document) DeleteNote(circuitName string, note int) error {
	return d.Edit("Delete note", func(f *audit.File) error { return f.DeleteNote(circuitName, note) })
}

// AddGroup draws a box around blocks and returns its place in Groups.
func (d *Document) AddGroup(circuitName, label string, ids ...string) (group int, err error) {
	err = d.Edit("Group "+these(ids), func(f *audit.File) (err error) {
		group, err = f.AddGroup(circuitName, label, ids...)
		return err
	})
	return group, err
}

// SetGroup gives a box another label and other blocks.
func (d *Document) SetGroup(circuitName string, group int, label string, ids ...string) error {
	return d.Edit("Change group "+label, func(f *audit.File) error { return f.SetGroup(circuitName, group, label, ids...) })
}

// DeleteGroup takes a box away; its blocks stay.
func (d *Document) DeleteGroup(circuitName string, group int) error {
	return d.Edit("Delete group", func(f *audit.File) error { return f.DeleteGroup(circuitName, group) })
}

// Bend lays a line by hand, as audit.File.Bend does; without runs it is straightened.
// Steps that bend one line are undone together; see EditMerging.
func (d *Document) Bend(circuitName, line string, lines []int, runs [][2][2]float64) error {
	do := func(f *audit.File) error { return f.Bend(circuitName, lines, runs) }
	if len(runs) == 0 {
		return d.Edit("Straighten line "+line, do)
	}
	return d.EditMerging(fmt.Sprint("bend ", circuitName, lines), "Bend line "+line, do)
}

// AddAxis adds an axis.
func (d *Document) AddAxis(name string, kind duty.AxisKind) error {
	return d.Edit("Add axis "+name, func(f *audit.File) error { return f.AddAxis(name, kind) })
}

// GiveAxis makes a new axis and lets a block move it.
func (d *Document) GiveAxis(target, name string, kind duty.AxisKind) error {
	return d.Edit("Make axis "+name, func(f *audit.File) error { return f.GiveAxis(target, name, kind) })
}

// RenameAxis gives an axis another name wherever it is named.
func (d *Document) RenameAxis(old, name string) error {
	return d.Edit("Rename axis "+old, func(f *audit.File) error { return f.RenameAxis(old, name) })
}

// SetAxisKind makes an axis linear or rotary.
func (d *Document) SetAxisKind(name string, kind duty.AxisKind) error {
	return d.Edit("Change kind of axis "+name, func(f *audit.File) error { return f.SetAxisKind(name, kind) })
}

// SetAxisLoad says what stands at the load side of an axis.
func (d *Document) SetAxisLoad(name, load string) error {
	return d.Edit("Change load side of axis "+name, func(f *audit.File) error { return f.SetAxisLoad(name, load) })
}

// RemoveAxis takes an axis out that nothing names any more.
func (d *Document) RemoveAxis(name string) error {
	return d.Edit("Remove axis "+name, func(f *audit.File) error { return f.RemoveAxis(name) })
}

// Clear takes out a value, as audit.File.Clear does.
func (d *Document) Clear(target string) error {
	return d.Edit("Clear "+target, func(f *audit.File) error { return f.Clear(target) })
}

// PutOil gives the oil anew, as audit.File.PutOil does.
func (d *Document) PutOil(keys map[string]string) error {
	return d.Edit("Change oil", func(f *audit.File) error { return f.PutOil(keys) })
}
