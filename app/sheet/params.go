package sheet

import (
	"fmt"
	"slices"
	"unicode"
	"unicode/utf8"

	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/circuit"
)

// lower makes a title part of a sentence; an abbreviation stays as it is.
func lower(s string) string {
	first, n := utf8.DecodeRuneInString(s)
	if second, _ := utf8.DecodeRuneInString(s[n:]); unicode.IsUpper(second) {
		return s
	}
	return string(unicode.ToLower(first)) + s[n:]
}

// blockRows makes the rows of a block: what was given or must be, and when asked for
// what is left at its default.
func (p *panel) blockRows(c *audit.CircuitEntry, b *circuit.Block) {
	k := circuit.KindNamed(b.Kind)
	if k == nil {
		return
	}
	later := 0
	for i := range k.Params {
		q := &k.Params[i]
		if !p.expanded && !p.listed(c, b, q) {
			later++
			continue
		}
		p.rows = append(p.rows, p.paramRow(c.Name, b.ID, q))
	}
	if later > 0 || p.expanded {
		p.all = newLink("", func() {
			p.expanded = !p.expanded
			p.rebuild()
			p.warn()
			p.relay()
		})
		p.all.lead = true
		p.all.SetText(pick(p.expanded, "Hide values left at their defaults", fmt.Sprintf("Show %d more values, left at their defaults", later)))
		widgets.Name(p.all, "sheet.all")
	}
}

// listed tells whether a parameter is worth a row at once.
func (p *panel) listed(c *audit.CircuitEntry, b *circuit.Block, q *circuit.Param) bool {
	_, value := b.Values[q.Key]
	_, word := b.Words[q.Key]
	if value || word || q.Need {
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
	options := q.Choices
	if b := p.block(circuitName, block); q.Type == circuit.FileRef && b != nil && b.Word(q.Key) != "" {
		options = []string{b.Word(q.Key)}
	}
	if q.Type == circuit.AxisRef {
		options = nil
		for _, a := range p.s.ctx.Doc().File().Axes {
			options = append(options, a.Name)
		}
	}
	r := &choiceRow{selectRow: newSelectRow(p, q.Title, "field."+q.Key, target, options), param: q}
	r.value = func() (string, string) {
		b := p.block(circuitName, block)
		if b == nil {
			return "", ""
		}
		if w := b.Word(q.Key); w != "" || q.Default == "" {
			return w, q.Text
		}
		return q.Default, "default" + reason(circuit.Value{Origin: q.Origin, Note: q.Source}) + join("; ", q.Text)
	}
	return r
}

type choiceRow struct {
	*selectRow
	param *circuit.Param
}

func (r *choiceRow) key() string { return r.param.Key }

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
