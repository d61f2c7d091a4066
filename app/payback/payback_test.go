package payback

import (
	"math"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"

	"fyne.io/fyne/v2"

	"barlitre/app/station"
	"barlitre/app/station/stationtest"
	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/audit/pen"
	"barlitre/machines/units"
	"barlitre/samples"
)

const press, winch = "baling-press.yaml", "quayside-winch.yaml"

func shown(t *testing.T, sample string) (*stationtest.Context, *Payback) {
	t.Helper()
	c := stationtest.New(t, sample)
	p := New(c).(*Payback)
	c.Show(p, 1190, 590)
	return c, p
}

func typeInto(t *testing.T, c *stationtest.Context, name, text string) *widgets.Field {
	t.Helper()
	f := widgets.Named(name).(*widgets.Field)
	c.Win.Canvas().Focus(f)
	f.SetText(text)
	c.Win.Canvas().Unfocus()
	return f
}

func again(c *stationtest.Context, p *Payback) {
	c.Wait()
	p.Changed(station.Model | station.Solution)
}

// Payback is cost by saving and saving is energy by price: worked out here from the
// balances and what is typed, it is what stands there.
func TestInputsChangeThePayback(t *testing.T) {
	c, p := shown(t, press)
	typeInto(t, c, "payback.price.high", "0,4")
	for _, step := range []struct {
		price, hours, low, likely, high string
		perkWh, h                       float64
		cost                            [3]float64
	}{
		{"0.2", "4200", "10000", "20000", "45000", 0.2, 4200, [3]float64{10000, 20000, 45000}},
		{"0,31 EUR/kWh", "3 000 h", "11000", "30000", "41 000 EUR", 0.31, 3000, [3]float64{11000, 30000, 41000}},
	} {
		for name, text := range map[string]string{"payback.price": step.price, "payback.hours.1": step.hours, "payback.hours.2": "0 h"} {
			if f := typeInto(t, c, name, text); f.Bad() {
				t.Fatalf("%s took not %q: %s", name, text, f.Note.Text)
			}
		}
		for _, key := range []string{"high", "low", "likely", "high"} { // in an order in which each is within the others
			typeInto(t, c, "payback.cost."+key, map[string]string{"low": step.low, "likely": step.likely, "high": step.high}[key])
		}
		again(c, p)
		s := c.Solution()
		drawn := func(i int) float64 {
			d := s.Circuits[i].Duties[0]
			return d.Balance.SupplyIn.Total() / d.Balance.Cycle * step.h * 3600 / 3.6e6
		}
		saving := (drawn(0) - drawn(1)) * step.perkWh
		text := p.shown[0].table.Text() + " / " + p.shown[0].cost.Text()
		want := []string{units.Number(drawn(0)*step.perkWh, 4) + "\u202fEUR", units.Number(drawn(1)*step.perkWh, 4) + "\u202fEUR", units.Number(saving, 4) + "\u202fEUR"}
		for _, cost := range step.cost {
			want = append(want, units.Number(cost/saving, 2)+" years", units.Number(cost, 4)+"\u202fEUR")
		}
		for _, w := range want {
			if !strings.Contains(text, w) {
				t.Errorf("price %s: %q is missing in %s", step.price, w, text)
			}
		}
		if !strings.Contains(p.shown[0].verdict.DumpText(), units.Number(step.cost[1]/saving, 2)+" years") {
			t.Errorf("the verdict is %q", p.shown[0].verdict.DumpText())
		}
	}
}

func TestCostIsRefusedAndNothingLost(t *testing.T) {
	c, _ := shown(t, press)
	before := c.Document.Revision()
	for text, reason := range map[string]string{"99999999": "between low and high", "30000 USD": "USD", "much": "much"} {
		f := typeInto(t, c, "payback.cost.likely", text)
		if !f.Bad() || f.Text != text || !strings.Contains(f.Note.Text, reason) || c.Document.Revision() != before {
			t.Errorf("%q: taken, or refused with %q", text, f.Note.Text)
		}
	}
}

func TestOriginNoteCreditAndCO2(t *testing.T) {
	c, p := shown(t, winch)
	p.inputs.origin.SetSelected("assumed")
	typeInto(t, c, "payback.price.note", "read: from a bill")
	p.inputs.credit.SetChecked(!c.Document.File().CreditReturned)
	typeInto(t, c, "payback.co2.year", "2023")
	p.inputs.basis.SetSelected("market")
	again(c, p)
	f := c.Document.File()
	if f.Price.Origin != "assumed" || f.Price.Note != "read: from a bill" || f.CO2Year != 2023 || f.CO2Basis != "market" || len(c.Failed) > 0 {
		t.Errorf("the file has %v, %q, %d, %q; failed: %v", f.Price.Origin, f.Price.Note, f.CO2Year, f.CO2Basis, c.Failed)
	}
	if !strings.Contains(p.basis.DumpText(), "2023, market-based") || strings.Contains(p.basis.DumpText(), "is credited") != f.CreditReturned {
		t.Errorf("the basis says %q", p.basis.DumpText())
	}
}

// A click on a bar opens the figure that it shows.
func TestBarsOpen(t *testing.T) {
	c, p := shown(t, press)
	d := p.shown[0]
	parts := d.draw(pen.NewRecorder(), 700, 260)
	if len(parts) != 6 {
		t.Fatalf("%d bars", len(parts))
	}
	for i, part := range parts {
		d.tapped(part, 0, 0)
		got := c.Explained[len(c.Explained)-1]
		if !strings.Contains(part.Text, got.Text) || !strings.HasSuffix(barRows[i/2], got.Name) || math.IsNaN(got.Value) {
			t.Errorf("%s opens %s %s", part.Text, got.Name, got.Text)
		}
	}
	n := len(c.Explained)
	for i, row := range d.table.Rows() {
		for j := range row.Cells {
			d.table.Table.Tapped(i, j+1)
		}
	}
	if len(c.Explained) < n+15 {
		t.Errorf("only %d figures of the table open", len(c.Explained)-n)
	}
}

func TestPublishedAndExclusions(t *testing.T) {
	c, p := shown(t, press)
	r := c.Report()
	if text := p.shown[0].published.DumpText(); !strings.Contains(text, r.Decisions[0].Published.Text) || !strings.Contains(text, r.Decisions[0].Published.Explanation) {
		t.Errorf("published: %q", text)
	}
	for _, e := range r.Exclusions {
		if !strings.Contains(p.left.DumpText(), e) {
			t.Errorf("%q is not among what is left out", e)
		}
	}
}

// An audit that begins with nothing takes all inputs.
func TestFromEmpty(t *testing.T) {
	c, p := shown(t, "")
	if !p.empty.Visible() || p.below.Visible() || p.Mend() {
		t.Error("the empty state is not shown")
	}
	for name, text := range map[string]string{"payback.price": "0,18", "payback.co2": "0.35"} {
		if f := typeInto(t, c, name, text); f.Bad() {
			t.Errorf("%s: %s", name, f.Note.Text)
		}
	}
	if f := c.Document.File(); f.Price.Text != "0.18 EUR/kWh" || f.CO2.Text != "0.35 kg/kWh" {
		t.Errorf("price %q, CO2 %q", f.Price.Text, f.CO2.Text)
	}
}

// A proposal without a cost, and an audit without a price, say what is missing and take it.
func TestCostAndPriceFromNothing(t *testing.T) {
	c, p := shown(t, press)
	err := c.Document.Edit("strip", func(f *audit.File) error {
		text := regexp.MustCompile(`(?m)^  retrofit_cost:.*\n`).ReplaceAllString(string(f.Bytes()), "")
		text = regexp.MustCompile(`(?ms)^energy:.*?^axes:`).ReplaceAllString(text, "axes:")
		f.Replace([]byte(text))
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	again(c, p)
	f := c.Document.File()
	if f.HasPrice || f.Circuits[1].Cost.Given || !p.Mend() || p.shown[0].cost.Table.Visible() || !strings.Contains(p.shown[0].none.DumpText(), "Type it at the left") {
		t.Fatalf("price %v, cost %v; %q", f.HasPrice, f.Circuits[1].Cost.Given, p.shown[0].none.DumpText())
	}
	c.Show(p, 1190, 590)
	c.Look("payback-nothing")
	for _, x := range [][2]string{{"payback.price", "0.2"}, {"payback.cost.likely", "20000"}, {"payback.cost.low", "15 000"}, {"payback.cost.high", "30000 EUR"}} {
		if f := typeInto(t, c, x[0], x[1]); f.Bad() {
			t.Errorf("%s: %s", x[0], f.Note.Text)
		}
	}
	again(c, p)
	cost := c.Document.File().Circuits[1].Cost
	if cost.Low.SI != 15000 || cost.Likely.SI != 20000 || cost.High.SI != 30000 || p.Mend() || !p.shown[0].cost.Table.Visible() {
		t.Errorf("the cost is %+v", cost)
	}
}

func TestPictures(t *testing.T) {
	for _, sample := range []string{press, winch, ""} {
		c, p := shown(t, sample)
		for _, dark := range []bool{false, true} {
			c.SetTheme(dark, 1)
			if !stationtest.Looking() {
				break
			}
			for size, wh := range map[string][2]float32{"large": {1190, 590}, "small": {930, 480}} {
				c.Show(p, wh[0], wh[1])
				c.Look("payback-" + strings.TrimSuffix(sample, ".yaml") + "-" + size + map[bool]string{true: "-dark"}[dark])
			}
		}
		p.scroll.ScrollToBottom()
		c.Settle(930, 480)
		c.Look("payback-" + strings.TrimSuffix(sample, ".yaml") + "-bottom")
		c.SetTheme(false, 2)
		c.Comma = true
		c.Show(p, 930, 480)
		c.Look("payback-" + strings.TrimSuffix(sample, ".yaml") + "-scale2")
		if m := p.Content().MinSize(); m.Width > 900 || m.Height > 480 {
			t.Errorf("the least size is %v", m)
		}
	}
}

// Where an engine burns fuel its price and CO2 are asked for and reach the file, with a decimal comma or
// by the litre as a bare number; elsewhere they are not.
func TestFuelInputs(t *testing.T) {
	c, p := shown(t, winch)
	if p.inputs.ofFuel.Visible() {
		t.Error("fuel is asked for without an engine")
	}
	data, err := samples.ReadStarter("closed-circuit-winch.yaml")
	if err != nil {
		t.Fatal(err)
	}
	text := regexp.MustCompile(`M1: \{kind: electric_motor[^\n]*`).ReplaceAllString(string(data), "M1: {kind: engine, rated_power: 30 kW, speed: 1800 rpm, at: [8, 38]}")
	path := filepath.Join(t.TempDir(), "engine.yaml")
	if err := os.WriteFile(path, []byte(text), 0o600); err != nil {
		t.Fatal(err)
	}
	if _, err := c.Document.Open(path); err != nil {
		t.Fatal(err)
	}
	again(c, p)
	if !p.inputs.ofFuel.Visible() {
		t.Fatal("the price of fuel is not asked for")
	}
	if f := typeInto(t, c, "payback.fuel_price", "1,62"); f.Bad() {
		t.Fatalf("refused: %s", f.Note.Text)
	}
	if f := typeInto(t, c, "payback.fuel_co2", "2.7 kg/L"); f.Bad() {
		t.Fatalf("refused: %s", f.Note.Text)
	}
	again(c, p)
	f := c.Doc().File()
	if f.FuelPrice.Text != "1.62 EUR/L" || math.Abs(f.FuelCO2.SI-2700) > 1e-9 {
		t.Errorf("%q, %g kg/m3", f.FuelPrice.Text, f.FuelCO2.SI)
	}
	s, _ := c.Document.Solution()
	y := s.Circuits[0].Year
	if litres := y.Fuel.Total() / (830.565 * 43.027e6) * 1e3; math.Abs(s.Circuits[0].Money.Drawn-1.62*litres) > 1e-6*litres {
		t.Errorf("costs %g for %g L", s.Circuits[0].Money.Drawn, litres)
	}
	if f := typeInto(t, c, "payback.fuel_price", "much"); !f.Bad() {
		t.Error("took a word for a price")
	}
}

// A circuit that an engine drives needs the price of fuel, not that of energy from the mains.
func TestFuelAloneNeedsItsPrice(t *testing.T) {
	c, p := shown(t, "ramp-carrier.yaml")
	if f := c.Document.File(); f.HasPrice || !f.HasFuelPrice || p.Mend() {
		t.Errorf("energy priced %v, fuel priced %v, to mend %v", f.HasPrice, f.HasFuelPrice, p.Mend())
	}
	if err := c.Document.Drop("energy.fuel_price"); err != nil {
		t.Fatal(err)
	}
	again(c, p)
	if !p.Mend() {
		t.Error("fuel without a price is nothing to mend")
	}
}

// Rows that come with a value push down what stands below them: no two fields overlap.
func TestRowsThatComeMoveTheOthers(t *testing.T) {
	c, _ := shown(t, press)
	if err := c.Doc().Clear("energy.co2"); err != nil {
		t.Fatal(err)
	}
	c.Wait()
	p := New(c).(*Payback)
	c.Show(p, 1190, 590)
	typeInto(t, c, "payback.co2", "0.38 kg/kWh")
	basis, hours := widgets.Named("payback.co2.basis").(*widgets.Select), widgets.Named("payback.hours.1").(*widgets.Field)
	at := func(o fyne.CanvasObject) float32 { return fyne.CurrentApp().Driver().AbsolutePositionForObject(o).Y }
	if !basis.Visible() || at(hours) < at(basis)+basis.Size().Height {
		t.Errorf("the basis of the CO2 factor ends at %g, the hours of a duty begin at %g", at(basis)+basis.Size().Height, at(hours))
	}
}
