package sheet

import (
	"fmt"
	"math"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"

	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// live shows what the block, or both circuits, do at the clock and over the cycle.
type live struct {
	p       *panel
	figure  *widgets.Figure
	choice  *widgets.Select
	plot    *widgets.ClockPlot
	content *fyne.Container
	chosen  map[string]string // course to plot, by kind of block
	filling bool
	drawn   []course // what the plot shows
}

// liveRow is a line of the live values: a name, and one value or two side by side.
type liveRow struct {
	name   string
	values []string
	bold   bool
}

func newLive(p *panel) *live {
	l := &live{p: p, chosen: map[string]string{}}
	l.figure = widgets.Name(widgets.NewFigure(fyne.NewSize(100, 40), l.draw), "sheet.live")
	l.choice = widgets.Name(widgets.NewSelect(nil, l.choose), "sheet.live.course")
	l.plot = widgets.Name(widgets.NewClockPlot(fyne.NewSize(100, 124), func() figures.Palette { return p.s.ctx.Palette() }), "sheet.live.plot")
	l.plot.Moved = func(t float64) { p.s.ctx.SetClock(t) }
	l.plot.Value = l.at
	l.content = container.New(tight{}, l.figure, l.choice, l.plot)
	return l
}

// moved follows the clock, writes the values at it if they are to be read, and tells
// whether they take another height.
func (l *live) moved(read bool) (grown bool) {
	if !read {
		l.plot.MoveClock(l.p.s.ctx.Clock())
		return false
	}
	l.plot.SetClock(l.p.s.ctx.Clock())
	before := l.figure.MinSize()
	l.figure.SetMin(fyne.NewSize(100, float32(34+19*len(l.rows()))))
	l.figure.Refresh()
	return l.figure.MinSize() != before
}

// rows lists the live values of what the panel shows.
func (l *live) rows() []liveRow {
	c, b := l.p.at()
	switch {
	case c == nil:
		return nil
	case b == nil:
		return l.totals()
	}
	own := l.blockValues(c, b)
	other, twin := l.p.compared()
	if twin == nil {
		return own
	}
	theirs := map[string]liveRow{}
	for _, r := range l.blockValues(other, twin) {
		theirs[r.name] = r
	}
	var out []liveRow
	for _, r := range own {
		out = append(out, r)
		if t, ok := theirs[r.name]; ok {
			out = append(out, liveRow{name: "   " + other.Name, values: t.values})
		}
	}
	return out
}

// totals are the powers of both circuits at the clock.
func (l *live) totals() []liveRow {
	s := l.p.s
	list := []struct {
		name string
		of   func(circuit.Channel) bool
	}{
		{"Drawn from the supply", func(c circuit.Channel) bool { return c.Role == circuit.Supply }},
		{"Given to the loads", func(c circuit.Channel) bool { return c.Role == circuit.Work }},
		{"Heat to the oil", func(c circuit.Channel) bool { return c.Role == circuit.Loss && c.Sink == circuit.ToOil }},
	}
	var out []liveRow
	for _, q := range list {
		r := liveRow{name: q.name, bold: true}
		for i := range s.editors {
			if s.editors[i].circuit < 0 {
				continue
			}
			text := "–"
			if run := s.run(i); run != nil && run.Plot != nil {
				text = s.ctx.Text(powerAt(run.Plot, s.ctx.Clock(), q.of), units.Power, 3)
			}
			r.values = append(r.values, text)
		}
		out = append(out, r)
	}
	return out
}

// powerAt adds the powers of some channels at an instant [W].
func powerAt(p *audit.Plot, t float64, of func(circuit.Channel) bool) float64 {
	sum := p.PowerAt(t, of)
	if math.Abs(sum) < smallestPower {
		return 0
	}
	return sum
}

// smallestPower [W] is what rounding leaves of none.
const smallestPower = 1e-6

// blockValues are pressures and flows at the ports, what else the block tells, its
// heat now and over the cycle.
func (l *live) blockValues(c *audit.CircuitEntry, b *circuit.Block) []liveRow {
	s := l.p.s
	run := s.runOf(c.Name)
	st := figures.StateAt(run, s.ctx.Clock())
	k := circuit.KindNamed(b.Kind)
	if st == nil || k == nil {
		return nil
	}
	var out []liveRow
	for _, port := range k.Ports {
		if text := l.portText(st, b.ID+"."+port.Name); text != "" {
			out = append(out, liveRow{name: port.Name + ", " + port.Text, values: []string{text}})
		}
	}
	for i := range run.Plot.Signals {
		t := &run.Plot.Signals[i]
		if block, what, ok := strings.Cut(t.Name, "."); ok && block == b.ID && !strings.Contains(what, ".") {
			out = append(out, liveRow{name: upper(t.Title), values: []string{l.text(t.At(s.ctx.Clock()), t.Dim)}})
		}
	}
	if len(k.Losses) > 0 {
		out = append(out, liveRow{"Heat", []string{s.ctx.Text(st.Heat(b.ID), units.Power, 3)}, true})
		if o := figures.OverCycle(run, s.ctx.Clock()); o.Energy {
			text := s.ctx.Text(o.Heat(b.ID), units.Energy, 3)
			if in := run.Balance.SupplyIn.Total(); in > 0 {
				text += " · " + s.ctx.Local(units.Format(o.Heat(b.ID)/in, units.Percent, 2)) + " of drawn"
			}
			out = append(out, liveRow{"Heat over the cycle", []string{text}, true})
		}
	}
	return out
}

func upper(s string) string {
	if s == "" {
		return s
	}
	return strings.ToUpper(s[:1]) + s[1:]
}

// text is a quantity as read, shares in percent.
func (l *live) text(si float64, d units.Dim) string {
	if d == units.Ratio {
		return l.p.s.ctx.Local(units.Format(si, units.Percent, 3))
	}
	return l.p.s.ctx.Text(si, d, 3)
}

// portText is "162 bar · 64.0 L/min in", "" for a port without signals.
func (l *live) portText(st *figures.SheetState, port string) string {
	var parts []string
	if p, ok := st.Signal(port + ".p"); ok {
		parts = append(parts, l.p.s.ctx.Text(p, units.Pressure, 3))
	}
	if q, ok := st.Signal(port + ".q"); ok {
		if math.Abs(q) < 1e-4*l.p.s.scales.Flow {
			q = 0
		}
		way := ""
		switch {
		case q > 0:
			way = " in"
		case q < 0:
			way = " out"
		}
		parts = append(parts, l.p.s.ctx.Text(math.Abs(q), units.Flow, 3)+way)
	}
	return strings.Join(parts, " · ")
}

// draw draws the live values.
func (l *live) draw(p pen.Pen, w, _ float64) []widgets.Part {
	s := l.p.s
	pal := s.ctx.Palette()
	rows := l.rows()
	p.Polyline([]pen.Pt{{X: 0, Y: 8}, {X: w, Y: 8}}, false, pal.Edge, pen.Stroke{W: 1, C: pal.Edge})
	if len(rows) == 0 {
		text := "Values at the clock follow when the circuit is solved."
		if c, _ := l.p.at(); c == nil {
			text = ""
		}
		p.Text(pen.Pt{Y: 25}, text, 11, pal.Secondary, pen.Left, false)
		return nil
	}
	head := "At "
	if _, b := l.p.at(); b != nil && len(l.p.many) > 1 {
		head = b.ID + " at " // several are edited together; this is the one whose values these are
	}
	p.Text(pen.Pt{Y: 25}, head+s.ctx.Text(s.ctx.Clock(), units.Time, 4)+pick(s.ctx.Doc().Current(), "", ", before the last edit"), 11, pal.Secondary, pen.Left, false)
	var parts []widgets.Part
	column := 84.0
	if len(rows[0].values) > 1 {
		for _, name := range s.names() {
			column = max(column, min(w/3, p.TextWidth(name, 11, false)+8))
		}
		for i, name := range s.names() {
			p.Text(pen.Pt{X: w - column*float64(len(rows[0].values)-1-i), Y: 25}, pen.Shorten(name, 11, false, column-8), 11, pal.Secondary, pen.Right, false)
		}
	}
	for i, r := range rows {
		y := 45 + 19*float64(i)
		left := 0.0
		for j, v := range r.values {
			x := w - column*float64(len(r.values)-1-j)
			p.Text(pen.Pt{X: x, Y: y}, v, 12, pal.Ink, pen.Right, r.bold)
			if j == 0 {
				left = x - p.TextWidth(v, 12, r.bold)
			}
		}
		p.Text(pen.Pt{Y: y}, pen.Shorten(r.name, 12, false, left-6), 12, pal.Ink, pen.Left, false)
		parts = append(parts, widgets.Part{Name: r.name, Text: strings.Join(r.values, " | "), Y: y - 13, W: w, H: 18})
	}
	return parts
}

// names of the circuits on the sheets.
func (s *Station) names() []string {
	var out []string
	for _, e := range s.editors {
		if e.circuit >= 0 {
			out = append(out, e.name)
		}
	}
	return out
}

// at is the value of what is plotted at an instant, for the plot.
func (l *live) at(_ int, t float64) string {
	var out []string
	for _, c := range l.drawn {
		out = append(out, c.prefix+l.text(c.at(t), c.dim))
	}
	if len(out) > 2 {
		return ""
	}
	return fmt.Sprint(strings.Join(out, " | "))
}
