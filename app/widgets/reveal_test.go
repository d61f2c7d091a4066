package widgets

import (
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/test"
)

// Tab reaches what is scrolled out of sight, and brings it there.
func TestFocusIsBroughtIntoSight(t *testing.T) {
	test.NewTempApp(t).Settings().SetTheme(Theme{})
	box := container.NewVBox()
	for range 30 {
		box.Add(NewField("1", nil))
		box.Add(NewCheck("check", nil))
		box.Add(NewButton("Press", nil))
	}
	scroll := container.NewScroll(box)
	w := test.NewTempWindow(t, container.NewStack(scroll))
	w.Resize(fyne.NewSize(300, 200))
	for range len(box.Objects) {
		w.Canvas().FocusNext()
		o := w.Canvas().Focused().(fyne.CanvasObject)
		if y := o.Position().Y - scroll.Offset.Y; y < 0 || y+o.Size().Height/2 > scroll.Size().Height {
			t.Fatalf("%T at %v is out of sight, the scroll is at %v", o, o.Position(), scroll.Offset)
		}
	}
	if scroll.Offset.Y == 0 {
		t.Error("nothing was scrolled")
	}
}

// F1 reaches the window from every widget that can have the focus.
func TestHelpKey(t *testing.T) {
	test.NewTempApp(t).Settings().SetTheme(Theme{})
	box := container.NewVBox(NewField("1", nil), NewCheck("check", nil), NewButton("Press", nil), NewTipButton("Press", "", nil), NewSelect([]string{"a"}, nil))
	w := test.NewTempWindow(t, box)
	got := 0
	w.Canvas().SetOnTypedKey(func(k *fyne.KeyEvent) {
		if k.Name == fyne.KeyF1 {
			got++
		}
	})
	for range box.Objects {
		w.Canvas().FocusNext()
		w.Canvas().Focused().TypedKey(&fyne.KeyEvent{Name: fyne.KeyF1})
	}
	if got != len(box.Objects) {
		t.Errorf("F1 came through %d of %d times", got, len(box.Objects))
	}
}

// A line of text has room for the lowest letters, which the toolkit counts from a base
// line on whole pixels; the fonts that figures are drawn with stay as they are.
func TestRoomBelow(t *testing.T) {
	test.NewTempApp(t).Settings().SetTheme(Theme{})
	const ascent, descent = 1901.0 / unitsPerEm, 483.0 / unitsPerEm // of the font file
	for _, size := range []float32{11, 12.5, 14, 17} {
		for _, bold := range []bool{false, true} {
			base := float32(int(ascent*size + 0.999))
			if h := fyne.MeasureText("y_", size, fyne.TextStyle{Bold: bold}).Height; h+0.5 < base+descent*size {
				t.Errorf("size %v: %v high, %v needed", size, h, base+descent*size)
			}
		}
	}
}
