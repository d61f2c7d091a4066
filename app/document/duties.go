package document

import (
	"fmt"

	"barlitre/audit"
)

// AddDuty adds a duty that lasts as long as said, "10 s".
func (d *Document) AddDuty(name, length string) error {
	return d.Edit("Add duty "+name, func(f *audit.File) error { return f.AddDuty(name, length) })
}

// RenameDuty gives a duty another name.
func (d *Document) RenameDuty(old, name string) error {
	return d.Edit("Rename duty "+old, func(f *audit.File) error { return f.RenameDuty(old, name) })
}

// CopyDuty adds a duty that begins as a copy of another.
func (d *Document) CopyDuty(from, name string) error {
	return d.Edit("Duplicate duty "+from, func(f *audit.File) error { return f.CopyDuty(from, name) })
}

// RemoveDuty takes a duty out.
func (d *Document) RemoveDuty(name string) error {
	return d.Edit("Remove duty "+name, func(f *audit.File) error { return f.RemoveDuty(name) })
}

// SetDuty sets hours, repeats, step, instants or note of a duty.
func (d *Document) SetDuty(name, key, value string) error {
	return d.Edit("Change "+key+" of "+name, func(f *audit.File) error { return f.SetDuty(name, key, value) })
}

// SetPhase names a stretch of a duty; "" for its beginning takes it out.
func (d *Document) SetPhase(duty, phase, from string) error {
	return d.Edit("Change phase "+phase, func(f *audit.File) error { return f.SetPhase(duty, phase, from) })
}

// SetStandstill sets the speed up to which an axis stands; "" takes it out.
func (d *Document) SetStandstill(duty, axis, speed string) error {
	return d.Edit("Change standstill of "+axis, func(f *audit.File) error { return f.SetStandstill(duty, axis, speed) })
}

// AddTrack adds a column of zeros to the table of a duty.
func (d *Document) AddTrack(duty, track, unit string) error {
	return d.Edit("Add "+track, func(f *audit.File) error { return f.AddTrack(duty, track, unit) })
}

// RemoveTrack takes a column out of the table of a duty.
func (d *Document) RemoveTrack(duty, track string) error {
	return d.Edit("Remove "+track, func(f *audit.File) error { return f.RemoveTrack(duty, track) })
}

// AddRow puts a row into the table of a duty, as audit.File.AddRow does.
func (d *Document) AddRow(duty string, row int, values map[string]string) error {
	return d.Edit(fmt.Sprintf("Add row %d of %s", row+1, duty), func(f *audit.File) error { return f.AddRow(duty, row, values) })
}

// RemoveRow takes a row out of the table of a duty.
func (d *Document) RemoveRow(duty string, row int) error {
	return d.Edit(fmt.Sprintf("Remove row %d of %s", row+1, duty), func(f *audit.File) error { return f.RemoveRow(duty, row) })
}

// SetTable writes the whole table of a duty, as audit.File.SetTable does.
func (d *Document) SetTable(duty string, heads []string, columns [][]string) error {
	return d.Edit("Change table of "+duty, func(f *audit.File) error { return f.SetTable(duty, heads, columns) })
}

// AddStagedDuty adds a duty that is computed from phases, as audit.File.AddStagedDuty does.
func (d *Document) AddStagedDuty(name string, phases [][]string) error {
	return d.Edit("Add duty "+name, func(f *audit.File) error { return f.AddStagedDuty(name, phases) })
}

// SetStage changes what a phase of a duty says; "" takes it out.
func (d *Document) SetStage(duty string, phase int, key, value string) error {
	return d.Edit(fmt.Sprintf("Change %s of %s, phase %d", key, duty, phase+1), func(f *audit.File) error {
		return f.SetStage(duty, phase, key, value)
	})
}

// AddStage puts a phase into a duty.
func (d *Document) AddStage(duty string, phase int, name string) error {
	return d.Edit("Add phase "+name, func(f *audit.File) error { return f.AddStage(duty, phase, name) })
}

// RemoveStage takes a phase out.
func (d *Document) RemoveStage(duty string, phase int) error {
	return d.Edit(fmt.Sprintf("Remove phase %d of %s", phase+1, duty), func(f *audit.File) error { return f.RemoveStage(duty, phase) })
}

// StagesToPoints turns the phases of a duty into points.
func (d *Document) StagesToPoints(duty string) error {
	return d.Edit("Turn phases of "+duty+" into points", func(f *audit.File) error { return f.StagesToPoints(duty) })
}

// EditYear changes the calendar, as the edits of audit.File do; what names the step of undo.
func (d *Document) EditYear(what string, edit func(*audit.File) error) error {
	return d.Edit("Change "+what+" of the year", edit)
}

// CloseStrokes scales the way back of an axis until it ends where it began.
func (d *Document) CloseStrokes(duty, axis string) error {
	return d.Edit("Close strokes of "+axis, func(f *audit.File) error { return f.CloseStrokes(duty, axis) })
}
