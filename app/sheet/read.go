package sheet

import (
	"math"
	"strings"

	"barlitre/circuit"
	"barlitre/machines/units"
)

// blockLines tells of a block under the pointer.
func (e *editor) blockLines(id string) []string {
	b := e.drawn.Block(id)
	if b == nil {
		return nil
	}
	out := []string{id}
	if k := circuit.KindNamed(b.Kind); k != nil {
		out[0] += " · " + circuit.InSentence(k.Title)
	}
	if t := e.heatText(id); t != "" {
		out = append(out, t)
	}
	out = append(out, e.valveLines(b)...)
	return append(out, e.findingLines(id)...)
}

// heatText is the heat of a block at the clock or over the cycle, "" for none.
func (e *editor) heatText(id string) string {
	v := e.state.Heat(id)
	switch {
	case v == 0:
		return ""
	case e.state.Energy:
		return "turns " + e.s.ctx.Text(v, units.Energy, 3) + " a cycle to heat"
	}
	return "turns " + e.s.ctx.Text(v, units.Power, 3) + " to heat"
}

// blockText is what scripts read of a block.
func (e *editor) blockText(id string) string {
	text := strings.Join(e.blockLines(id), ", ")
	if e.selected[id] {
		text += ", selected"
	}
	return text
}

// lineLines tells of a line under the pointer: its pressure, and flow and power at
// each end that has a flow, the largest first seen on top.
func (e *editor) lineLines(net int) []string {
	ports := e.sheet.Net(net)
	if len(ports) == 0 {
		return nil
	}
	var names, flows []string
	pressure, known := 0.0, false
	for _, p := range ports {
		names = append(names, p.String())
		if v, ok := e.state.Signal(p.String() + ".p"); ok && !known {
			pressure, known = v, true
		}
	}
	for _, p := range ports {
		q, ok := e.state.Signal(p.String() + ".q")
		if !ok || math.Abs(q) < 1e-3*e.opt.Scales.Flow {
			continue
		}
		way := "into "
		if q < 0 {
			way = "out of "
		}
		line := way + p.Block + ": " + e.s.ctx.Text(math.Abs(q), units.Flow, 3)
		if known {
			line += ", " + e.s.ctx.Text(math.Abs(q*pressure), units.Power, 3)
		}
		flows = append(flows, line)
	}
	out := []string{strings.Join(names, " – ")}
	if known {
		out[0] = e.s.ctx.Text(pressure, units.Pressure, 3)
	} else {
		out = append(out, e.shaftLines(ports)...)
	}
	out = append(out, flows...)
	if known {
		out = append(out, e.velocityLines(ports)...)
	}
	return out
}

// shaftLines tells speed and power of a shaft or an electric line.
func (e *editor) shaftLines(ports []circuit.PortRef) []string {
	var out []string
	for _, p := range ports {
		if w, ok := e.state.Signal(p.Block + ".w"); ok {
			out = append(out, p.Block+": "+e.s.ctx.Text(w, units.AngularSpeed, 3))
		}
		for _, what := range []string{"shaft", "electric"} {
			if v, ok := e.state.Signal(p.Block + "." + what); ok && (what == "shaft") == (p.Port == "shaft") {
				out = append(out, p.Block+": "+e.s.ctx.Text(v, units.Power, 3))
			}
		}
	}
	return out
}
