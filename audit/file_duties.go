package audit

import (
	"errors"
	"fmt"
	"slices"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/audit/calendar"
	"barlitre/circuit/duty"
	"barlitre/machines/units"
)

// AddDuty adds a duty of two rows, at 0 s and at length, such as "10 s", without tracks.
func (f *File) AddDuty(name, length string) error {
	name = oneLine(name)
	if err := f.mayBeDuty(name); err != nil {
		return err
	}
	if t, _, err := units.Parse(length, units.Time); err != nil || t <= 0 {
		return fmt.Errorf("duty %q: it lasts %q; write a time above 0, such as 10 s", name, length)
	}
	d := f.draft()
	n := len(f.Duties)
	err := d.addItem("duties", []string{"name: " + encode(name, true), "points: {}"})
	if err == nil {
		err = d.add(d.duty(n), "points", false, "t: [0 s, "+encode(strings.TrimSpace(length), false)+"]")
	}
	if err != nil {
		return fmt.Errorf("duty %q: %w", name, err)
	}
	return f.take(name, d, func(g *File) bool { return g.dutyIndex(name) == n })
}

// RenameDuty gives a duty another name.
func (f *File) RenameDuty(old, name string) error {
	i, err := f.dutyNamed(old)
	if err != nil {
		return err
	}
	if name = oneLine(name); name == old {
		return nil
	}
	if err := f.mayBeDuty(name); err != nil {
		return err
	}
	d := f.draft()
	err = d.one(d.src.put(d.duty(i), "name", encode(name, true)))
	if state := f.StateOf(old); state != "" && err == nil {
		err = d.renameUse(child(child(d.root, "calendar"), string(state)), old, name)
	}
	return f.dutyEdit(d, i, err, func(g *File) bool { return g.dutyIndex(name) == i })
}

// CopyDuty adds a duty that begins as a copy of another, without its hours: two duties
// do not run in the same ones.
func (f *File) CopyDuty(from, name string) error {
	i, err := f.dutyNamed(from)
	if err != nil {
		return err
	}
	if name = oneLine(name); f.mayBeDuty(name) != nil {
		return f.mayBeDuty(name)
	}
	d, last := f.draft(), len(f.Duties)
	list := child(d.root, "duties")
	text, err := d.src.itemText(list, i)
	if err == nil {
		err = d.one(d.src.attach(list, text))
	}
	if err == nil {
		err = d.one(d.src.put(d.duty(last), "name", encode(name, true)))
	}
	if err == nil && child(d.duty(last), "hours") != nil {
		err = d.cutKey(d.duty(last), "hours")
	}
	if err != nil {
		return fmt.Errorf("duty %q: %w", name, err)
	}
	return f.take(name, d, func(g *File) bool {
		return len(g.Duties) == last+1 && g.Duties[last].Name == name && len(g.Duties[last].Time) == len(f.Duties[i].Time)
	})
}

// RemoveDuty takes a duty out.
func (f *File) RemoveDuty(name string) error {
	i, err := f.dutyNamed(name)
	if err != nil {
		return err
	}
	d := f.draft()
	err = d.cut(d.root, "duties", true, func(k int) bool { return k == i })
	if state := f.StateOf(name); state != "" && err == nil {
		err = d.cutState(state, name)
	}
	return f.dutyEdit(d, i, err,
		func(g *File) bool { return len(g.Duties) == len(f.Duties)-1 })
}

// dutyKeys are what SetDuty reaches.
var dutyKeys = []string{"hours", "repeats", "step", "instants", "note"}

// SetDuty sets what a duty has besides its table: hours, repeats, step, instants, note;
// "" takes it out.
func (f *File) SetDuty(name, key, value string) error {
	i, err := f.dutyNamed(name)
	if err != nil {
		return err
	}
	value = strings.TrimSpace(value)
	if !slices.Contains(dutyKeys, key) {
		return fmt.Errorf("duty %q: %s: give one of %s", name, key, strings.Join(dutyKeys, ", "))
	}
	d := f.draft()
	if value == "" {
		if child(d.duty(i), key) == nil {
			return nil
		}
		return f.dutyEdit(d, i, d.cutKey(d.duty(i), key), func(g *File) bool { return child(g.dutyNode(i), key) == nil })
	}
	err = d.one(d.src.put(d.duty(i), key, encode(value, key == "note")))
	return f.dutyEdit(d, i, err, func(g *File) bool {
		return written(child(child(g.dutyNode(i), key), "value"), child(g.dutyNode(i), key)) == value
	})
}

// StateOf returns the state of the calendar that a duty stands for, "" for none.
func (f *File) StateOf(name string) calendar.State {
	if f.Calendar == nil {
		return ""
	}
	return f.Calendar.StateOf(name)
}

// written returns the text of the first node that is a single value.
func written(nodes ...*yaml.Node) string {
	for _, n := range nodes {
		if n != nil && n.Kind == yaml.ScalarNode {
			return n.Value
		}
	}
	return ""
}

// SetPhase names the stretch of a duty that begins at a time; "" takes it out.
func (f *File) SetPhase(dutyName, phase, from string) error {
	return f.setIn(dutyName, "phases", phase, from)
}

// SetStandstill sets the speed up to which an axis counts as standing; "" takes it out.
func (f *File) SetStandstill(dutyName, axis, speed string) error {
	return f.setIn(dutyName, "standstill", axis, speed)
}

// setIn sets an entry of a short mapping in a duty, or takes it out.
func (f *File) setIn(dutyName, key, entry, value string) error {
	i, err := f.dutyNamed(dutyName)
	if err != nil {
		return err
	}
	if key == "phases" && f.Stages[i] != nil {
		return fmt.Errorf("duty %q is computed from its phases, which have their names in the list", dutyName)
	}
	entry, value = strings.TrimSpace(entry), strings.TrimSpace(value)
	d := f.draft()
	m := child(d.duty(i), key)
	switch _, old := pair(m, entry); {
	case entry == "":
		err = errors.New("it has no name; write one")
	case value == "" && old == nil:
		return nil
	case value == "":
		err = d.cut(d.duty(i), key, false, func(k int) bool { return mappingKeys(m)[k].Value == entry })
	case old != nil:
		err = d.one(d.src.put(m, entry, encode(value, false)))
	default:
		err = d.addInline(d.duty(i), key, false, encode(entry, true)+": "+encode(value, false))
	}
	return f.dutyEdit(d, i, err, func(g *File) bool {
		n := child(child(g.dutyNode(i), key), entry)
		return written(child(n, "value"), n) == value
	})
}

// dutyEdit takes a draft in which a duty was changed.
func (f *File) dutyEdit(d *draft, i int, err error, holds func(*File) bool) error {
	what := fmt.Sprintf("duty %q", f.Duties[i].Name)
	if err != nil {
		return fmt.Errorf("%s: %w", what, err)
	}
	return f.take(what, d, holds)
}

func (f *File) dutyNode(i int) *yaml.Node { return item(child(f.root, "duties"), i) }

func (f *File) dutyIndex(name string) int {
	return slices.IndexFunc(f.Duties, func(d *duty.Duty) bool { return d.Name == name })
}

// dutyNamed finds a duty, or says that there is none.
func (f *File) dutyNamed(name string) (int, error) {
	if i := f.dutyIndex(name); i >= 0 {
		return i, nil
	}
	var known []string
	for _, d := range f.Duties {
		known = append(known, d.Name)
	}
	return -1, fmt.Errorf("there is no duty %q%s", name, guess(name, known))
}

func (f *File) mayBeDuty(name string) error {
	if name == "" {
		return errors.New("a duty needs a name; write one, such as day shift")
	}
	if f.dutyIndex(name) >= 0 {
		return fmt.Errorf("there is a duty %q already; choose another name", name)
	}
	return nil
}
