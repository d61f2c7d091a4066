package audit

import (
	"fmt"
	"slices"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/circuit"
)

// Connect joins two ports, "P1.P" and "V1.P". A port that stands on a line already
// brings its line along: one line is one node. A tank may stand on several lines, which
// stay lines of their own. What cannot be joined is refused, and the error says why.
func (f *File) Connect(circuitName, portA, portB string) error {
	e, err := f.drawn(circuitName)
	if err != nil {
		return err
	}
	a, err := portNamed(portA)
	if err != nil {
		return err
	}
	b, err := portNamed(portB)
	if err != nil {
		return err
	}
	if err := e.MayJoin(a, b); err != nil {
		return err
	}
	return f.join(e, a, e.ownLine(a), b, e.ownLine(b))
}

// ConnectLine leads a port to a line, by its place in Circuit.Lines.
func (f *File) ConnectLine(circuitName, port string, line int) error {
	e, err := f.drawn(circuitName)
	if err != nil {
		return err
	}
	a, err := portNamed(port)
	if err != nil {
		return err
	}
	b, err := e.portOn(line)
	if err != nil {
		return err
	}
	if err := e.MayJoin(a, b); err != nil {
		return err
	}
	return f.join(e, a, e.ownLine(a), b, line)
}

// JoinLines makes two lines one, by their places in Circuit.Lines.
func (f *File) JoinLines(circuitName string, first, second int) error {
	e, err := f.drawn(circuitName)
	if err != nil {
		return err
	}
	a, err := e.portOn(first)
	if err != nil {
		return err
	}
	b, err := e.portOn(second)
	if err != nil {
		return err
	}
	if err := e.MayJoin(a, b); err != nil && a != b {
		return err
	}
	return f.join(e, a, first, b, second)
}

// AddJunction puts a junction on a line and returns its id. Its other ports may be
// connected on.
func (f *File) AddJunction(circuitName string, line int, at [2]float64) (string, error) {
	e, err := f.drawn(circuitName)
	if err != nil {
		return "", err
	}
	p, err := e.portOn(line)
	if err != nil {
		return "", err
	}
	if t := e.TypeOf(p); t != circuit.Oil && t != circuit.Pilot {
		return "", fmt.Errorf("the line at %s is a line of type %s; a junction joins oil and pilot lines", p, t)
	}
	g := *f
	id, err := g.AddBlock(circuitName, "junction", at, "")
	if err != nil {
		return "", err
	}
	if err := g.ConnectLine(circuitName, id+".1", line); err != nil {
		return "", err
	}
	*f = g
	return id, nil
}

// Disconnect takes a port off its line; a tank off all of its lines. A line with fewer
// than two ports left goes.
func (f *File) Disconnect(circuitName, port string) error {
	return f.disconnect(circuitName, port, func(int) bool { return true })
}

// DisconnectFrom takes a port off one line, by its place in Circuit.Lines.
func (f *File) DisconnectFrom(circuitName, port string, line int) error {
	return f.disconnect(circuitName, port, func(i int) bool { return i == line })
}

func (f *File) disconnect(circuitName, port string, from func(i int) bool) error {
	e, err := f.drawn(circuitName)
	if err != nil {
		return err
	}
	p, err := portNamed(port)
	if err != nil {
		return err
	}
	want := map[int][]circuit.PortRef{}
	for i, l := range e.Lines {
		if from(i) && slices.Contains(l.Ports, p) {
			want[i] = slices.DeleteFunc(slices.Clone(l.Ports), func(q circuit.PortRef) bool { return q == p })
		}
	}
	if len(want) == 0 {
		return fmt.Errorf("%s stands on no such line of circuit %q; there is nothing to disconnect", p, e.Name)
	}
	return f.redraw(e, p.String(), want, nil)
}

// DeleteLine takes a line away, by its place in Circuit.Lines; its blocks stay.
func (f *File) DeleteLine(circuitName string, line int) error {
	e, err := f.drawn(circuitName)
	if err != nil {
		return err
	}
	p, err := e.portOn(line)
	if err != nil {
		return err
	}
	return f.redraw(e, "line at "+p.String(), map[int][]circuit.PortRef{line: nil}, nil)
}

// join makes one line of two ports with the lines that they stand on, −1 for none.
func (f *File) join(e *CircuitEntry, a circuit.PortRef, la int, b circuit.PortRef, lb int) error {
	what := a.String() + " - " + b.String()
	for i, l := range e.Lines {
		if slices.Contains(l.Ports, a) && slices.Contains(l.Ports, b) || la == lb && i == la {
			return fmt.Errorf("%s and %s are on one line already", a, b)
		}
	}
	if e.JoinedBeside(a, b) {
		return fmt.Errorf("%s and %s are joined already, by a junction", a, b)
	}
	want := map[int][]circuit.PortRef{}
	switch {
	case la < 0 && lb < 0:
		return f.redraw(e, what, nil, []circuit.PortRef{a, b})
	case la < 0:
		want[lb] = append(slices.Clone(e.Lines[lb].Ports), a)
	case lb < 0:
		want[la] = append(slices.Clone(e.Lines[la].Ports), b)
	default:
		keep, drop := min(la, lb), max(la, lb)
		want[drop] = nil
		want[keep] = union(e.Lines[keep].Ports, e.Lines[drop].Ports)
	}
	return f.redraw(e, what, want, nil)
}

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

// ownLine returns the line that a port stands on, −1 for none and for tanks, which
// take no other line along.
func (e *CircuitEntry) ownLine(p circuit.PortRef) int {
	if b := e.Block(p.Block); b != nil && b.Kind == "tank" {
		return -1
	}
	return slices.IndexFunc(e.Lines, func(l circuit.Line) bool { return slices.Contains(l.Ports, p) })
}

// portOn returns a port that tells a line, not a tank where there is another.
func (e *CircuitEntry) portOn(line int) (circuit.PortRef, error) {
	if line < 0 || line >= len(e.Lines) {
		return circuit.PortRef{}, fmt.Errorf("there is no line %d in circuit %q; it has %d", line+1, e.Name, len(e.Lines))
	}
	ports := e.Lines[line].Ports
	for _, p := range ports {
		if b := e.Block(p.Block); b != nil && b.Kind != "tank" {
			return p, nil
		}
	}
	return ports[0], nil
}

func portNamed(text string) (circuit.PortRef, error) {
	m := portText.FindStringSubmatch(strings.TrimSpace(text))
	if m == nil {
		return circuit.PortRef{}, fmt.Errorf("%q is not a port; write block.port, as in P1.P", text)
	}
	return circuit.PortRef{Block: m[1], Port: m[2]}, nil
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
	if len(texts) == 0 {
		return nil
	}
	return d.add(d.circuit(index), "lines", true, texts...)
}
