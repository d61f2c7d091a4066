package sheet

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"

	"barlitre/app/widgets"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
)

// service shows a selected service of a cylinder-switched machine beside another machine; hidden for other blocks.
type service struct {
	p       *panel
	figure  *widgets.Figure
	verdict *widgets.Text
	content *fyne.Container
	shown   figures.Service
}

const serviceWidth = 250

func newService(p *panel) *service {
	v := &service{p: p, verdict: widgets.Wrapped("")}
	v.figure = widgets.Name(widgets.NewFigure(fyne.NewSize(100, 0), v.draw), "sheet.service")
	v.content = container.New(tight{}, v.figure, v.verdict)
	return v
}

// update brings the figure in line with block and solution.
func (v *service) update() {
	c, b := v.p.at()
	v.shown = figures.Service{}
	if b != nil && c != nil {
		if run := v.p.s.solved(c.Name); run != nil {
			for _, s := range run.Services {
				if s.Block == b.ID {
					v.shown, _ = figures.ServiceOf(s, v.p.s.ctx.System())
				}
			}
		}
	}
	has := len(v.shown.Plot.Lanes) > 0
	show(v.content, has)
	if has {
		v.verdict.SetText(v.p.s.ctx.Local(v.shown.Verdict))
		v.figure.SetMin(fyne.NewSize(100, float32(v.shown.Height(serviceWidth))))
		v.figure.Refresh()
	}
}

func (v *service) draw(p pen.Pen, w, h float64) []widgets.Part {
	v.shown.Draw(p, w, h, v.p.s.ctx.Palette())
	return []widgets.Part{{Name: "service", Text: v.shown.Head + ". " + v.shown.Verdict, W: w, H: h}}
}
