package widgets

import (
	"strings"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/test"
)

// shownLines are the lines as the toolkit draws them.
func shownLines(o fyne.CanvasObject) (out []string) {
	for _, x := range test.LaidOutObjects(o) {
		if l, ok := x.(*canvas.Text); ok && l.Visible() {
			out = append(out, l.Text)
		}
	}
	return out
}

// A break comes before a number with its unit where all of it does not fit, and nowhere else.
func TestNumberKeepsItsUnit(t *testing.T) {
	fits := func(n int) func(string) bool { return func(s string) bool { return len([]rune(s)) <= n } }
	for _, c := range []struct {
		room       int
		text, want string
	}{
		{12, "saves 3431\u202fkWh a year", "saves\n3431\u202fkWh a year"},
		{14, "saves 3431\u202fkWh a year", "saves 3431\u202fkWh a year"},
		{8, "saves 3431\u202fkWh a year", "saves 3431\u202fkWh a year"}, // nothing of it fits: the toolkit breaks there by itself
		{12, "plain words go on as they are", "plain words go on as they are"},
		{12, "first\nthen 44\u202f920\u202fkWh", "first\nthen\n44\u202f920\u202fkWh"},
		{4, "44\u202f920\u202fkWh", "44\u202f920\u202fkWh"},
	} {
		if got := unbroken(c.text, fits(c.room)); got != c.want {
			t.Errorf("%q in %d becomes %q, want %q", c.text, c.room, got, c.want)
		}
	}
}

// At every width the lines of the toolkit are those of ours: none begins with what belongs to the line before.
func TestTextAtEveryWidth(t *testing.T) {
	test.NewTempApp(t)
	const text = "Pump-controlled draws 12\u202f000\u202fkWh a year where As found draws 56\u202f920\u202fkWh: 44\u202f920\u202fkWh less (78.9\u202f%), 8085\u202fEUR a year"
	x := Wrapped("")
	x.SetText(text)
	w := test.NewTempWindow(t, x)
	broke := 0
	for width := float32(140); width < 700; width += 3 {
		w.Resize(fyne.NewSize(width, 400))
		if strings.ReplaceAll(x.Text, "\n", " ") != text || x.DumpText() != text {
			t.Fatalf("the text became %q", x.Text)
		}
		broke += strings.Count(x.Text, "\n")
		if len(shownLines(x)) < 2 {
			t.Fatalf("at %g it shows %q", width, shownLines(x))
		}
		for _, l := range shownLines(x) {
			for _, rest := range []string{"kWh", "EUR", "%", "000", "920"} {
				if strings.HasPrefix(l, rest) {
					t.Errorf("at %g a line says %q", width, l)
				}
			}
		}
	}
	if broke == 0 {
		t.Error("no break was ever needed: the test tells nothing")
	}
}
