package sheet

import (
	"slices"
	"strings"

	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/circuit"
)

// lineEnd is what a new line begins or ends at: a port, else a line that is drawn, by its
// number on the sheet, −1 for neither.
type lineEnd struct {
	port *figures.SheetPort
	net  int
	at   [2]float64 // where on the line, on the grid [M]
}

func (a lineEnd) any() bool { return a.port != nil || a.net >= 0 }

// is tells whether two ends are one.
func (a lineEnd) is(b lineEnd) bool {
	if a.port != nil || b.port != nil {
		return a.port != nil && b.port != nil && a.port.PortRef == b.port.PortRef
	}
	return a.net == b.net
}

// endName names an end.
func (e *editor) endName(a lineEnd) string {
	if a.port != nil {
		return a.port.String()
	}
	return "the line " + e.lineName(a.net)
}

// joining returns the name of the edit that joins two ends, and the edit.
func (e *editor) joining(a, b lineEnd) (name string, do func(f *audit.File) error) {
	first := func(net int) int {
		if lines, _ := e.sheet.Lines(net); len(lines) > 0 {
			return lines[0]
		}
		return -1
	}
	switch {
	case a.port != nil && b.port != nil:
		return "Connect " + a.port.String() + " and " + b.port.String(), func(f *audit.File) error {
			return f.Connect(e.name, a.port.String(), b.port.String())
		}
	case a.port == nil && b.port == nil:
		return "Join two lines", func(f *audit.File) error { return f.JoinLines(e.name, first(a.net), first(b.net)) }
	case a.port == nil:
		a, b = b, a
	}
	return "Connect " + a.port.String(), func(f *audit.File) error {
		if err := f.ConnectLine(e.name, a.port.String(), first(b.net)); err != nil {
			return err
		}
		e.branchAt(f, a.port.PortRef, b)
		return nil
	}
}

// branchAt lets the branch to a port that was just put on a line begin where it was pulled
// out of the line, or let go on it. Where that cannot be, the line is laid as any other.
func (e *editor) branchAt(f *audit.File, port circuit.PortRef, on lineEnd) {
	if e.joined(port) {
		return // two lines become one
	}
	runs, ok := e.sheet.Pull(on.net, on.at, port)
	c := f.Circuit(e.name)
	if !ok || c == nil {
		return
	}
	drawn := c.DrawnWith(port)
	var lines []int
	for i, l := range c.Lines {
		if slices.ContainsFunc(l.Ports, func(p circuit.PortRef) bool {
			b := c.Block(p.Block)
			return b != nil && b.Kind != "tank" && slices.Contains(drawn, p)
		}) {
			lines = append(lines, i)
		}
	}
	if g := *f; g.Bend(e.name, lines, runs) == nil {
		*f = g
	}
}

// joinSays tells what joining two ends would do, and whether it may be done: it is tried
// on a copy of the file, once for each pair.
func (e *editor) joinSays(a, b lineEnd) (text string, fine bool) {
	switch {
	case !b.any():
		return "Release on a port or on a line to connect " + e.endName(a), true
	case a.is(b):
		return "Drag to a port or to a line", true
	}
	key := e.endName(a) + " > " + e.endName(b)
	if e.wire.tried != key || e.wire.triedOn != e.s.ctx.Doc().Revision() {
		e.wire.tried, e.wire.triedOn = key, e.s.ctx.Doc().Revision()
		f := *e.s.ctx.Doc().File()
		_, do := e.joining(a, b)
		e.wire.refusal = do(&f)
	}
	if e.wire.refusal != nil {
		return "⚠ " + strings.ReplaceAll(e.wire.refusal.Error(), "\n", " "), false
	}
	if a.port != nil && b.port != nil {
		return "Connect " + e.endName(a) + " and " + e.endName(b), true
	}
	return "Join " + e.endName(a) + " and " + e.endName(b), true
}

// connect joins two ends, or says why not.
func (e *editor) connect(a, b lineEnd) {
	name, do := e.joining(a, b)
	if err := e.s.ctx.Doc().Edit(name, do); err != nil {
		e.s.refused(err)
		return
	}
	e.fitted = false
	e.s.ctx.Say("Connected " + e.endName(a) + " and " + e.endName(b) + ". Ctrl+Z takes it back.")
}
