package frame

import (
	"fmt"
	"image/color"
	"slices"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/driver/desktop"

	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
	"barlitre/circuit/duty"
	"barlitre/machines/units"
)

// strip shows the tracks of the duty at hand over time, and the clock.
type strip struct {
	f       *Frame
	figure  *clockFigure
	play    *widgets.TipButton
	speed   *widgets.Select
	picker  *widgets.Select
	plot    figures.Plot
	asked   [][]valuesAt // by lane, what its series are of
	area    figures.PlotArea
	numbers []span // of the axis
	content fyne.CanvasObject
	own     bool // the picker is being set by the program
}

func newStrip(f *Frame) *strip {
	s := &strip{f: f}
	s.figure = newClockFigure(s)
	widgets.Name(s.figure, "strip")
	s.play = widgets.Name(widgets.NewTipButton("Play", "let the clock run (Space in the strip)", s.toggle), "strip.play")
	s.picker = widgets.Name(widgets.NewSelect(nil, func(name string) {
		if s.own {
			return
		}
		for i, d := range f.doc.File().Duties {
			if d.Name == name {
				f.SetDuty(i)
			}
		}
	}), "strip.duty")
	f.player = &player{f: f}
	side := container.New(&stack{}, s.picker, container.New(playRow{}, s.play, s.newSpeed()))
	s.content = container.NewBorder(nil, nil, side, nil, s.figure)
	return s
}

// newSpeed makes the choice of how fast the clock runs.
func (s *strip) newSpeed() *widgets.Select {
	var texts []string
	for _, k := range speeds {
		texts = append(texts, speedText(k))
	}
	s.speed = widgets.Name(widgets.NewSelect(texts, func(text string) {
		s.f.player.factor = speeds[slices.Index(texts, text)]
	}), "strip.speed")
	s.speed.Selected = texts[0]
	return s.speed
}

func (s *strip) toggle() {
	if s.f.player.running() {
		s.f.player.stop()
	} else {
		s.f.player.start()
	}
}

// reload takes the duty at hand.
func (s *strip) reload() {
	file := s.f.doc.File()
	if file == nil || s.f.duty >= len(file.Duties) {
		s.plot, s.own = figures.Plot{}, true
		s.picker.SetOptions(nil)
		s.picker.ClearSelected()
		s.own = false
		s.figure.Refresh()
		return
	}
	var names []string
	for _, d := range file.Duties {
		names = append(names, d.Name)
	}
	d := file.Duties[s.f.duty]
	s.own = true
	s.picker.SetOptions(names)
	s.picker.SetSelected(d.Name)
	s.own = false
	s.asked = nil
	s.plot = s.lanes(d, file.Axes)
	s.figure.Refresh()
}

// lanes puts tracks of one quantity and kind of axis into one lane.
func (s *strip) lanes(d *duty.Duty, axes []duty.Axis) figures.Plot {
	plot := figures.Plot{Axis: "time", AxisUnit: "s"}
	if len(d.Time) > 0 {
		plot.From, plot.To = d.Time[0], d.Time[len(d.Time)-1]
	}
	kind := map[string]duty.AxisKind{}
	for _, a := range axes {
		kind[a.Name] = a.Kind
	}
	lane := map[string]int{}
	roles := []figures.Role{figures.RoleInk, figures.RoleGain, figures.RoleBar}
	for _, tr := range d.Tracks {
		if tr.What.Measured() {
			continue // it is no demand
		}
		dim := tr.What.Dim(kind[tr.Of])
		u := units.Preferred(dim, s.f.settings.system)
		key := fmt.Sprint(tr.What, dim)
		i, ok := lane[key]
		if !ok {
			i = len(plot.Lanes)
			lane[key] = i
			plot.Lanes = append(plot.Lanes, figures.Lane{Title: tr.Of + " " + tr.What.String(), Unit: u.Label(), Zero: true})
			s.asked = append(s.asked, nil)
		}
		asked := audit.CourseOf(d, tr)
		y := make([]float64, len(asked.V))
		for k, v := range asked.V {
			y[k] = u.FromSI(v)
		}
		s.asked[i] = append(s.asked[i], valuesAt{d.Time, tr.Values, u})
		n := len(plot.Lanes[i].Series)
		plot.Lanes[i].Series = append(plot.Lanes[i].Series, figures.Series{Name: tr.Of, X: asked.T, Y: y, Role: roles[n%len(roles)], Dash: n > 0})
		if n > 0 {
			plot.Lanes[i].Title = tr.What.String()
		}
	}
	for i, p := range d.Phases {
		to := plot.To
		if i+1 < len(d.Phases) {
			to = d.Phases[i+1].From
		}
		plot.Phases = append(plot.Phases, figures.Phase{Name: p.Name, From: p.From, To: to})
	}
	return plot
}

// moved follows the clock, and writes the values at it if they are to be read.
func (s *strip) moved(read bool) { s.figure.follow(read) }

// clockFigure is the strip's figure: the clock follows click, drag and arrow keys. Its line
// and the values at it lie over the tracks, which stay as they are while it moves.
type clockFigure struct {
	*widgets.Figure
	s       *strip
	focus   bool
	line    *canvas.Rectangle
	head    *canvas.Raster
	flag    *canvas.Raster
	cover   *canvas.Rectangle // behind the flag, over numbers that it hides in part
	pen     *pen.Raster       // of the flag
	text    string            // in it
	wide    float64           // the room it takes at scale 1
	pointer fyne.Position
}

func newClockFigure(s *strip) *clockFigure {
	c := &clockFigure{s: s, line: canvas.NewRectangle(color.Transparent), cover: canvas.NewRectangle(color.Transparent)}
	c.Figure = widgets.NewFigure(fyne.NewSize(240, stripSlim), func(p pen.Pen, w, h float64) []widgets.Part {
		s.draw(p, w, h)
		if c.focus {
			pen.Rect(p, 1, 1, w-2, h-2, color.NRGBA{}, pen.Stroke{W: 2, C: s.f.Palette().Gain})
		}
		return nil
	})
	c.head, c.flag = canvas.NewRaster(c.paintHead), canvas.NewRaster(c.paintFlag)
	c.head.ScaleMode, c.flag.ScaleMode = canvas.ImageScalePixels, canvas.ImageScalePixels
	c.Over = []fyne.CanvasObject{c.cover, c.line, c.head, c.flag}
	c.ExtendBaseWidget(c)
	return c
}

func (c *clockFigure) to(x float32) {
	c.s.f.player.stop()
	c.s.f.SetClock(c.s.area.At(float64(x/widgets.Scale()) - stripPad))
}

// MouseDown sets the clock and takes the focus.
func (c *clockFigure) MouseDown(ev *desktop.MouseEvent) {
	c.s.f.win.Canvas().Focus(c)
	if ev.Button == desktop.MouseButtonPrimary {
		c.to(ev.Position.X)
	}
}

// MouseUp ends a press.
func (c *clockFigure) MouseUp(*desktop.MouseEvent) {}

// Dragged moves the clock along.
func (c *clockFigure) Dragged(ev *fyne.DragEvent) { c.to(ev.Position.X) }

// DragEnd ends a drag.
func (c *clockFigure) DragEnd() {}

// FocusGained and FocusLost show the focus.
func (c *clockFigure) FocusGained()   { c.focus = true; c.Refresh() }
func (c *clockFigure) FocusLost()     { c.focus = false; c.Refresh() }
func (c *clockFigure) TypedRune(rune) {}

// TypedKey steps the clock: a hundredth of the cycle, with page keys a tenth.
func (c *clockFigure) TypedKey(k *fyne.KeyEvent) {
	f := c.s.f
	from, to := f.span()
	step := (to - from) / 100
	switch k.Name {
	case fyne.KeyLeft:
		f.SetClock(f.clock - step)
	case fyne.KeyRight:
		f.SetClock(f.clock + step)
	case fyne.KeyPageUp:
		f.SetClock(f.clock - 10*step)
	case fyne.KeyPageDown:
		f.SetClock(f.clock + 10*step)
	case fyne.KeyHome:
		f.SetClock(from)
	case fyne.KeyEnd:
		f.SetClock(to)
	case fyne.KeySpace:
		c.s.toggle()
	}
}
