package stationtest

import (
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/test"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/widgets"
)

// Units looks at all texts over several lines in an object: how many hold a number with its unit, and those in which the
// two may part at the end of a line.
func Units(o fyne.CanvasObject) (held int, parting []string) {
	bound := func(text string) bool { return strings.ContainsAny(text, "\u202f\u00a0") }
	for _, o := range test.LaidOutObjects(o) {
		switch l := o.(type) {
		case *widgets.Text:
			if bound(l.DumpText()) {
				held++
			}
		case *widget.Label:
			if l.Wrapping != fyne.TextWrapOff && bound(l.Text) {
				parting = append(parting, l.Text)
			}
		}
	}
	return held, parting
}
