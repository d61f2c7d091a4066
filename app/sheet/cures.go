package sheet

import (
	"barlitre/app/widgets"
	"barlitre/audit/cure"
	"barlitre/audit/pen"
	"barlitre/circuit"
)

// Sizes of the button of a cure in the list of findings.
const (
	cureHeight = 20.0
	cureGap    = 4.0
	cureText   = 11.5
)

// cureSuffix ends the name of the part of a cure: "3.cure".
const cureSuffix = ".cure"

// cureRoom is the height that a cure takes below its finding.
func (f *findings) cureRoom(i int) float64 {
	if f.cures[i] == nil {
		return 0
	}
	return cureHeight + cureGap
}

// drawCure draws the button below a finding.
func (f *findings) drawCure(p pen.Pen, name string, c *cure.Cure, y, w float64) widgets.Part {
	return f.drawLink(p, name+cureSuffix, c.Name, y, w)
}

// drawLink draws a button with a name for scripts.
func (f *findings) drawLink(p pen.Pen, name, label string, y, w float64) widgets.Part {
	pal := f.s.ctx.Palette()
	text := pen.Shorten(label, cureText, false, w-findLeft-findRight-16)
	width := p.TextWidth(text, cureText, false) + 16
	fill := pal.Gain
	fill.A = 24
	pen.RoundRect(p, findLeft, y+cureGap, width, cureHeight, 4, fill, pen.Stroke{W: 1, C: pal.Gain})
	p.Text(pen.Pt{X: findLeft + 8, Y: y + cureGap + 14}, text, cureText, pal.Ink, pen.Left, false)
	return widgets.Part{Name: name, Text: label, X: findLeft, Y: y + cureGap, W: width, H: cureHeight, Click: true}
}

// mend does the cure of a finding. What it drew is selected, and the line below the
// window says what is to be known of it.
func (f *findings) mend(i int) {
	if i < 0 || i >= len(f.list) || f.cures[i] == nil {
		return
	}
	g, c, doc := f.list[i], f.cures[i], f.s.ctx.Doc()
	if c.Mend == nil {
		f.open(i)
		return
	}
	had := map[string]bool{}
	if e := doc.File().Circuit(g.Circuit); e != nil {
		for _, b := range e.Blocks {
			had[b.ID] = true
		}
	}
	if err := doc.Mend(c); err != nil {
		f.s.refused(err)
		return
	}
	f.showDrawn(g, had)
	f.s.ctx.Say("Done: " + circuit.InSentence(c.Name) + ". " + c.Told + pick(c.Told == "", "", " ") + "Ctrl+Z takes it back.")
}

// showDrawn selects the first block that was not there before, else the finding's.
func (f *findings) showDrawn(g circuit.Finding, had map[string]bool) {
	for k, c := range f.s.ctx.Doc().File().Circuits {
		if c.Name != g.Circuit {
			continue
		}
		block := g.Block
		for _, b := range c.Blocks {
			if !had[b.ID] {
				block = b.ID
				break
			}
		}
		if c.Block(block) == nil {
			block = ""
		}
		f.s.ctx.Select(k, block)
	}
}
