package heat

import (
	"math"
	"strings"
	"testing"

	"barlitre/app/station"
	"barlitre/app/station/stationtest"
	"barlitre/app/widgets"
	"barlitre/machines/units"
)

const press, winch = "baling-press.yaml", "quayside-winch.yaml"

func shown(t *testing.T, c *stationtest.Context) *Heat {
	t.Helper()
	h := New(c).(*Heat)
	c.Show(h, 1190, 590)
	return h
}

func typeInto(t *testing.T, c *stationtest.Context, name, text string) {
	t.Helper()
	f := widgets.Named(name).(*widgets.Field)
	c.Win.Canvas().Focus(f)
	f.SetText(text)
	c.Win.Canvas().Unfocus()
}

// The cooler is heat over temperature difference: worked out here from the balance and
// the temperatures typed, it is what the table shows, in every unit.
func TestTemperaturesChangeTheCooler(t *testing.T) {
	c := stationtest.New(t, press)
	h := shown(t, c)
	for _, step := range []struct{ oil, air string }{{"50", "28"}, {"55 °C", "28"}, {"55,5", "31"}, {"131 F", "68 °F"}} {
		typeInto(t, c, "heat.oil", step.oil)
		typeInto(t, c, "heat.air", step.air)
		c.Wait()
		h.Changed(station.Model | station.Solution)
		s := c.Solution()
		oil, _, _ := units.ParseLoose(step.oil, units.Temperature, units.Preferred(units.Temperature, units.Metric))
		air, _, _ := units.ParseLoose(step.air, units.Temperature, units.Preferred(units.Temperature, units.Metric))
		text := h.table.Text()
		for _, run := range s.Circuits {
			for _, d := range run.Duties {
				mean := d.Balance.HeatToOil().Total() / d.Balance.Cycle
				if mean < 1e-6 {
					mean = 0 // rounding, in a circuit that is switched off
				}
				want := c.Text(mean/(oil-air), units.HeatCapacityRate, 3)
				if !strings.Contains(text, want) {
					t.Errorf("oil %s, air %s: %s, %s needs %s; the table is %s", step.oil, step.air, run.Circuit.Name, d.Duty.Name, want, text)
				}
			}
		}
	}
	if f := c.Document.File(); math.Abs(f.Oil.Temperature.SI-units.ZeroCelsius-55) > 1e-9 || math.Abs(f.Air.SI-units.ZeroCelsius-20) > 1e-9 {
		t.Errorf("the file has oil %s, air %s", f.Oil.Temperature.Text, f.Air.Text)
	}
}

// A refused value stays in its field with the reason, and the file stays as it was.
func TestRefusals(t *testing.T) {
	c := stationtest.New(t, press)
	h := shown(t, c)
	for _, x := range [][3]string{{"heat.oil", "warm", "warm"}, {"heat.oil.low", "55", "between its low and high"}, {"heat.air", "-500", "absolute zero"}} {
		before := c.Document.Revision()
		typeInto(t, c, x[0], x[1])
		f := widgets.Named(x[0]).(*widgets.Field)
		if !f.Bad() || f.Text != x[1] || c.Document.Revision() != before || !strings.Contains(f.Note.Text, x[2]) {
			t.Errorf("%s: %q was taken, or refused with %q", x[0], x[1], f.Note.Text)
		}
	}
	if text := h.table.Text(); !strings.Contains(text, "kW/K") {
		t.Errorf("the table is %s", text)
	}
}

func TestAirWarmerThanOil(t *testing.T) {
	c := stationtest.New(t, press)
	h := shown(t, c)
	typeInto(t, c, "heat.oil.low", "30")
	typeInto(t, c, "heat.oil", "34")
	typeInto(t, c, "heat.air", "36")
	c.Wait()
	h.Changed(station.Model | station.Solution)
	if !h.Mend() || !strings.Contains(h.fault.DumpText(), "not warmer than the air") || strings.Contains(h.table.Text(), "kW/K") {
		t.Errorf("fault %q, table %s", h.fault.DumpText(), h.table.Text())
	}
}

// The clock line lies where the plot has the instant; a click sets the clock to it.
func TestClock(t *testing.T) {
	c := stationtest.New(t, press)
	h := shown(t, c)
	c.Time = 20
	h.Changed(station.Clock)
	if got, want := float64(h.plot.line.Position1.X), h.plot.area.XAt(20); !h.plot.line.Visible() || math.Abs(got-want) > 0.01 {
		t.Errorf("the clock line is at %v, want %v", got, want)
	}
	for _, t0 := range []float64{20, 23.2} { // at the second a ramp begins: tracks keep other instants of it
		c.Time = t0
		h.Changed(station.Clock)
		var want []string
		for _, run := range c.Solution().Circuits {
			sum := 0.0
			for i, ch := range run.Duties[0].Plot.Channels {
				if ch.Sink == "oil" {
					sum += run.Duties[0].Plot.Powers[i].At(t0)
				}
			}
			want = append(want, run.Circuit.Name+" "+c.Text(sum, units.Power, 3))
		}
		for _, w := range want {
			if !strings.Contains(h.plot.now.Text, w) {
				t.Errorf("the clock says %q, want %q in it", h.plot.now.Text, w)
			}
		}
	}
	h.plot.tapped(h.plot.figure.At(h.plot.area.XAt(7), h.plot.area.Lanes[0].Y+4), h.plot.area.XAt(7), 0)
	if math.Abs(c.Time-7) > 1e-9 {
		t.Errorf("a click at 7 s set the clock to %v", c.Time)
	}
}

func TestFiguresOpen(t *testing.T) {
	c := stationtest.New(t, winch)
	h := shown(t, c)
	n := 0
	for i, row := range h.table.Rows() {
		for j, f := range row.Cells {
			h.table.Table.Tapped(i, j+1)
			if got := c.Explained[len(c.Explained)-1]; got != f || got.Calculation.Formula == "" || h.table.Table.Cell(i, j+1) != f.Text {
				t.Errorf("%q opens %+v", f.Text, got)
			}
			n++
		}
		h.table.Table.Tapped(i, 0) // a name opens nothing
	}
	if n != len(c.Explained) || n < 8 {
		t.Errorf("%d figures, %d opened", n, len(c.Explained))
	}
}

func TestEmptyAndPartSolved(t *testing.T) {
	c := stationtest.New(t, "")
	h := shown(t, c)
	if h.empty.DumpText() == "" || h.tableOf.Visible() || h.Mend() || h.plot.line.Visible() {
		t.Errorf("an empty audit shows %q", h.empty.DumpText())
	}
	typeInto(t, c, "heat.air", "20") // the empty audit has no air in its text
	if f := c.Document.File(); f.Air.Text != "20 C" {
		t.Errorf("air is %q: %s", f.Air.Text, h.air.value.Note.Text)
	}
}

func TestPictures(t *testing.T) {
	for _, sample := range []string{press, winch} {
		c := stationtest.New(t, sample)
		h := New(c).(*Heat)
		for _, dark := range []bool{false, true} {
			c.SetTheme(dark, 1)
			if !stationtest.Looking() {
				break
			}
			for size, wh := range map[string][2]float32{"large": {1190, 590}, "small": {930, 480}} {
				c.Time = 18
				c.Show(h, wh[0], wh[1])
				c.Look("heat-" + strings.TrimSuffix(sample, ".yaml") + "-" + size + map[bool]string{true: "-dark"}[dark])
			}
		}
		c.SetTheme(false, 2)
		c.Comma = true
		c.Show(h, 930, 480)
		c.Look("heat-" + strings.TrimSuffix(sample, ".yaml") + "-scale2")
		if m := h.Content().MinSize(); m.Width > 900 || m.Height > 480 {
			t.Errorf("the least size is %v", m)
		}
	}
	c := stationtest.New(t, "")
	shown(t, c)
	c.Look("heat-empty")
}
