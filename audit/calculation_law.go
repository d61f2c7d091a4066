package audit

import (
	"strings"
	"unicode"

	"barlitre/circuit"
	"barlitre/machines/units"
)

// law is what the catalog says of a loss of a block.
type law struct {
	kind  *circuit.Kind
	block *circuit.Block
	loss  *circuit.LossKind
}

func lawOf(c *circuit.Circuit, block, kind string) *law {
	b := c.Block(block)
	if b == nil {
		return nil
	}
	k := circuit.KindNamed(b.Kind)
	if k == nil {
		return nil
	}
	for i := range k.Losses {
		if k.Losses[i].Name == kind {
			return &law{k, b, &k.Losses[i]}
		}
	}
	return nil
}

func (l *law) formula() string {
	lines := []string{strings.TrimSuffix(l.loss.Text, "."), trapezoid}
	for _, e := range l.kind.Equations {
		lines = append(lines, e.Text)
	}
	return joined(lines)
}

func (l *law) source() string {
	lines := []string{fromBalance}
	for _, e := range l.kind.Equations {
		if line := l.kind.Title + ": " + e.Source; e.Source != "" && line != lines[len(lines)-1] {
			lines = append(lines, line)
		}
	}
	return joined(lines)
}

// values lists the numbers of the block that stand in its formulas, then its choices.
func (l *law) values(s *Solution, p printer) string {
	words := symbols(l.formula())
	var numbers, choices []string
	for i := range l.kind.Params {
		q := &l.kind.Params[i]
		row, ok := parameter(l.kind, l.block, q)
		switch {
		case !ok:
		case q.Type == circuit.Number && words[q.Symbol]:
			numbers = append(numbers, q.Symbol+" = "+row.Value+" ("+row.Origin+spread(row)+")")
		case q.Type == circuit.Choice:
			choices = append(choices, circuit.InSentence(q.Title)+": "+row.Value+" ("+row.Origin+")")
		}
	}
	if words["μ"] {
		numbers = append(numbers, "μ = "+p.in(s.Conditions.Viscosity, units.DynamicViscosity, 3)+" (oil at "+p.degrees(s.Oil)+")")
	}
	if words["ρ"] {
		numbers = append(numbers, "ρ = "+p.in(s.Conditions.Density, units.Density, 3)+" (oil at "+p.degrees(s.Oil)+")")
	}
	if l.kind.Param("compression") != nil && words["ε"] {
		oil := fluidOf(s.Conditions)
		numbers = append(numbers, "B = "+p.in(oil.Bulk, units.Pressure, 3)+" (oil)", "α = "+units.Format(oil.Air, units.Percent, 2)+" (air in the oil)", "p0 = "+p.in(units.AtmosphericPressure, units.Pressure, 4))
	}
	return joined([]string{strings.Join(numbers, "; "), strings.Join(choices, "; ")})
}

// spread says between which limits a value may lie.
func spread(r ParameterRow) string {
	switch {
	case r.Low != "" && r.High != "":
		return ", " + units.Range(r.Low, r.High)
	case r.Low != "":
		return ", from " + r.Low
	case r.High != "":
		return ", up to " + r.High
	}
	return ""
}

// symbols are the words of a formula.
func symbols(text string) map[string]bool {
	out := map[string]bool{}
	for _, w := range strings.FieldsFunc(text, func(r rune) bool { return !unicode.IsLetter(r) && !unicode.IsDigit(r) }) {
		out[w] = true
	}
	return out
}
