package document

import (
	"bytes"
	"fmt"
	"strings"

	"barlitre/audit"
)

// Edit changes the audit; it is the only way to. change works on a copy that is
// dropped when it returns an error, and the document is then as it was. A change
// that changes no text makes no revision. name is shown with undo: "Move RV1".
//
// change must use the methods of the File, and may read the document but not change it.
func (d *Document) Edit(name string, change func(f *audit.File) error) error {
	return d.EditMerging("", name, change)
}

// EditMerging is Edit for one of many small steps, as in dragging: steps of one key
// that follow each other within a second are undone together. What was saved between
// two of them stays a stop for undo.
func (d *Document) EditMerging(key, name string, change func(f *audit.File) error) error {
	d.editing.Lock()
	revision, ticket, err := d.edit(key, name, change)
	d.editing.Unlock()
	if revision != 0 {
		d.announce(Edited, revision, ticket)
	}
	return err
}

// edit returns revision 0 when nothing changed. editing is held.
func (d *Document) edit(key, name string, change func(f *audit.File) error) (revision, ticket int, err error) {
	now := d.snapshot()
	f := *now.file // edits of a File replace what it holds and change none of it in place
	if err := guarded(func() error { return change(&f) }); err != nil {
		return 0, 0, err
	}
	f.Path = now.Path
	text := f.Bytes()
	if bytes.Equal(text, now.text) {
		return 0, 0, nil
	}
	d.mu.Lock()
	defer d.mu.Unlock()
	if d.closed {
		return 0, 0, errClosed
	}
	d.past.add(key, name, d.opt.Now(), now.text, text)
	revision, ticket = d.install(&f, text)
	return revision, ticket, nil
}

// install makes a file the present revision and asks for it to be solved. mu is held.
func (d *Document) install(f *audit.File, text []byte) (revision, ticket int) {
	d.now.file, d.now.text, d.checked = f, text, nil
	d.now.revision++
	d.request()
	return d.now.revision, d.ticket
}

// announce tells of a revision, then lets it be solved and kept.
func (d *Document) announce(kind EventKind, revision, ticket int) {
	d.emit(Event{Kind: kind, Revision: revision})
	d.release(ticket)
	poke(d.touched)
}

// Set changes one value, as audit.File.Set does: "RV1.crack", "170 bar". It takes
// its name for undo from the catalog of blocks.
func (d *Document) Set(target, quantity string) error {
	return d.Edit(setName(d.File(), target), func(f *audit.File) error { return f.Set(target, quantity) })
}

// Put is Set for the fields of a screen, as audit.File.Put does: it adds a section that the file lacks.
func (d *Document) Put(target, quantity string) error {
	return d.Edit(setName(d.File(), target), func(f *audit.File) error { return f.Put(target, quantity) })
}

// Drop takes a value out, so that its default holds again, as audit.File.Drop does.
func (d *Document) Drop(target string) error {
	return d.Edit(strings.Replace(setName(d.File(), target), "Change", "Drop", 1), func(f *audit.File) error { return f.Drop(target) })
}

// Step is Set for one of many small steps of a value; see EditMerging.
func (d *Document) Step(target, quantity string) error {
	return d.EditMerging("set "+target, setName(d.File(), target), func(f *audit.File) error { return f.Set(target, quantity) })
}

// Place puts blocks and notes at places on a sheet, as audit.File.Place does. Steps of one
// key are undone together; see EditMerging.
func (d *Document) Place(key, name, circuit string, blocks map[string][2]float64, notes map[int][2]float64) error {
	return d.EditMerging(key, name, func(f *audit.File) error { return f.Place(circuit, blocks, notes) })
}

// SetPoint changes one value of a duty, as audit.File.SetPoint does.
func (d *Document) SetPoint(duty, track string, row int, quantity string) error {
	return d.Edit(fmt.Sprintf("Change %s of %s, row %d", track, duty, row+1), func(f *audit.File) error {
		return f.SetPoint(duty, track, row, quantity)
	})
}
