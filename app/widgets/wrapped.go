package widgets

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/widget"
)

// Wrapped is an empty text over as many lines as it takes, under a name for scripts; "" = none.
func Wrapped(name string) *widget.Label {
	l := widget.NewLabel("")
	l.Wrapping = fyne.TextWrapWord
	if name != "" {
		Name(l, name)
	}
	return l
}
