package widgets

import "fyne.io/fyne/v2"

// Show shows an object or hides it, where it is not so already.
func Show(o fyne.CanvasObject, on bool) {
	if on != o.Visible() {
		if on {
			o.Show()
		} else {
			o.Hide()
		}
	}
}
