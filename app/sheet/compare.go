package sheet

import (
	"image/color"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"

	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/audit/pen"
	"barlitre/circuit"
)

// twin is the block of the same id and kind in the circuit on the other sheet.
func (p *panel) twin(c *audit.CircuitEntry, b *circuit.Block) (other *audit.CircuitEntry, twin *circuit.Block) {
	for _, e := range p.s.editors {
		if e.circuit < 0 || e.name == c.Name {
			continue
		}
		if other = p.s.ctx.Doc().File().Circuit(e.name); other == nil {
			continue
		}
		if twin = other.Block(b.ID); twin != nil && twin.Kind == b.Kind {
			return other, twin
		}
	}
	return nil, nil
}

// compared is the twin while the panel compares, else nil.
func (p *panel) compared() (other *audit.CircuitEntry, twin *circuit.Block) {
	c, b := p.at()
	if !p.comparing || c == nil || b == nil {
		return nil, nil
	}
	return p.twin(c, b)
}

// newCompare makes the link that sets the other circuit's values beside the own.
func (p *panel) newCompare() {
	p.compare = widgets.Name(newLink("", func() {
		p.comparing = !p.comparing
		p.rebuildHere()
		p.bringCompare()
	}), "sheet.compare")
	p.compare.lead = true
	p.compareLine = container.New(wordsLine{}, p.compare)
}

// bringCompare says what the link does; it is there where there is something to compare.
func (p *panel) bringCompare() {
	c, b := p.at()
	var other *audit.CircuitEntry
	if c != nil && b != nil {
		other, _ = p.twin(c, b)
	}
	show(p.compareLine, other != nil)
	if other != nil {
		name := pen.Shorten(other.Name, 11, false, 150)
		p.compare.SetText(pick(p.comparing, "Stop comparing with "+name, "Compare with "+name))
	}
}

// beside is the line below a field that shows the value in the other circuit, and takes it.
type besideRow struct {
	p       *panel
	param   *circuit.Param
	text    *canvas.Text
	take    *link
	content *fyne.Container
}

// newBeside makes the line of a parameter.
func newBeside(p *panel, q *circuit.Param, after func(error)) *besideRow {
	r := &besideRow{p: p, param: q, text: canvas.NewText("", color.Transparent)}
	r.take = widgets.Name(newLink("take this", func() {
		c, b := p.at()
		other, twin := p.compared()
		if twin != nil {
			room := p.s.room(c.Name)
			after(room.said(p.s.ctx.Doc().TakeValue(c.Name, b.ID, q.Key, other.Name, room.make)))
		}
	}), "field."+q.Key+".take")
	r.content = container.New(headLine{}, r.text, canvas.NewText("", nil), r.take)
	widgets.Name(r.text, "field."+q.Key+".beside")
	return r
}

// fill compares: what differs is marked and can be taken.
func (r *besideRow) fill() {
	other, twin := r.p.compared()
	show(r.content, twin != nil)
	if twin == nil {
		return
	}
	_, b := r.p.at()
	theirs := r.p.valueText(twin, r.param)
	same := sameValue(twin, b, r.param)
	show(r.take, !same)
	pal, k := r.p.s.ctx.Palette(), widgets.Scale()
	r.text.TextSize, r.text.TextStyle.Bold = 11*k, !same
	r.text.Color = pal.Secondary
	if !same {
		r.text.Color = pal.Ink
	}
	mark := pick(same, "= ", "≠ ")
	room := float64(r.p.width() / k)
	if !same {
		room -= 70 // of the link
	}
	name := pen.Shorten(other.Name, 11, !same, room-pen.TextWidth(mark+": "+theirs, 11, !same))
	r.text.Text = pen.Shorten(mark+name+": "+theirs, 11, !same, room)
	r.text.Refresh()
}

// differs reports whether a parameter has another value in the other circuit.
func (p *panel) differs(b *circuit.Block, q *circuit.Param) bool {
	_, twin := p.compared()
	return twin != nil && !sameValue(twin, b, q)
}
