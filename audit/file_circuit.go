package audit

import (
	"fmt"
	"math"
	"regexp"
	"slices"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/circuit"
	"barlitre/machines/units"
)

// blockIDs notes the ids of all circuits, which tracks may name.
func (r *reader) blockIDs(n *yaml.Node) {
	if n == nil || n.Kind != yaml.SequenceNode {
		return
	}
	for _, item := range n.Content {
		if b := child(item, "blocks"); b != nil && b.Kind == yaml.MappingNode {
			for i := 0; i < len(b.Content); i += 2 {
				r.blocks[b.Content[i].Value] = true
			}
		}
	}
}

const noCircuit = "there is no circuit; draw the one that was found"

func (r *reader) circuits(n, root *yaml.Node) {
	items := r.items(scope{}, n, "circuits", "circuits: [{name: As found, ...}]")
	if len(items) == 0 && r.isAbsent(n) {
		r.bad(scope{}, root, "circuits", noCircuit)
	}
	line := map[string]int{}
	for i, item := range items {
		name, at := nameOf(item)
		if name == "" {
			name = fmt.Sprintf("circuit %d", i+1)
		} else if first, twice := line[name]; twice {
			r.bad(scope{circuit: name}, at, "", "circuit %q stands here twice, %s; rename one", name, lines(first, at.Line))
		} else {
			line[name] = at.Line
		}
		r.file.Circuits = append(r.file.Circuits, r.circuit(name, i, item))
	}
}

func (r *reader) circuit(name string, index int, n *yaml.Node) CircuitEntry {
	s := scope{circuit: name, where: fmt.Sprintf("circuit %q", name)}.titled("circuit")
	f := r.fields(s, n, "", "name", "role", "note", "pump_at_rest", "standby", "retrofit_cost", "blocks", "lines", "notes", "groups", "bends", "heat")
	if _, ok := f["name"]; !ok {
		r.bad(s, n, "name", "is missing")
	}
	c := CircuitEntry{Circuit: &circuit.Circuit{Name: name, Line: n.Line}, Role: AsFound}
	if index > 0 {
		c.Role = Proposal
	}
	r.text(s, f, "name")
	if role := r.word(s, f, "role", string(AsFound), string(Proposal)); role != "" {
		c.Role = Role(role)
	}
	c.Note = r.text(s, f, "note")
	c.PumpAtRest = circuit.AtRest(r.wordCalled(s, f, "pump_at_rest", func(w string) string { return circuit.AtRest(w).Name() }, string(circuit.Keep), string(circuit.Unload), string(circuit.Stop)))
	if v, ok := r.optional(s, f, "standby", units.Power); ok {
		if c.Standby, c.HasStandby = v.SI, true; v.SI < 0 {
			r.bad(s, f["standby"].value, "standby", "is %s, must not be below 0", v.Text)
		}
	}
	if e, ok := f["retrofit_cost"]; ok {
		c.Cost = r.cost(s, e.value)
		if c.Role != Proposal {
			r.bad(s, e.at, "retrofit_cost", "is for proposals; a circuit as found costs nothing more")
		}
	}
	for _, e := range r.blockEntries(s, f["blocks"].value) {
		if b, ok := r.block(s, e); ok {
			c.Blocks = append(c.Blocks, b)
		}
	}
	for _, item := range r.items(s, f["lines"].value, "lines", "lines: [P1.P - V1.P]") {
		if l, ok := r.line(s, item); ok {
			c.Lines = append(c.Lines, l)
		} else {
			c.unreadLine = true
		}
	}
	c.Heat = r.heat(s, f["heat"].value)
	c.Notes = r.notes(s, f["notes"].value)
	c.Groups = r.groups(s, f["groups"].value, &c)
	c.Bends = r.bends(s, f["bends"].value, &c)
	return c
}

func (r *reader) cost(s scope, n *yaml.Node) Cost {
	var c Cost
	in := s.in("retrofit_cost")
	if isNull(n) || n.Kind != yaml.MappingNode {
		c.Likely, c.Given = r.quantity(s, n, "retrofit_cost", units.Money)
		c.Low, c.High = c.Likely, c.Likely
		if c.Given {
			r.money(s, n, "retrofit_cost", c.Likely)
		}
		return c
	}
	f := r.fields(s, n, "retrofit_cost", "low", "likely", "high", "note")
	c.Note = r.text(in, f, "note")
	if _, ok := f["likely"]; !ok {
		r.bad(s, n, "retrofit_cost", "has no likely value; write {low: ..., likely: 26000 EUR, high: ...}")
		return c
	}
	if c.Likely, c.Given = r.quantity(in, f["likely"].value, "likely", units.Money); !c.Given {
		return c
	}
	r.money(in, f["likely"].value, "likely", c.Likely)
	c.Low, c.High = c.Likely, c.Likely
	_, low := f["low"]
	_, high := f["high"]
	if low != high {
		r.bad(s, n, "retrofit_cost", "has one end of its range only; give low and high, or neither")
		return c
	}
	if low {
		c.Low, c.High = r.costEnd(in, f, "low", c.Likely), r.costEnd(in, f, "high", c.Likely)
		if c.Low.SI > c.Likely.SI || c.High.SI < c.Likely.SI {
			r.bad(s, n, "retrofit_cost", "the likely cost must lie between low and high (%s: %s)", c.Likely.Text, bounds(f))
		}
	}
	if c.Low.SI < 0 {
		r.bad(s, n, "retrofit_cost", "is %s, must not be below 0", c.Low.Text)
	}
	return c
}

// costEnd reads low or high of a cost, in the currency of the likely one.
func (r *reader) costEnd(s scope, f map[string]entry, key string, likely circuit.Value) circuit.Value {
	n := f[key].value
	v := likely
	if x := r.bound(s, f, key, likely, units.Money); !math.IsNaN(x) {
		v.SI, v.Text, v.Line = x, n.Value, n.Line
	}
	if _, u, err := units.Parse(v.Text, units.Money); err == nil {
		r.money(s, n, key, circuit.Value{Unit: u})
	}
	return v
}

// blockEntries lists the blocks of a circuit; an id that is used twice is a fault.
func (r *reader) blockEntries(s scope, n *yaml.Node) []entry {
	at := len(r.found)
	out := r.entries(s, n, "blocks")
	for i := at; i < len(r.found); i++ { // the id is the block, not a parameter of the circuit
		r.found[i].Block, r.found[i].Parameter = r.found[i].Parameter, ""
	}
	return out
}

// placing are the keys of a block that are not parameters of its kind.
var placing = []string{"kind", "at", "turn", "mirror"}

func (r *reader) block(s scope, e entry) (circuit.Block, bool) {
	s.block, s.where = e.key, e.key
	s = s.titled("block")
	b := circuit.Block{ID: e.key, Line: e.at.Line, Values: map[string]circuit.Value{}, Words: map[string]circuit.Word{}}
	if !r.id(s, e.at, "block") {
		return b, false
	}
	if isNull(e.value) || e.value.Kind != yaml.MappingNode {
		r.bad(s, e.value, "", "needs a kind and its parameters, as in %s: {kind: relief, crack: 160 bar}", e.key)
		return b, false
	}
	kn := child(e.value, "kind")
	if kn == nil {
		r.bad(s, e.at, "kind", "is missing; write what the block is, such as kind: cylinder; `barlitre blocks` lists the kinds")
		return b, false
	}
	name, ok := r.scalar(s, kn, "kind", "a kind of block")
	if !ok {
		return b, false
	}
	b.Kind = name
	kind := circuit.KindNamed(name)
	if kind == nil {
		r.bad(s, kn, "kind", "%s", noKind(name))
		return b, true
	}
	r.params(s.ofKind(kind), &b, kind, e.value)
	return b, true
}

// noKind says that a kind of block is not known, and which one was likely meant.
func noKind(name string) string {
	title := func(name string) string {
		if k := circuit.KindNamed(name); k != nil {
			return k.Title
		}
		return ""
	}
	if known := kindNames(); nearest(name, known) != "" || calledSo(name, known, title) != "" {
		return fmt.Sprintf("there is no kind %q%s", name, guessOf(name, known, title))
	}
	return fmt.Sprintf("there is no kind %q; `barlitre blocks` lists the kinds", name)
}

func kindNames() []string {
	var out []string
	for _, k := range circuit.Catalog() {
		out = append(out, k.Name)
	}
	return out
}

// params reads what a block of a known kind says.
func (r *reader) params(s scope, b *circuit.Block, kind *circuit.Kind, n *yaml.Node) {
	f := map[string]entry{}
	for _, e := range r.entries(s, n, "") {
		f[e.key] = e
		p := kind.Param(e.key)
		switch {
		case slices.Contains(placing, e.key):
		case p == nil:
			known := append([]string{}, placing...)
			for _, q := range kind.Params {
				known = append(known, q.Key)
			}
			r.unknownParam(s, e, n, kind, known)
		case p.Type == circuit.Number:
			if v, ok := r.value(s, e.value, e.key, p.Dim); ok {
				b.Values[e.key] = v
			}
		default:
			if t, ok := r.scalar(s, e.value, e.key, p.Takes()); ok {
				b.Words[e.key] = circuit.Word{Text: choice(p, t), Line: e.value.Line}
			}
		}
	}
	if e, ok := f["points"]; ok && kind.Param("points") != nil {
		r.measured(s, b, kind, e.value)
	}
	b.At = r.at(s, f)
	b.Turn = r.number(s, f, "turn", 0, 3)
	b.Mirror = r.flag(s, f, "mirror", false)
}

// choice lets true and false stand for the yes and no of a parameter.
func choice(p *circuit.Param, word string) string {
	switch w := strings.ToLower(word); {
	case !slices.Contains(p.Choices, "yes"):
	case w == "yes" || w == "true":
		return "yes"
	case w == "no" || w == "false":
		return "no"
	}
	return word
}

func (r *reader) unknownParam(s scope, e entry, n *yaml.Node, kind *circuit.Kind, known []string) {
	if n.Style&yaml.FlowStyle != 0 && isNull(e.value) && startsWithDigit.MatchString(e.key) {
		r.unknownKey(s, e, n, known)
		return
	}
	which := s.guess(e.key, known)
	if !strings.Contains(which, "did you mean") {
		which = fmt.Sprintf("; `barlitre blocks %s` lists its keys", kind.Name)
	}
	r.bad(s, e.at, e.key, "unknown key for this kind of block, %s%s", circuit.WithWord(kind.Title, kind.Name), which)
}

// at reads the place of a block on the sheet.
func (r *reader) at(s scope, f map[string]entry) *[2]float64 {
	e, ok := f["at"]
	if !ok {
		return nil
	}
	if isNull(e.value) || e.value.Kind != yaml.SequenceNode || len(e.value.Content) != 2 {
		r.bad(s, e.value, "at", "needs two numbers, as in at: [12, 30]")
		return nil
	}
	var at [2]float64
	for i, n := range e.value.Content {
		v, ok := r.quantity(s, n, "at", units.Count)
		if !ok {
			return nil
		}
		if math.Abs(v.SI) > 1e4 {
			r.bad(s, n, "at", "is %s, must be between -10000 and 10000", v.Text)
			return nil
		}
		at[i] = v.SI
	}
	return &at
}

var portText = regexp.MustCompile(`^([\pL\pN_]+)\.([\pL\pN_]+)$`)

// line reads "P1.P - V1.P - RV1.P"; whether the ports exist is the check's business.
func (r *reader) line(s scope, n *yaml.Node) (circuit.Line, bool) {
	l := circuit.Line{Line: n.Line}
	s = s.in("lines")
	t, ok := r.scalar(s, n, "", "ports joined by -, as in P1.P - V1.P")
	if !ok {
		return l, false
	}
	for _, part := range strings.Split(t, "-") {
		m := portText.FindStringSubmatch(strings.TrimSpace(part))
		if m == nil {
			where := ""
			if whole := oneLine(t); whole != strings.TrimSpace(part) {
				where = fmt.Sprintf(" in %q", whole)
			}
			r.bad(s, n, "", "%q is not a port%s; write block.port - block.port", strings.TrimSpace(part), where)
			return l, false
		}
		l.Ports = append(l.Ports, circuit.PortRef{Block: m[1], Port: m[2]})
	}
	return l, true
}
