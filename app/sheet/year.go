package sheet

import (
	"fyne.io/fyne/v2"

	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/audit/pen"
)

// year shows the figures of the selected machine over the year, beside those of the machine of the same name in the
// other circuit, and how well its law meets its measured points. A click opens a figure.
type year struct {
	p      *panel
	figure *widgets.Figure
	lines  []yearLine
	heads  []string
}

// yearLine is a name and the figures of one or two circuits.
type yearLine struct {
	name    string
	figures []audit.Figure
}

func newYear(p *panel) *year {
	y := &year{p: p}
	y.figure = widgets.Name(widgets.NewFigure(fyne.NewSize(100, 20), y.draw), "sheet.year")
	y.figure.Tapped = func(part widgets.Part, _, _ float64) {
		for _, l := range y.lines {
			for i, f := range l.figures {
				if part.Name == l.name+"/"+y.heads[i] {
					p.s.ctx.Explain(f)
				}
			}
		}
	}
	return y
}

const (
	yearHead     = 18
	yearLineHigh = 35 // name above, figures below
)

// bring takes the figures of what is selected.
func (y *year) bring() {
	y.lines, y.heads = nil, nil
	c, b := y.p.at()
	if c != nil && b != nil {
		y.take(c.Name, b.ID)
	}
	y.figure.SetMin(fyne.NewSize(100, float32(yearHead+yearLineHigh*len(y.lines))))
	show(y.figure, len(y.lines) > 0)
	y.figure.Refresh()
}

// take lists the figures of a block of a circuit, and of the circuit on the other sheet.
func (y *year) take(circuit, block string) {
	own := y.page(circuit, block)
	if own == nil {
		return
	}
	var pages []*audit.MachinePage
	for _, name := range y.p.s.names() {
		if m := y.page(name, block); m != nil {
			pages, y.heads = append(pages, m), append(y.heads, name)
		}
	}
	for i, f := range own.Figures {
		l := yearLine{name: f.Name}
		for _, m := range pages {
			l.figures = append(l.figures, m.Figures[i])
		}
		y.lines = append(y.lines, l)
	}
	for i, f := range own.Fit {
		l := yearLine{name: upper(f.Name)}
		for _, m := range pages {
			if i < len(m.Fit) {
				l.figures = append(l.figures, m.Fit[i])
			} else {
				l.figures = append(l.figures, audit.Figure{Name: f.Name, Text: "–"})
			}
		}
		y.lines = append(y.lines, l)
	}
}

func (y *year) page(circuit, block string) *audit.MachinePage {
	r := y.p.s.ctx.Report()
	if r == nil {
		return nil
	}
	for i := range r.Circuits {
		if r.Circuits[i].Name == circuit {
			return r.Circuits[i].Machine(block)
		}
	}
	return nil
}

func (y *year) draw(p pen.Pen, w, _ float64) []widgets.Part {
	pal, local := y.p.s.ctx.Palette(), y.p.s.ctx.Local
	if len(y.lines) == 0 {
		return nil
	}
	column := w / float64(max(1, len(y.heads)))
	for i, name := range y.heads {
		p.Text(pen.Pt{X: float64(i) * column, Y: 12}, pen.Shorten(name, 11, true, column-8), 11, pal.Secondary, pen.Left, true)
	}
	var parts []widgets.Part
	top := float64(yearHead)
	for _, l := range y.lines {
		p.Text(pen.Pt{Y: top + 13}, pen.Shorten(upper(local(l.name)), 11, false, w), 11, pal.Secondary, pen.Left, false)
		for i, f := range l.figures {
			x := float64(i) * column
			text := local(f.Text)
			p.Text(pen.Pt{X: x, Y: top + 28}, pen.Shorten(text, 12, true, column-8), 12, pal.Ink, pen.Left, true)
			parts = append(parts, widgets.Part{Name: l.name + "/" + y.heads[i], Text: text, X: x, Y: top, W: column, H: yearLineHigh, Click: f.Calculation.Formula != ""})
		}
		top += yearLineHigh
	}
	return parts
}
