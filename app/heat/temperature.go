package heat

import (
	"math"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"

	"barlitre/app/station"
	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// temperature is the field of one temperature, with its low and high where the file has them:
// a value outside them is refused, so they must be within reach.
type temperature struct {
	ctx     station.Context
	target  string
	value   *widgets.Field
	low     *widgets.Field
	high    *widgets.Field
	band    fyne.CanvasObject
	content fyne.CanvasObject
}

func newTemperature(ctx station.Context, title, target, name string) *temperature {
	t := &temperature{ctx: ctx, target: target}
	t.value = widgets.Name(widgets.NewField("", t.put("")), name)
	t.low = widgets.Name(widgets.NewField("", t.put(".low")), name+".low")
	t.high = widgets.Name(widgets.NewField("", t.put(".high")), name+".high")
	note := widgets.Wrapped("")
	t.low.Note, t.high.Note = note, note
	t.band = widgets.Row("  lies within", container.NewGridWithColumns(2, t.low, t.high), note)
	t.content = container.NewVBox(widgets.FieldRow(title, t.value), t.band)
	return t
}

// put returns what takes a typed value.
func (t *temperature) put(what string) func(string) error {
	return func(text string) error {
		var keep units.Unit
		if v, there := t.of(t.ctx.Doc().File()); there && !(math.IsNaN(v.Low) && math.IsNaN(v.High)) {
			keep = v.Unit
		}
		quantity, err := station.Typed(text, units.Temperature, units.Preferred(units.Temperature, t.ctx.System()), keep)
		if err != nil {
			return err
		}
		name := "Change " + map[string]string{"oil.temperature": "the oil temperature", "air.temperature": "the air temperature"}[t.target]
		if err := t.ctx.Doc().Edit(name, func(f *audit.File) error { return f.Put(t.target+what, quantity) }); err != nil {
			return err
		}
		t.show(t.ctx.Doc().File())
		return nil
	}
}

// of returns the value in the file.
func (t *temperature) of(f *audit.File) (circuit.Value, bool) {
	if t.target == "oil.temperature" {
		return f.Oil.Temperature, f.Oil.HasTemperature
	}
	return f.Air, f.HasAir
}

func (t *temperature) show(f *audit.File) {
	v, there := t.of(f)
	if !there {
		t.value.SetValue("", "Not given yet; type one, such as "+t.ctx.Text(units.ZeroCelsius+30, units.Temperature, 2)+".")
		t.band.Hide()
		return
	}
	hint := string(v.Origin)
	if v.Note != "" {
		if hint != "" {
			hint += ": "
		}
		hint += v.Note
	}
	t.value.SetValue(station.Shown(t.ctx, v.SI, v.Unit, units.Temperature), hint)
	end := func(field *widgets.Field, x float64) {
		if math.IsNaN(x) {
			field.SetValue("", "")
			return
		}
		field.SetValue(station.Shown(t.ctx, x, v.Unit, units.Temperature), "")
	}
	end(t.low, v.Low)
	end(t.high, v.High)
	if math.IsNaN(v.Low) && math.IsNaN(v.High) {
		t.band.Hide()
	} else {
		t.band.Show()
	}
}
