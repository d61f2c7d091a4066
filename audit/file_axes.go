package audit

import (
	"errors"
	"fmt"
	"slices"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/circuit"
	"barlitre/circuit/duty"
)

// AddAxis adds an axis to the file.
func (f *File) AddAxis(name string, kind duty.AxisKind) error {
	name = strings.TrimSpace(name)
	if err := f.mayBeAxis(name); err != nil {
		return err
	}
	d := f.draft()
	if err := d.addInline(d.root, "axes", false, encode(name, true)+": "+kind.String()); err != nil {
		return fmt.Errorf("axis %s: %w", name, err)
	}
	return f.take("axis "+name, d, func(g *File) bool { return slices.Contains(g.Axes, duty.Axis{Name: name, Kind: kind}) })
}

// NewAxis names an axis that a block could move and that is not there yet; ok is false for
// blocks that move none.
func (f *File) NewAxis(b *circuit.Block) (name string, kind duty.AxisKind, ok bool) {
	k := circuit.KindNamed(b.Kind)
	if k == nil || k.Param("axis") == nil {
		return "", 0, false
	}
	name, kind = "ram", duty.Linear
	if k.Param("displacement") != nil {
		name, kind = "turn", duty.Rotary
	}
	first := name
	for n := 2; f.mayBeAxis(name) != nil; n++ {
		name = fmt.Sprint(first, n)
	}
	return name, kind, true
}

// GiveAxis makes a new axis and lets a block move it.
func (f *File) GiveAxis(target, name string, kind duty.AxisKind) error {
	if err := f.AddAxis(name, kind); err != nil {
		return err
	}
	return f.Set(target, name)
}

func (f *File) mayBeAxis(name string) error {
	switch {
	case !IsName(name):
		return fmt.Errorf("axis %q: use letters, digits and _ only", name)
	case f.isAxis(name):
		return fmt.Errorf("there is an axis %s already; choose another name", name)
	}
	for _, e := range f.Circuits {
		if e.Block(name) != nil {
			return fmt.Errorf("%s is a block of circuit %q; choose another name for the axis", name, e.Name)
		}
	}
	return nil
}

// RenameAxis gives an axis another name, in the blocks and tracks that name it too.
func (f *File) RenameAxis(old, name string) error {
	name = strings.TrimSpace(name)
	if name == old && f.isAxis(old) {
		return nil
	}
	if err := f.knownAxis(old); err != nil {
		return err
	}
	if err := f.mayBeAxis(name); err != nil {
		return err
	}
	d := f.draft()
	var splices []splice
	replace := func(n *yaml.Node, indent int) error {
		sp, err := d.src.replace(n, indent, encode(name, true))
		splices = append(splices, sp)
		return err
	}
	axes := child(d.root, "axes")
	key, _ := pair(axes, old)
	err := replace(key, axes.Column-1)
	for i := range f.Circuits {
		blocks := child(d.circuit(i), "blocks")
		for k := range mappingKeys(blocks) {
			for _, key := range axisKeys {
				m := blocks.Content[2*k+1]
				if n := child(m, key); n != nil && n.Value == old && err == nil {
					err = replace(n, m.Column-1)
				}
			}
		}
	}
	for i := range f.Duties {
		m := child(d.duty(i), "standstill")
		if n, _ := pair(m, old); n != nil && err == nil {
			err = replace(n, m.Column-1)
		}
	}
	if err := d.do(splices, err); err != nil {
		return fmt.Errorf("axis %s: %w", old, err)
	}
	if err := f.renameTracks(d, old, name, false); err != nil {
		return err
	}
	return f.take("axis "+old, d, func(g *File) bool { return g.isAxis(name) && !g.isAxis(old) })
}

// SetAxisKind makes an axis linear or rotary, as long as no track is written in its units.
func (f *File) SetAxisKind(name string, kind duty.AxisKind) error {
	i, err := f.axisAt(name)
	if err != nil {
		return err
	}
	d := f.draft()
	m, key := child(d.root, "axes"), name
	if v := child(m, name); v != nil && v.Kind == yaml.MappingNode {
		m, key = v, "kind"
	}
	if err := d.one(d.src.put(m, key, kind.String())); err != nil {
		return fmt.Errorf("axis %s: %w", name, err)
	}
	return f.take("axis "+name, d, func(g *File) bool { return g.Axes[i].Kind == kind })
}

// SetAxisLoad says what stands at the load side of an axis; "" takes it out.
func (f *File) SetAxisLoad(name, load string) error {
	i, err := f.axisAt(name)
	if err != nil {
		return err
	}
	load = oneLine(load)
	d := f.draft()
	v := child(child(d.root, "axes"), name)
	switch {
	case load == f.Axes[i].Load:
		return nil
	case v.Kind != yaml.MappingNode:
		text := "{kind: " + f.Axes[i].Kind.String() + ", load: " + encode(load, true) + "}"
		from, e := d.src.start(v)
		to, e2 := d.src.end(v, child(d.root, "axes").Column-1)
		err = d.one(splice{from, to, text}, errors.Join(e, e2))
	case load == "":
		err = d.cutKey(v, "load")
	default:
		err = d.one(d.src.put(v, "load", encode(load, true)))
	}
	if err != nil {
		return fmt.Errorf("axis %s: %w", name, err)
	}
	return f.take("axis "+name, d, func(g *File) bool { return g.Axes[i].Load == load })
}

// axisAt is the place of an axis in Axes.
func (f *File) axisAt(name string) (int, error) {
	if err := f.knownAxis(name); err != nil {
		return -1, err
	}
	return slices.IndexFunc(f.Axes, func(a duty.Axis) bool { return a.Name == name }), nil
}

// RemoveAxis takes an axis out that no block and no track names any more.
func (f *File) RemoveAxis(name string) error {
	if err := f.knownAxis(name); err != nil {
		return err
	}
	if users := f.usersOf(name); len(users) > 0 {
		return fmt.Errorf("axis %s is named by %s; take it out there first", name, strings.Join(users, ", "))
	}
	d := f.draft()
	if err := d.cut(d.root, "axes", true, func(i int) bool { return mappingKeys(child(d.root, "axes"))[i].Value == name }); err != nil {
		return fmt.Errorf("axis %s: %w", name, err)
	}
	return f.take("axis "+name, d, func(g *File) bool { return !g.isAxis(name) })
}

// usersOf lists what names an axis.
func (f *File) usersOf(axis string) []string {
	var out []string
	for _, e := range f.Circuits {
		for _, b := range e.Blocks {
			for _, key := range axisKeys {
				if b.Word(key) == axis {
					out = append(out, e.Name+"/"+b.ID+"."+key)
				}
			}
		}
	}
	for _, d := range f.Duties {
		for _, t := range d.Tracks {
			if t.Of == axis {
				out = append(out, fmt.Sprintf("duty %q, track %s.%s", d.Name, t.Of, t.What))
			}
		}
		if _, ok := d.Standstill[axis]; ok {
			out = append(out, fmt.Sprintf("duty %q, standstill", d.Name))
		}
	}
	return out
}

func (f *File) knownAxis(name string) error {
	if f.isAxis(name) {
		return nil
	}
	var known []string
	for _, a := range f.Axes {
		known = append(known, a.Name)
	}
	return fmt.Errorf("there is no axis %q%s", name, guess(name, known))
}
