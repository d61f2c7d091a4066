package sheet

import (
	"slices"

	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/circuit/duty"
)

// axisChoices lets a row offer the axes that there are and, to what moves one, a new one.
func (p *panel) axisChoices(r *selectRow, circuitName, block string, q *circuit.Param, target string, others []string) {
	file := func() *audit.File { return p.s.ctx.Doc().File() }
	offer := func() (word, name string, kind duty.AxisKind) {
		if b := p.block(circuitName, block); b != nil && q.Key == "axis" {
			if name, kind, ok := file().NewAxis(b); ok {
				return "new axis: " + name, name, kind
			}
		}
		return "", "", 0
	}
	r.options = func() []string {
		out := slices.Clone(others)
		for _, a := range file().Axes {
			out = append(out, a.Name)
		}
		if word, _, _ := offer(); word != "" {
			out = append(out, word)
		}
		return out
	}
	r.pick = func(text string) (bool, error) {
		word, name, kind := offer()
		if word == "" || text != word {
			return false, nil
		}
		return true, p.s.ctx.Doc().GiveAxis(target, name, kind)
	}
}
