package sheet

import (
	"fmt"
	"image/color"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/widgets"
	"barlitre/circuit"
)

// group is a section of the parameters of a block: a heading, and the rows below it.
type group struct {
	section circuit.Section
	head    fyne.CanvasObject // nil where the kind has no sections
	about   *widgets.Text     // what the values that are not shown follow from
	toggle  *link             // nil where all values are shown anyway
	rows    []row
	later   []*circuit.Param // left at their defaults
}

// dress makes heading and link of a group.
func (p *panel) dress(g *group) {
	if n := len(g.later); n > 0 {
		text := fmt.Sprintf("%d more", n)
		if g.section == "" {
			text = fmt.Sprintf("Show %d more values, left at their defaults", n)
		}
		if p.expanded[g.section] {
			text = pick(g.section == "", "Hide values left at their defaults", "fewer")
		}
		g.toggle = newLink(text, func() {
			p.expanded[g.section] = !p.expanded[g.section]
			p.rebuildHere()
		})
		g.toggle.lead = g.section == ""
		widgets.Name(g.toggle, "sheet.all"+pick(g.section == "", "", ".")+string(g.section))
	}
	if g.section == "" {
		return
	}
	g.head = p.heading(string(g.section), g.toggle)
	g.about = p.label(widget.LowImportance)
}

// gapOf is room between things.
func gapOf(h float32) fyne.CanvasObject {
	r := canvas.NewRectangle(color.Transparent)
	r.SetMinSize(fyne.NewSize(1, h*widgets.Scale()))
	return r
}

// objects are what stands in the list, from the top down.
func (g *group) objects() []fyne.CanvasObject {
	var out []fyne.CanvasObject
	if g.head != nil {
		out = append(out, g.head, g.about)
	}
	for _, r := range g.rows {
		out = append(out, r.object())
	}
	if g.head == nil && g.toggle != nil {
		out = append(out, g.toggle)
	}
	return out
}

// summarize says what the values that are not shown follow from, where that is one thing.
func (p *panel) summarize() {
	_, b := p.at()
	for _, g := range p.groups {
		if g.about == nil || b == nil {
			continue
		}
		text := ""
		if !p.expanded[g.section] {
			text = commonReason(b, g.later)
		}
		g.about.SetText(text)
	}
}

// commonReason is why several defaults are what they are, "" where they have not one reason.
func commonReason(b *circuit.Block, params []*circuit.Param) string {
	k, text := circuit.KindNamed(b.Kind), ""
	for _, q := range params {
		v, isDefault, ok := k.Value(b, q.Key)
		if q.Type != circuit.Number || !ok || !isDefault || v.SI == 0 {
			continue
		}
		switch why := reason(v); {
		case why == "":
			return ""
		case text == "":
			text = why
		case text != why:
			return ""
		}
	}
	if text == "" {
		return ""
	}
	return "defaults" + text
}

// rebuildHere makes the rows anew and stays where the panel was scrolled to.
func (p *panel) rebuildHere() {
	at := p.scroll.Offset
	p.rebuild()
	p.warn()
	p.relay()
	p.scroll.ScrollToOffset(at)
}
