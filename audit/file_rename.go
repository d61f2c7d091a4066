package audit

import (
	"fmt"
	"slices"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/circuit"
)

// Rename gives a block of a circuit another id, in its lines and groups and in the
// tracks of duties too. Where another circuit has a block of the old id, its tracks
// stay and the renamed block gets a copy of them. Comments are left alone.
func (f *File) Rename(circuitName, old, id string) error {
	e, err := f.drawn(circuitName)
	if err != nil {
		return err
	}
	if _, err := e.block(old); err != nil {
		return err
	}
	id = strings.TrimSpace(id)
	if id == old {
		return nil
	}
	if err := f.mayBeCalled(e, id); err != nil {
		return err
	}
	d, ci := f.draft(), f.circuitIndex(circuitName)
	splices, err := d.renamed(ci, old, id)
	if err := d.do(splices, err); err != nil {
		return fmt.Errorf("%s: %w", old, err)
	}
	if !f.isAxis(old) {
		if err := f.renameTracks(d, old, id, f.elsewhere(ci, old)); err != nil {
			return err
		}
	}
	return f.take(old, d, func(g *File) bool {
		c := g.Circuit(circuitName)
		return c.Block(old) == nil && c.Block(id) != nil && len(c.Lines) == len(e.Lines)
	})
}

// renamed gives a block another id in its circuit.
func (d *draft) renamed(ci int, old, id string) ([]splice, error) {
	m := d.circuit(ci)
	var out []splice
	blocks := child(m, "blocks")
	key, _ := pair(blocks, old)
	if key == nil {
		return nil, errLayout
	}
	sp, err := d.src.replace(key, blocks.Column-1, encode(id, true))
	if err != nil {
		return nil, err
	}
	out = append(out, sp)
	lines := child(m, "lines")
	for i := 0; lines != nil && i < len(lines.Content); i++ {
		n := lines.Content[i]
		l, ok := (&reader{}).line(scope{}, n)
		if !ok || !slices.ContainsFunc(l.Ports, func(p circuit.PortRef) bool { return p.Block == old }) {
			continue
		}
		for k := range l.Ports {
			if l.Ports[k].Block == old {
				l.Ports[k].Block = id
			}
		}
		if sp, err = d.src.replace(n, lines.Column-1, encode(portsText(l.Ports), true)); err != nil {
			return nil, err
		}
		out = append(out, sp)
	}
	for _, n := range groupMembers(m) {
		if n.Value == old {
			if sp, err = d.src.replace(n, 0, encode(id, true)); err != nil {
				return nil, err
			}
			out = append(out, sp)
		}
	}
	more, err := d.renamedBends(m, old, id)
	return append(out, more...), err
}

// renameTracks gives the tracks of a block or axis another name; with keep the old
// ones stay beside them.
func (f *File) renameTracks(d *draft, old, id string, keep bool) error {
	for i, stages := range f.Stages {
		for k := range stages {
			if err := d.renameKeys(item(child(d.duty(i), "phases"), k), old, id, keep); err != nil {
				return err
			}
		}
	}
	return f.eachTrackList(d, old, func(duty *yaml.Node, key string) error {
		return d.renameKeys(child(duty, key), old, id, keep)
	})
}

// renameKeys renames the tracks of one list of tracks.
func (d *draft) renameKeys(m *yaml.Node, old, id string, keep bool) error {
	var splices []splice
	var copies []string
	for i, k := range mappingKeys(m) {
		if ofTrack(k) != old {
			continue
		}
		head := strings.Replace(k.Value, old+".", id+".", 1)
		if keep {
			copies = append(copies, encode(head, true)+": "+flowText(m.Content[2*i+1]))
			continue
		}
		sp, err := d.src.replace(k, m.Column-1, encode(head, true))
		if err != nil {
			return err
		}
		splices = append(splices, sp)
	}
	if len(copies) > 0 {
		return d.one(d.src.attach(m, copies...))
	}
	return d.do(splices, nil)
}
