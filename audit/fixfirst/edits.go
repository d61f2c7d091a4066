package fixfirst

import (
	"fmt"
	"math"
	"strings"

	"barlitre/audit"
	"barlitre/audit/look"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// isLower reports whether what an edit would lower stands at its value or below already.
func isLower(f *audit.File, e Edit) bool {
	i := strings.LastIndex(e.Target, "/")
	id, key, ok := strings.Cut(e.Target[i+1:], ".")
	entry := f.Circuit(e.Target[:max(i, 0)])
	if !ok || entry == nil || entry.Block(id) == nil {
		return false
	}
	b := entry.Block(id)
	p := circuit.KindNamed(b.Kind).Param(key)
	if p == nil {
		return false
	}
	want, _, err := units.Parse(e.Value, p.Dim)
	return err == nil && look.Value(b, key) <= want
}

// InWords lists the edits for people: "RV1 cracks at 231 bar".
func (c Cure) InWords(f *audit.File) string {
	var parts []string
	for _, e := range c {
		parts = append(parts, e.inWords(f))
	}
	return strings.Join(parts, "; ")
}

func (e Edit) inWords(f *audit.File) string {
	i := strings.LastIndex(e.Target, "/")
	rest := e.Target[i+1:]
	id, key, _ := strings.Cut(rest, ".")
	switch e.act {
	case off, rewire:
		return e.String()
	case heat:
		if k := audit.HeatKeyNamed(key); k != nil {
			return circuit.InSentence(k.Title) + " " + e.Value
		}
	}
	if rest == "pump_at_rest" {
		return "pumps " + circuit.AtRest(e.Value).Name() + " while every axis stands"
	}
	if entry := f.Circuit(e.Target[:max(i, 0)]); entry != nil && entry.Block(id) != nil {
		if p := circuit.KindNamed(entry.Block(id).Kind).Param(key); p != nil {
			return id + " " + circuit.InSentence(p.Title) + " " + p.NameOf(e.Value)
		}
	}
	for _, v := range f.OilValues() {
		if rest == "oil."+v.Key {
			return circuit.InSentence(v.Title) + " " + e.Value
		}
	}
	return strings.ReplaceAll(rest, "_", " ") + ": " + e.Value
}

// barText writes a pressure [Pa] for the file, to whole bars, rounded down.
func barText(pa float64) string {
	return fmt.Sprintf("%g bar", math.Floor(pa/units.Bar+1e-6))
}

// pressures makes a choice of cures of one pressure, in this order.
func (p *plant) pressures(do act, b *circuit.Block, key string, to ...float64) []Cure {
	var out []Cure
	for _, x := range to {
		out = append(out, Cure{{do, p.target(b, key), barText(x)}})
	}
	return out
}
