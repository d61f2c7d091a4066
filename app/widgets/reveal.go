package widgets

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
)

// reveal scrolls an object that has got the focus into sight: the toolkit leaves it
// where it is, so that Tab would lead to places that cannot be seen.
func reveal(o fyne.CanvasObject) {
	c := fyne.CurrentApp().Driver().CanvasForObject(o)
	if c == nil {
		return
	}
	var scrolls []*container.Scroll
	if !scrollsTo(c.Content(), o, &scrolls) {
		return
	}
	for i := len(scrolls) - 1; i >= 0; i-- { // the innermost first
		bring(scrolls[i], o)
	}
}

// scrollsTo collects the scrolls around target, from the outside in, and reports whether it is below o.
func scrollsTo(o, target fyne.CanvasObject, scrolls *[]*container.Scroll) bool {
	if o == target {
		return true
	}
	if o == nil || !o.Visible() {
		return false
	}
	below := func(list ...fyne.CanvasObject) bool {
		for _, child := range list {
			if scrollsTo(child, target, scrolls) {
				return true
			}
		}
		return false
	}
	switch o := o.(type) {
	case *fyne.Container:
		return below(o.Objects...)
	case *container.Split:
		return below(o.Leading, o.Trailing)
	case *container.Scroll:
		*scrolls = append(*scrolls, o)
		if below(o.Content) {
			return true
		}
		*scrolls = (*scrolls)[:len(*scrolls)-1]
	}
	return false
}

// bring moves the content of a scroll as far as needed to see o whole, or where o is
// larger than the scroll, its beginning. What is in sight by more than half stays, so that
// a click on it does not move it away from under the pointer.
func bring(s *container.Scroll, o fyne.CanvasObject) {
	driver := fyne.CurrentApp().Driver()
	at := driver.AbsolutePositionForObject(o).Subtract(driver.AbsolutePositionForObject(s))
	const free = 8
	move := func(from, size, room float32) float32 {
		seen := min(from+size, room) - max(from, 0)
		switch {
		case seen > size/2:
			return 0
		case from < 0 || size+2*free > room:
			return from - free
		}
		return from + size + free - room
	}
	dx, dy := move(at.X, o.Size().Width, s.Size().Width), move(at.Y, o.Size().Height, s.Size().Height)
	if dx != 0 || dy != 0 {
		s.ScrollToOffset(s.Offset.AddXY(dx, dy))
	}
}
