package audit

import (
	"errors"
	"fmt"
	"slices"
	"strings"

	"barlitre/circuit"
)

// AddNote writes a note on the sheet of a circuit [modules] and returns its place in Notes.
func (f *File) AddNote(circuitName, text string, at [2]float64) (int, error) {
	e, err := f.drawn(circuitName)
	if err != nil {
		return 0, err
	}
	text = strings.TrimSpace(text)
	n := len(e.Notes)
	return n, f.sheetEdit(e, "note", func(d *draft, ci int) error {
		return d.add(d.circuit(ci), "notes", true, noteText(circuit.SheetNote{Text: text, At: at}))
	}, func(g *CircuitEntry) bool {
		return len(g.Notes) == n+1 && g.Notes[n] == circuit.SheetNote{Text: text, At: at}
	})
}

// SetNote changes what a note says and where it stands.
func (f *File) SetNote(circuitName string, note int, text string, at [2]float64) error {
	e, err := f.drawn(circuitName)
	if err != nil {
		return err
	}
	if note < 0 || note >= len(e.Notes) {
		return fmt.Errorf("there is no note %d in circuit %q; it has %d", note+1, e.Name, len(e.Notes))
	}
	text = strings.TrimSpace(text)
	return f.sheetEdit(e, "note", func(d *draft, ci int) error {
		m := item(child(d.circuit(ci), "notes"), note)
		var splices []splice
		if e.Notes[note].Text != text {
			sp, err := d.src.put(m, "text", encode(text, true))
			if err != nil {
				return err
			}
			splices = append(splices, sp)
		}
		more, err := d.src.putPlace(m, at)
		return d.do(append(splices, more...), err)
	}, func(g *CircuitEntry) bool { return g.Notes[note] == circuit.SheetNote{Text: text, At: at} })
}

// DeleteNote takes a note off a sheet.
func (f *File) DeleteNote(circuitName string, note int) error {
	e, err := f.drawn(circuitName)
	if err != nil {
		return err
	}
	n := len(e.Notes)
	if note < 0 || note >= n {
		return fmt.Errorf("there is no note %d in circuit %q; it has %d", note+1, e.Name, n)
	}
	return f.sheetEdit(e, "note", func(d *draft, ci int) error {
		return d.cut(d.circuit(ci), "notes", true, func(i int) bool { return i == note })
	}, func(g *CircuitEntry) bool { return len(g.Notes) == n-1 })
}

// AddGroup draws a box with a label around blocks and returns its place in Groups.
func (f *File) AddGroup(circuitName, label string, ids ...string) (int, error) {
	e, err := f.drawn(circuitName)
	if err != nil {
		return 0, err
	}
	g := circuit.SheetGroup{Label: strings.TrimSpace(label), Blocks: ids}
	if err := e.mayGroup(g); err != nil {
		return 0, err
	}
	n := len(e.Groups)
	return n, f.sheetEdit(e, "group", func(d *draft, ci int) error {
		return d.add(d.circuit(ci), "groups", true, groupText(g))
	}, func(c *CircuitEntry) bool { return len(c.Groups) == n+1 })
}

// SetGroup gives a box another label and other blocks.
func (f *File) SetGroup(circuitName string, group int, label string, ids ...string) error {
	e, err := f.drawn(circuitName)
	if err != nil {
		return err
	}
	if group < 0 || group >= len(e.Groups) {
		return fmt.Errorf("there is no group %d in circuit %q; it has %d", group+1, e.Name, len(e.Groups))
	}
	want := circuit.SheetGroup{Label: strings.TrimSpace(label), Blocks: ids}
	if err := e.mayGroup(want); err != nil {
		return err
	}
	return f.sheetEdit(e, "group", func(d *draft, ci int) error {
		if err := d.one(d.src.put(item(child(d.circuit(ci), "groups"), group), "label", encode(want.Label, true))); err != nil {
			return err
		}
		return d.fill(item(child(d.circuit(ci), "groups"), group), "blocks", idsText(ids))
	}, func(c *CircuitEntry) bool {
		return c.Groups[group].Label == want.Label && slices.Equal(c.Groups[group].Blocks, ids)
	})
}

// DeleteGroup takes a box away; its blocks stay.
func (f *File) DeleteGroup(circuitName string, group int) error {
	e, err := f.drawn(circuitName)
	if err != nil {
		return err
	}
	n := len(e.Groups)
	if group < 0 || group >= n {
		return fmt.Errorf("there is no group %d in circuit %q; it has %d", group+1, e.Name, n)
	}
	return f.sheetEdit(e, "group", func(d *draft, ci int) error {
		return d.cut(d.circuit(ci), "groups", true, func(i int) bool { return i == group })
	}, func(c *CircuitEntry) bool { return len(c.Groups) == n-1 })
}

func (e *CircuitEntry) mayGroup(g circuit.SheetGroup) error {
	if g.Label == "" || len(g.Blocks) == 0 {
		return errors.New("a group needs a label and blocks; choose the blocks and write what they are")
	}
	for _, id := range g.Blocks {
		if _, err := e.block(id); err != nil {
			return err
		}
	}
	return nil
}

// sheetEdit changes what stands on a sheet beside blocks and lines.
func (f *File) sheetEdit(e *CircuitEntry, what string, change func(d *draft, ci int) error, holds func(*CircuitEntry) bool) error {
	d := f.draft()
	if err := change(d, f.circuitIndex(e.Name)); err != nil {
		return fmt.Errorf("circuit %q, %s: %w", e.Name, what, err)
	}
	return f.take(what, d, func(g *File) bool { return holds(g.Circuit(e.Name)) })
}

func noteText(n circuit.SheetNote) string {
	return "{text: " + encode(n.Text, true) + ", at: " + placeText(n.At) + "}"
}
