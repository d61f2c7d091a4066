package sheet

import (
	"math"
	"strings"
	"testing"

	"barlitre/circuit"
	"barlitre/machines/units"
)

func (b *bench) oil(key string) *oilRow {
	b.t.Helper()
	for _, r := range b.s.panel.rows {
		if o, ok := r.(*oilRow); ok && o.of == key {
			return o
		}
	}
	b.t.Fatalf("no row for the oil's %s", key)
	return nil
}

// The oil is set with nothing selected; how it suits the machines follows.
func TestOilInThePanel(t *testing.T) {
	b, _ := openDrives(t, window)
	b.Select(0, "")
	put := func(key, text string) *oilRow {
		r := b.oil(key)
		r.field.SetText(text)
		r.field.OnSubmitted(text)
		b.pump()
		return r
	}
	if r := b.oil("viscosity_index"); r.field.Text != "" || r.field.PlaceHolder != "102" || !strings.Contains(r.note.Text, "assumed") {
		t.Errorf("the index of a plain VG 46 (6.8 mm2/s at 100 C, 102 by ASTM D2270) stands as %q, %q", r.field.PlaceHolder, r.note.Text)
	}
	put("viscosity_index", "150")
	put("air", "5")
	put("start_temperature", "-10")
	o := b.doc.File().Oil
	if o.VI.SI != 150 || math.Abs(o.Air.SI-0.05) > 1e-12 || math.Abs(o.Start.SI-(units.ZeroCelsius-10)) > 1e-9 {
		t.Errorf("the file has index %s, air %s, start %s", o.VI.Text, o.Air.Text, o.Start.Text)
	}
	b.oil("air").origin.SetSelected("measured")
	b.pump()
	if got := b.doc.File().Oil.Air.Origin; got != circuit.Measured {
		t.Errorf("the air is %q", got)
	}
	suits := b.s.panel.rows[len(b.s.panel.rows)-1].(*suitsRow)
	if n := len(suits.labels.Objects); n != 2 {
		t.Errorf("%d viscosities are shown, at work and at start are two", n)
	}
	if r := put("air", "50"); !r.field.Bad() {
		t.Error("half of the oil may be air")
	}
	put("air", "")
	if o := b.doc.File().Oil; o.HasAir {
		t.Errorf("an emptied field leaves %s of air", o.Air.Text)
	}
	if r := put("temperature", ""); !r.field.Bad() || !b.doc.File().Oil.HasTemperature {
		t.Error("the oil has lost its temperature")
	}
	b.tall(0, "", "oil-light")
	b.theme(true, 1.5)
	b.tall(0, "", "oil-dark-150")
}
