package sheet

import (
	"math"
	"strings"

	"barlitre/circuit"
	"barlitre/machines/units"
)

// velocityLines tells how fast oil runs in a line: in the blocks of kind line that it
// touches, whose inner diameter is known.
func (e *editor) velocityLines(ports []circuit.PortRef) []string {
	if e.state == nil {
		return nil
	}
	var out []string
	oil := false
	for _, p := range ports {
		b := e.drawn.Block(p.Block)
		if _, has := e.state.Signal(p.String() + ".q"); has {
			oil = true
		}
		if b == nil || b.Kind != "line" {
			continue
		}
		v, ok := e.state.Signal(b.ID + ".v")
		d, given := b.Values["diameter"]
		if ok && given {
			out = append(out, e.s.ctx.Text(math.Abs(v), units.Velocity, 3)+" in "+b.ID+", inner diameter "+e.s.ctx.Local(units.Format(d.SI, d.Unit, 3)))
		}
	}
	if oil && len(out) == 0 {
		out = append(out, "velocity not known: no inner diameter; draw it as a Line")
	}
	return out
}

// way is a way through a valve: from where to where, and the port whose flow it has.
type way struct{ from, to, flow string }

// waysOf lists the ways that a directional valve has open at an opening u, and says its
// position in words.
func waysOf(b *circuit.Block, u float64) (position string, open []way) {
	switch {
	case u > 0 && circuit.KindNamed(b.Kind).WordOf(b, "extend") == "regenerative":
		return "P to A, B to P", []way{{"P", "A", "A"}, {"B", "P", "B"}}
	case u > 0:
		return "P to A, B to T", []way{{"P", "A", "A"}, {"B", "T", "B"}}
	case u < 0:
		return "P to B, A to T", []way{{"P", "B", "B"}, {"A", "T", "A"}}
	}
	switch circuit.KindNamed(b.Kind).WordOf(b, "centre") {
	case "open":
		return "centre, all ports joined", []way{{"P", "T", "P"}, {"A", "T", "A"}, {"B", "T", "B"}}
	case "tandem":
		return "centre, P to T", []way{{"P", "T", "P"}}
	case "float":
		return "centre, A and B to T", []way{{"A", "T", "A"}, {"B", "T", "B"}}
	}
	return "centre, all ports closed", nil
}

// valveLines tells the position of a directional valve, and flow, pressure drop and
// power of each way that is open.
func (e *editor) valveLines(b *circuit.Block) []string {
	u, ok := e.state.Signal(b.ID + ".u")
	if b.Kind != "valve" || !ok {
		return nil
	}
	position, open := waysOf(b, u)
	out := []string{"position: " + position}
	if u != 0 {
		out[0] += ", open " + e.s.ctx.Local(units.Format(math.Abs(u), units.Percent, 3))
	}
	for _, w := range open {
		if text := e.wayText(b.ID, w); text != "" {
			out = append(out, text)
		}
	}
	return out
}

// wayText is "P → A: 64.0 L/min, 21 bar drop, 2.2 kW", "" where nothing is known.
func (e *editor) wayText(id string, w way) string {
	at := func(port, what string) float64 {
		v, ok := e.state.Signal(id + "." + port + "." + what)
		if !ok {
			return math.NaN()
		}
		return v
	}
	q, drop := math.Abs(at(w.flow, "q")), at(w.from, "p")-at(w.to, "p")
	if math.IsNaN(q + drop) {
		return ""
	}
	return w.from + " → " + w.to + ": " + strings.Join([]string{e.s.ctx.Text(q, units.Flow, 3),
		e.s.ctx.Text(drop, units.Pressure, 3) + " drop", e.s.ctx.Text(math.Abs(q*drop), units.Power, 3)}, ", ")
}

// findingLines tells what is marked at a block.
func (e *editor) findingLines(id string) []string {
	i := e.s.findings.of(e.name, id)
	if i < 0 {
		return nil
	}
	g := e.s.findings.list[i]
	text := strings.TrimPrefix(strings.TrimPrefix(e.s.ctx.Local(g.Text), id+": "), id+", ")
	lines := wrap("⚠ "+levelWords[g.Level]+": "+text, 11, 330)
	if len(lines) > 3 {
		lines = append(lines[:3:3], "…")
	}
	if c := e.s.findings.cures[i]; c != nil {
		lines = append(lines, "in the findings: "+c.Name)
	}
	return lines
}
