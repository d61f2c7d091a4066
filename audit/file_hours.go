package audit

import (
	"fmt"
	"strings"

	"gopkg.in/yaml.v3"
)

// InYear returns the names of the duties that run in the year: those with hours.
func (f *File) InYear() (names []string) {
	for _, d := range f.Duties {
		if d.Hours > 0 {
			names = append(names, d.Name)
		}
	}
	return names
}

// HandHours gives the hours a year of one duty to another, with their origin and range, or
// its place in the calendar; the first stays with 0 h, or out of the calendar. On an error
// nothing is changed.
func (f *File) HandHours(from, to string) error {
	i, err := f.dutyNamed(from)
	if err != nil {
		return err
	}
	k, err := f.dutyNamed(to)
	switch {
	case err != nil:
		return err
	case i == k:
		return fmt.Errorf("duty %q: it has its hours already", from)
	case f.Duties[i].Hours <= 0:
		return fmt.Errorf("duty %q: it has no hours a year to give", from)
	}
	hours := f.Duties[i].Hours
	d := f.draft()
	if child(d.duty(k), "hours") != nil {
		err = d.cutKey(d.duty(k), "hours")
	}
	if state := f.StateOf(from); state != "" && err == nil {
		err = d.renameUse(child(child(d.root, "calendar"), string(state)), from, to)
	} else if err == nil {
		err = d.handHours(i, k)
	}
	if err != nil {
		return fmt.Errorf("hours of duty %q: %w", from, err)
	}
	return f.take("hours of duty "+from, d, func(g *File) bool {
		return g.Duties[i].Hours == 0 && g.Duties[k].Hours == hours
	})
}

// handHours moves what stands under hours, as it is written.
func (d *draft) handHours(i, k int) error {
	v := child(d.duty(i), "hours")
	if v == nil {
		return errLayout
	}
	if err := d.one(d.src.insert(d.duty(k), "hours", quantityText(v))); err != nil {
		return err
	}
	if child(d.duty(i), "hours").Kind == yaml.ScalarNode {
		return d.one(d.src.put(d.duty(i), "hours", "0 h"))
	}
	if err := d.cutKey(d.duty(i), "hours"); err != nil { // a range belongs to the hours that went
		return err
	}
	return d.one(d.src.insert(d.duty(i), "hours", "0 h"))
}

// quantityText writes a quantity on one line, with what stands beside its value.
func quantityText(v *yaml.Node) string {
	if v.Kind != yaml.MappingNode {
		return encode(v.Value, false)
	}
	var parts []string
	for _, key := range mappingKeys(v) {
		parts = append(parts, key.Value+": "+encode(child(v, key.Value).Value, key.Value == "note"))
	}
	return "{" + strings.Join(parts, ", ") + "}"
}

// renameUse lets another duty stand in a state of the calendar, with the share that is there.
func (d *draft) renameUse(uses *yaml.Node, old, name string) error {
	for _, key := range mappingKeys(uses) {
		if oneLine(key.Value) == old {
			return d.one(d.src.replace(key, uses.Column-1, encode(name, true)))
		}
	}
	return errLayout
}
