package sheet

import (
	"maps"

	"barlitre/app/widgets"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
)

// picture is one drawing of a sheet and all that it takes, so that it can be drawn behind the
// window too, while the window goes on. Lengths are in units of the toolkit.
type picture struct {
	sheet      *figures.Sheet // nil: there is none
	state      *figures.SheetState
	opt        figures.SheetOptions
	x, y, zoom float64
	w, h       float64             // room for the sheet
	words      func(string) string // puts the decimal sign in; nil changes nothing
	notice     string              // at the upper left
	legend     float64             // height of the strip below, 0 for none
	scale      float64             // of the window
	empty      []string            // lines that say what belongs here
	head       int                 // how many of these stand out
	lift       float64             // how much higher than the middle they stand
}

// picture gathers what it takes to draw a sheet as it stands here now.
func (e *editor) picture(sh *figures.Sheet, legend bool) picture {
	w, h := e.room()
	p := picture{sheet: sh, state: e.state, opt: e.opt, x: e.x, y: e.y, zoom: e.zoom, w: w, h: h,
		words: e.s.ctx.Words(), scale: float64(widgets.Scale())}
	p.opt.Palette = e.s.ctx.Palette()
	if sh == nil {
		p.empty, p.head, p.lift = e.emptyLines(), 2, 20*p.scale
		if e.index == 0 {
			p.head = 1
		}
		if e.copied.Visible() {
			p.lift *= 2
		}
		return p
	}
	if bare := e.laying.bare; bare != nil && sh == e.sheet {
		p.notice, p.sheet, p.opt.HideLabels = "Laying the lines …", bare, true
	}
	if legend && e.state != nil && e.ownLegend() {
		p.legend = e.legendHeight()
	}
	return p
}

// kept is the picture with nothing in common with what the window changes.
func (p picture) kept() picture {
	p.opt.Selected, p.opt.Hover, p.opt.Lines = maps.Clone(p.opt.Selected), maps.Clone(p.opt.Hover), maps.Clone(p.opt.Lines)
	p.opt.Notes, p.opt.Groups, p.opt.Findings = maps.Clone(p.opt.Notes), maps.Clone(p.opt.Groups), maps.Clone(p.opt.Findings)
	if p.opt.Piece != nil {
		piece := *p.opt.Piece
		p.opt.Piece = &piece
	}
	return p
}

// draw draws it over what is drawn already, so many pixels a unit.
func (p picture) draw(to pen.Pen, pixels float64) {
	to.Push(0, 0, pixels)
	p.inUnits(pen.Worded(to, p.words))
	to.Pop()
}

// inUnits draws it in units of the toolkit.
func (p picture) inUnits(to pen.Pen) {
	if p.sheet == nil {
		p.drawEmpty(to)
		return
	}
	ox, oy := p.sheet.Origin()
	to.ClipRect(0, 0, p.w, p.h)
	if p.notice != "" {
		to.Text(pen.Pt{X: 12 * p.scale, Y: 20 * p.scale}, p.notice, 12.5*p.scale, p.opt.Palette.Secondary, pen.Left, false)
	}
	p.sheet.Draw(to, p.x+ox*p.zoom, p.y+oy*p.zoom, p.zoom, p.state, p.opt)
	to.Unclip()
	if p.legend > 0 {
		p.drawLegend(to)
	}
}

// drawLegend draws the legend at a size that can be read. So that the samples are as
// wide and large as on the sheet at its present zoom, they are asked for from scales
// that are smaller by the square of the ratio: width and radius go with the root.
func (p picture) drawLegend(to pen.Pen) {
	at := legendAt * p.scale
	k := at / p.zoom
	sc := p.opt.Scales
	sc.Flow, sc.Heat, sc.Energy = sc.Flow*k*k, sc.Heat*k*k, sc.Energy*k*k
	to.ClipRect(0, p.h, p.w, p.legend)
	to.Push(12, p.h, at)
	figures.DrawLegend(to, (p.w-24)/at, sc, p.state.Energy, p.opt)
	to.Pop()
	to.Unclip()
}

// drawEmpty says what belongs on the sheet and how to get it there.
func (p picture) drawEmpty(to pen.Pen) {
	y := p.h/2 - p.lift
	for i, l := range p.empty {
		c := p.opt.Palette.Secondary
		if i < p.head {
			c = p.opt.Palette.Ink
		}
		to.Text(pen.Pt{X: p.w / 2, Y: y}, l, 12.5*p.scale, c, pen.Center, false)
		y += 19 * p.scale
	}
}

// emptyLines are what an empty sheet says.
func (e *editor) emptyLines() []string {
	if e.index == 0 {
		return []string{"No circuit in this audit yet.", "Press / to add a first block, or begin with", "one of the circuits in File > New."}
	}
	return []string{"A proposal stands here,", "beside the circuit as found.", "Copy the circuit and change it,", "or press / for a first block."}
}

// ownLegend tells whether the legend is drawn here: on the first sheet that is shown,
// and on the second where it is at another zoom.
func (e *editor) ownLegend() bool {
	if e.index == 0 || e.s.single || e.s.editors[0].state == nil {
		return true
	}
	r := e.zoom / e.s.editors[0].zoom
	return r < 0.98 || r > 1.02
}
