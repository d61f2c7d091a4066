package sheet

import (
	"math"
	"slices"
	"strings"

	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// several lists the selected blocks of the kind of the one at hand, sorted, with that
// itself; it is alone where no other is selected.
func (p *panel) several(c *audit.CircuitEntry, b *circuit.Block) []string {
	out := []string{b.ID}
	e := p.s.editors[p.s.active]
	if e.name != c.Name {
		return out
	}
	for _, id := range e.ids() {
		if o := c.Block(id); o != nil && o.Kind == b.Kind && id != b.ID {
			out = append(out, id)
		}
	}
	slices.Sort(out)
	return out
}

// targets are those of all blocks that are edited together, of a target of the one at
// hand: "As found/RV1.crack". Other targets stand alone.
func (p *panel) targets(target string) []string {
	if len(p.many) < 2 {
		return []string{target}
	}
	for _, id := range p.many {
		rest, ok := strings.CutPrefix(target, p.manyOf+"/"+id+".")
		if !ok {
			continue
		}
		var out []string
		for _, id := range p.many {
			out = append(out, p.manyOf+"/"+id+"."+rest)
		}
		return out
	}
	return []string{target}
}

// set and drop change a value of all blocks that are edited together, as one step of undo.
func (p *panel) set(target, text string) error {
	return p.s.ctx.Doc().SetAll(p.targets(target), text)
}
func (p *panel) drop(target string) error { return p.s.ctx.Doc().DropAll(p.targets(target)) }

// valueText is what a parameter of a block says, with its unit; a default in brackets,
// "–" for none.
func (p *panel) valueText(b *circuit.Block, q *circuit.Param) string {
	if q.Type != circuit.Number {
		switch w := b.Word(q.Key); {
		case w != "":
			return q.NameOf(w)
		case q.Default != "":
			return "(" + q.NameOf(q.Default) + ")"
		}
		return none
	}
	v, isDefault, ok := circuit.KindNamed(b.Kind).Value(b, q.Key)
	if !ok {
		return none
	}
	u := v.Unit
	if u.Factor == 0 {
		u = p.preferred(q)
	}
	text := p.s.ctx.Local(strings.TrimSpace(plain(units.Number(u.FromSI(v.SI), 4)) + " " + u.Label()))
	if isDefault {
		return "(" + text + ")"
	}
	return text
}

// differ reports whether the blocks that are edited together have different values, and
// lists them: "160 bar (RV1), 200 bar (RV2)".
func (p *panel) differ(q *circuit.Param) (list string, yes bool) {
	if len(p.many) < 2 {
		return "", false
	}
	var texts []string
	var first *circuit.Block
	for _, id := range p.many {
		b := p.block(p.manyOf, id)
		if b == nil {
			continue
		}
		if first == nil {
			first = b
		}
		yes = yes || !sameValue(first, b, q)
		texts = append(texts, p.valueText(b, q)+" ("+id+")")
	}
	return strings.Join(texts, ", "), yes
}

// sameValue reports whether a parameter has one value in two blocks of a kind, given or
// by default, whatever the units.
func sameValue(a, b *circuit.Block, q *circuit.Param) bool {
	k := circuit.KindNamed(a.Kind)
	if q.Type != circuit.Number {
		return k.WordOf(a, q.Key) == k.WordOf(b, q.Key)
	}
	v, _, ok := k.Value(a, q.Key)
	w, _, has := k.Value(b, q.Key)
	return ok == has && (!ok || math.Abs(v.SI-w.SI) <= 1e-9*math.Max(math.Abs(v.SI), math.Abs(w.SI)))
}

// severalWord stands in a field whose blocks have different values.
const severalWord = "several"
