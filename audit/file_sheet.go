package audit

import (
	"fmt"
	"slices"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/circuit"
)

// notes reads what is written on a sheet.
func (r *reader) notes(s scope, n *yaml.Node) []circuit.SheetNote {
	var out []circuit.SheetNote
	for i, item := range r.items(s, n, "notes", "notes: [{text: ..., at: [12, 30]}]") {
		in := s.in(fmt.Sprintf("note %d", i+1))
		f := r.fields(in, item, "", "text", "at")
		note := circuit.SheetNote{Text: r.text(in, f, "text")}
		if strings.TrimSpace(note.Text) == "" {
			r.bad(in, item, "text", "is missing; write what the note says, or take it out")
		}
		if at := r.at(in, f); at != nil {
			note.At = *at
		} else if _, ok := f["at"]; !ok {
			r.bad(in, item, "at", "is missing; write its place, as in at: [12, 30]")
		}
		out = append(out, note)
	}
	return out
}

// groups reads the boxes around blocks of a circuit.
func (r *reader) groups(s scope, n *yaml.Node, c *CircuitEntry) []circuit.SheetGroup {
	var out []circuit.SheetGroup
	for i, item := range r.items(s, n, "groups", "groups: [{label: ..., blocks: [M1, P1]}]") {
		in := s.in(fmt.Sprintf("group %d", i+1))
		f := r.fields(in, item, "", "label", "blocks")
		g := circuit.SheetGroup{Label: r.text(in, f, "label")}
		if strings.TrimSpace(g.Label) == "" {
			r.bad(in, item, "label", "is missing; write what the box holds")
		}
		for _, b := range r.items(in, f["blocks"].value, "blocks", "blocks: [M1, P1]") {
			id, ok := r.scalar(in, b, "blocks", "the id of a block")
			switch {
			case !ok:
			case c.Block(id) == nil:
				r.bad(in, b, "blocks", "there is no block %q in the circuit; take it out of the group", id)
			case slices.Contains(g.Blocks, id):
				r.bad(in, b, "blocks", "%s stands here twice; keep one", id)
			default:
				g.Blocks = append(g.Blocks, id)
			}
		}
		if len(g.Blocks) == 0 {
			r.bad(in, item, "blocks", "are missing; name the blocks that the box goes around")
		}
		out = append(out, g)
	}
	return out
}

// groupMembers lists the ids in the groups of a circuit.
func groupMembers(m *yaml.Node) []*yaml.Node {
	var out []*yaml.Node
	if list := child(m, "groups"); list != nil && list.Kind == yaml.SequenceNode {
		for _, g := range list.Content {
			if b := child(g, "blocks"); b != nil && b.Kind == yaml.SequenceNode {
				out = append(out, b.Content...)
			}
		}
	}
	return out
}

// leaveGroups takes blocks out of the groups; a group with none left goes.
func (d *draft) leaveGroups(ci int, ids []string) error {
	list := child(d.circuit(ci), "groups")
	if list == nil || list.Kind != yaml.SequenceNode {
		return nil
	}
	left := func(g *yaml.Node) int {
		n := 0
		if b := child(g, "blocks"); b != nil {
			for _, x := range b.Content {
				if !slices.Contains(ids, x.Value) {
					n++
				}
			}
		}
		return n
	}
	if err := d.cut(d.circuit(ci), "groups", false, func(i int) bool { return left(list.Content[i]) == 0 }); err != nil {
		return err
	}
	for i := 0; ; i++ {
		g := item(child(d.circuit(ci), "groups"), i)
		if g == nil {
			return nil
		}
		members := child(g, "blocks")
		if members == nil {
			continue
		}
		if err := d.cut(g, "blocks", false, func(k int) bool { return slices.Contains(ids, members.Content[k].Value) }); err != nil {
			return err
		}
	}
}
