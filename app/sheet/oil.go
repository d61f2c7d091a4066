package sheet

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// oilRows are the values of the oil that all circuits share, and how it suits the circuit at hand.
func (p *panel) oilRows() []row {
	grade := newFieldRow(p, "Oil", "field.oil.grade", "oil.grade", func(text string) error { return p.s.ctx.Doc().Put("oil.grade", text) })
	grade.value = func() (string, string, string, string) {
		return p.s.ctx.Doc().File().Oil.Grade, "all circuits have the same oil; such as ISO VG 46, or ISO VG 46 HV", "given by its viscosity", ""
	}
	grade.stack(grade.field)
	out := []row{&headRow{p.heading("Oil, of all circuits", nil)}, grade}
	for _, v := range p.s.ctx.Doc().File().OilValues() {
		out = append(out, newOilRow(p, v))
	}
	return append(out, newSuitsRow(p))
}

// headRow is a heading among the rows.
type headRow struct{ head fyne.CanvasObject }

func (r *headRow) object() fyne.CanvasObject { return r.head }
func (r *headRow) fill()                     {}
func (r *headRow) keep()                     {}
func (r *headRow) focus() fyne.Focusable     { return nil }

// oilRow is the row of a quantity of the oil.
type oilRow struct {
	*quantityRow
	of string // its key in the file
}

func newOilRow(p *panel, v audit.OilValue) *oilRow {
	r := &oilRow{of: v.Key}
	target := "oil." + v.Key
	r.quantityRow = newQuantityRow(p, v.Title, "field."+target, target, r.take)
	r.value = r.shown
	return r
}

// now is the value as the file has it.
func (r *oilRow) now() audit.OilValue {
	for _, v := range r.p.s.ctx.Doc().File().OilValues() {
		if v.Key == r.of {
			return v
		}
	}
	return audit.OilValue{}
}

func (r *oilRow) unitOf(v audit.OilValue) units.Unit {
	if v.Given && v.Value.Unit.Factor != 0 {
		return v.Value.Unit
	}
	if v.Dim == units.Ratio {
		return units.Percent
	}
	return units.Preferred(v.Dim, r.p.s.ctx.System())
}

func (r *oilRow) shown() (text, hint, placeholder, unit string) {
	v := r.now()
	u := r.unitOf(v)
	r.fillOrigin(v.Value, v.Given)
	if !v.Given {
		hint, placeholder = "not given; "+v.Text, ""
		if v.Known {
			hint, placeholder = "default"+reason(v.Value)+"; "+v.Text, r.number(v.Value.SI, u)
		}
		return "", hint, placeholder, u.Label()
	}
	return r.number(v.Value.SI, u), r.hint(v.Value, u, v.Text), "", u.Label()
}

// take reads what was typed; an empty field brings the default back.
func (r *oilRow) take(text string) error {
	v, doc := r.now(), r.p.s.ctx.Doc()
	switch {
	case text == "" && v.Need:
		return errEmpty
	case text == "":
		return doc.Drop(r.target)
	}
	si, u, err := units.ParseLoose(text, v.Dim, r.unitOf(v))
	if err != nil {
		return err
	}
	return doc.Put(r.target, units.FileText(si, u))
}

// suitsRow says how the oil suits the machines of the circuit at hand.
type suitsRow struct {
	p       *panel
	labels  *fyne.Container
	content *fyne.Container
}

func newSuitsRow(p *panel) *suitsRow {
	r := &suitsRow{p: p, labels: container.New(tight{})}
	r.content = container.New(tight{}, newBase(p, "Viscosity", "").head, r.labels)
	return r
}

func (r *suitsRow) object() fyne.CanvasObject { return r.content }
func (r *suitsRow) keep()                     {}
func (r *suitsRow) focus() fyne.Focusable     { return nil }

func (r *suitsRow) fill() {
	r.labels.Objects = nil
	ctx := r.p.s.ctx
	say := func(text string, i widget.Importance) {
		l := r.p.label(i)
		l.SetText(ctx.Local(text))
		r.labels.Add(l)
	}
	c, _ := r.p.at()
	oil, err := ctx.Doc().File().Conditions()
	switch {
	case err != nil:
		say(err.Error(), widget.DangerImportance)
		return
	case c == nil:
		return
	}
	for _, l := range circuit.OilLimits(c.Circuit, oil) {
		importance, sign := widget.SuccessImportance, "✓ "
		if !l.Passed() {
			importance, sign = widget.DangerImportance, "⚠ "
		}
		say(sign+audit.OilLimitText(l, ctx.System()), importance)
	}
}
