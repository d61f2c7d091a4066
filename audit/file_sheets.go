package audit

import (
	"errors"
	"fmt"
	"strings"

	"gopkg.in/yaml.v3"
)

// AddCircuit adds a circuit with an empty sheet. What its pumps do at rest stays open,
// and Check asks for it.
func (f *File) AddCircuit(name string, role Role) error {
	name = oneLine(name)
	if err := f.mayBeNamed(name); err != nil {
		return err
	}
	if role != AsFound && role != Proposal {
		return fmt.Errorf("circuit %q: its role is %q; it is %q or %q", name, role, AsFound, Proposal)
	}
	d := f.draft()
	keys := []string{"name: " + encode(name, true), "role: " + string(role), "blocks: {}", "lines: []"}
	if err := d.addItem("circuits", keys); err != nil {
		return fmt.Errorf("circuit %q: %w", name, err)
	}
	return f.take(name, d, func(g *File) bool {
		e := g.Circuit(name)
		return len(g.Circuits) == len(f.Circuits)+1 && e != nil && e.Role == role
	})
}

// addItem adds a mapping with some keys to a list at the top of the file.
func (d *draft) addItem(list string, keys []string) error {
	n := child(d.root, list)
	flow := d.root.Style&yaml.FlowStyle != 0 || n != nil && n.Style&yaml.FlowStyle != 0 && len(n.Content) > 0
	if flow {
		return d.add(d.root, list, true, "{"+strings.Join(keys, ", ")+"}")
	}
	indent := d.root.Column + 1
	if n != nil && len(n.Content) > 0 {
		dash, err := d.src.dash(n.Content[0])
		if err != nil {
			return err
		}
		indent = dash + 2
	}
	return d.add(d.root, list, true, strings.Join(keys, d.src.lineBreak()+strings.Repeat(" ", indent)))
}

// CopyCircuit adds a proposal that begins as a copy of another circuit, comments too.
func (f *File) CopyCircuit(from, name string) error {
	e, err := f.drawn(from)
	if err != nil {
		return err
	}
	name = oneLine(name)
	if err := f.mayBeNamed(name); err != nil {
		return err
	}
	d := f.draft()
	fail := func(err error) error { return fmt.Errorf("circuit %q: %w", name, err) }
	list, i := child(d.root, "circuits"), f.circuitIndex(from)
	text, err := d.src.itemText(list, i)
	if err != nil {
		return fail(err)
	}
	if err := d.one(d.src.attach(list, text)); err != nil {
		return fail(err)
	}
	last := len(f.Circuits)
	copied, err := d.src.put(d.circuit(last), "name", encode(name, true))
	if err != nil {
		return fail(err)
	}
	role, err := d.src.put(d.circuit(last), "role", string(Proposal))
	if err := d.do([]splice{copied, role}, err); err != nil {
		return fail(err)
	}
	return f.take(name, d, func(g *File) bool {
		c := g.Circuit(name)
		return c != nil && c.Role == Proposal && len(c.Blocks) == len(e.Blocks) && len(c.Lines) == len(e.Lines)
	})
}

// itemText returns the text of an entry of a list, without its dash, with a comment
// that stands beside its end.
func (s *source) itemText(list *yaml.Node, i int) (string, error) {
	from, to, err := s.entrySpan(list, i)
	if err != nil || list.Style&yaml.FlowStyle != 0 {
		return string(s.data[from:to]), err
	}
	dash, err := s.dash(list.Content[i])
	if err != nil {
		return "", err
	}
	return strings.Repeat(" ", max(0, list.Content[i].Column-3-dash)) + string(s.data[from:s.restOfLine(to)]), nil
}

// DeleteCircuit takes a proposal out. A circuit as found stays: the proposals are
// compared with it.
func (f *File) DeleteCircuit(name string) error {
	e, err := f.drawn(name)
	if err != nil {
		return err
	}
	if e.Role == AsFound {
		return fmt.Errorf("circuit %q is the one as found, which proposals are compared with; swap it with a proposal first", name)
	}
	d, i := f.draft(), f.circuitIndex(name)
	for _, b := range e.Blocks {
		if err := f.dropTracks(d, i, b.ID); err != nil {
			return err
		}
	}
	if i == 0 && len(f.Circuits) > 1 && child(d.circuit(1), "role") == nil { // the first without a role is the one as found
		if err := d.one(d.src.insert(d.circuit(1), "role", string(f.Circuits[1].Role))); err != nil {
			return fmt.Errorf("circuit %q: %w", name, err)
		}
	}
	if err := d.cut(d.root, "circuits", true, func(k int) bool { return k == i }); err != nil {
		return fmt.Errorf("circuit %q: %w", name, err)
	}
	return f.take(name, d, func(g *File) bool { return len(g.Circuits) == len(f.Circuits)-1 && g.Circuit(name) == nil })
}

// RenameCircuit gives a circuit another name.
func (f *File) RenameCircuit(old, name string) error {
	if _, err := f.drawn(old); err != nil {
		return err
	}
	if name = oneLine(name); name == old {
		return nil
	}
	if err := f.mayBeNamed(name); err != nil {
		return err
	}
	d, i := f.draft(), f.circuitIndex(old)
	if err := d.one(d.src.put(d.circuit(i), "name", encode(name, true))); err != nil {
		return fmt.Errorf("circuit %q: %w", old, err)
	}
	return f.take(old, d, func(g *File) bool { return g.circuitIndex(name) == i })
}

func (f *File) mayBeNamed(name string) error {
	if name == "" {
		return errors.New("a circuit needs a name; write one, such as As found")
	}
	if f.Circuit(name) != nil {
		return fmt.Errorf("there is a circuit %q already; choose another name", name)
	}
	return nil
}

// SwapRoles makes the circuit as found a proposal and the proposal the one as found.
// A retrofit cost stays on the side of the proposal.
func (f *File) SwapRoles(first, second string) error {
	a, err := f.drawn(first)
	if err != nil {
		return err
	}
	b, err := f.drawn(second)
	if err != nil {
		return err
	}
	if a.Role == b.Role {
		return fmt.Errorf("circuits %q and %q are both %s; choose one as found and one proposal", first, second, a.Role)
	}
	d := f.draft()
	found, proposed := f.circuitIndex(first), f.circuitIndex(second)
	if a.Role == Proposal {
		found, proposed = proposed, found
	}
	for _, x := range []struct {
		i    int
		role Role
	}{{found, Proposal}, {proposed, AsFound}} {
		if err := d.one(d.src.put(d.circuit(x.i), "role", string(x.role))); err != nil {
			return fmt.Errorf("%s: %w", f.Circuits[x.i].Name, err)
		}
	}
	if cost := child(d.circuit(proposed), "retrofit_cost"); !isNull(cost) {
		text := flowText(cost)
		if err := d.cutKey(d.circuit(proposed), "retrofit_cost"); err != nil {
			return fmt.Errorf("%s: %w", f.Circuits[proposed].Name, err)
		}
		if err := d.one(d.src.insert(d.circuit(found), "retrofit_cost", text)); err != nil {
			return fmt.Errorf("%s: %w", f.Circuits[found].Name, err)
		}
	}
	return f.take("roles", d, func(g *File) bool {
		return g.Circuits[found].Role == Proposal && g.Circuits[proposed].Role == AsFound
	})
}
