package heat

import (
	"fmt"
	"math"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/station"
	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
	"barlitre/audit/thermal"
	"barlitre/machines/units"
)

// The views of the curves.
const (
	viewWeek  = "Week"
	viewDay   = "Wednesday"
	viewStart = "Winter start"
)

// curves shows the oil temperatures of all circuits on one scale, and lets cooler, air and tank be tried.
type curves struct {
	ctx     station.Context
	content fyne.CanvasObject
	figure  *widgets.Figure
	view    *widgets.Select
	cooler  *trialSlider
	air     *trialSlider
	tank    *trialSlider
	note    *widgets.Text
	take    *widgets.Button
	back    *widgets.Button
	body    *fyne.Container
	empty   *widgets.Text

	runs  []*audit.CircuitRun // studied
	plot  figures.Plot
	quiet bool // sliders are being set, not moved

	loaded  bool   // there were curves
	waiting string // why there are none now
}

// trialSlider is a slider with its value beside it.
type trialSlider struct {
	slider *widgets.Slider
	value  *widget.Label
}

// sliderValue is the least width of a value, so that the sliders are of one length.
const sliderValue = 88

func (c *curves) slider(name, title string, low, high, step float64) (*trialSlider, fyne.CanvasObject) {
	s := &trialSlider{value: widget.NewLabel("")}
	s.slider = widgets.Name(widgets.NewSlider(low, high, step, func(float64) {
		if !c.quiet {
			c.follow()
		}
	}), name)
	s.value.Alignment = fyne.TextAlignTrailing
	value := container.NewStack(container.New(widgets.Wide(sliderValue)), s.value)
	return s, widgets.Row(title, container.NewBorder(nil, nil, nil, value, s.slider), nil)
}

func newCurves(ctx station.Context) *curves {
	c := &curves{ctx: ctx}
	c.figure = widgets.Name(widgets.NewFigure(fyne.NewSize(320, 300), c.draw), "heat.curves")
	c.view = widgets.Name(widgets.NewSelect([]string{viewWeek, viewDay, viewStart}, func(string) { c.follow() }), "heat.view")
	c.view.Selected = viewWeek
	var rows [3]fyne.CanvasObject
	c.cooler, rows[0] = c.slider("heat.slider.cooler", "Cooler", 0, 1, 0.001)
	c.air, rows[1] = c.slider("heat.slider.air", "Air", -25, 25, 0.5)
	c.tank, rows[2] = c.slider("heat.slider.tank", "Oil in the tank", -2, 2, 0.05)
	c.note = widgets.Wrapped("heat.trial")
	c.note.Importance = widget.LowImportance
	c.take = widgets.Name(widgets.NewButton("Put into the audit", c.put), "heat.trial.put")
	c.back = widgets.Name(widgets.NewButton("As in the audit", func() { c.reset(); c.follow() }), "heat.trial.back")
	head := container.NewBorder(nil, nil, widget.NewLabelWithStyle("Oil temperature", fyne.TextAlignLeading, fyne.TextStyle{Bold: true}), c.view)
	c.body = container.NewVBox(head, c.figure, rows[0], rows[1], rows[2], c.note, container.NewHBox(c.take, c.back))
	c.empty = widgets.Wrapped("heat.curves.empty")
	c.content = container.NewVBox(c.empty, c.body)
	return c
}

// load takes the studies of a solution. While they are being worked out nothing of the audit before is drawn in their place.
func (c *curves) load() {
	c.runs = nil
	why := ""
	sol := c.ctx.Solution()
	if sol != nil {
		for _, r := range sol.Circuits {
			switch h := r.Warmth; {
			case h != nil && h.Week != nil:
				c.runs = append(c.runs, r)
			case h != nil:
				why = h.Fault
			}
		}
	}
	pending := sol != nil && sol.Pending
	switch {
	case len(c.runs) > 0:
		c.empty.Hide()
		c.body.Show()
		c.reset()
		c.follow()
		return
	case pending && c.body.Visible() && c.loaded:
		c.wait()
		return
	case pending:
		why = pendingText(c.ctx)
	case waits(c.ctx, sol):
		why = "How warm the oil gets stands here as soon as there is a result."
	case why == "":
		why = "How warm the oil gets stands here once the audit knows the tank: type the oil in the tank under Tank, cooler and air, at the right, and then the cooler if there is one."
	}
	c.body.Hide()
	c.empty.SetText(c.ctx.Local(why))
	c.empty.Show()
}

// pendingText says why oil temperatures are not there yet.
func pendingText(ctx station.Context) string {
	if ctx.Doc().Warming() {
		return "The oil temperature is being worked out…"
	}
	return "The oil temperature was not worked out, for that was cancelled. The next change begins again."
}

// wait leaves everything in its place, without a value.
func (c *curves) wait() {
	c.plot = figures.Plot{}
	c.waiting = pendingText(c.ctx)
	for _, s := range []*trialSlider{c.cooler, c.air, c.tank} {
		s.value.SetText("")
		s.slider.Disable()
	}
	c.note.SetText(c.waiting)
	c.take.Disable()
	c.back.Disable()
	c.figure.Refresh()
}

// first is the study that the sliders begin from: all circuits have the tank and cooler of the file, unless it says otherwise.
func (c *curves) first() *audit.HeatStudy { return c.runs[0].Warmth }

// reset sets the sliders to what the file has.
func (c *curves) reset() {
	if len(c.runs) == 0 {
		return
	}
	c.quiet, c.loaded, c.waiting = true, true, ""
	defer func() { c.quiet = false }()
	for _, s := range []*trialSlider{c.cooler, c.air, c.tank} {
		s.slider.Enable()
	}
	top := 0.0
	for _, r := range c.runs {
		top = math.Max(top, r.Warmth.Largest())
	}
	c.cooler.slider.Max = top
	c.cooler.slider.Step = top / 400
	c.cooler.slider.SetValue(c.first().Rate())
	c.air.slider.SetValue(0)
	c.tank.slider.SetValue(0)
}

// trial is what the sliders say for a circuit: its own cooler and tank change by the same factor as those of the first.
func (c *curves) trial(h *audit.HeatStudy) audit.Trial {
	x := audit.Trial{Rate: c.cooler.slider.Value, Tank: math.Exp2(c.tank.slider.Value), Air: c.air.slider.Value}
	if first := c.first().Rate(); first > 0 && h.Rate() > 0 {
		x.Rate *= h.Rate() / first
	}
	if near := c.first().Rate(); math.Abs(c.cooler.slider.Value-near) <= c.cooler.slider.Step {
		x.Rate = h.Rate()
	}
	return x
}

// follow marches anew and draws.
func (c *curves) follow() {
	if len(c.runs) == 0 {
		return
	}
	days := []figures.TemperatureLane{{Title: "ordinary", Air: true}, {Title: "hot days", Air: true}}
	start := figures.TemperatureLane{Title: "winter"}
	failed := ""
	for _, r := range c.runs {
		t, err := r.Warmth.Try(c.trial(r.Warmth))
		if err != nil {
			failed = err.Error()
			continue
		}
		for lane, course := range map[*figures.TemperatureLane]*thermal.Course{&days[0]: t.Week, &days[1]: t.Hot, &start: t.Start} {
			lane.Courses = append(lane.Courses, figures.CourseOf(r, course))
		}
	}
	c.say(failed)
	u := units.Preferred(units.Temperature, c.ctx.System())
	limits := figures.HeatLimits(c.first(), func(theta float64) string { return c.ctx.Text(theta, units.Temperature, 3) })
	switch {
	case len(start.Courses) == 0:
		c.plot = figures.Plot{}
	case c.view.Selected == viewStart:
		t := start.Courses[0].Course.T
		c.plot = figures.TemperaturePlot([]figures.TemperatureLane{start}, limits, u, 0, t[len(t)-1])
	case c.view.Selected == viewDay:
		c.plot = figures.TemperaturePlot(days, limits, u, 2*thermal.Day, 3*thermal.Day)
	default:
		c.plot = figures.TemperaturePlot(days, limits, u, 0, thermal.Week)
		c.plot.Phases = figures.Weekdays()
	}
	c.figure.Refresh()
}

// say writes what the sliders stand at.
func (c *curves) say(failed string) {
	h := c.first()
	x := c.trial(h)
	c.cooler.value.SetText(c.ctx.Text(x.Rate, units.HeatCapacityRate, 3))
	c.air.value.SetText(c.ctx.Text(h.Plant.Air.Mean+x.Air, units.Temperature, 3))
	c.tank.value.SetText(c.ctx.Text(x.Tank*h.Section.Values["tank_volume"].SI, units.Volume, 3))
	same := x == h.Untried()
	text := "The curves stand as the audit has them. Move a slider to try another cooler, air or tank; all circuits change alike, and so do hot days and winter."
	switch {
	case failed != "":
		text = "⚠ " + failed
	case !same:
		text = "On trial: the audit itself is unchanged until you put it in."
	}
	c.note.SetText(text)
	for _, b := range []*widgets.Button{c.take, c.back} {
		if same {
			b.Disable()
		} else {
			b.Enable()
		}
	}
}

// put writes what was tried into the audit.
func (c *curves) put() {
	h := c.first()
	x, was := c.trial(h), h.Untried()
	volume := h.Section.Values["tank_volume"]
	err := c.ctx.Doc().Edit("Take over cooler, air and tank", func(f *audit.File) error {
		if x.Rate != was.Rate {
			if x.Rate > 0 && h.Rate() == 0 && h.Section.Word("cooler") == "none" {
				if err := f.Put("heat.cooler", "air"); err != nil {
					return err
				}
			}
			if len(h.Section.Points) > 0 {
				return fmt.Errorf("the capacity of the cooler is a table; type another one under Tank, cooler and air")
			}
			if err := f.Put("heat.cooler_rate", units.FileText(rounded(x.Rate), units.Preferred(units.HeatCapacityRate, units.Metric))); err != nil {
				return err
			}
		}
		if x.Tank != was.Tank {
			if err := f.Put("heat.tank_volume", units.FileText(rounded(x.Tank*volume.SI), volume.Unit)); err != nil {
				return err
			}
		}
		if x.Air != 0 {
			return f.Put("air.temperature", units.FileText(h.Plant.Air.Mean+x.Air, f.Air.Unit))
		}
		return nil
	})
	if err != nil {
		c.ctx.Fail(err)
	}
}

// rounded keeps three digits: nobody orders a cooler of more.
func rounded(x float64) float64 {
	if x <= 0 {
		return 0
	}
	k := math.Pow(10, 2-math.Floor(math.Log10(x)))
	return math.Round(x*k) / k
}

func (c *curves) draw(to pen.Pen, w, h float64) []widgets.Part {
	if len(c.plot.Lanes) == 0 {
		to.Text(pen.Pt{X: w / 2, Y: h / 2}, c.waiting, 12.5, c.ctx.Palette().Secondary, pen.Center, false)
		return nil
	}
	c.plot.Draw(to, w, h, c.ctx.Palette())
	var parts []widgets.Part
	for _, l := range c.plot.Lanes {
		for _, s := range l.Series {
			if n := len(s.Y); n > 0 {
				parts = append(parts, widgets.Part{Name: l.Title + " " + s.Name, Text: fmt.Sprintf("last %.2f", s.Y[n-1])})
			}
		}
	}
	return parts
}
