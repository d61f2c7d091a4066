package sheet

import (
	"slices"

	"barlitre/audit"
	"barlitre/circuit"
)

// blockRows makes the rows of a block by section: what was given or must be, and when asked for what is left at its
// default.
func (p *panel) blockRows(c *audit.CircuitEntry, b *circuit.Block) {
	k := circuit.KindNamed(b.Kind)
	if k == nil {
		return
	}
	for _, section := range append([]circuit.Section{""}, circuit.Sections...) {
		g := &group{section: section}
		for i := range k.Params {
			q := &k.Params[i]
			switch {
			case q.Section != section:
			case p.expanded[section] || p.listed(c, b, q):
				g.rows = append(g.rows, p.paramRow(c.Name, b.ID, q))
				if !p.listed(c, b, q) {
					g.later = append(g.later, q)
				}
			default:
				g.later = append(g.later, q)
			}
		}
		if len(g.rows)+len(g.later) > 0 {
			p.dress(g)
			p.groups = append(p.groups, g)
			p.rows = append(p.rows, g.rows...)
		}
	}
}

// hidden reports whether a parameter that is worth a row has none, as after undo.
func (p *panel) hidden() bool {
	c, b := p.at()
	if c == nil || b == nil {
		return false
	}
	for _, g := range p.groups {
		if p.expanded[g.section] {
			continue
		}
		for _, q := range g.later {
			if p.listed(c, b, q) {
				return true
			}
		}
	}
	return false
}

// listed tells whether a parameter is worth a row at once.
func (p *panel) listed(c *audit.CircuitEntry, b *circuit.Block, q *circuit.Param) bool {
	_, value := b.Values[q.Key]
	_, word := b.Words[q.Key]
	if value || word || q.Need || p.differs(b, q) {
		return true
	}
	_, draft := p.drafts[c.Name+"/"+b.ID+"."+q.Key]
	return draft || slices.ContainsFunc(p.s.findings.list, func(f circuit.Finding) bool {
		return f.Circuit == c.Name && f.Block == b.ID && f.Parameter == q.Key && f.Level != circuit.Note
	})
}

func (p *panel) paramRow(circuitName, block string, q *circuit.Param) row {
	target := circuitName + "/" + block + "." + q.Key
	if q.Type == circuit.Number {
		return newNumberRow(p, circuitName, block, q, target)
	}
	if q.Type == circuit.FileRef {
		return newFileRow(p, circuitName, block, q, target)
	}
	options := slices.Clone(q.Choices)
	if q.Default == "" && !q.Need {
		options = append([]string{none}, options...)
	}
	r := &choiceRow{selectRow: newSelectRow(p, q.Title, "field."+q.Key, target, options, q.NameOf), param: q}
	if q.Type == circuit.AxisRef {
		p.axisChoices(r.selectRow, circuitName, block, q, target, options)
	}
	r.beside = newBeside(p, q, func(err error) {
		r.fill()
		if err != nil {
			r.say(err.Error(), true)
		}
		p.relay()
	})
	r.content.Add(r.beside.content)
	r.value = func() (string, string) {
		b := p.block(circuitName, block)
		if b == nil {
			return "", ""
		}
		if list, yes := p.differ(q); yes {
			r.sel.PlaceHolder = severalWord
			return "", list
		}
		switch w := b.Word(q.Key); {
		case w != "":
			return w, q.Text
		case q.Default == "" && !q.Need:
			return none, q.Text
		case q.Default == "":
			return "", q.Text
		}
		return q.Default, "default" + reason(circuit.Value{Origin: q.Origin, Note: q.Source}) + join("; ", q.Text)
	}
	return r
}

// none is the choice that takes a word out of the file.
const none = "–"

type choiceRow struct {
	*selectRow
	param  *circuit.Param
	beside *besideRow
}

func (r *choiceRow) key() string { return r.param.Key }

func (r *choiceRow) fill() {
	r.selectRow.fill()
	r.beside.fill()
}

func join(link, text string) string {
	if text == "" {
		return ""
	}
	return link + text
}

// reason is why a default is what it is.
func reason(v circuit.Value) string {
	switch {
	case v.Note == "":
		return ""
	case v.Origin == circuit.NotStated:
		return ": " + v.Note
	}
	return ", " + string(v.Origin) + ": " + v.Note
}

// block is a block of the present file, or nil.
func (p *panel) block(circuitName, id string) *circuit.Block {
	if c := p.s.ctx.Doc().File().Circuit(circuitName); c != nil {
		return c.Block(id)
	}
	return nil
}
