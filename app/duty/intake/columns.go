package intake

import (
	"errors"
	"slices"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/widgets"
	"barlitre/circuit/recording/logger"
	"barlitre/machines/units"
)

// columns is what each column of the file holds.
type columns struct {
	p                    *Page
	content              fyne.CanvasObject
	table                *widgets.Table
	names                []string
	title                *widget.Label
	quantity, unit       *choice
	signal, kind         *choice
	low, high            *widgets.Field
	span                 *fyne.Container
	absolute, counts     *widgets.Check
	text, leave          *widgets.Check
	details, pressureRow *fyne.Container
	selected             string
}

// quantities are what a channel may be, as units name them.
var quantities = func() (out []units.Dim) {
	return []units.Dim{units.Pressure, units.Flow, units.Velocity, units.AngularSpeed, units.Force, units.Torque, units.Length, units.Angle, units.Power, units.Energy,
		units.Temperature, units.Current, units.Voltage, units.Frequency, units.Acceleration, units.Volume, units.Mass, units.Time, units.Ratio}
}()

func dimOf(quantity string) units.Dim {
	for _, d := range quantities {
		if d.Name() == quantity {
			return d
		}
	}
	for d := units.Dim(0); d.Name() != "unknown quantity"; d++ {
		if d.Name() == quantity {
			return d
		}
	}
	return units.Ratio
}

// signals are what a transmitter may give: the ends of its range.
var (
	signalWords  = []string{"", "4-20 mA", "0-20 mA", "0-10 V", "0-5 V"}
	signalLabels = []string{"none: the quantity itself", "4 to 20 mA", "0 to 20 mA", "0 to 10 V", "0 to 5 V"}
	signalEnds   = map[string]logger.Scaling{"4-20 mA": {Signal: "mA", From: [2]float64{4, 20}}, "0-20 mA": {Signal: "mA", From: [2]float64{0, 20}},
		"0-10 V": {Signal: "V", From: [2]float64{0, 10}}, "0-5 V": {Signal: "V", From: [2]float64{0, 5}}}
)

func newColumns(p *Page) *columns {
	c := &columns{p: p}
	c.table = widgets.Name(widgets.NewTable(fyne.NewSize(300, 120), p.ctx.Palette), "intake.columns")
	c.table.ByRow = true
	c.table.Selected = func(row, _ int) {
		if row >= 0 && row < len(c.names) {
			c.selected = c.names[row]
			p.refresh()
		}
	}
	c.title = widgets.Name(widget.NewLabelWithStyle("", fyne.TextAlignLeading, fyne.TextStyle{Bold: true}), "intake.column")
	c.title.Truncation = fyne.TextTruncateEllipsis
	names := []string{""}
	labels := []string{"plain number"}
	for _, d := range quantities {
		names, labels = append(names, d.Name()), append(labels, d.Name())
	}
	c.quantity = p.newChoice("intake.column.quantity", names, labels, c.setQuantity)
	c.unit = p.newChoice("intake.column.unit", nil, nil, func(w string) { c.edit(func(x *logger.Channel) { x.Unit = w }) })
	c.signal = p.newChoice("intake.column.signal", signalWords, signalLabels, c.setSignal)
	c.kind = p.newChoice("intake.column.kind", []string{"", string(logger.Mean), string(logger.Minimum), string(logger.Maximum)}, []string{"an instant", "the mean of its interval", "the lowest of its interval", "the highest of its interval"},
		func(w string) { c.edit(func(x *logger.Channel) { x.Kind = logger.Kind(w) }) })
	c.low = widgets.Name(widgets.NewField("", func(t string) error { return c.setEnd(0, t) }), "intake.column.low")
	c.high = widgets.Name(widgets.NewField("", func(t string) error { return c.setEnd(1, t) }), "intake.column.high")
	check := func(word, name string, set func(x *logger.Channel, on bool)) *widgets.Check {
		return widgets.Name(widgets.NewCheck(word, func(on bool) {
			if !p.loading {
				c.edit(func(x *logger.Channel) { set(x, on) })
			}
		}), name)
	}
	c.absolute = check("against vacuum, not against the air", "intake.column.absolute", func(x *logger.Channel, on bool) { x.Absolute = on })
	c.counts = check("counts up, as a meter does", "intake.column.counter", func(x *logger.Channel, on bool) { x.Counter = on })
	c.text = check("remarks, no numbers", "intake.column.text", func(x *logger.Channel, on bool) { x.Text = on })
	c.leave = check("leave this column out", "intake.column.leave", func(x *logger.Channel, on bool) { x.Leave = on })
	c.span = container.NewVBox(widgets.FieldRow("at the low end", c.low), widgets.FieldRow("at the high end", c.high))
	c.pressureRow = container.NewVBox(c.absolute)
	c.details = container.NewVBox(widgets.Row("Quantity", c.quantity.Select, nil), widgets.Row("Unit", c.unit.Select, nil), widgets.Row("Signal", c.signal.Select, nil), c.span,
		widgets.Row("A row is", c.kind.Select, nil), c.pressureRow, c.counts, c.text, c.leave,
		say("An offset or a turned sign is set where the channel becomes a track; a zero offset that the data show is under Findings.", widget.LowImportance, false))
	side := container.NewVScroll(container.New(besideBar{}, container.NewVBox(c.title, c.details)))
	split := container.NewHSplit(c.table, side)
	split.Offset = 0.62
	c.content = split
	return c
}

// edit changes the channel at hand.
func (c *columns) edit(set func(x *logger.Channel)) {
	c.p.change(func(r *logger.Recipe) {
		x := r.Channel(c.selected)
		if x == nil {
			r.Channels = append(r.Channels, logger.Channel{Column: c.selected})
			x = &r.Channels[len(r.Channels)-1]
		}
		set(x)
	})
}

func (c *columns) setQuantity(w string) {
	c.edit(func(x *logger.Channel) {
		x.Quantity, x.Unit = w, ""
		if w != "" {
			x.Unit = units.Preferred(dimOf(w), units.Metric).Symbol
		}
		x.Absolute = x.Absolute && w == units.Pressure.Name()
	})
}

func (c *columns) setSignal(w string) {
	c.edit(func(x *logger.Channel) {
		if w == "" {
			x.Scaling = nil
			return
		}
		s := signalEnds[w]
		s.To = [2]float64{0, 100}
		if x.Scaling != nil {
			s.To = x.Scaling.To
		}
		x.Scaling = &s
	})
}

// setEnd says what one end of a signal stands for, in the unit of the channel or another.
func (c *columns) setEnd(i int, text string) error {
	x := c.p.src().recipe.Channel(c.selected)
	if x == nil || x.Scaling == nil {
		return nil
	}
	dim := units.Ratio
	if x.Quantity != "" {
		dim = dimOf(x.Quantity)
	}
	u := unitOf(*x)
	u.Dim = dim
	si, _, err := units.ParseLoose(text, dim, u)
	if err != nil {
		return err
	}
	s := *x.Scaling
	s.To[i] = u.FromSI(si)
	if s.To[0] == s.To[1] {
		return errors.New("both ends would be the same")
	}
	c.edit(func(x *logger.Channel) { x.Scaling = &s })
	return nil
}

func signalOf(x logger.Channel) string {
	if x.Scaling != nil {
		for w, s := range signalEnds {
			if s.Signal == x.Scaling.Signal && s.From == x.Scaling.From {
				return w
			}
		}
	}
	return ""
}

func (c *columns) fill() {
	p := c.p
	pre, err := p.src().file.Preview(p.src().recipe, max(40, p.src().recipe.First+3))
	if err != nil {
		pre = &logger.Preview{}
	}
	c.names = nil
	for _, n := range pre.Names {
		if !slices.Contains(p.src().recipe.Time.Columns, n) && n != p.src().recipe.Time.Counter {
			c.names = append(c.names, n)
		}
	}
	if !slices.Contains(c.names, c.selected) && len(c.names) > 0 {
		c.selected = c.names[0]
	}
	first := map[string]string{}
	for i := len(pre.First) - 1; i >= 0; i-- {
		if r := pre.First[i]; r.Row {
			for k, n := range pre.Names {
				if k < len(r.Cells) && r.Cells[k] != "" {
					first[n] = r.Cells[k]
				}
			}
		}
	}
	cols := []widgets.Column{{Name: "column", Head: "Column", Left: true}, {Name: "quantity", Head: "Quantity", Left: true}, {Name: "unit", Head: "Unit", Left: true},
		{Name: "signal", Head: "Signal", Left: true}, {Name: "first", Head: "First value\nas it stands"}}
	c.table.SetData(cols, len(c.names), func(i int) widgets.TableRow { return c.row(c.names[i], first[c.names[i]]) })
	if i := slices.Index(c.names, c.selected); i >= 0 {
		c.table.Select(i, 0)
	}
	c.fillDetails()
}

func (c *columns) row(name, first string) widgets.TableRow {
	x := c.p.src().recipe.Channel(name)
	cells := []string{name, "left out", "", "", first}
	switch {
	case x == nil || x.Leave:
	case x.Text:
		cells[1] = "remarks"
	default:
		if cells[1] = x.Quantity; x.Quantity == "" {
			cells[1] = "plain number"
		}
		cells[2], cells[3] = x.Unit, signalOf(*x)
	}
	return widgets.TableRow{Name: name, Cells: cells}
}

func (c *columns) fillDetails() {
	show(c.details, c.selected != "")
	c.title.SetText("Column " + c.selected)
	x := logger.Channel{Column: c.selected, Leave: true}
	if y := c.p.src().recipe.Channel(c.selected); y != nil {
		x = *y
	}
	c.quantity.set(x.Quantity)
	var symbols []string
	if x.Quantity != "" {
		for _, u := range units.Units(dimOf(x.Quantity)) {
			if !slices.Contains(symbols, u.Symbol) {
				symbols = append(symbols, u.Symbol)
			}
		}
		if x.Unit != "" && !slices.Contains(symbols, x.Unit) {
			symbols = append(symbols, x.Unit)
		}
	}
	c.unit.offer(symbols, nil)
	c.unit.set(x.Unit)
	c.signal.set(signalOf(x))
	c.kind.set(string(x.Kind))
	show(c.span, x.Scaling != nil)
	if x.Scaling != nil {
		c.low.SetValue(c.p.ctx.Local(units.Number(x.Scaling.To[0], 6))+" "+x.Unit, "")
		c.high.SetValue(c.p.ctx.Local(units.Number(x.Scaling.To[1], 6))+" "+x.Unit, "")
	}
	c.absolute.SetChecked(x.Absolute)
	show(c.pressureRow, x.Quantity == units.Pressure.Name())
	c.counts.SetChecked(x.Counter)
	c.text.SetChecked(x.Text)
	c.leave.SetChecked(x.Leave)
}
