package pdf

import (
	"fmt"
	"image/color"
	"math"
	"path/filepath"

	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
	"barlitre/machines/units"
)

// The frame of a drawing [mm]: 20 mm on the side that is filed, 10 mm elsewhere
// (ISO 5457, as public guides to drawing quote it).
const (
	frameLeft  = 20.0
	frameOther = 10.0
	frameLine  = 0.5
)

// Scales of the drawing and its legend [mm a module].
const (
	boardMost   = 2.6
	legendScale = 1.35
	boardRoom   = 3.0 // about the drawing [mm]
)

// print draws every page on paper.
func (b *boards) print(to paper) {
	for i := range b.all {
		p := to.lying(b.Paper)
		to.mark("Circuit sheet: "+b.all[i].e.Name, 0, 0)
		b.draw(p, &b.all[i], i+1)
		if b.pages > 0 {
			text := fmt.Sprintf("page %d of %d", b.before+i+1, b.pages)
			p.Text(pen.Pt{X: b.Paper.W - frameOther, Y: b.Paper.H - 4.5}, text, smallSize, b.pal.Secondary, pen.Right, false)
		}
	}
}

// draw draws a page: frame, circuit, legend, what is shown, title block.
func (b *boards) draw(p pen.Pen, one *board, number int) {
	w, h := b.Paper.W-frameLeft-frameOther, b.Paper.H-2*frameOther
	p.Push(frameLeft, frameOther, 1)
	defer p.Pop()
	pen.Rect(p, 0, 0, w, h, b.pal.Card, pen.Stroke{W: frameLine, C: b.pal.Ink})
	top := h - blockHeight
	b.titleBlock(p, w-blockWidth, top, one.e, number)
	p = pen.Worded(p, b.Local) // not the title block: its numbers are names
	b.told(p, boardRoom, top, w-blockWidth-2*boardRoom, one)
	opt := figures.SheetOptions{Palette: b.pal, System: b.opt.System, Scales: b.scales, Hide: b.Hide, Findings: b.Marks[one.e.Name]}
	if one.state != nil {
		top -= figures.LegendHeight * legendScale
	}
	k := b.circuit(p, one, w, top, opt)
	if one.state != nil {
		b.legend(p, w, top, k, opt)
	}
}

// circuit draws the circuit whole and in the middle, and returns its scale.
func (b *boards) circuit(p pen.Pen, one *board, w, h float64, opt figures.SheetOptions) float64 {
	sw, sh := one.Size()
	k := min(boardMost, (w-2*boardRoom)/sw, (h-2*boardRoom)/sh)
	one.Draw(p, (w-k*sw)/2, (h-k*sh)/2, k, one.state, opt)
	return k
}

// legend draws samples as wide and large as in the drawing, at a size that can be read:
// widths and radii go with the root of what they stand for.
func (b *boards) legend(p pen.Pen, w, y, k float64, opt figures.SheetOptions) {
	r := (legendScale / k) * (legendScale / k)
	sc := b.scales
	sc.Flow, sc.Heat, sc.Energy = sc.Flow*r, sc.Heat*r, sc.Energy*r
	p.Push(boardRoom, y, legendScale)
	figures.DrawLegend(p, (w-2*boardRoom)/legendScale, sc, b.Cycle, opt)
	p.Pop()
}

// told writes, beside the title block, what the results of the page are of.
func (b *boards) told(p pen.Pen, x, y, w float64, one *board) {
	st := style{size: smallSize, c: b.pal.Secondary}
	y += 1 + st.base()
	for _, text := range b.toldOf(one) {
		for _, line := range st.wrap(text, w) {
			p.Text(pen.Pt{X: x, Y: y}, line, st.size, st.c, pen.Left, false)
			y += st.line()
		}
	}
}

func (b *boards) toldOf(one *board) []string {
	if one.state == nil {
		return []string{"Drawn without results.", symbols, disclaimer}
	}
	in := func(v float64, d units.Dim, n int) string {
		return units.Format(v, units.Preferred(d, b.opt.System), n)
	}
	at := "Results at " + in(b.At, units.Time, 4)
	if phase := phaseAt(one.run.Duty, b.At); phase != "" {
		at += " (" + phase + ")"
	}
	heat := 0.0
	for _, block := range one.e.Blocks {
		heat += one.state.Heat(block.ID)
	}
	power := drawnAt(one.run.Plot, b.At)
	what := "Draws "
	if power < 0 {
		what = "Returns "
	}
	discs := "turns " + in(heat, units.Power, 3) + " to heat."
	if b.Cycle {
		discs = "discs: heat of one cycle, " + in(heat, units.Energy, 3) + " in all."
	}
	return []string{at + " of duty “" + b.duty + "”.", what + in(math.Abs(power), units.Power, 3) + "; " + discs, symbols, disclaimer}
}

// The title block [mm]: no wider than 180 mm, at the lower right corner, with the fields
// of ISO 7200:2004, compared with public lists of them: legal owner, identification number, date of issue, sheet,
// title, approval, creator and type of document must be there, revision may.
const (
	blockWidth  = 180.0
	blockHeight = 34.0
	rowLow      = 10.0
	rowHigh     = blockHeight - 2*rowLow
)

var noFill color.NRGBA

// cell is a field of the title block.
type cell struct {
	x, y, w, h        float64
	name, text, below string // below is a second line
}

// titleBlock draws the fields with their names.
func (b *boards) titleBlock(p pen.Pen, x, y float64, e *audit.CircuitEntry, number int) {
	f := b.f
	date := first(f.Site.Date, b.opt.Date.Format("2006-01-02"))
	file := "not saved yet"
	if f.Path != "" {
		file = filepath.Base(f.Path)
	}
	for _, c := range []cell{
		{x: 0, w: 72, h: rowLow, name: "Legal owner", text: first(f.Issue.Owner, b.opt.Customer, f.Site.Customer)},
		{x: 72, w: 38, h: rowLow, name: "Created by", text: b.author},
		{x: 110, w: 38, h: rowLow, name: "Approved by", text: f.Issue.Approved},
		{x: 148, w: 32, h: rowLow, name: "Date of issue", text: date},
		{x: 0, y: rowLow, w: 126, h: rowHigh, name: "Title", text: b.title, below: e.Name + " (" + string(e.Role) + ")"},
		{x: 126, y: rowLow, w: 54, h: rowHigh, name: "Type of document", text: "Hydraulic circuit diagram", below: b.results()},
		{x: 0, y: rowLow + rowHigh, w: 72, h: rowLow, name: "Identification number", text: f.Issue.Number},
		{x: 72, y: rowLow + rowHigh, w: 24, h: rowLow, name: "Revision", text: f.Issue.Revision},
		{x: 96, y: rowLow + rowHigh, w: 52, h: rowLow, name: "File", text: file},
		{x: 148, y: rowLow + rowHigh, w: 32, h: rowLow, name: "Sheet", text: fmt.Sprintf("%d/%d", number, len(b.all))},
	} {
		b.cell(p, x, y, c)
	}
	pen.Rect(p, x, y, blockWidth, blockHeight, noFill, pen.Stroke{W: frameLine, C: b.pal.Ink})
}

func (b *boards) results() string {
	if b.s == nil {
		return ""
	}
	return "with computed results"
}

// cell draws one field.
func (b *boards) cell(p pen.Pen, x, y float64, c cell) {
	const pad, name, text, title = 1.2, 1.9, 2.8, 4.0
	x, y = x+c.x, y+c.y
	pen.Rect(p, x, y, c.w, c.h, noFill, pen.Stroke{W: 0.25, C: b.pal.Ink})
	p.Text(pen.Pt{X: x + pad, Y: y + 2.6}, c.name, name, b.pal.Secondary, pen.Left, false)
	size, bold, at := text, false, y+c.h-2.6
	if c.below != "" {
		at = y + 8
		p.Text(pen.Pt{X: x + pad, Y: y + c.h - 2}, pen.Shorten(c.below, text, false, c.w-2*pad), text, b.pal.Ink, pen.Left, false)
	}
	if c.name == "Title" {
		size, bold = title, true
	}
	p.Text(pen.Pt{X: x + pad, Y: at}, pen.Shorten(c.text, size, bold, c.w-2*pad), size, b.pal.Ink, pen.Left, bold)
}
