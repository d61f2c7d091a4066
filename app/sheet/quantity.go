package sheet

import (
	"math"
	"strings"

	"fyne.io/fyne/v2/container"

	"barlitre/app/widgets"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// quantityRow is the row of a quantity: its number in the unit it was given in, and where
// it comes from.
type quantityRow struct {
	*fieldRow
	origin  *widgets.Select
	filling bool
}

func newQuantityRow(p *panel, title, name, target string, take func(string) error) *quantityRow {
	r := &quantityRow{fieldRow: newFieldRow(p, title, name, target, take)}
	r.origin = widgets.Name(widgets.NewSelect(words(circuit.Origins), r.setOrigin), name+".origin")
	r.origin.PlaceHolder = "origin?"
	r.stack(container.New(columns{0.5, 0.5}, r.field, r.origin))
	return r
}

func words(list []circuit.Origin) []string {
	var out []string
	for _, o := range list {
		out = append(out, string(o))
	}
	return out
}

// number is a value in a unit without the unit, as typed; "" where there is none.
func (r *quantityRow) number(si float64, u units.Unit) string {
	if math.IsNaN(si) || math.IsInf(si, 0) {
		return ""
	}
	return r.p.s.ctx.Local(strings.TrimSpace(strings.TrimSuffix(units.FileText(si, u), u.Symbol)))
}

// hint is what is known of a given value besides: its band, what it may be or is for, its note.
func (r *quantityRow) hint(v circuit.Value, u units.Unit, about string) string {
	var notes []string
	if low := r.number(v.Low, u); low != "" {
		notes = append(notes, "low "+low)
	}
	if high := r.number(v.High, u); high != "" {
		notes = append(notes, "high "+high)
	}
	notes = append(notes, about)
	if v.Note != "" {
		notes = append(notes, v.Note)
	}
	return strings.Join(notes, " · ")
}

// fillOrigin shows where the value comes from; a default has an origin of its own,
// which cannot be changed.
func (r *quantityRow) fillOrigin(v circuit.Value, given bool) {
	r.filling = true
	defer func() { r.filling = false }()
	if r.origin.Selected != string(v.Origin) {
		r.origin.Selected = string(v.Origin)
		r.origin.Refresh()
	}
	if given == r.origin.Disabled() {
		if given {
			r.origin.Enable()
		} else {
			r.origin.Disable()
		}
	}
}

func (r *quantityRow) setOrigin(text string) {
	if r.filling || text == "" {
		return
	}
	err := r.p.set(r.target+".origin", text)
	r.fill()
	if err != nil {
		r.say(err.Error(), true)
	}
	r.p.relay()
}
