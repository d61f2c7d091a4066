package document

import (
	"fmt"
	"strings"

	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// SetAll sets one value of several blocks, or of one, as one step of undo, with what follows
// from it. On an error none is changed.
func (d *Document) SetAll(targets []string, quantity string, then ...func(*audit.File) error) error {
	return d.each("", targets, func(f *audit.File, target string) error { return f.Set(target, quantity) }, then...)
}

// DropAll takes one value out of several blocks, or of one; see Drop.
func (d *Document) DropAll(targets []string) error {
	return d.each("Drop", targets, func(f *audit.File, target string) error { return f.Drop(target) })
}

// each does one edit on several targets.
func (d *Document) each(verb string, targets []string, do func(f *audit.File, target string) error, then ...func(*audit.File) error) error {
	if len(targets) == 0 {
		return nil
	}
	name := setName(d.File(), targets[0])
	if len(targets) > 1 {
		_, what, _ := strings.Cut(name, ": ")
		what, _, _ = strings.Cut(what, " (")
		name = fmt.Sprintf("Change %d blocks: %s", len(targets), what)
	}
	if verb != "" {
		name = strings.Replace(name, "Change", verb, 1)
	}
	return d.Edit(name, func(f *audit.File) error {
		for _, target := range targets {
			if err := do(f, target); err != nil {
				return err
			}
		}
		return inTurn(f, then)
	})
}

// TakeValue gives a parameter of a block the value, and the origin, that the block of
// the same id has in another circuit, with what follows from it; where it is left at its
// default there, here too.
func (d *Document) TakeValue(circuitName, block, key, from string, then ...func(*audit.File) error) error {
	there := d.File().Circuit(from)
	if there == nil || there.Block(block) == nil {
		return fmt.Errorf("there is no %s in circuit %q to take %s from", block, from, key)
	}
	b, target := there.Block(block), circuitName+"/"+block+"."+key
	v, isNumber := b.Values[key]
	take := func(f *audit.File) error {
		switch {
		case isNumber:
			if err := f.Set(target, units.FileText(v.SI, v.Unit)); err != nil {
				return err
			}
			if v.Origin != circuit.NotStated && v.Origin != "" {
				return f.Set(target+".origin", string(v.Origin))
			}
			return nil
		case b.Word(key) != "":
			return f.Set(target, b.Word(key))
		}
		return f.Drop(target)
	}
	return d.Edit("Take "+block+"."+key+" from "+from, func(f *audit.File) error {
		return inTurn(f, append([]func(*audit.File) error{take}, then...))
	})
}

// inTurn does one thing after the other, up to the first error.
func inTurn(f *audit.File, all []func(*audit.File) error) error {
	for _, do := range all {
		if err := do(f); err != nil {
			return err
		}
	}
	return nil
}
