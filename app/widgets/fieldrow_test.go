package widgets

import (
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/test"
	"fyne.io/fyne/v2/theme"
	"fyne.io/fyne/v2/widget"
)

// A name that is wider than its column is read whole over several lines, and its field stands beside it as those of
// short names do; above its field it stands only where a word of it is wider than the column.
func TestLongNameIsReadWhole(t *testing.T) {
	app := test.NewTempApp(t)
	for _, scale := range []float32{1, 2} {
		app.Settings().SetTheme(Theme{Scale: scale})
		for name, above := range map[string]bool{"low": false, "tipping, packing and waiting": false, "Schrottpaketierungsautomatik": true} {
			row := FieldRow(name, NewField("", func(string) error { return nil })).(*fyne.Container)
			row.Resize(fyne.NewSize(500*scale, 100*scale))
			label, field := row.Objects[0].(*widget.Label), row.Objects[1]
			if got := field.Position().Y >= label.Size().Height && field.Position().X == 0; got != above {
				t.Errorf("scale %g, %q: above %v; the name has %v, the field is at %v", scale, name, got, label.Size(), field.Position())
			}
			if beside := field.Position() == fyne.NewPos(rowName*scale, 0); beside == above {
				t.Errorf("scale %g, %q: the field is at %v", scale, name, field.Position())
			}
			lines := float32(1)
			if !above && nameWidth(label) > rowName*scale {
				lines = 2
			}
			if need := (lines - 1) * theme.TextSize(); label.Size().Height < widget.NewLabel("x").MinSize().Height+need || row.MinSize().Height < label.Size().Height {
				t.Errorf("scale %g, %q: the name has %v, the row %v", scale, name, label.Size(), row.MinSize())
			}
		}
	}
}
