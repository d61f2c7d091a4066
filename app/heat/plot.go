package heat

import (
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/station"
	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
	"barlitre/circuit"
	"barlitre/circuit/duty"
	"barlitre/machines/units"
)

// layers is how many areas a circuit has at most.
const layers = 6

// plot shows the heat over one cycle, with the clock over it.
type plot struct {
	ctx     station.Context
	content fyne.CanvasObject
	head    *widget.Label
	now     *widget.Label
	figure  *widgets.Figure
	line    *canvas.Line
	stack   figures.Stack
	area    figures.PlotArea // of the last drawing, in figure units
	unit    units.Unit
}

func newPlot(ctx station.Context) *plot {
	p := &plot{ctx: ctx, line: canvas.NewLine(nil)}
	p.head = widgets.Name(widget.NewLabel(""), "heat.duty")
	p.head.Truncation = fyne.TextTruncateEllipsis
	p.head.Importance = widget.LowImportance
	p.now = widgets.Name(widget.NewLabel(""), "heat.clock")
	p.now.Truncation = fyne.TextTruncateEllipsis
	p.figure = widgets.Name(widgets.NewFigure(fyne.NewSize(260, 200), p.draw), "heat.plot")
	p.figure.Tapped = p.tapped
	p.line.StrokeWidth = 1.5
	p.line.Hide()
	over := container.NewWithoutLayout(p.line)
	title := widget.NewLabelWithStyle("Heat into the oil by block", fyne.TextAlignLeading, fyne.TextStyle{Bold: true})
	top := container.NewVBox(container.NewBorder(nil, nil, title, nil, p.head), p.now)
	p.content = container.NewBorder(top, nil, nil, nil, container.NewStack(p.figure, over))
	return p
}

// load takes the courses of the duty at hand from the solution.
func (p *plot) load() {
	p.stack, p.unit = figures.Stack{}, units.Preferred(units.Power, p.ctx.System())
	s, i := p.ctx.Solution(), p.ctx.Duty()
	head := ""
	if s != nil && i >= 0 && i < len(s.File.Duties) {
		d := s.File.Duties[i]
		head = "one cycle of " + d.Name + ", all circuits on one scale"
		p.stack = p.stackOf(s, i, d)
	}
	p.head.SetText(head)
	// Below this height the text of the figure would get too small to read: it scrolls.
	p.figure.SetMin(fyne.NewSize(320, float32(0.86*p.stack.Height())))
	p.figure.Refresh()
	p.clock()
}

func (p *plot) stackOf(s *audit.Solution, i int, d *duty.Duty) figures.Stack {
	out := figures.Stack{Unit: p.unit.Label(), Axis: "time", AxisUnit: "s", Phases: figures.PhasesOf(d)}
	write := func(watt float64) string { return p.ctx.Text(watt, units.Power, 3) }
	for _, c := range s.Circuits {
		if i >= len(c.Duties) || c.Duties[i].Balance == nil {
			continue
		}
		lane := figures.HeatLane(c, c.Duties[i], layers, p.unit, write)
		if c.Duties[i].Plot.Thinned && len(out.Lanes) == 0 {
			lane.Note = "drawn from the lowest and highest value of each stretch"
		}
		out.Lanes = append(out.Lanes, lane)
	}
	return out
}

func (p *plot) draw(to pen.Pen, w, h float64) []widgets.Part {
	if len(p.stack.Lanes) == 0 {
		to.Text(pen.Pt{X: w / 2, Y: h / 2}, "The course of the heat stands here once a circuit is solved", 12.5, p.ctx.Palette().Secondary, pen.Center, false)
		p.area = figures.PlotArea{}
		return nil
	}
	p.area = p.stack.Draw(to, w, h, p.ctx.Palette())
	p.place(p.ctx.Clock())
	var parts []widgets.Part
	for i, l := range p.area.Lanes {
		parts = append(parts, widgets.Part{Name: p.stack.Lanes[i].Title, Text: "mean " + p.stack.Lanes[i].MeanNote,
			X: p.area.X, Y: l.Y, W: p.area.W, H: l.H, Click: true})
	}
	return parts
}

// tapped sets the clock.
func (p *plot) tapped(part widgets.Part, x, _ float64) {
	if part.Name != "" && p.area.W > 0 {
		p.ctx.SetClock(p.area.At(x / float64(widgets.Scale())))
	}
}

// clock moves the line and says what each circuit puts in at that instant.
func (p *plot) clock() {
	t, s := p.ctx.Clock(), p.ctx.Solution()
	if s == nil || len(p.stack.Lanes) == 0 {
		p.line.Hide()
		p.now.SetText("")
		return
	}
	parts := []string{"at " + p.ctx.Text(t, units.Time, 4)}
	for _, c := range s.Circuits { // as the sheets say it: the layers stand at fewer instants than the tracks
		if i := p.ctx.Duty(); i < len(c.Duties) && c.Duties[i].Balance != nil {
			heat := c.Duties[i].Plot.PowerAt(t, func(x circuit.Channel) bool { return x.Role == circuit.Loss && x.Sink == circuit.ToOil })
			parts = append(parts, c.Circuit.Name+" "+p.ctx.Text(heat, units.Power, 3))
		}
	}
	if text := strings.Join(parts, "  ·  "); text != p.now.Text {
		p.now.SetText(text)
	}
	p.place(t)
}

// place puts the line where the clock is in the last drawing.
func (p *plot) place(t float64) {
	if len(p.area.Lanes) == 0 || t < p.area.From || t > p.area.To {
		p.line.Hide()
		return
	}
	k := float64(widgets.Scale())
	first, last := p.area.Lanes[0], p.area.Lanes[len(p.area.Lanes)-1]
	x := float32(p.area.XAt(t) * k)
	a, b := fyne.NewPos(x, float32((first.Y-4)*k)), fyne.NewPos(x, float32((last.Y+last.H+6)*k))
	colour := p.ctx.Palette().Danger
	if p.line.Position1 == a && p.line.Position2 == b && p.line.Visible() && p.line.StrokeColor == colour {
		return
	}
	p.line.StrokeColor, p.line.Position1, p.line.Position2 = colour, a, b
	p.line.Show()
	p.line.Refresh()
}
