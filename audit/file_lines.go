package audit

import (
	"fmt"
	"slices"
	"strings"

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
