package widgets

import (
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/test"
	"fyne.io/fyne/v2/widget"
)

// A name that is wider than its column stands above its field, where it is read whole.
func TestLongNameStandsAbove(t *testing.T) {
	app := test.NewTempApp(t)
	for _, scale := range []float32{1, 2} {
		app.Settings().SetTheme(Theme{Scale: scale})
		for name, above := range map[string]bool{"low": false, "tipping, packing and waiting": true} {
			row := FieldRow(name, NewField("", func(string) error { return nil })).(*fyne.Container)
			row.Resize(fyne.NewSize(500*scale, 100*scale))
			label, field := row.Objects[0].(*widget.Label), row.Objects[1]
			if got := field.Position().Y >= label.Size().Height && label.Size().Width > nameWidth(label); got != above {
				t.Errorf("scale %g, %q: above %v; the name has %v, the field is at %v", scale, name, got, label.Size(), field.Position())
			}
		}
	}
}
