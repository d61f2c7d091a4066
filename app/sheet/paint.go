package sheet

import (
	"image"
	"image/color"

	"barlitre/app/widgets"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
)

// paint draws the sheet at the pixel size asked for. It runs on the UI goroutine.
func (e *editor) paint(w, h int) image.Image {
	if e.pen == nil || e.pen.Image().Rect.Dx() != w || e.pen.Image().Rect.Dy() != h {
		e.pen = pen.NewMosaic(w, h)
		e.lift.still = nil
	}
	e.frames++
	if e.index == e.s.active {
		widgets.Frames.Add(1)
	}
	l, card := &e.lift, e.s.ctx.Palette().Card
	switch {
	case e.moved == nil:
		e.pen.Begin(card)
		e.ink(e.sheet, true)
	case l.up == nil:
		e.pen.Begin(card)
		e.ink(e.moved, true)
	default:
		if view := [3]float64{e.zoom, e.x, e.y}; l.still == nil || l.view != view {
			e.pen.Begin(card)
			e.ink(l.up.Still, true)
			mark := e.pen.Mark()
			l.still, l.view = &mark, view
		}
		e.pen.Rewind(*l.still)
		e.ink(e.moved, false)
	}
	e.pen.Flush()
	return e.pen.Image()
}

// ink draws a sheet over what is drawn already.
func (e *editor) ink(sh *figures.Sheet, legend bool) {
	size := e.Size()
	if size.Width <= 0 || size.Height <= 0 {
		return
	}
	e.pen.Push(0, 0, float64(e.pen.Image().Rect.Dx())/float64(size.Width))
	e.draw(pen.Worded(e.pen, e.s.ctx.Local), sh, legend)
	e.pen.Pop()
}

// draw draws a sheet in units of the toolkit, with its legend where that belongs here.
func (e *editor) draw(p pen.Pen, sh *figures.Sheet, legend bool) {
	w, h := e.room()
	if sh == nil {
		e.drawEmpty(p, w, h)
		return
	}
	ox, oy := sh.Origin()
	p.ClipRect(0, 0, w, h)
	opt := e.opt
	if bare := e.laying.bare; bare != nil && sh == e.sheet {
		k := float64(widgets.Scale())
		p.Text(pen.Pt{X: 12 * k, Y: 20 * k}, "Laying the lines …", 12.5*k, e.s.ctx.Palette().Secondary, pen.Left, false)
		sh, opt.HideLabels = bare, true
	}
	sh.Draw(p, e.x+ox*e.zoom, e.y+oy*e.zoom, e.zoom, e.state, opt)
	p.Unclip()
	if legend && e.state != nil && e.legendHeight() > 0 && e.ownLegend() {
		e.drawLegend(p, w, h)
	}
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

// drawLegend draws the legend at a size that can be read. So that the samples are as
// wide and large as on the sheet at its present zoom, they are asked for from scales
// that are smaller by the square of the ratio: width and radius go with the root.
func (e *editor) drawLegend(p pen.Pen, w, h float64) {
	at := legendAt * float64(widgets.Scale())
	k := at / e.zoom
	sc := e.opt.Scales
	sc.Flow, sc.Heat, sc.Energy = sc.Flow*k*k, sc.Heat*k*k, sc.Energy*k*k
	p.ClipRect(0, h, w, e.legendHeight())
	p.Push(12, h, at)
	figures.DrawLegend(p, (w-24)/at, sc, e.state.Energy, e.opt)
	p.Pop()
	p.Unclip()
}

// drawEmpty says what belongs on the sheet and how to get it there.
func (e *editor) drawEmpty(p pen.Pen, w, h float64) {
	pal, k := e.s.ctx.Palette(), float64(widgets.Scale())
	head, lines := 2, []string{"A proposal stands here,", "beside the circuit as found.", "Copy the circuit and change it,", "or press / for a first block."}
	if e.index == 0 {
		head = 1
		lines = []string{"No circuit in this audit yet.", "Press / to add a first block, or begin with", "one of the circuits in File > New."}
	}
	y := h/2 - 20*k
	if e.copied.Visible() {
		y -= 20 * k
	}
	for i, l := range lines {
		p.Text(pen.Pt{X: w / 2, Y: y}, l, 12.5*k, map[bool]color.NRGBA{true: pal.Ink, false: pal.Secondary}[i < head], pen.Center, false)
		y += 19 * k
	}
}
