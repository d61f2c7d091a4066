package sheet

import (
	"errors"
	"math"
	"strings"

	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/widgets"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// numberRow is the row of a parameter of a block: a quantity, and behind a link its low,
// high and note.
type numberRow struct {
	*quantityRow
	param   *circuit.Param
	circuit string
	block   string
	more    *link
	extra   []*fieldRow
	about   *widgets.Text
	drop    *link // takes the value out
	beside  *besideRow
}

func (r *numberRow) key() string { return r.param.Key }

func newNumberRow(p *panel, circuitName, block string, q *circuit.Param, target string) *numberRow {
	r := &numberRow{param: q, circuit: circuitName, block: block}
	r.quantityRow = newQuantityRow(p, q.Title, "field."+q.Key, target, r.take)
	r.value = r.shown
	r.more = newLink("more", r.toggle)
	widgets.Name(r.more, "field."+q.Key+".more")
	r.head.Add(r.more)
	r.drop = widgets.Name(newLink("Drop this value; its default then holds", r.takeOut), "field."+q.Key+".drop")
	r.drop.lead = true
	r.beside = newBeside(p, q, r.handed)
	r.content.Add(r.beside.content)
	return r
}

// now is the value in the file; given is false for a default or none.
func (r *numberRow) now() (v circuit.Value, given bool) {
	b := r.p.block(r.circuit, r.block)
	if b == nil {
		return circuit.Value{}, false
	}
	v, given = b.Values[r.param.Key]
	return v, given
}

// unitNow is the unit the number stands in: its own, else that of the default or of
// the user.
func (r *numberRow) unitNow() units.Unit {
	if v, given := r.now(); given && v.Unit.Factor != 0 {
		return v.Unit
	}
	return r.p.preferred(r.param)
}

// preferred is the unit of a value that has none of its own: that of the default, else
// of the user.
func (p *panel) preferred(q *circuit.Param) units.Unit {
	sys := p.s.ctx.System()
	if q.Default != "" && sys == units.Metric {
		if _, u, err := units.Parse(q.Default, q.Dim); err == nil {
			return u
		}
	}
	return units.Preferred(q.Dim, sys)
}

// shown is what stands in the row.
func (r *numberRow) shown() (text, hint, placeholder, unit string) {
	u := r.unitNow()
	v, given := r.now()
	show(r.drop, given && !r.param.Need)
	if list, yes := r.p.differ(r.param); yes {
		r.fillOrigin(circuit.Value{}, given)
		return "", list + "; " + r.rangeText(u), severalWord, u.Label()
	}
	if given {
		r.fillOrigin(v, true)
		return r.number(v.SI, u), r.hint(v, u, r.rangeText(u)), "", u.Label()
	}
	b := r.p.block(r.circuit, r.block)
	if b == nil {
		return "", "", "", u.Label()
	}
	v, _, ok := circuit.KindNamed(b.Kind).Value(b, r.param.Key)
	r.fillOrigin(v, false)
	if !ok {
		return "", "not given; " + r.param.Text + join("; follows from ", r.param.Derived) + "; " + r.rangeText(u), "", u.Label()
	}
	return "", "default" + reason(v) + "; " + r.rangeText(u), r.number(v.SI, u), u.Label()
}

// rangeText says what the parameter may be, in the unit of the row.
func (r *numberRow) rangeText(u units.Unit) string {
	q := r.param
	show := func(x float64) string { return r.p.s.ctx.Local(plain(units.Number(u.FromSI(x), 4))) }
	low, high := "any", ""
	switch {
	case q.Above:
		low = "above " + show(q.Min)
	case !math.IsInf(q.Min, 0):
		low = "from " + show(q.Min)
	}
	if !math.IsInf(q.Max, 0) {
		high = " to " + show(q.Max)
	}
	return low + high
}

// plain drops zeros at the end of a decimal number.
func plain(text string) string {
	mantissa, exp, has := strings.Cut(text, "e")
	if strings.Contains(mantissa, ".") {
		mantissa = strings.TrimRight(strings.TrimRight(mantissa, "0"), ".")
	}
	if has {
		return mantissa + "e" + exp
	}
	return mantissa
}

var errEmpty = errors.New("the field is empty; write a value, or press Escape to bring the old one back")

// take reads what was typed, in any unit of the quantity, and hands it to the
// document as a file writes it.
func (r *numberRow) take(text string) error {
	_, given := r.now()
	if text == "" {
		if _, several := r.p.differ(r.param); given && !several {
			return errEmpty
		}
		return nil
	}
	si, u, err := units.ParseLoose(text, r.param.Dim, r.unitNow())
	if err != nil {
		return err
	}
	if bad := r.param.CheckValue(circuit.Value{SI: si, Unit: u, Low: math.NaN(), High: math.NaN()}); bad != "" {
		return errors.New(r.p.s.ctx.Local(circuit.InSentence(r.param.Title) + " " + bad))
	}
	return r.p.set(r.target, units.FileText(si, u))
}

// takeOut drops the value from the file.
func (r *numberRow) takeOut() { r.handed(r.p.drop(r.target)) }

// handed shows what became of a change that was not typed.
func (r *numberRow) handed(err error) {
	r.fill()
	if err != nil {
		r.say(err.Error(), true)
	}
	r.p.relay()
}

// toggle shows or hides low, high and note.
func (r *numberRow) toggle() {
	if r.extra != nil {
		for _, x := range r.extra {
			r.content.Remove(x.content)
		}
		r.content.Remove(r.about)
		r.content.Remove(r.drop)
		r.extra = nil
		r.more.SetText("more")
	} else {
		r.about = r.p.label(widget.LowImportance)
		r.about.SetText(upper(r.param.Text))
		r.content.Add(r.about)
		r.extra = []*fieldRow{r.bound("low", func(v circuit.Value) float64 { return v.Low }), r.bound("high", func(v circuit.Value) float64 { return v.High }), r.noteRow()}
		for _, x := range r.extra {
			x.fill()
			r.content.Add(x.content)
		}
		r.content.Add(r.drop)
		r.more.SetText("less")
	}
	r.p.relay()
}

// bound is the row of the lowest or highest value it may have.
func (r *numberRow) bound(which string, of func(circuit.Value) float64) *fieldRow {
	target := r.target + "." + which
	x := newFieldRow(r.p, r.param.Title+", "+which, "field."+r.param.Key+"."+which, target, func(text string) error {
		if text == "" {
			if v, _ := r.now(); !math.IsNaN(of(v)) {
				return errEmpty
			}
			return nil
		}
		si, u, err := units.ParseLoose(text, r.param.Dim, r.unitNow())
		if err != nil {
			return err
		}
		return r.p.set(target, units.FileText(si, u))
	})
	x.value = func() (string, string, string, string) {
		v, given := r.now()
		if !given {
			return "", "set the value first", "", r.unitNow().Label()
		}
		return r.number(of(v), r.unitNow()), "", "", r.unitNow().Label()
	}
	x.stack(x.field)
	return x
}

func (r *numberRow) noteRow() *fieldRow {
	target := r.target + ".note"
	x := newFieldRow(r.p, r.param.Title+", note", "field."+r.param.Key+".note", target, func(text string) error {
		if v, _ := r.now(); text == "" && v.Note == "" {
			return nil
		}
		return r.p.set(target, text)
	})
	x.value = func() (string, string, string, string) {
		v, given := r.now()
		return v.Note, pick(given, "", "set the value first"), "", ""
	}
	x.field.Scroll = container.ScrollHorizontalOnly
	x.stack(x.field)
	return x
}

func (r *numberRow) fill() {
	r.fieldRow.fill()
	r.beside.fill()
	for _, x := range r.extra {
		x.fill()
	}
}

func (r *numberRow) keep() {
	r.fieldRow.keep()
	for _, x := range r.extra {
		x.keep()
	}
}
