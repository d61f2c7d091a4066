package intake

import (
	"fmt"
	"image/color"
	"math"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/widgets"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
	"barlitre/circuit/logged"
	found "barlitre/circuit/recording/cycles"
	"barlitre/machines/units"
)

// cyclesTab is how well the rate tells the energy, which states and cycles the recording has,
// and which of them makes the duty.
type cyclesTab struct {
	p        *Page
	content  fyne.CanvasObject
	rate     *fyne.Container
	rates    string
	which    *choice
	from, to *widgets.Field
	span     *fyne.Container
	spread   *widgets.Text
	states   *widgets.Figure
	stack    *widgets.Picture
	table    *widgets.Table
	none     *widgets.Text
}

// The parts of a recording that may make the duty.
const (
	wholeIs   = "whole recording"
	typicalIs = "typical cycle"
	extremeIs = "extreme cycle"
	stretchIs = "stretch"
)

func newCycles(p *Page) *cyclesTab {
	c := &cyclesTab{p: p, rate: container.NewVBox()}
	c.which = p.newChoice("intake.part", nil, nil, c.take)
	end := func(name string, i int) *widgets.Field {
		return widgets.Name(widgets.NewField("", func(text string) error { return c.takeEnd(i, text) }), name)
	}
	c.from, c.to = end("intake.part.from", 0), end("intake.part.to", 1)
	c.span = container.NewVBox(widgets.FieldRow("from", c.from), widgets.FieldRow("to", c.to))
	c.spread = widgets.Name(say("", widget.MediumImportance, false), "intake.spread")
	c.none = widgets.Name(say("", widget.MediumImportance, false), "intake.cycles.none")
	c.states = widgets.Name(widgets.NewFigure(fyne.NewSize(260, 64), c.drawStates), "intake.states")
	c.stack = widgets.NewPicture(fyne.NewSize(260, 120), p.ctx.Palette)
	c.table = widgets.Name(widgets.NewTable(fyne.NewSize(260, 180), p.ctx.Palette), "intake.cycles")
	c.table.ByRow = true
	c.table.Tapped = func(row, _ int) { c.takeRow(row) }
	left := container.NewVBox(widgets.Card("What makes the duty", container.NewVBox(c.which.Select, c.span, c.spread)), widget.NewSeparator(),
		widgets.Card("Is it logged fast enough?", c.rate))
	right := container.NewVScroll(container.New(besideBar{}, container.NewVBox(c.none, c.states, c.stack, c.table)))
	c.table.Outer = right.Scrolled
	split := container.NewHSplit(container.NewVScroll(container.New(besideBar{}, left)), right)
	split.Offset = 0.36
	c.content = split
	return c
}

// take takes a part of the recording.
func (c *cyclesTab) take(word string) {
	r := c.p.out.found
	switch {
	case word == wholeIs:
		c.p.part = logged.Part{}
	case word == typicalIs && r != nil && r.Typical >= 0:
		c.p.part = logged.PartOf(r.Cycles[r.Typical], typicalIs)
	case word == extremeIs && c.p.extreme() >= 0:
		c.p.part = logged.PartOf(r.Cycles[r.Extreme], extremeIs)
	default:
		t := c.p.rec.Time
		part := c.p.part
		if part.Whole() {
			part = logged.Part{From: t[0], To: t[len(t)-1]}
		}
		part.Is = stretchIs
		c.p.part = part
	}
	c.p.derive()
}

// extreme is the cycle that takes the most energy, -1 where none is known to take any.
func (p *Page) extreme() int {
	if r := p.out.found; r != nil && len(p.out.works) > 0 {
		return r.Extreme
	}
	return -1
}

// takeRow takes the cycle of a row of the table.
func (c *cyclesTab) takeRow(row int) {
	r := c.p.out.found
	if r == nil || row < 0 || row >= len(r.Cycles) {
		return
	}
	c.p.part = logged.PartOf(r.Cycles[row], fmt.Sprintf("cycle %d", row+1))
	switch row {
	case r.Typical:
		c.p.part.Is = typicalIs
	case c.p.extreme():
		c.p.part.Is = extremeIs
	}
	c.p.derive()
}

func (c *cyclesTab) takeEnd(i int, text string) error {
	second := units.Preferred(units.Time, units.SI)
	x, _, err := units.ParseLoose(text, units.Time, second)
	if err != nil {
		return err
	}
	part := c.p.part
	if i == 0 {
		part.From = x
	} else {
		part.To = x
	}
	if part.Whole() {
		return fmt.Errorf("the stretch must end after it begins")
	}
	part.Is = stretchIs
	c.p.part = part
	c.p.derive()
	return nil
}

func (c *cyclesTab) fill() {
	p := c.p
	c.fillRates()
	words := []string{wholeIs}
	r := p.out.found
	labels := []string{"the whole recording"}
	if p.rec != nil {
		t := p.rec.Time
		labels[0] += ", " + p.seconds(t[len(t)-1]-t[0])
	}
	if r != nil && r.Typical >= 0 {
		words, labels = append(words, typicalIs), append(labels, fmt.Sprintf("the typical cycle, number %d, %s", r.Typical+1, p.seconds(r.Cycles[r.Typical].Length())))
	}
	if i := p.extreme(); i >= 0 {
		words, labels = append(words, extremeIs), append(labels, fmt.Sprintf("the extreme cycle, number %d, %s", i+1, p.seconds(r.Cycles[i].Length())))
	}
	words, labels = append(words, stretchIs), append(labels, "a stretch from … to …")
	for i := range labels {
		labels[i] = p.ctx.Local(labels[i])
	}
	c.which.offer(words, labels)
	is := p.part.Is
	if p.part.Whole() {
		is = wholeIs
	} else if is != typicalIs && is != extremeIs {
		is = stretchIs
	}
	c.which.set(is)
	show(c.span, !p.part.Whole())
	second := units.Preferred(units.Time, units.SI)
	c.from.SetValue(p.ctx.Local(units.Format(p.part.From, second, 6)), "")
	c.to.SetValue(p.ctx.Local(units.Format(p.part.To, second, 6)), "")
	c.spread.SetText(p.ctx.Local(c.spreadText()))
	c.fillStack()
	c.fillTable()
}

func (c *cyclesTab) fillRates() {
	p := c.p
	shows := fmt.Sprint(p.ctx.Local("0.0"))
	for _, r := range p.out.rates {
		shows += r.Axis + strings.Join(r.Remarks, "") + fmt.Sprint(r.Coarser)
	}
	if shows == c.rates && len(c.rate.Objects) > 0 {
		return
	}
	c.rates, c.rate.Objects = shows, nil
	if len(p.out.rates) == 0 {
		c.rate.Add(say("This is told once an axis has a motion and a load.", widget.MediumImportance, false))
	}
	for i, r := range p.out.rates {
		text, importance := r.Axis+": "+strings.Join(r.Remarks, "; ")+".", widget.MediumImportance
		if r.Warns {
			text, importance = "⚠ "+text, widget.DangerImportance
		}
		c.rate.Add(widgets.Name(say(p.ctx.Local(text), importance, false), fmt.Sprintf("intake.rate%d", i+1)))
	}
	if len(p.out.rates) > 0 && len(p.out.rates[0].Coarser) > 0 {
		var parts []string
		for _, x := range p.out.rates[0].Coarser {
			parts = append(parts, fmt.Sprintf("%s: %.2g %% as means, up to %.2g %% as instants", p.brief(x.Interval), 100*x.Means, 100*x.Spot))
		}
		c.rate.Add(say(p.ctx.Local("Logged more slowly, the energy of "+p.out.rates[0].Axis+" would be wrong by: "+strings.Join(parts, "; ")+". Products are taken before means here."), widget.LowImportance, false))
	}
	c.rate.Refresh()
}

// spreadText says how cycles scatter.
func (c *cyclesTab) spreadText() string {
	r := c.p.out.found
	if r == nil || len(r.Cycles) == 0 {
		return "A recorded duty is one stretch of time, and its mean is taken. Set under Duty that it repeats if it does."
	}
	period := units.Around(c.p.seconds(r.Period), " on average", c.p.seconds(r.Length.Least), c.p.seconds(r.Length.Most))
	if len(c.p.out.works) == 0 {
		return fmt.Sprintf("%d cycles of %s, by what moves. Their energy stands here once an axis has a load too.", len(r.Cycles), period)
	}
	kJ := func(j float64) string { return c.p.ctx.Text(j, units.Energy, 3) }
	e := r.Energy
	text := fmt.Sprintf("%d cycles of %s. Work a cycle, out less back: mean %s, from %s to %s, eight in ten between %s and %s.",
		len(r.Cycles), period, kJ(e.Mean), kJ(e.Least), kJ(e.Most), kJ(e.P10), kJ(e.P90))
	if e.Mean != 0 {
		text += fmt.Sprintf(" Standard deviation %.2g %%.", 100*e.Deviation/e.Mean)
	}
	return text + " The typical cycle is the one nearest to all others, the extreme takes the most energy."
}

// colourOf gives each state its colour; its word stands beside it.
func colourOf(s found.State, pal figures.Palette) color.NRGBA {
	switch s {
	case found.Work:
		return pal.Gain
	case found.Hold:
		return pal.Heat
	case found.Idle:
		return pal.Bar
	}
	return pal.Pale
}

// drawStates draws the states of the recording as a bar over time, and under it what the
// colours mean, with the time in each.
func (c *cyclesTab) drawStates(q pen.Pen, w, h float64) (parts []widgets.Part) {
	r, d := c.p.out.found, c.p.out.whole
	pal := c.p.ctx.Palette()
	if r == nil || d == nil || len(d.Time) < 2 {
		return nil
	}
	t0, t1 := d.Time[0], d.Time[len(d.Time)-1]
	x := func(t float64) float64 { return (t - t0) / (t1 - t0) * w }
	const top, high, size = 2.0, 18.0, 11.0
	for _, s := range r.States {
		pen.Rect(q, x(s.From), top, x(s.To)-x(s.From), high, colourOf(s.State, pal), pen.Stroke{})
	}
	pen.Rect(q, 0, top, w, high, color.NRGBA{}, pen.Stroke{W: 1, C: pal.Edge})
	if !c.p.part.Whole() { // the part that makes the duty
		pen.Rect(q, x(c.p.part.From), top, math.Max(2, x(c.p.part.To)-x(c.p.part.From)), high, color.NRGBA{}, pen.Stroke{W: 2, C: pal.Ink})
	}
	at, line := 0.0, top+high+16
	for _, s := range r.Shares {
		text := c.p.ctx.Local(fmt.Sprintf("%s %s, %s", s.State, c.p.seconds(s.Time), units.Format(s.Time/(t1-t0), units.Percent, 2)))
		wide := q.TextWidth(text, size, false) + 30
		if at+wide > w && at > 0 {
			at, line = 0, line+16
		}
		pen.Rect(q, at, line-9, 10, 10, colourOf(s.State, pal), pen.Stroke{W: 0.7, C: pal.Edge})
		q.Text(pen.Pt{X: at + 14, Y: line}, text, size, pal.Ink, pen.Left, false)
		parts = append(parts, widgets.Part{Name: string(s.State), Text: text, X: at, Y: line - 10, W: wide, H: 12})
		at += wide
	}
	return parts
}

func (c *cyclesTab) fillStack() {
	p := c.p
	r, d := p.out.found, p.out.whole
	text := ""
	switch {
	case p.out.none != "":
		text = p.out.none
	case r == nil:
		text = "Cycles are looked for once an axis has a motion."
	case len(r.Cycles) == 0:
		text = "No cycle that repeats was found."
	default:
		text = "The cycles over one another; a click on one below makes it the duty."
	}
	c.none.SetText(p.ctx.Local(text))
	c.states.Refresh()
	show(c.stack, r != nil && len(r.Cycles) > 0)
	if r == nil || len(r.Cycles) == 0 || d == nil {
		return
	}
	plot := stacked(r, d, p)
	c.stack.SetMin(fyne.NewSize(260, float32(60+72*len(plot.Lanes))))
	c.stack.Set(func(q pen.Pen, w, h float64, pal figures.Palette) { plot.Draw(q, w, h, pal) })
}
