package payback

import (
	"math"
	"slices"
	"strconv"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/station"
	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// inputs are the fields of the left side.
type inputs struct {
	ctx     station.Context
	content *fyne.Container
	scroll  *container.Scroll // that the content lies in
	loading bool              // values come from the file: choices are not the user's

	price, low, high, note *widgets.Field
	band                   fyne.CanvasObject
	ofPrice, ofCO2, ofFuel fyne.CanvasObject // what there is to say of a value, once it is given
	fuelPrice, fuelCO2     *widgets.Field
	origin                 *widgets.Select
	credit                 *widgets.Check
	co2, year              *widgets.Field
	basis                  *widgets.Select

	duties   *fyne.Container
	hours    []*widgets.Field
	dutyName []string
	costs    *fyne.Container
	cost     []*costFields
}

const notStated = "not stated"

func newInputs(ctx station.Context) *inputs {
	in := &inputs{ctx: ctx, duties: container.NewVBox(), costs: container.NewVBox()}
	in.price = in.field("payback.price", in.putPrice(""))
	in.low, in.high = in.field("payback.price.low", in.putPrice(".low")), in.field("payback.price.high", in.putPrice(".high"))
	in.note = in.field("payback.price.note", in.put("Change the note on the price", "energy.price.note"))
	in.note.Scroll = fyne.ScrollHorizontalOnly
	bandNote := widgets.Wrapped("")
	in.low.Note, in.high.Note = bandNote, bandNote
	in.band = widgets.Row("  lies within", container.NewGridWithColumns(2, in.low, in.high), bandNote)
	var origins []string
	for _, o := range circuit.Origins {
		origins = append(origins, string(o))
	}
	in.origin = in.choice("payback.price.origin", "Change the origin of the price", "energy.price.origin", origins)
	in.credit = widgets.Name(widgets.NewCheck("returned energy is paid for", in.setCredit), "payback.credit")
	in.co2 = in.field("payback.co2", in.putCO2)
	in.fuelPrice = in.field("payback.fuel_price", in.putFuel("Change the price of fuel", "energy.fuel_price", func() string { return currency(ctx).Symbol + "/L" }))
	in.fuelCO2 = in.field("payback.fuel_co2", in.putFuel("Change the CO2 of fuel", "energy.fuel_co2", func() string { return "kg/L" }))
	in.year = in.field("payback.co2.year", in.put("Change the year of the CO2 factor", "energy.co2_year"))
	in.basis = in.choice("payback.co2.basis", "Change the basis of the CO2 factor", "energy.co2_basis", []string{"location", "market"})
	in.ofPrice = container.NewVBox(widgets.Row("  it is", in.origin, nil), widgets.FieldRow("  note", in.note))
	in.ofCO2 = container.NewVBox(widgets.FieldRow("  of the year", in.year), widgets.Row("  basis", in.basis, nil))
	in.ofFuel = container.NewVBox(widgets.FieldRow("Price of fuel", in.fuelPrice), widgets.FieldRow("CO2 of fuel", in.fuelCO2))
	in.content = container.NewVBox(
		widgets.Card("Energy", container.NewVBox(
			widgets.FieldRow("Price of energy", in.price), in.band, in.ofPrice, in.credit,
			widgets.FieldRow("CO2 factor", in.co2), in.ofCO2, in.ofFuel)),
		widget.NewSeparator(),
		widgets.Card("Hours a year", in.duties),
		widget.NewSeparator(),
		widgets.Card("Cost of the retrofit", in.costs),
	)
	in.scroll = container.NewScroll(widgets.Spaced(in.content))
	return in
}

func (in *inputs) field(name string, commit func(string) error) *widgets.Field {
	return widgets.Name(widgets.NewField("", commit), name)
}

// choice makes a list that sets a word of the file.
func (in *inputs) choice(name, edit, target string, words []string) *widgets.Select {
	s := widgets.NewSelect(words, func(word string) {
		if in.loading {
			return
		}
		if err := in.edit(edit, target, word); err != nil {
			in.ctx.Fail(err)
			in.show()
		}
	})
	s.PlaceHolder = notStated
	return widgets.Name(s, name)
}

// edit puts a value into the file and shows what became of it.
func (in *inputs) edit(name, target, quantity string) error {
	if err := in.ctx.Doc().Edit(name, func(f *audit.File) error { return f.Put(target, quantity) }); err != nil {
		return err
	}
	in.show()
	return nil
}

// put takes a text as it is.
func (in *inputs) put(name, target string) func(string) error {
	return func(text string) error { return in.edit(name, target, text) }
}

// putPrice takes a price; a bare number is by the kWh.
func (in *inputs) putPrice(what string) func(string) error {
	return func(text string) error {
		var keep units.Unit
		f := in.ctx.Doc().File()
		if f.HasPrice && !(math.IsNaN(f.Price.Low) && math.IsNaN(f.Price.High)) {
			keep = f.Price.Unit
		}
		bare, err := units.ParseUnit(currency(in.ctx).Symbol+"/kWh", units.EnergyPrice)
		if err != nil {
			return err
		}
		quantity, err := station.Typed(text, units.EnergyPrice, bare, keep)
		if err != nil {
			return err
		}
		return in.edit("Change the price of energy", "energy.price"+what, quantity)
	}
}

func (in *inputs) putCO2(text string) error {
	var keep units.Unit
	f := in.ctx.Doc().File()
	if f.HasCO2 && !(math.IsNaN(f.CO2.Low) && math.IsNaN(f.CO2.High)) {
		keep = f.CO2.Unit
	}
	quantity, err := station.Typed(text, units.CO2Factor, units.Preferred(units.CO2Factor, units.Metric), keep)
	if err != nil {
		return err
	}
	return in.edit("Change the CO2 factor", "energy.co2", quantity)
}

// putFuel takes a value of fuel, with a decimal comma too; a bare number is by the litre.
func (in *inputs) putFuel(name, target string, bare func() string) func(string) error {
	return func(text string) error {
		text = strings.Replace(strings.TrimSpace(text), ",", ".", 1)
		if _, err := strconv.ParseFloat(text, 64); err == nil {
			text += " " + bare()
		}
		return in.edit(name, target, text)
	}
}

func (in *inputs) setCredit(on bool) {
	if in.loading {
		return
	}
	word := "no"
	if on {
		word = "yes"
	}
	if err := in.edit("Change what returned energy earns", "energy.credit_returned", word); err != nil {
		in.ctx.Fail(err)
		in.show()
	}
}

// show brings the file's values in.
func (in *inputs) show() {
	in.loading = true
	defer func() { in.loading = false }()
	f := in.ctx.Doc().File()
	height := in.content.MinSize().Height
	in.showPrice(f)
	in.credit.SetChecked(f.CreditReturned)
	if f.HasCO2 {
		in.co2.SetValue(station.Shown(in.ctx, f.CO2.SI, f.CO2.Unit, units.CO2Factor), said(f.CO2))
		in.ofCO2.Show()
	} else {
		in.co2.SetValue("", in.ctx.Local("Not given yet; type one, such as 0.35 kg/kWh."))
		in.ofCO2.Hide()
	}
	in.showFuel(f)
	year := ""
	if f.CO2Year > 0 {
		year = strconv.Itoa(f.CO2Year)
	}
	in.year.SetValue(year, "")
	choose(in.basis, f.CO2Basis)
	in.showHours(f)
	in.showCosts(f)
	if in.content.MinSize().Height != height { // rows came or went: all below moves
		in.scroll.Refresh()
	}
}

// showFuel shows what fuel costs and emits, where an engine burns it.
func (in *inputs) showFuel(f *audit.File) {
	if !f.Burns() {
		in.ofFuel.Hide()
		return
	}
	in.ofFuel.Show()
	text, hint := "", in.ctx.Local("Not given yet; type what a litre or a kilogram costs, such as 1.6 "+currency(in.ctx).Symbol+"/L.")
	if f.HasFuelPrice {
		text, hint = in.ctx.Local(f.FuelPrice.Text), said(f.FuelPrice)
	}
	in.fuelPrice.SetValue(text, hint)
	text, hint = "", in.ctx.Local("Not given: 2.66 kg/L, mineral diesel.")
	if f.HasFuelCO2 {
		text, hint = in.ctx.Local(f.FuelCO2.Text), said(f.FuelCO2)
	}
	in.fuelCO2.SetValue(text, hint)
}

func (in *inputs) showPrice(f *audit.File) {
	choose(in.origin, string(f.Price.Origin))
	if !f.HasPrice {
		in.price.SetValue("", in.ctx.Local("Not given yet; type what the next unit costs, such as 0.18 "+currency(in.ctx).Symbol+"/kWh."))
		in.note.SetValue("", "")
		in.ofPrice.Hide()
		in.band.Hide()
		return
	}
	in.ofPrice.Show()
	v := f.Price
	in.price.SetValue(station.Shown(in.ctx, v.SI, v.Unit, units.EnergyPrice), "")
	in.note.SetValue(v.Note, "")
	if math.IsNaN(v.Low) && math.IsNaN(v.High) {
		in.band.Hide()
		return
	}
	in.band.Show()
	for field, end := range map[*widgets.Field]float64{in.low: v.Low, in.high: v.High} {
		if math.IsNaN(end) {
			field.SetValue("", "")
		} else {
			field.SetValue(station.Shown(in.ctx, end, v.Unit, units.EnergyPrice), "")
		}
	}
}

// said is where a value comes from, with its note.
func said(v circuit.Value) string {
	if v.Origin != "" && v.Note != "" {
		return string(v.Origin) + ": " + v.Note
	}
	return string(v.Origin) + v.Note
}

func choose(s *widgets.Select, word string) {
	if s.Selected != word {
		if word == "" {
			s.ClearSelected()
		} else {
			s.SetSelected(word)
		}
	}
}

// showHours shows one field a duty.
func (in *inputs) showHours(f *audit.File) {
	var names []string
	for _, d := range f.Duties {
		names = append(names, d.Name)
	}
	if !slices.Equal(names, in.dutyName) || len(in.duties.Objects) == 0 {
		in.dutyName, in.hours, in.duties.Objects = names, nil, nil
		for i, name := range names {
			field := in.field("payback.hours."+strconv.Itoa(i+1), func(text string) error { return in.putHours(name, text) })
			in.hours = append(in.hours, field)
			in.duties.Add(widgets.FieldRow(name, field))
		}
		if len(names) == 0 {
			none := widgets.Wrapped("")
			none.SetText("The duties and their hours stand here once there is one; build it under Duty.")
			in.duties.Add(none)
		}
	}
	for i, d := range f.Duties {
		if d.Hours > 0 {
			in.hours[i].SetValue(in.ctx.Local(strings.TrimSuffix(units.FileText(d.Hours, hour()), " h"))+"\u202fh", "")
		} else {
			in.hours[i].SetValue("", "Without hours a duty is left out of the year.")
		}
	}
}

func hour() units.Unit { return units.Unit{Symbol: "h", Dim: units.Time, Factor: units.Hour} }

func (in *inputs) putHours(name, text string) error {
	quantity, err := station.Typed(text, units.Time, hour(), units.Unit{})
	if err != nil {
		return err
	}
	if err := in.ctx.Doc().Edit("Change the hours of "+name, func(f *audit.File) error { return f.PutHours(name, quantity) }); err != nil {
		return err
	}
	in.show()
	return nil
}
