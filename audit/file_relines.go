package audit

import (
	"fmt"
	"slices"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/circuit"
)

// union joins two lists, with what is in both once.
func union(a, b []circuit.PortRef) []circuit.PortRef {
	out := slices.Clone(a)
	for _, p := range b {
		if !slices.Contains(out, p) {
			out = append(out, p)
		}
	}
	return out
}

// redraw gives lines of a circuit other ports and adds a line; see draft.setLines.
func (f *File) redraw(e *CircuitEntry, what string, want map[int][]circuit.PortRef, added []circuit.PortRef) error {
	d := f.draft()
	if err := d.setLines(f.circuitIndex(e.Name), want, added); err != nil {
		return fmt.Errorf("%s: %w", what, err)
	}
	lines := wanted(e.Lines, want, added)
	return f.take(what, d, func(g *File) bool { return sameLines(g.Circuit(e.Name).Lines, lines) })
}

// wanted returns the ports of all lines as they should be after setLines.
func wanted(lines []circuit.Line, want map[int][]circuit.PortRef, added ...[]circuit.PortRef) [][]circuit.PortRef {
	var out [][]circuit.PortRef
	for i, l := range lines {
		ports, changed := want[i]
		if !changed {
			ports = l.Ports
		}
		if !changed || len(ports) > 1 {
			out = append(out, ports)
		}
	}
	for _, l := range added {
		if len(l) > 1 {
			out = append(out, l)
		}
	}
	return out
}

func sameLines(lines []circuit.Line, want [][]circuit.PortRef) bool {
	return slices.EqualFunc(lines, want, func(l circuit.Line, ports []circuit.PortRef) bool { return slices.Equal(l.Ports, ports) })
}

func portsText(ports []circuit.PortRef) string {
	var words []string
	for _, p := range ports {
		words = append(words, p.String())
	}
	return strings.Join(words, " - ")
}

// setLines rewrites the lines of a circuit that want names by their place among those
// that can be read, takes out what has fewer than two ports left, and adds others.
func (d *draft) setLines(index int, want map[int][]circuit.PortRef, added ...[]circuit.PortRef) error {
	list := child(d.circuit(index), "lines")
	at := map[int][]circuit.PortRef{} // by place in the text
	if list != nil && list.Kind == yaml.SequenceNode {
		readable := 0
		for i, n := range list.Content {
			if _, ok := (&reader{}).line(scope{}, n); !ok {
				continue
			}
			if ports, ok := want[readable]; ok {
				at[i] = ports
			}
			readable++
		}
	}
	var splices []splice
	for i, ports := range at {
		if len(ports) < 2 {
			continue
		}
		sp, err := d.src.replace(list.Content[i], list.Column-1, encode(portsText(ports), true))
		if err != nil {
			return err
		}
		splices = append(splices, sp)
	}
	if err := d.do(splices, nil); err != nil {
		return err
	}
	gone := func(i int) bool { ports, ok := at[i]; return ok && len(ports) < 2 }
	if err := d.cut(d.circuit(index), "lines", false, gone); err != nil {
		return err
	}
	var texts []string
	for _, ports := range added {
		if len(ports) > 1 {
			texts = append(texts, encode(portsText(ports), true))
		}
	}
	if len(texts) > 0 {
		if err := d.add(d.circuit(index), "lines", true, texts...); err != nil {
			return err
		}
	}
	return d.keepBends(index, want, added)
}
