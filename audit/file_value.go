package audit

import (
	"math"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/circuit"
	"barlitre/machines/units"
)

// value reads a quantity: "160 bar", or a mapping with value, origin, low, high, note.
func (r *reader) value(s scope, n *yaml.Node, key string, d units.Dim) (circuit.Value, bool) {
	if isNull(n) || n.Kind != yaml.MappingNode {
		return r.quantity(s, n, key, d)
	}
	in := s.in(key)
	in.param = key
	f := r.fields(s, n, key, "value", "origin", "low", "high", "note")
	e, ok := f["value"]
	if !ok {
		r.bad(s, n, key, "has no value; write {value: ...}")
		return circuit.Value{}, false
	}
	v, ok := r.quantity(in, e.value, "value", d)
	v.Line = e.value.Line
	v.Origin = circuit.Origin(r.word(in, f, "origin", originWords()...))
	v.Note = r.text(in, f, "note")
	if !ok {
		return v, false
	}
	v.Low = r.bound(in, f, "low", v, d)
	v.High = r.bound(in, f, "high", v, d)
	if v.Low > v.SI || v.High < v.SI {
		r.bad(s, n, key, "the value must lie between its low and high (%s: %s)", v.Text, bounds(f))
	}
	return v, true
}

func originWords() []string {
	var out []string
	for _, o := range circuit.Origins {
		out = append(out, string(o))
	}
	return out
}

// bounds shows low and high as written.
func bounds(f map[string]entry) string {
	var s string
	for _, k := range []string{"low", "high"} {
		if e, ok := f[k]; ok {
			if s != "" {
				s += ", "
			}
			s += k + " " + e.value.Value
		}
	}
	return s
}

// article puts the article before a noun.
func article(noun string) string {
	if strings.ContainsAny(noun[:1], "aeiou") {
		return "an " + noun
	}
	return "a " + noun
}

// quantity reads "160 bar".
func (r *reader) quantity(s scope, n *yaml.Node, key string, d units.Dim) (circuit.Value, bool) {
	t, ok := r.scalar(s, n, key, article(d.Name()))
	if !ok {
		return circuit.Value{}, false
	}
	si, u, err := units.Parse(t, d)
	if err != nil {
		r.bad(s, n, key, "%v", err)
		return circuit.Value{}, false
	}
	return circuit.Value{SI: si, Text: t, Unit: u, Low: math.NaN(), High: math.NaN(), Line: n.Line}, true
}

// bound reads low or high of v [SI], NaN when it is not there or not readable. A
// bare number is in the unit of v.
func (r *reader) bound(s scope, f map[string]entry, key string, v circuit.Value, d units.Dim) float64 {
	e, ok := f[key]
	if !ok {
		return math.NaN()
	}
	t, ok := r.scalar(s, e.value, key, article(d.Name()))
	if !ok {
		return math.NaN()
	}
	si, err := boundIn(t, v.Unit, d)
	if err != nil {
		r.bad(s, e.value, key, "%v", err)
		return math.NaN()
	}
	return si
}

// boundIn reads a quantity whose bare number is in unit u.
func boundIn(text string, u units.Unit, d units.Dim) (float64, error) {
	if x, _, err := units.Parse(text, units.Count); err == nil {
		return u.ToSI(x), nil
	}
	si, _, err := units.Parse(text, d)
	return si, err
}

// number reads a whole number without a unit.
func (r *reader) number(s scope, f map[string]entry, key string, low, high int) int {
	e, ok := f[key]
	if !ok {
		return 0
	}
	t, ok := r.scalar(s, e.value, key, "a whole number")
	if !ok {
		return 0
	}
	x, _, err := units.Parse(t, units.Count)
	if err != nil || x != math.Trunc(x) || x < float64(low) || x > float64(high) {
		r.bad(s, e.value, key, "is %q; write a whole number from %d to %d", t, low, high)
		return 0
	}
	return int(x)
}
