package audit

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/circuit"
)

// Copy returns blocks of a circuit as text, with the lines between them, the groups that
// hold no others, and the bends of lines that lead nowhere else. It is a small audit file with one circuit, so that it passes
// through the clipboard to any sheet.
func (f *File) Copy(circuitName string, ids ...string) (string, error) {
	return f.CopyNoted(circuitName, nil, ids...)
}

// CopyNoted is Copy with notes of the sheet, by their places in Notes.
func (f *File) CopyNoted(circuitName string, notes []int, ids ...string) (string, error) {
	e, err := f.drawn(circuitName)
	if err != nil {
		return "", err
	}
	if len(ids)+len(notes) == 0 {
		return "", errors.New("no block is chosen; choose the blocks to copy")
	}
	m := f.circuitNode(f.circuitIndex(circuitName))
	var b strings.Builder
	fmt.Fprintf(&b, "format: %s\ntitle: %s\ncircuits:\n- name: %s\n", Format, encode("Part of "+circuitName, true), encode(circuitName, true))
	if len(ids) > 0 {
		b.WriteString("  blocks:\n")
	}
	for _, id := range ids {
		if _, err := e.block(id); err != nil {
			return "", err
		}
		fmt.Fprintf(&b, "    %s: %s\n", encode(id, true), flowText(child(child(m, "blocks"), id)))
	}
	var lines, groups, bends, written []string
	for _, l := range e.Lines {
		inner := slices.DeleteFunc(slices.Clone(l.Ports), func(p circuit.PortRef) bool { return !slices.Contains(ids, p.Block) })
		if len(inner) > 1 {
			lines = append(lines, encode(portsText(inner), true))
		}
	}
	for _, g := range e.Groups {
		if !slices.ContainsFunc(g.Blocks, func(id string) bool { return !slices.Contains(ids, id) }) {
			groups = append(groups, groupText(g))
		}
	}
	for _, b := range e.Bends {
		if e.Within(b.Port, ids) {
			bends = append(bends, bendText(b))
		}
	}
	for _, i := range notes {
		if i < 0 || i >= len(e.Notes) {
			return "", fmt.Errorf("there is no note %d on the sheet of %q", i, circuitName)
		}
		written = append(written, noteText(e.Notes[i]))
	}
	for _, list := range []struct {
		key   string
		texts []string
	}{{"lines", lines}, {"groups", groups}, {"bends", bends}, {"notes", written}} {
		if len(list.texts) > 0 {
			fmt.Fprintf(&b, "  %s:\n  - %s\n", list.key, strings.Join(list.texts, "\n  - "))
		}
	}
	return b.String(), nil
}

// PartPlace returns the upper left corner of the places in a text of Copy [modules].
func PartPlace(text string) ([2]float64, error) {
	e, _, err := part(text)
	at := [2]float64{math.Inf(1), math.Inf(1)}
	if err != nil {
		return at, err
	}
	for _, b := range e.Blocks {
		for i := 0; i < 2 && b.At != nil; i++ {
			at[i] = math.Min(at[i], b.At[i])
		}
	}
	for _, n := range e.Notes {
		at[0], at[1] = math.Min(at[0], n.At[0]), math.Min(at[1], n.At[1])
	}
	if math.IsInf(at[0], 1) {
		at = [2]float64{}
	}
	return at, nil
}

// part reads a text of Copy; any audit file will do, of which the first circuit is taken.
func part(text string) (*CircuitEntry, *File, error) {
	g, _ := Parse([]byte(text), nil, "")
	if g == nil || len(g.Circuits) == 0 || len(g.Circuits[0].Blocks)+len(g.Circuits[0].Notes) == 0 {
		return nil, nil, errors.New("the clipboard holds no blocks of a circuit; copy some first")
	}
	return &g.Circuits[0], g, nil
}

// Paste puts the blocks of a text of Copy on the sheet of a circuit, shifted
// [modules], and returns their new ids by the old ones. An axis that the circuit's own
// blocks are bound to already, or that the file does not have, is not taken along;
// Check asks for it.
func (f *File) Paste(circuitName, text string, shift [2]float64) (map[string]string, error) {
	e, err := f.drawn(circuitName)
	if err != nil {
		return nil, err
	}
	p, g, err := part(text)
	if err != nil {
		return nil, err
	}
	for _, l := range p.Lines {
		for _, port := range l.Ports {
			if err := p.Clash(port); err != nil {
				return nil, fmt.Errorf("the clipboard: %w", err)
			}
		}
	}
	ids, taken := map[string]string{}, map[string]bool{}
	var blocks, lines, groups, bends, notes []string
	for _, b := range p.Blocks {
		kind := circuit.KindNamed(b.Kind)
		if kind == nil {
			return nil, fmt.Errorf("the clipboard, %s: %s", b.ID, noKind(b.Kind))
		}
		id := b.ID
		if f.mayBeCalled(e, id) != nil || taken[id] || f.hasTrackOf(id) {
			id = f.freeID(e, kind, taken)
		}
		ids[b.ID], taken[id] = id, true
		n := child(child(g.circuitNode(0), "blocks"), b.ID)
		blocks = append(blocks, encode(id, true)+": "+f.pastedText(e, n, &b, shift))
	}
	for _, l := range p.Lines {
		if ports := renamedPorts(l.Ports, ids); len(ports) > 1 {
			lines = append(lines, encode(portsText(ports), true))
		}
	}
	for _, group := range p.Groups {
		for i, id := range group.Blocks {
			group.Blocks[i] = ids[id]
		}
		groups = append(groups, groupText(group))
	}
	for _, b := range p.Bends {
		b.Port.Block = ids[b.Port.Block]
		bends = append(bends, bendText(b.Mapped(func(at [2]float64) [2]float64 { return [2]float64{at[0] + shift[0], at[1] + shift[1]} })))
	}
	for _, n := range p.Notes {
		n.At = [2]float64{n.At[0] + shift[0], n.At[1] + shift[1]}
		notes = append(notes, noteText(n))
	}
	d, ci := f.draft(), f.circuitIndex(circuitName)
	for _, x := range []struct {
		key    string
		isList bool
		texts  []string
	}{{"blocks", false, blocks}, {"lines", true, lines}, {"groups", true, groups}, {"bends", true, bends}, {"notes", true, notes}} {
		if len(x.texts) == 0 {
			continue
		}
		if err := d.add(d.circuit(ci), x.key, x.isList, x.texts...); err != nil {
			return nil, fmt.Errorf("paste into %q: %w", circuitName, err)
		}
	}
	return ids, f.take("paste", d, func(h *File) bool {
		c := h.Circuit(circuitName)
		return len(c.Blocks) == len(e.Blocks)+len(blocks) && len(c.Lines) == len(e.Lines)+len(lines) && len(c.Notes) == len(e.Notes)+len(notes)
	})
}

// Duplicate copies blocks within a circuit, shifted [modules].
func (f *File) Duplicate(circuitName string, shift [2]float64, ids ...string) (map[string]string, error) {
	return f.DuplicateNoted(circuitName, shift, nil, ids...)
}

// DuplicateNoted is Duplicate with notes of the sheet.
func (f *File) DuplicateNoted(circuitName string, shift [2]float64, notes []int, ids ...string) (map[string]string, error) {
	text, err := f.CopyNoted(circuitName, notes, ids...)
	if err != nil {
		return nil, err
	}
	return f.Paste(circuitName, text, shift)
}

// pastedText writes a block for another place and circuit.
func (f *File) pastedText(e *CircuitEntry, n *yaml.Node, b *circuit.Block, shift [2]float64) string {
	var words []string
	for i := 0; i+1 < len(n.Content); i += 2 {
		key, value := n.Content[i].Value, flowText(n.Content[i+1])
		switch {
		case slices.Contains(axisKeys, key) && !f.unbound(e, b.Word(key)):
			continue
		case key == "at" && b.At != nil:
			value = placeText([2]float64{b.At[0] + shift[0], b.At[1] + shift[1]})
		}
		words = append(words, flowText(n.Content[i])+": "+value)
	}
	return "{" + strings.Join(words, ", ") + "}"
}

// unbound reports whether the file has an axis that no block of a circuit is bound to.
func (f *File) unbound(e *CircuitEntry, axis string) bool {
	return f.isAxis(axis) && !slices.ContainsFunc(e.Blocks, func(b circuit.Block) bool {
		return slices.ContainsFunc(axisKeys, func(key string) bool { return b.Word(key) == axis })
	})
}

func renamedPorts(ports []circuit.PortRef, ids map[string]string) []circuit.PortRef {
	var out []circuit.PortRef
	for _, p := range ports {
		if id, ok := ids[p.Block]; ok {
			out = append(out, circuit.PortRef{Block: id, Port: p.Port})
		}
	}
	return out
}

func groupText(g circuit.SheetGroup) string {
	return "{label: " + encode(g.Label, true) + ", blocks: " + idsText(g.Blocks) + "}"
}

func idsText(ids []string) string {
	var words []string
	for _, id := range ids {
		words = append(words, encode(id, true))
	}
	return "[" + strings.Join(words, ", ") + "]"
}
